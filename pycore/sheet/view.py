"""From the plan to what stands on the paper: every value a finished, escaped piece of text.

The template only sets these pieces in their places. The sheet reads the plan and nothing below it.
"""
import re

from markupsafe import escape

from . import svg
from .fit import fit, title_size
from .heatlayout import stations_of
from .notes import PLACES, composition_of, notes_of, others_of, phases_of
from .reader import Reader, part_of, rows_of, texts_of
from .section import draw_section, nothing_to_draw
from .words import NOT_COMPUTED, HRC_range, bound, clean, fahrenheit, is_number, number, seconds, span

PRINTED_CAUTIONS = 6
VERDICTS = {"reachable": "Within reach", "borderline": "Borderline", "out-of-reach": "Out of reach"}
SIGNALS = ("danger", "warning", "caution")
# The note that stands behind the "at" and the "how long" of a step.
STEP_AT = {"austenitize": "austenitize.temperature_C", "transfer": "quench.bath_C", "out": "quench.out_of_bath_C",
           "check": "as_quenched.surface.HRC", "temper": "temper.temperature_C", "final-check": "final.surface.HRC",
           "cold": "cold.temperature_C", "preheat": "austenitize.preheat", "normalize": "steel.prior"}
STEP_TIME = {"austenitize": "austenitize.heat_up_min", "soak": "austenitize.soak_min",
             "transfer": "quench.transfer_s", "out": "quench.time_in_bath_s", "temper": "temper.hold_min",
             "cold": "cold.hold_min"}


def view_of(plan):
    """Everything the template needs, in a dictionary of strings, Markup and lists of them."""
    reader = Reader(plan)
    cautions = cautions_of(plan)
    letters = {caution["id"]: caution["letter"] for caution in cautions if caution["letter"]}
    verdict = plan.get("verdict") if plan.get("verdict") in VERDICTS else "borderline"
    reasons = [bound(text) for text in texts_of(plan.get("reasons"))]
    title = clean(plan.get("title")) or "Untitled job"
    quantity = plan.get("quantity")
    heading = f"{title}, {number(quantity, 9)} pieces" if is_number(quantity) and quantity > 1 else title
    summary = {name: bound(clean(part_of(plan, "summary").get(name))) for name in ("steel", "part", "aim", "shop")}
    view = {
        "heading": heading, "title_pt": title_size(heading), "summary": summary,
        "aim": aim_of(plan), "verdict": verdict, "verdict_word": VERDICTS[verdict],
        "reasons": reasons,
        "alternatives": [{"what": bound(clean(row.get("what"))), "gives": bound(clean(row.get("gives"))).rstrip(".")}
                         for row in rows_of(plan.get("alternatives"))],
        "framed": verdict != "reachable",
        "stations": stations_of(plan, reader.link_to),
        "steps": [step_of(row, reader, letters) for row in rows_of(plan.get("steps"))],
        "section": draw_section(plan) or nothing_to_draw(reader.reason("profile")),
        "hardness": [{"place": name, "before": reader.shown(f"as_quenched.{key}.HRC", HRC_range(reader.value(f"as_quenched.{key}"))),
                      "after": reader.shown(f"final.{key}.HRC", HRC_range(reader.value(f"final.{key}")))}
                     for key, name in PLACES],
        "facts": facts_of(plan, reader),
        "faults": [{"sign": bound(clean(row.get("sign"))), "cause": sentence(bound(clean(row.get("cause")))),
                    "then": sentence(bound(clean(row.get("then"))))} for row in rows_of(plan.get("faults"))],
        "cautions": [caution for caution in cautions if caution["letter"]],
        "more_cautions": more_of(sum(1 for caution in cautions if not caution["letter"])),
        "all_cautions": cautions,
        "sign": svg.triangle(), "stop": svg.stop_sign(),
        "readings": 3,
        "foot": " · ".join(part for part in (clean(plan.get("date")), f"job {clean(plan.get('id'))}",
                                              f"Quenchwright {clean(plan.get('version'))}") if part),
        "edition": clean(plan.get("data_edition")),
        "notes": notes_of(reader), "marks": [{"value": value, "text": text} for value, text in reader.marks],
        "others": others_of(plan), "phases": phases_of(plan), "composition": composition_of(plan),
        "sources": texts_of(plan.get("sources")),
        "aim_source": clean(part_of(plan, "aim").get("source")),
    }
    view["marked"] = lambda: reader.marked      # known only when all is drawn
    view["missing"] = missing_of(reader)
    fit(plan, view, reader.link_to)
    return view


def aim_of(plan):
    """The aim in large type: "56–59" and its unit."""
    aim = part_of(plan, "aim").get("HRC")
    if isinstance(aim, list) and len(aim) == 2:
        return span(*aim)
    return NOT_COMPUTED


def cautions_of(plan):
    """Worst first. The first six and every danger get a letter and stand on the paper; the rest in the notes."""
    rows = rows_of(plan.get("cautions"))
    found = []
    for row in rows:
        signal = row.get("signal") if row.get("signal") in SIGNALS else "caution"
        found.append({"id": clean(row.get("id")), "signal": signal, "text": bound(clean(row.get("text"))),
                      "because": sentence(bound(clean(row.get("because")))), "source": clean(row.get("source")), "letter": ""})
    found.sort(key=lambda caution: SIGNALS.index(caution["signal"]))
    dangers = sum(caution["signal"] == "danger" for caution in found)
    for index, caution in enumerate(found[:max(PRINTED_CAUTIONS, dangers)]):
        caution["letter"] = chr(ord("A") + index) if index < 26 else str(index + 1)
    return found


def sentence(text):
    """A capital at its start and a full stop at its end."""
    if not text:
        return ""
    return text[0].upper() + text[1:] + ("" if text[-1] in ".!?…" else ".")


def more_of(count):
    return f"({count} more in the notes on screen.)" if count else ""


def step_of(row, reader, letters):
    kind = clean(row.get("id"))
    do = bound(clean(row.get("do")))
    at, time = unsaid(bound(clean(row.get("at"))), do), unsaid(bound(clean(row.get("time"))), do)
    known = row.get("cautions") if isinstance(row.get("cautions"), list) else []
    return {
        "n": clean(row.get("n")), "do": do, "hold": row.get("hold") is True,
        "at": reader.shown(STEP_AT.get(kind, ""), at + (" ·" if at and time else ""), together=True),
        "time": reader.shown(STEP_TIME.get(kind, ""), time, together=True), "at_text": at, "time_text": time, "look": bound(clean(row.get("look"))),
        "blanks": [part.strip() for part in clean(row.get("blank")).split(" / ") if part.strip()] or ["was"],
        "cautions": sorted({letters[name] for name in known if isinstance(name, str) and name in letters}),
    }


def unsaid(text, do):
    """`text` without what `do` has said: after "Heat to 790 °C" only "(775–805) · 1455 °F" is left."""
    parts = []
    for part in text.split(" · "):
        head, comma, rest = part.partition(", ")
        value, bracket, window = part.partition(" (")
        if said(part, do):
            continue
        if comma and said(head, do):
            part = rest
        elif bracket and said(value, do):
            part = "(" + window
        parts.append(part)
    return " · ".join(parts)


def said(value, do):
    """Whether `do` holds this figure as a whole: "6 min" is in "Soak 6 min" but not in "Soak 16 min"."""
    return bool(value) and bool(re.search(r"(?<![\w–.−-])" + re.escape(value) + r"(?![\w–])", do))


def facts_of(plan, reader):
    """Bath, time in it and skin: short facts for the foot. A spare one also stands elsewhere on the sheet."""
    quench, austenitize = part_of(plan, "quench"), part_of(plan, "austenitize")
    steps = [step.get("id") for step in rows_of(plan.get("steps"))]
    facts = []

    def fact(name, text, spare=False):
        facts.append({"name": name, "text": text, "spare": spare})

    if quench:
        words = escape(clean(quench.get("medium_name")) or clean(quench.get("medium")) or NOT_COMPUTED)
        if quench.get("kind") in ("water", "oil"):
            if is_number(quench.get("volume_L")):
                words += escape(", ") + reader.number("quench.volume_L", "L")
            fact("Bath", words + escape(", at least ") + reader.number("quench.volume_needed_L", "L"))
            fact("warms by", reader.number("quench.bath_rise_C", "°C"))
            stirred = {"still": "still", "moderate": "moderately", "strong": "strongly"}.get(quench.get("agitation"))
            if stirred:
                fact("stirred", escape(stirred), spare=True)
        else:
            fact("Bath", words)
        window = quench.get("bath_window_C")
        if isinstance(window, list) and len(window) == 2 and all(map(is_number, window)):
            in_F = span(*map(fahrenheit, window))
            fact("at", reader.shown("quench.bath_C", f"{span(*window)} °C · {in_F} °F"), spare=True)
        if is_number(quench.get("flash_C")):
            fact("flash point", reader.temperature("quench.flash_C"))
        told = "out" in steps
        fact("out at", reader.temperature("quench.out_of_bath_C"), spare=told)
        fact("after", reader.shown("quench.time_in_bath_s", seconds(quench.get("time_in_bath_s"))), spare=told)
        if is_number(quench.get("size_change_pct")):
            fact("grows", reader.shown("quench.size_change_pct", f"{number(quench['size_change_pct'], 2)} %"), spare=True)
    if austenitize:
        fact("Scale", reader.length("austenitize.scale_mm"), spare=True)
        fact("carbon lost", reader.length("austenitize.decarb_mm") + escape(" deep"))
        if is_number(austenitize.get("stock_mm")):
            fact("leave to grind", reader.length("austenitize.stock_mm"), spare="stock" in steps)
    return facts


ON_PAPER = ("austenitize", "quench", "temper", "as_quenched", "final", "profile", "cold")


def missing_of(reader):
    """Reasons for values that would stand on the paper but could not be computed, each once."""
    found = []
    for path, reason in reader.marks:
        if reader.value(path) is None and reason and reason not in found and path.split(".")[0] in ON_PAPER:
            found.append(reason)
    return found

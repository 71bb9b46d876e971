"""From the plan to what stands on the paper: every value a finished, escaped piece of text.

The template only sets these pieces in their places. The sheet reads the plan and nothing below it.
"""
import re

from markupsafe import Markup, escape

from . import svg
from .fit import fit, title_size
from .heatline import stations_of
from .section import draw_section, nothing_to_draw
from .words import (
    NOT_COMPUTED,
    WHOLE,
    HRC_middle,
    HRC_range,
    both_units,
    bound,
    clean,
    fahrenheit,
    is_number,
    number,
    seconds,
    span,
)

PRINTED_CAUTIONS = 6
VERDICTS = {"reachable": "Within reach", "borderline": "Borderline", "out-of-reach": "Out of reach"}
SIGNALS = ("danger", "warning", "caution")
PLACES = (("surface", "surface"), ("midradius", "mid-radius"), ("centre", "centre"))
UNITS = (("_C_per_s", "°C/s"), ("_C_pct", "% C"), ("_C", "°C"), ("_min", "min"), ("_s", "s"), ("_mm", "mm"), ("_L", "L"),
         ("_pct", "%"), ("HRC", "HRC"))
DIFFERENCE = re.compile(r"rise|error|accuracy|margin|below|above|step")
# The note that stands behind the "at" and the "how long" of a step.
STEP_AT = {"austenitize": "austenitize.temperature_C", "transfer": "quench.bath_C", "out": "quench.out_of_bath_C",
           "check": "as_quenched.surface.HRC", "temper": "temper.temperature_C", "final-check": "final.surface.HRC",
           "cold": "cold.temperature_C", "preheat": "austenitize.preheat", "normalize": "steel.prior"}
STEP_TIME = {"austenitize": "austenitize.heat_up_min", "soak": "austenitize.soak_min",
             "transfer": "quench.transfer_s", "out": "quench.time_in_bath_s", "temper": "temper.hold_min",
             "cold": "cold.hold_min"}


def anchor(key):
    """A note's address: only letters, digits, dot, hyphen and underscore."""
    return "why-" + re.sub(r"[^A-Za-z0-9_.-]", "-", key)


def rows_of(value):
    """A list of the plan's dictionaries; anything else in it is left out."""
    return [row for row in value if isinstance(row, dict)] if isinstance(value, list) else []


def texts_of(value):
    return [text for text in map(clean, value) if text] if isinstance(value, list) else []


def part_of(plan, name):
    value = plan.get(name)
    return value if isinstance(value, dict) else {}


class Reader:
    """Looks values up by their path and knows which have a note and which a mark."""

    def __init__(self, plan):
        self.plan = plan
        self.why = part_of(plan, "why")
        self.marks = [(clean(mark.get("value")), clean(mark.get("text"))) for mark in rows_of(plan.get("marks"))]
        self.marked = False

    def value(self, path):
        here = self.plan
        for name in path.split("."):
            here = here.get(name) if isinstance(here, dict) else None
        return here

    def reason(self, path):
        """What the mark on this value says, or ''."""
        for value, text in self.marks:
            if value and (path == value or path.startswith(value + ".")):
                return text
        return ""

    def outside(self, path):
        note = self.why.get(path)
        return bool(self.reason(path)) or (isinstance(note, dict) and note.get("inside") is False)

    def link_to(self, path):
        """(address of the note or None, whether the value is marked) for a path of the plan."""
        if not isinstance(path, str) or not path:
            return None, False
        outside = self.outside(path)
        self.marked = self.marked or outside
        return ("#" + anchor(path) if isinstance(self.why.get(path), dict) else None), outside

    def shown(self, path, text, together=False):
        """`text` for the value at `path`: linked to its note, marked "~" when outside its range.
        With `together` its short parts, set apart by " · ", are not broken over two lines."""
        if not text:
            return Markup("")
        address, outside = self.link_to(path)
        text = ("~" if outside and not text.startswith("~") else "") + text
        if together:
            *before, last = text.split(" · ")
            parts = [part + " ·" for part in before] + [last]      # the dot stays with what it follows
            words = Markup(" ").join(Markup('<span class="whole">{}</span>').format(part) if len(part) <= WHOLE else escape(part)
                                     for part in parts)
        else:
            words = escape(text)
        return Markup('<a class="why" href="{}">{}</a>').format(address, words) if address else words

    def number(self, path, unit=""):
        value = self.value(path)
        if not is_number(value):
            return self.shown(path, NOT_COMPUTED)
        return self.shown(path, f"{number(value)} {unit}".strip())

    def temperature(self, path):
        value = self.value(path)
        return self.shown(path, both_units(value)) if is_number(value) else self.number(path)

    def length(self, path):
        value = self.value(path)
        if is_number(value) and self.plan.get("units") == "in":
            return self.shown(path, f"{number(value / 25.4, 2)} in")
        return self.number(path, "mm")


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
        told = any(step.get("id") == "out" for step in rows_of(plan.get("steps")))
        fact("out at", reader.temperature("quench.out_of_bath_C"), spare=told)
        fact("after", reader.shown("quench.time_in_bath_s", seconds(quench.get("time_in_bath_s"))), spare=told)
    if austenitize:
        fact("Scale", reader.length("austenitize.scale_mm"), spare=True)
        fact("carbon lost", reader.length("austenitize.decarb_mm") + escape(" deep"))
        if is_number(austenitize.get("stock_mm")):
            fact("leave to grind", reader.length("austenitize.stock_mm"))
    return facts


ON_PAPER = ("austenitize", "quench", "temper", "as_quenched", "final", "profile", "cold")


def missing_of(reader):
    """Reasons for values that would stand on the paper but could not be computed, each once."""
    found = []
    for path, reason in reader.marks:
        if reader.value(path) is None and reason and reason not in found and path.split(".")[0] in ON_PAPER:
            found.append(reason)
    return found


def value_text(reader, path):
    """The value behind a note, in words."""
    value = reader.value(path)
    if path.endswith(".HRC") and isinstance(value, dict):
        return f"{HRC_range({'HRC': value})} HRC, most likely {HRC_middle({'HRC': value})}"
    unit = next((unit for ending, unit in UNITS if path.endswith(ending)), "")
    if is_number(value):
        if unit == "s":
            return seconds(value)
        # a rise or an error is a difference: it has no point on the other scale
        return both_units(value) if unit == "°C" and not DIFFERENCE.search(path) else f"{number(value)} {unit}".strip()
    if isinstance(value, list) and len(value) == 2 and all(map(is_number, value)):
        return f"{span(*value)} {unit}".strip()
    return clean(value) if isinstance(value, str) else (NOT_COMPUTED if value is None else "")


def notes_of(reader):
    """One note for each number that has a "why"."""
    notes = []
    for path, row in reader.why.items():
        if isinstance(path, str) and isinstance(row, dict):
            notes.append({"anchor": anchor(path), "name": clean(row.get("name")) or path, "value": value_text(reader, path),
                          "model": clean(row.get("model")), "inputs": clean(row.get("inputs")),
                          "source": clean(row.get("source")), "range": clean(row.get("range")),
                          "outside": reader.outside(path), "reason": reader.reason(path)})
    return notes


def others_of(plan):
    """The other baths that were looked at."""
    return [{"name": clean(row.get("medium_name")) or clean(row.get("medium")),
             "surface": number(row.get("surface_HRC"), 2), "centre": number(row.get("centre_HRC"), 2),
             "why_not": clean(row.get("why_not"))} for row in rows_of(part_of(plan, "quench").get("others"))]


def phases_of(plan):
    """What the steel is made of as quenched, in per cent, place by place."""
    found = []
    for key, name in PLACES:
        phases = part_of(part_of(plan, "as_quenched"), key).get("phases")
        if isinstance(phases, dict) and any(map(is_number, phases.values())):
            shares = [f"{clean(phase).replace('_', ' ')} {number(share * 100, 2)} %"
                      for phase, share in phases.items() if is_number(share) and share >= 0.005]
            found.append({"place": name, "shares": ", ".join(shares)})
    return found


def composition_of(plan):
    composition = part_of(plan, "steel").get("composition")
    if not isinstance(composition, dict):
        return ""
    return ", ".join(f"{clean(element)} {number(share)} %" for element, share in composition.items() if is_number(share))

"""The sheet for the terminal: plain text, eighty columns."""
import textwrap

from .words import NOT_COMPUTED, HRC_range, clean, is_number, number, span

COLUMNS = 80
VERDICTS = {"reachable": "WITHIN REACH", "borderline": "BORDERLINE", "out-of-reach": "OUT OF REACH"}
PLACES = (("surface", "surface"), ("midradius", "mid-radius"), ("centre", "centre"))


def wrapped(text, first="", rest=None):
    """`text` in lines of at most eighty columns; the first begins with `first`, the others with `rest`."""
    rest = " " * len(first) if rest is None else rest
    return textwrap.wrap(text, COLUMNS, initial_indent=first, subsequent_indent=rest) or ([first.rstrip()] if first.strip() else [])


def printable(value):
    """One line of text without control characters: a title must not steer the terminal."""
    return "".join(char for char in clean(value) if char.isprintable())


def rows(plan, name):
    value = plan.get(name)
    return [row for row in value if isinstance(row, dict)] if isinstance(value, list) else []


def sheet_text(plan):
    """The whole sheet as text: title, verdict, stations, steps, hardness, what to do, cautions, record."""
    out = []
    quantity = plan.get("quantity")
    title = printable(plan.get("title")) or "Untitled job"
    out += wrapped(f"{title}, {number(quantity, 9)} pieces" if is_number(quantity) and quantity > 1 else title)
    out.append("=" * COLUMNS)
    summary = plan.get("summary") if isinstance(plan.get("summary"), dict) else {}
    for name in ("steel", "part", "shop"):
        if printable(summary.get(name)):
            out += wrapped(printable(summary.get(name)), f"{name:<7}")
    aim = (plan.get("aim") or {}).get("HRC")
    aim_text = f"{span(*aim)} HRC" if isinstance(aim, list) and len(aim) == 2 else NOT_COMPUTED
    out += wrapped(aim_text, "aim    ")
    out.append("")
    verdict = VERDICTS.get(plan.get("verdict"), VERDICTS["borderline"])
    reasons = [printable(reason) for reason in plan.get("reasons") or []]
    out += wrapped(": ".join(part for part in (verdict, " ".join(reasons)) if part))
    for row in rows(plan, "alternatives"):
        gives = printable(row.get("gives"))
        out += wrapped(printable(row.get("what")) + (f" Gives {gives}." if gives else ""), "  - ")

    out += ["", "HEAT LINE", "-" * COLUMNS]
    for row in rows(plan, "stations"):
        value = " ".join(part for part in (printable(row.get("value")) or NOT_COMPUTED, printable(row.get("unit"))) if part)
        more = ", ".join(part for part in (printable(row.get("other")), printable(row.get("note"))) if part)
        out += wrapped(f"{value}  {more}".rstrip(), f"{printable(row.get('order')):>2}  {printable(row.get('label'))[:24]:<25}")

    out += ["", "STEPS", "-" * COLUMNS]
    for row in rows(plan, "steps"):
        stop = "  ** stop and check **" if row.get("hold") is True else ""
        out += wrapped(printable(row.get("do")) + stop, f"[ ] {printable(row.get('n')):>2}  ")
        facts = " · ".join(part for part in (printable(row.get("at")), printable(row.get("time"))) if part)
        if facts:
            out += wrapped(facts, "        ")
        if printable(row.get("look")):
            out += wrapped(printable(row.get("look")), "        ")
        blank = printable(row.get("blank")) or "was"
        out.append(f"        {blank[:40]}: ______________")

    out += ["", "EXPECTED HARDNESS, HRC", "-" * COLUMNS, f"    {'':<12}{'quenched':<16}tempered"]
    for key, name in PLACES:
        before = HRC_range((plan.get("as_quenched") or {}).get(key))
        after = HRC_range((plan.get("final") or {}).get(key))
        out.append(f"    {name:<12}{before:<16}{after}")

    if rows(plan, "faults"):
        out += ["", "IF IT COMES OUT WRONG", "-" * COLUMNS]
        for row in rows(plan, "faults"):
            out += wrapped(" ".join(printable(row.get(name)) for name in ("cause", "then")), f"{printable(row.get('sign'))[:16]:<18}")
    if rows(plan, "cautions"):
        out += ["", "TAKE CARE", "-" * COLUMNS]
        for row in rows(plan, "cautions"):
            because = printable(row.get("because")).rstrip(".")
            out += wrapped(printable(row.get("text")) + (f" {because}." if because else ""),
                           f"! {printable(row.get('signal')).upper()[:8]:<9}")
    if rows(plan, "marks"):
        out += ["", "MARKS", "-" * COLUMNS]
        for row in rows(plan, "marks"):
            out += wrapped(f"{printable(row.get('value'))}: {printable(row.get('text'))}", "~ ")
    out += ["", "date ____________  made by ____________  HRC ______ ______ ______", ""]
    out += wrapped("Computed ranges, not promises: try one first. Local rules and licensed practice come first.")
    foot = [printable(plan.get("date")), f"job {printable(plan.get('id'))}", f"Quenchwright {printable(plan.get('version'))}",
            f"data {printable(plan.get('data_edition'))}"]
    out += wrapped(" · ".join(part for part in foot if part))
    return "\n".join(line.rstrip() for line in out) + "\n"

"""The notes at the end of the sheet: where each number comes from, and what else was looked at."""
import re

from .reader import anchor, part_of, rows_of
from .words import NOT_COMPUTED, HRC_middle, HRC_range, both_units, clean, is_number, number, seconds, span

PLACES = (("surface", "surface"), ("midradius", "mid-radius"), ("centre", "centre"))
UNITS = (("_C_per_s", "°C/s"), ("_C_pct", "% C"), ("_C", "°C"), ("_min", "min"), ("_s", "s"), ("_mm", "mm"), ("_L", "L"),
         ("_pct", "%"), ("HRC", "HRC"))
DIFFERENCE = re.compile(r"rise|error|accuracy|margin|below|above|step")


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

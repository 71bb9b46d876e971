"""Numbers as a shop reads them: both temperature scales, ranges, times, the part in one phrase."""

from pycore import words
from pycore.data import number, table
from pycore.lengths import show_length
from pycore.stages.notes import nearest


def fahrenheit(temperature_C):
    """°F to the nearest 5, as dials are marked."""
    return nearest(temperature_C * 9 / 5 + 32, 5)


def temperature(temperature_C):
    return f"{temperature_C:.0f} °C · {fahrenheit(temperature_C)} °F"


def span(low, high):
    return f"{low:.0f}–{high:.0f}" if round(low) != round(high) else f"{low:.0f}"


def span_F(low, high):
    return f"{fahrenheit(low)}–{fahrenheit(high)} °F"


def minutes(value_min):
    """A time in minutes as words; long ones in hours."""
    if value_min >= 90:
        hours = round(value_min / 30) / 2
        return f"{hours:g} h"
    if value_min < 1:
        return f"{max(5, nearest(value_min * 60, 5))} s"
    return f"{value_min:.0f} min"


def seconds(value_s):
    return (
        minutes(value_s / 60)
        if value_s >= 120
        else f"{value_s:.0f} s"
        if value_s >= 3 or value_s == int(value_s)
        else f"{value_s:.1f} s"
    )


def hold(hold_min, cycles):
    """(value, unit) of the temper hold for the heat line: "2 × 1", "h"."""
    value, unit = (f"{hold_min / 60:g}", "h") if hold_min >= 60 and hold_min % 30 == 0 else (f"{hold_min:g}", "min")
    return (f"{cycles} × {value}" if cycles > 1 else value), unit


def rough_length(value_mm, units):
    """A length to set by eye: to 5 mm, or to 1/4 in."""
    if units == "in":
        return show_length(max(6.35, nearest(value_mm / 6.35, 1) * 6.35), "in")
    return show_length(max(5, nearest(value_mm, 5)), "mm")


def part_phrase(job, section):
    """“20 mm round, 180 mm long, tip hardened for 40 mm, forged”."""
    d, units, shape = job.part.dimensions_mm, job.units, job.part.shape
    show = lambda name: show_length(d[name], units)  # noqa: E731
    bare = lambda name: show_length(d[name], units).rsplit(" ", 1)[0]  # noqa: E731
    if shape == "flat":
        said = f"{bare('thickness')} × {show('width')} flat"
    elif shape == "tube":
        said = f"{show('diameter')} tube, {show('bore')} bore"
    elif shape == "wedge":
        said = f"blade {show('width')} wide, spine {show('spine')}, edge {show('edge')}"
    elif shape == "taper":
        said = f"round taper {bare('edge')} to {show('diameter')}"
    elif shape == "square":
        said = f"{show('width')} square"
    else:
        said = f"{show('diameter')} {shape}"
    if "length" in d:
        said += f", {show('length')} long"
    if job.part.zone != "all":
        said += f", {job.part.zone} hardened for {rough_length(section.zone_mm, units) if job.part.zone_mm is None else show_length(section.zone_mm, units)}"
    if job.part.condition != "unknown":
        said += ", " + words.CONDITIONS[job.part.condition]
    return said


def shop_phrase(job):
    heat = words.HEATS[job.heat.kind]
    heat += (
        " with a pyrometer"
        if job.heat.pyrometer and job.heat.kind not in ("kiln", "salt")
        else ("" if job.heat.pyrometer else " with a magnet")
    )
    baths = ", ".join(
        words.media_row(b.medium)["name"] + (f" {b.volume_L:g} L" if b.volume_L else "") for b in job.baths
    )
    return f"{heat}; {baths}; {words.TEMPERS[job.temper.kind]} to {job.temper.max_C:g} °C"


def use_row(use):
    return next((row for row in table("uses") if row["id"] == use), None) if use else None


def use_range(row):
    return number(row["HRC_low"]), number(row["HRC_high"])

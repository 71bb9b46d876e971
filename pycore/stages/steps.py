"""The order of work: the steps as they happen, only those this part needs."""

import re

from pycore import words
from pycore.lengths import show_length
from pycore.stages import say
from pycore.stages.notes import nearest
from pycore.stages.quench import SURFACE

FILE_SKATES_FROM_HRC = 60.0  # an ordinary mill file is about 62-65 HRC; it skates from about 60 (SAE J864; practice)
FLOOR_BELOW_EXPECTED_HRC = 2.0
HAND_WARM_C = 66.0  # 50-66 °C: where supplier sheets send the part to temper
CLAMP_WINDOW_C = 200.0  # below about 200 °C martensite forms: stop bending (common practice)
WHERE = {"all": "part", "edge": "edge", "tip": "tip"}


def steps(job, steel, section, heat, quenched, cold, temper, aim_HRC, use, cautions):
    """The numbered steps, only those this part needs."""
    listed = [_ready(job, section, quenched, temper)]
    listed += _prepare(job, steel, heat)
    for i, stage in enumerate(heat.preheat):
        listed.append(
            _step(
                "preheat",
                f"{'Then' if i else 'Preheat'} to {stage['temperature_C']} °C",
                f"{say.fahrenheit(stage['temperature_C'])} °F",
                f"{stage['hold_min']:.0f} min",
                "The whole part one even shade.",
                "was",
            )
        )
    listed += [
        _heat(job, section, heat),
        _soak(job, heat),
        _plunge(job, section, quenched),
        _out(job, quenched),
    ]
    listed.append(_check(quenched))
    if cold is not None:
        listed.append(
            _step(
                "cold",
                f"Cold: {words.COLDS[job.cold]}",
                say.temperature(cold.temperature_C),
                say.minutes(cold.hold_min),
                f"Right after the check. {cold.why_do[0].upper()}{cold.why_do[1:]}. Let it warm in still air.",
                "in / out",
            )
        )
    listed.append(_temper(temper))
    listed.append(_final(job, temper, aim_HRC, use))
    for n, step in enumerate(listed):
        step["n"] = n
        step["cautions"] = [
            c["id"] for c in cautions if c["step"] == step["id"] or (c["step"] == "quench" and step["id"] == "transfer")
        ]
    return tuple(listed)


def _step(id_, do, at="", time="", look="", blank="", hold=False):
    return {
        "n": 0,
        "id": id_,
        "do": do,
        "at": at,
        "time": time,
        "look": look,
        "blank": blank,
        "hold": hold,
        "cautions": [],
    }


def _ready(job, section, quenched, temper):
    said = []
    if temper.kind not in ("torch", "residual-heat"):
        said.append(f"Oven settled at {temper.temperature_C:.0f} °C before the fire is lit.")
    if quenched.kind in ("water", "oil"):
        name = quenched.medium_name if quenched.medium_name[0].isdigit() else quenched.medium_name.capitalize()
        litres = (
            f"{quenched.volume_L:g} L" if quenched.volume_L else f"at least {max(1, round(quenched.volume_needed_L))} L"
        )
        dip = (
            section.zone_mm
            if job.part.zone == "tip"
            else (section.length_mm if job.part.zone == "all" else section.zone_mm)
        )
        said.append(
            f"{name} {litres} at {say.span(*quenched.bath_window_C)} °C, "
            f"deeper than {say.rough_length(dip + 50, job.units)}."
        )
    elif quenched.kind == "plates":
        said.append("Two thick aluminium plates and clamps at hand.")
    said.append("Tongs tried on the cold part.")
    return _step("ready", "Make ready", "", "", " ".join(said), "oven reads")


def _prepare(job, steel, heat):
    listed, condition = [], job.part.condition
    advice = re.sub(r"If it was forged( or overheated)?, (\w)", lambda found: found[2].upper(), steel.prior)
    if condition == "forged" and steel.normalize == "yes" and "normalize_C" in steel.temperatures:
        top = steel.temperatures["normalize_C"][1]
        listed.append(_step("normalize", "Normalize", say.temperature(top), "even, then still air", advice, "heats"))
    elif condition in ("forged", "hardened"):
        listed.append(
            _step(
                "normalize",
                "Soften first" if condition == "forged" else "Undo the old hardening",
                "",
                "",
                advice,
                "done",
            )
        )
    if heat.stock_mm >= 0.15:
        stock = show_length(heat.stock_mm) if job.units == "mm" else f"{heat.stock_mm / 25.4:.3f} in"
        listed.append(
            _step(
                "stock",
                f"Leave {stock} a side",
                "",
                "",
                "The skin loses that much to scale and carbon. Deburr; no cross scratches.",
                "left on",
            )
        )
    return listed


def _heat(job, section, heat):
    where = WHERE[job.part.zone]
    low, high = heat.window_C
    at = f"{say.span(low, high)} °C · {say.span_F(low, high)}"
    if heat.measured_by == "pyrometer":
        look = f"Start the clock when it reads {heat.temperature_C:.0f} °C again. {heat.colour.capitalize()} by eye."
    else:
        above = heat.temperature_C - heat.magnet_lets_go_C
        shade = "one shade brighter" if above < 60 else f"about {nearest(above, 10)} °C hotter, two shades brighter"
        look = f"Turn it. The magnet lets go near {heat.magnet_lets_go_C:.0f} °C; then "
        look += f"{shade}: {heat.colour}. The last dark shadow has gone."
    if section.width_mm > 2 * section.thinnest_mm:
        look += " Keep the thin part out of the flame."
    return _step(
        "austenitize",
        f"Heat the {where} to {heat.temperature_C:.0f} °C",
        at,
        f"about {say.minutes(max(1, heat.heat_up_min))} to heat through",
        look,
        "was",
    )


def _soak(job, heat):
    look = {
        "kiln": "Part and wall the same colour before the clock starts.",
        "salt": "Keep it moving in the salt.",
    }.get(job.heat.kind, "Part and fire the same colour. Throttle the fire: it must not get brighter.")
    return _step(
        "soak", f"Soak {say.minutes(heat.soak_min)}", "", f"{say.minutes(heat.soak_max_min)} at most", look, "in / out"
    )


def _plunge(job, section, quenched):
    low, high = quenched.bath_window_C
    within = say.seconds(quenched.transfer_s)
    if quenched.kind == "gas":
        fan = quenched.medium == "fan-air"
        return _step(
            "transfer",
            f"Hang in {'moving' if fan else 'still'} air within {within}",
            "",
            "",
            ("Both sides in the draught. " if fan else "Away from draughts, on a wire or edge up. ")
            + "Do not lay it flat.",
            "in at",
        )
    if quenched.kind == "plates":
        return _step(
            "transfer",
            f"Between plates within {within}",
            "",
            "",
            "Clamp flat at once, blow air along the edges.",
            "in at",
        )
    at = f"{say.span(low, high)} °C · {say.span_F(low, high)}"
    name = {"oil": "oil", "water": "brine" if quenched.medium == "brine" else "water"}[quenched.kind]
    if job.part.zone == "tip":
        under = say.rough_length(section.zone_mm, job.units)
        look = f"Tip first, {under} under, up and down so that no hard line forms. Not side to side."
    elif job.part.zone == "edge":
        under = say.rough_length(section.zone_mm, job.units)
        look = f"Edge first, straight down, {under} under; rock along its length, never flat side to side."
    elif job.part.shape in ("flat", "wedge"):
        look = "On edge and straight down, all under. Move it along its own plane, never flat side to side."
    else:
        look = "Endwise, straight down, all under with the hot part of the tongs. Move it up and down."
    return _step("transfer", f"Into the {name} within {within}", at, "", look, f"{name} at")


def _out(job, quenched):
    out = quenched.out_of_bath_C
    time = f"after about {say.seconds(quenched.time_in_bath_s)}"
    if quenched.kind in ("gas", "plates"):
        return _step(
            "out",
            "Cool to hand-warm",
            say.temperature(out),
            time,
            f"True it while above {CLAMP_WINDOW_C:.0f} °C, gloved; below that stop bending.",
            "time",
        )
    if job.temper.kind == "residual-heat":
        look = "The zone is black and cold enough to polish; the body must still hold heat. Do not strike it."
        return _step("out", "Lift out, the body still hot", say.temperature(nearest(out, 5)), time, look, "time")
    if out <= HAND_WARM_C:
        return _step(
            "out",
            "Out when hand-warm",
            say.temperature(out),
            time,
            "Dry it. Do not drop or strike: it is glass-hard.",
            "time",
        )
    return _step(
        "out",
        f"Out at about {nearest(out, 5)} °C",
        say.temperature(nearest(out, 5)),
        time,
        "Wipe it, let it cool to hand-warm in still air. Do not drop or strike: it is glass-hard.",
        "time",
    )


def file_skates(found):
    """Whether a file should skate on the quenched surface, with a margin for what the quench may miss."""
    return found.HRC[SURFACE] - FLOOR_BELOW_EXPECTED_HRC >= FILE_SKATES_FROM_HRC


def _check(quenched):
    found = quenched.structure
    if found is None:
        return _step(
            "check",
            "Test it before tempering",
            "",
            "",
            "No figure can be promised for this section: file it through the skin and test.",
            "HRC",
            True,
        )
    low, high = found.low[SURFACE], found.high[SURFACE]
    expect = f"expect {say.span(low, high)} HRC"
    if file_skates(found):
        return _step(
            "check",
            "A file must skate",
            expect,
            "",
            "Stone through the skin first, at one spot. No crack, straight. File bites: do not temper, see below.",
            "HRC",
            True,
        )
    return _step(
        "check",
        f"At least {low:.0f} HRC",
        expect,
        "",
        "Stone through the skin first, at one spot. No crack, straight. If softer: do not temper, see below.",
        "HRC",
        True,
    )


def _temper(temper):
    cool, hot = temper.window_C
    window = f" ({say.span(cool, hot)})" if cool is not None and hot > cool else ""
    at = f"{temper.temperature_C:.0f} °C{window} · {say.fahrenheit(temper.temperature_C)} °F"
    seen = temper.colour.capitalize() if temper.colour else "No colour yet"
    start = f"within {say.minutes(temper.start_within_min)}"
    if temper.kind == "residual-heat":
        return _step(
            "temper",
            "Let the colours run",
            at,
            "seconds",
            f"Polish the zone at once; heat left in the body runs forward. {seen} "
            "at the working end: quench all of it.",
            "colour",
        )
    if temper.kind == "torch":
        return _step(
            "temper",
            f"Draw to colour {start}",
            at,
            f"{temper.cycles} × {say.minutes(temper.hold_min)}",
            f"Bright steel. Heat from the thick side, flame moving. {seen}, then off.",
            "colour",
        )
    value, unit = say.hold(temper.hold_min, temper.cycles)
    heat_up = say.minutes(max(1, temper.heat_up_min))
    between = " Cool to hand-warm between." if temper.cycles > 1 else ""
    verb = "kiln" if temper.kind == "kiln" else "salt" if temper.kind == "salt" else "oven"
    colour = f"Bright steel turns {temper.colour} or darker." if temper.colour else ""
    blank = " / ".join(("1st", "2nd", "3rd", "4th", "5th", "6th")[: temper.cycles]) if temper.cycles > 1 else "in / out"
    return _step(
        "temper",
        f"Into the {verb} {start}",
        at,
        f"{heat_up} to heat, then {value} {unit}",
        f"{colour}{between}".strip() or "In the middle, away from the elements.",
        blank,
    )


def _final(job, temper, aim_HRC, use):
    where = {"all": "", "edge": " at the edge", "tip": " at the tip"}[job.part.zone]
    body = f" {use['body'][0].upper()}{use['body'][1:]}." if use and use["body"] else ""
    look = f"Three readings through the skin, 3 mm apart, 3 mm from the edge.{body}"
    expected, aim = temper.final["surface"]["HRC"], say.span(*aim_HRC)
    if expected["mid"] is not None and not aim_HRC[0] - 0.5 <= expected["mid"] <= aim_HRC[1] + 0.5:
        side = "harder" if expected["mid"] > aim_HRC[1] else "softer"
        return _step(
            "final-check",
            f"Expect {say.span(expected['low'], expected['high'])} HRC{where}",
            f"the aim is {aim}",
            "",
            f"{side.capitalize()} than the aim: settle that before it goes into use. {look}",
            "HRC",
            True,
        )
    return _step("final-check", f"{aim} HRC{where}", "", "", look, "HRC", True)

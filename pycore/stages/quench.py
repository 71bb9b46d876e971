"""From the fire to the bath and out of it: which bath, how fast, when to take the part out, what it becomes."""

from dataclasses import dataclass

import numpy as np

from pycore import words
from pycore.data import number
from pycore.physics import bath as bath_physics
from pycore.physics import conduction, quench_media, size_change, steel_properties
from pycore.physics.validity import outside, say
from pycore.stages import structure
from pycore.stages.notes import mark, note, rounded
from pycore.stages.risk import MEANT_FOR, crack_risk, gentleness

ROOM_C = 20.0
PLACES = (1.0, 0.95, 0.9, 0.8, 0.7, 0.6, 0.5, 0.4, 0.3, 0.15, 0.0)  # relative distance from the centre
SURFACE, MIDRADIUS, CENTRE = 0, PLACES.index(0.5), len(PLACES) - 1
TRANSFER_CAP_S = {"water": 3.0, "oil": 5.0, "plates": 10.0, "gas": 20.0}  # common practice
OUT_C = {"water": 50.0, "oil": 65.0, "plates": 50.0, "gas": 60.0}  # hand-warm; supplier sheets 50-65 °C
OUT_ABOVE_BATH_K = 10.0
TIP_COLD_C = 120.0  # a tip is cold enough to polish, the body behind it still hot (common practice)
ENTRY_ABOVE_AC1_K, ENTRY_BELOW_AC3_K = 20.0, 15.0  # common practice: enter above about Ac1 + 20-30 K
ALLOWED_RISE_K = {"water": 10.0, "oil": 38.0}  # oil: 1 US gal/lb rule; water: common practice
LONGEST_QUENCH_S = 5 * 3600.0
FULLY_HARD = 0.75  # share of martensite from which the change of size is told
MODELS_APART_HRC = 8.0  # beyond the error each of the two models of hardening is known for
THIN_FOR_OIL_MM = 6.35  # under 1/4 in plain carbon steel may be quenched in oil (Heat Treater's Guide)
HARDER_THAN_AIM_HRC = 1.0  # what tempering needs to come down from, above the middle of the aim
WATER_HOTTEST_C = 95.0
BATH_ORDER = ("still-air", "fan-air", "plates", "canola", "medium-oil", "fast-oil", "water", "brine")  # mildest first


@dataclass(frozen=True)
class Quench:
    medium: str
    medium_name: str
    kind: str
    bath_C: float
    bath_window_C: tuple
    agitation: str
    bath_rise_C: float | None
    volume_L: float | None
    volume_needed_L: float | None
    transfer_s: float
    bath_entry_C: float
    out_of_bath_C: float
    time_in_bath_s: float
    rate_704_C_per_s: dict
    flash_C: float | None
    crack_risk: dict
    size_change_pct: float | None  # linear, hardened through, before tempering
    others: tuple
    time_s: np.ndarray
    curves_C: np.ndarray  # (places, steps)
    structure: object  # Structure, or None where no data hold
    marks: tuple
    why: dict


def transfer_limit_s(steel, section, start_C):
    """(seconds until the thinnest section is too cold, that temperature), lumped in still air."""
    lowest = steel.Ac1_C + ENTRY_ABOVE_AC1_K
    if steel.Ac3_C is not None:
        lowest = max(lowest, steel.Ac3_C - ENTRY_BELOW_AC3_K)
    lowest = min(lowest, start_C - 5.0)
    T = np.linspace(lowest, start_C, 40)
    flux = quench_media.air_coefficient(T) * (T - ROOM_C)
    heat = (
        steel_properties.AUSTENITE_DENSITY_KG_M3
        * steel_properties.austenite_specific_heat(T)
        * section.thinnest_mm
        / 2000.0
    )
    return float(np.trapezoid(heat / flux, T)), lowest


def _air(surface_C, time_s):
    return quench_media.air_coefficient(surface_C), np.full_like(surface_C, ROOM_C)


def _cool(section, start, baths, kinds, working_C, out_C):
    """Cooling in every bath at once, from the profile at bath entry."""
    curves = [
        quench_media.quench_coefficient(bath.medium, kind, T, bath.agitation)
        for bath, kind, T in zip(baths, kinds, working_C)
    ]
    grid = np.linspace(-20.0, 1300.0, 331)
    tables = np.array([np.interp(grid, *curve) for curve in curves])
    index, around = np.arange(len(baths)), np.array(working_C)

    def boundary(surface_C, time_s):
        position = np.clip((surface_C - grid[0]) / (grid[1] - grid[0]), 0, len(grid) - 1.001)
        i = position.astype(int)
        w = position - i
        return tables[index, i] * (1 - w) + tables[index, i + 1] * w, around

    profiles = np.broadcast_to(start, (len(baths), start.shape[-1]))
    return conduction.conduct(
        section.geometry,
        np.full(len(baths), section.half_thickness_mm),
        steel_properties.on_quenching(),
        profiles,
        boundary,
        until=lambda T: T.max(axis=1) <= np.array(out_C),
        end_s=LONGEST_QUENCH_S,
        largest_change_K=18.0,
    )


def _hardens_mm(steel, kind):
    """Largest section a tabulated grade hardens through in a medium: air by its sheet, faster media deeper."""
    air = steel.temperatures.get("air_hardening_mm", (None, None, None, ""))[1]
    oil = steel.temperatures.get("oil_hardening_mm", (None, None, None, ""))[1]
    if kind == "oil" or kind == "water":
        return oil or air or 0.0
    return air or 0.0


def quench(job, steel, section, heat, aim_HRC):
    """Tries every bath of the shop and takes the mildest that gives the hardness needed, deepest first."""
    baths = job.baths
    rows = [words.media_row(bath.medium) for bath in baths]
    kinds = [row["kind"] for row in rows]
    start_C = heat.temperature_C
    limit_s, lowest_C = transfer_limit_s(steel, section, start_C)
    if steel.hardening == "air":
        limit_s = max(limit_s, 60.0)  # air-hardening steel does not mind the walk
    rises, needs = [], []
    for bath, row in zip(baths, rows):
        rise = need = None
        if words.is_liquid(row):
            density, heat_capacity = number(row["density_kg_L"]), number(row["heat_capacity_kJ_kgK"])
            out = max(OUT_C[row["kind"]], bath.temperature_C + OUT_ABOVE_BATH_K)
            need = float(
                bath_physics.volume_needed_L(
                    section.hot_mass_kg, start_C, out, ALLOWED_RISE_K[row["kind"]], density, heat_capacity
                )
            )
            if bath.volume_L is not None:
                rise = float(
                    bath_physics.bath_rise_K(section.hot_mass_kg, start_C, out, bath.volume_L, density, heat_capacity)
                )
        rises.append(rise)
        needs.append(need)
    working = [
        min(bath.temperature_C + (rise or 0.0) / 2, WATER_HOTTEST_C if kind == "water" else 400.0)
        for bath, rise, kind in zip(baths, rises, kinds)
    ]
    hot_body = job.temper.kind == "residual-heat"  # the body's heat is wanted back: lift the zone out early
    out_C = [
        max(TIP_COLD_C if hot_body and kind in ("water", "oil") else OUT_C[kind], T + OUT_ABOVE_BATH_K)
        for kind, T in zip(kinds, working)
    ]
    walk_s = min(limit_s, min(TRANSFER_CAP_S[kind] for kind in kinds))
    walk = conduction.conduct(
        section.geometry,
        section.half_thickness_mm,
        steel_properties.on_quenching(),
        start_C,
        _air,
        until=lambda T: np.zeros(len(T), bool),
        end_s=walk_s,
        largest_change_K=18.0,
    )
    entry = walk.temperature_C[:, -1, :]
    history = _cool(section, entry, baths, kinds, working, out_C)
    results = []
    for i, (bath, row, kind) in enumerate(zip(baths, rows, kinds)):
        time_s, _ = history.case(i)
        curves = np.array([history.at(x, i) for x in PLACES])
        if steel.basis == "tabulated":
            found = structure.tabulated_structure(
                steel, len(PLACES), section.half_thickness_mm, _hardens_mm(steel, kind)
            )
        else:
            found = structure.structure_of(
                steel, time_s, curves, ROOM_C, PLACES, section.geometry, section.half_thickness_mm, kind
            )
        risk = crack_risk(job, steel, section, bath.medium, kind)
        results.append((bath, row, time_s, curves, found, risk))
    chosen = _choose(job, steel, section, results, aim_HRC)
    return _result(
        job, steel, section, heat, results, chosen, rises, needs, working, out_C, walk_s, limit_s, lowest_C, entry
    )


def _choose(job, steel, section, results, aim_HRC):
    """Index of the bath to take.

    In order: within the aim at the surface, no high crack risk, not milder than the grade is meant for (the kinetics
    are only sure to a factor of two or three), room to temper, depth, then the mildest.
    """
    if "medium" in job.decided:
        return next(i for i, r in enumerate(results) if r[0].medium == job.decided["medium"])
    low, high = aim_HRC
    room = (low + high) / 2 + HARDER_THAN_AIM_HRC
    meant_for = MEANT_FOR[steel.hardening] + (steel.hardening == "water" and section.width_mm <= THIN_FOR_OIL_MM)

    def rank(i):
        bath, row, _, _, found, risk = results[i]
        surface, centre = (found.HRC[SURFACE], found.HRC[CENTRE]) if found is not None else (-1.0, -1.0)
        short = 0 if surface >= low + 0.5 else round(low + 0.5 - surface)
        milder = gentleness(row["kind"]) > meant_for
        return (short, risk["grade"] == "high", milder, surface < room, centre < room, BATH_ORDER.index(bath.medium))

    return min(range(len(results)), key=rank)


def _result(job, steel, section, heat, results, chosen, rises, needs, working, out_C, walk_s, limit_s, lowest_C, entry):
    bath, row, time_s, curves, found, risk = results[chosen]
    kind, marks = row["kind"], []
    if job.temper.kind == "residual-heat" and job.part.zone == "all":
        marks.append(
            mark("temper.temperature_C", "residual heat needs a body left hot: it serves a tip or an edge only")
        )
    if walk_s < 1.0:
        marks.append(
            mark(
                "quench.transfer_s",
                f"the thinnest part falls below {lowest_C:.0f} °C in {limit_s:.1f} s in air: quench beside the fire",
            )
        )
    if words.is_liquid(row) and bath.volume_L is None:
        marks.append(mark("quench.bath_rise_C", "the volume of the bath is not given"))
    if found is None:
        limit = _hardens_mm(steel, kind)
        marks.append(
            mark(
                "as_quenched",
                f"{section.width_mm:g} mm is beyond the {limit:g} mm the grade's sheet "
                f"hardens through in this medium, and no model holds for this steel",
            )
        )
    if found is not None and found.second_HRC is not None:
        apart = np.abs(found.HRC - found.second_HRC)
        if apart.max() > MODELS_APART_HRC:
            where = ("surface", "mid-radius", "centre")[int(np.argmax(apart[[SURFACE, MIDRADIUS, CENTRE]]))]
            text = f"the Jominy curve and the kinetics differ by {apart.max():.0f} HRC ({where}): the range is wide, try a coupon"
            marks.append(mark("as_quenched", text))
    out = outside(steel.austenite, structure.KINETICS_RANGE) if steel.basis == "modelled" else ()
    if out:
        marks.append(mark("as_quenched", "outside the range of the kinetics: " + say(out)))
    flash = number(row["flash_C"])
    if kind == "oil" and flash is None:
        marks.append(
            mark("quench.flash_C", "flash point not known: read it on the oil's own sheet before heating anything")
        )
    rate = {
        name: (
            None if found is None or found.rate_C_per_s[i] != found.rate_C_per_s[i] else rounded(found.rate_C_per_s[i])
        )
        for name, i in (("surface", SURFACE), ("midradius", MIDRADIUS), ("centre", CENTRE))
    }
    others = tuple(_other(results, i, chosen) for i in range(len(results)) if i != chosen)
    low, high = number(row["window_low_C"]), number(row["window_high_C"])
    transfer = np.floor(walk_s * 2) / 2 if walk_s >= 1 else 0.5
    return Quench(
        bath.medium,
        row["name"],
        kind,
        rounded(bath.temperature_C, 0),
        (low, high) if low is not None else (None, None),
        bath.agitation,
        rounded(rises[chosen]),
        bath.volume_L,
        rounded(needs[chosen]),
        rounded(transfer),
        rounded(float(entry[0, -1]), 0),
        rounded(out_C[chosen], 0),
        rounded(time_s[-1], 0),
        rate,
        flash,
        risk,
        _size_change_pct(steel, found),
        others,
        time_s,
        curves,
        found,
        tuple(marks),
        _why(steel, section, heat, bath, row, found, working[chosen], walk_s, lowest_C),
    )


def _size_change_pct(steel, found):
    """Linear change of size where the surface is fully hard; None where it is not, or where carbides are not cementite."""
    if found is None or steel.basis == "tabulated" or found.fractions["martensite"][SURFACE] < FULLY_HARD:
        return None
    carbide = size_change.undissolved_carbide_pct(steel.composition["C"], steel.dissolved_C_pct)
    austenite = 100 * found.fractions["retained_austenite"][SURFACE]
    return rounded(size_change.thelning_linear_change_pct(steel.dissolved_C_pct, carbide, austenite), 2)


def _other(results, i, chosen):
    bath, row, _, _, found, risk = results[i]
    best = results[chosen][4]
    surface = None if found is None else rounded(found.HRC[SURFACE])
    centre = None if found is None else rounded(found.HRC[CENTRE])
    if found is None:
        why = "no data for this section"
    elif best is not None and found.HRC[SURFACE] < best.HRC[SURFACE] - 1:
        why = "leaves the surface softer"
    elif best is not None and found.HRC[CENTRE] < best.HRC[CENTRE] - 1:
        why = "does not harden as deep"
    elif risk["grade"] == "high":
        why = "risks cracking: " + risk["reasons"][0]
    else:
        why = "gains nothing and is harsher"
    return {
        "medium": bath.medium,
        "medium_name": row["name"],
        "surface_HRC": surface,
        "centre_HRC": centre,
        "why_not": why,
    }


def _why(steel, section, heat, bath, row, found, working_C, walk_s, lowest_C):
    part = f"{section.geometry}, half thickness {section.half_thickness_mm:.1f} mm ({section.aspect_note})"
    quench_inputs = (
        f"{part}; from {heat.temperature_C:.0f} °C, {walk_s:.1f} s in air; {row['name']} at {working_C:.0f} °C, "
        f"{words.AGITATIONS[bath.agitation]}"
    )
    by = found.by if found is not None else "none holds"
    source = {"tabulated for the grade": steel.temperatures.get("as_quenched_HRC", ("", "", "", ""))[3]}.get(
        by,
        "ASTM A255 (from memory); Kirkaldy & Venugopalan 1984, Li et al. 1998 (from memory); "
        "Hodge & Orehoski 1946; Koistinen & Marburger 1959",
    )
    as_quenched = note(
        "Hardness before tempering",
        by,
        quench_inputs,
        source,
        "±2 HRC hard through, ±6 where half hard",
        found is not None,
    )
    return {
        "quench.transfer_s": note(
            "Time from fire to bath",
            "lumped cooling in still air of the thinnest section, capped by practice",
            f"{section.thinnest_mm:g} mm from {heat.temperature_C:.0f} to {lowest_C:.0f} °C",
            "Stefan-Boltzmann, Churchill & Chu 1975; common practice",
        ),
        "quench.time_in_bath_s": note(
            "Time in the bath",
            "transient conduction, finite volumes; austenite properties",
            quench_inputs,
            f"heat-transfer curve: {row['source']}",
            "bath curves are known to ±30-50 %; latent heat of transformation left out",
        ),
        "quench.bath_rise_C": note(
            "Rise of the bath",
            "enthalpy balance",
            f"{section.hot_mass_kg:.2f} kg hot, {bath.volume_L or 0:g} L",
            "EN 1993-1-2:2005 cl. 3.4.1.2, integrated; " + row["source"],
            "well stirred, no loss",
        ),
        "quench.volume_needed_L": note(
            "Bath needed",
            "enthalpy balance for the allowed rise",
            f"{section.hot_mass_kg:.2f} kg hot",
            "EN 1993-1-2:2005; allowed rise 38 K in oil (1 US gal per lb), 10 K in water (common practice)",
        ),
        "quench.size_change_pct": note(
            "Growth on hardening",
            "Thelning, from carbon, carbide and austenite; a third of the volume",
            f"{steel.dissolved_C_pct:g} % C dissolved",
            "Thelning, Steel and its Heat Treatment (from memory)",
            "before tempering, which takes back about 0.1 %; two published sets differ by 0.3 %",
        ),
        "as_quenched.surface": as_quenched,
        "as_quenched.midradius": as_quenched,
        "as_quenched.centre": as_quenched,
    }

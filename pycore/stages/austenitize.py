"""Into the fire: how hot, how long to heat through, how long to soak, and what the skin loses."""

from dataclasses import dataclass

import numpy as np

from pycore.data import number, table
from pycore.physics import colours, conduction, steel_properties, surface_loss
from pycore.physics.quench_media import radiation_coefficient
from pycore.stages.notes import mark, nearest, note, rounded

ROOM_C = 20.0
EVEN_WITHIN_K = 10.0  # the centre counts as through when it is this close (common practice)
FORGE_HOTTER_BY_K = 120.0  # a forge's fire stands above the part; it is throttled when the part is there
LONGEST_HEAT_S = 6 * 3600.0
SCALE_STARTS_C = 700.0  # lower end of the parabolic law's range
METAL_PER_SCALE = 0.5  # iron lost per thickness of scale; Pilling-Bedworth ratio about 1.7-2
COLOUR_ERROR_C = 40.0  # judging by shade and magnet: ±30-50 °C (common practice)
THIN_AND_THICK = 1.5  # from this ratio the thin section is looked at by itself
PREHEAT_HOLD_MIN = 10.0  # common practice: until even, at least 10 minutes
SOAK_BY_FAMILY = {"hypo": (5.0, 10.0, 30.0), "hyper": (5.0, 10.0, 20.0)}  # common practice where no sheet exists


@dataclass(frozen=True)
class Austenitize:
    temperature_C: float
    window_C: tuple
    preheat: tuple
    heat_up_min: float
    soak_min: float
    soak_max_min: float
    total_min: float
    thin_at_heat_min: float | None  # the thinnest section, where it is much thinner than the rest
    scale_mm: float
    decarb_mm: float
    stock_mm: float
    colour: str
    magnet_lets_go_C: float
    measured_by: str
    error_C: float
    marks: tuple
    why: dict


def furnace_row(kind):
    return next(row for row in table("furnace") if row["kind"] == kind)


def atmosphere_row(kind):
    return next(row for row in table("atmospheres") if row["id"] == kind)


def heat_up(geometry, half_thickness_mm, job, target_C):
    """History of a section in its fire until the centre is within EVEN_WITHIN_K of the target."""
    fire, air = furnace_row(job.heat.kind), atmosphere_row(job.heat.atmosphere)
    convection = number(fire["convection_W_m2K"])
    emissivity = number(fire["emissivity_to_part"]) if job.heat.atmosphere == "air" else number(air["emissivity"])
    source_C = target_C + (FORGE_HOTTER_BY_K if job.heat.kind in ("gas-forge", "coal-forge", "torch") else 0.0)

    def boundary(surface_C, time_s):
        around = np.where(surface_C >= target_C, target_C, source_C)  # the smith throttles: never above target
        return convection + radiation_coefficient(surface_C, around, emissivity), around

    return conduction.conduct(
        geometry,
        half_thickness_mm,
        steel_properties.on_heating(),
        ROOM_C,
        boundary,
        until=lambda T: T[:, 0] >= target_C - EVEN_WITHIN_K,
        end_s=LONGEST_HEAT_S,
        largest_change_K=25.0,
        nodes=15,
    )


def austenitize(job, steel, section):
    marks = []
    low, usual, high = steel.austenitize_C
    target = job.decided.get("austenitize_C", usual)
    decided = "austenitize_C" in job.decided
    if decided and not low <= target <= high:
        marks.append(
            mark(
                "austenitize.temperature_C",
                f"decided {target:g} °C is outside the published range {low:g}-{high:g} °C: "
                + ("the grain grows" if target > high else "too little carbon dissolves"),
            )
        )
    fire = furnace_row(job.heat.kind)
    if job.heat.pyrometer:
        measured_by = "pyrometer"
        error = job.heat.accuracy_C if job.heat.accuracy_C is not None else number(fire["accuracy_default_C"])
    else:
        measured_by, error = "colour and magnet", max(job.heat.accuracy_C or 0.0, COLOUR_ERROR_C)
    history = heat_up(section.geometry, section.half_thickness_mm, job, target)
    time_s, temperature = history.case()
    heat_up_min = float(time_s[-1]) / 60.0
    if temperature[-1, 0] < target - EVEN_WITHIN_K - 1:
        marks.append(
            mark("austenitize.heat_up_min", "not through within six hours; the fire is too weak for this section")
        )
    soak = steel.temperatures.get("soak_min") or (
        *SOAK_BY_FAMILY["hyper" if steel.Acm_C else "hypo"],
        "common practice",
    )
    soak_min = soak[1] if job.heat.pyrometer else soak[0]
    soak_max = soak[2]
    thin_at_heat_min = _thin_at_heat_min(job, section, target, heat_up_min + soak_min)
    if thin_at_heat_min is not None and thin_at_heat_min > soak_max:
        marks.append(
            mark(
                "austenitize.soak_min",
                f"the {section.thinnest_mm:g} mm part is at heat for about {thin_at_heat_min:.0f} min by then, over the "
                f"{soak_max:g} min the grade stands: shield it, or put it in last",
            )
        )
    hot = float(np.trapezoid(temperature[:, -1] > SCALE_STARTS_C, time_s)) / 60.0 + soak_min
    air = atmosphere_row(job.heat.atmosphere)
    scale = float(surface_loss.paidassi_scale_mm(target, hot)) * number(air["scale_factor"])
    decarb = float(surface_loss.decarburized_depth_mm(target, hot, steel.composition["C"])) * number(
        air["decarb_factor"]
    )
    stock = max(0.05, np.ceil((decarb + METAL_PER_SCALE * scale) / 0.05) * 0.05)
    preheat = _preheats(job, steel)
    total = heat_up_min + soak_min + sum(step["hold_min"] for step in preheat)
    colour = colours.heat_colour(target) or "no glow"
    why = _why(job, steel, section, target, decided, soak, hot, fire, air, error)
    return Austenitize(
        rounded(target, 0),
        (rounded(low, 0), rounded(high, 0)),
        preheat,
        rounded(heat_up_min),
        rounded(soak_min),
        rounded(soak_max),
        rounded(total),
        rounded(thin_at_heat_min),
        rounded(scale, 3),
        rounded(decarb, 2),
        rounded(stock, 2),
        colour,
        colours.MAGNET_LETS_GO_C if not steel.Acm_C else rounded(steel.Ac1_C, 0),
        measured_by,
        rounded(error),
        tuple(marks),
        why,
    )


def _thin_at_heat_min(job, section, target_C, whole_min):
    """How long the thinnest section stands at heat while the thickest comes through; None where they hardly differ."""
    if section.thinnest_mm * THIN_AND_THICK > section.width_mm:
        return None
    time_s, _ = heat_up("slab", section.thinnest_mm / 2, job, target_C).case()
    return max(0.0, whole_min - float(time_s[-1]) / 60.0)


def _preheats(job, steel):
    """Preheats the grade's sheet asks for; a torch or forge passes through them slowly instead."""
    steps = []
    for quantity in ("preheat_C", "preheat2_C"):
        if quantity in steel.temperatures and (steel.hardening != "water" or job.heat.kind in ("kiln", "salt")):
            steps.append({"temperature_C": nearest(steel.temperatures[quantity][1], 5), "hold_min": PREHEAT_HOLD_MIN})
    return tuple(steps)


def _why(job, steel, section, target, decided, soak, hot_min, fire, air, error):
    part = f"{section.geometry}, half thickness {section.half_thickness_mm:.1f} mm ({section.aspect_note})"
    known = steel.temperatures.get("austenitize_C")
    source = known[3] if known else "common practice: 30-60 K above Ac3, or 45-75 K above Ac1 for hypereutectoid steel"
    return {
        "austenitize.temperature_C": note(
            "Austenitizing temperature",
            "decided by you" if decided else "published range of the grade" if known else "rule of the trade",
            f"Ac1 {steel.Ac1_C:g} °C",
            source,
            f"{steel.austenitize_C[0]:g}-{steel.austenitize_C[2]:g} °C",
            steel.austenitize_C[0] <= target <= steel.austenitize_C[2],
        ),
        "austenitize.heat_up_min": note(
            "Time to heat through",
            "transient conduction, finite volumes, EN 1993-1-2 properties with latent heat",
            f"{part}; {fire['name']}, {target:g} °C; one piece, heated from all sides",
            f"EN 1993-1-2:2005 cl. 3.4.1; {fire['source']}",
            "20-1200 °C",
        ),
        "austenitize.soak_min": note("Soak", "hold after the centre is within 10 K", steel.name, soak[3]),
        "austenitize.scale_mm": note(
            "Scale",
            "parabolic oxidation of iron, Païdassi",
            f"{target:g} °C, {hot_min:.0f} min above 700 °C, {air['name']}",
            "Chen & Yuen 2003, Oxid. Met. 59 (from memory); " + air["source"],
            "700-1250 °C",
        ),
        "austenitize.decarb_mm": note(
            "Decarburized depth",
            "Fick's law, bare surface; Tibbetts diffusivity",
            f"{target:g} °C, {hot_min:.0f} min above 700 °C, {air['name']}",
            "Tibbetts 1980 (from memory); " + air["source"],
            "an upper bound",
        ),
        "austenitize.error_C": note(
            "Error of the heat",
            "instrument" if job.heat.pyrometer else "shade and magnet",
            f"±{error:g} °C",
            "as stated" if job.heat.accuracy_C is not None and job.heat.pyrometer else "common practice",
        ),
    }

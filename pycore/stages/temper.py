"""Which temper brings the part to its service hardness, and what to do where the oven cannot."""

import math
from dataclasses import dataclass

import numpy as np

from pycore.data import number, table
from pycore.physics import colours, conduction, hardness, steel_properties, tempering
from pycore.physics.quench_media import radiation_coefficient
from pycore.physics.validity import outside, say
from pycore.stages.notes import mark, nearest, note, rounded
from pycore.stages.quench import CENTRE, MIDRADIUS, SURFACE  # places of the section

ROOM_C = 20.0
LOWEST_C = 150.0  # coolest useful temper: relieves without softening (common practice)
UNTEMPERED_TO_C = 100.0  # below this an hour changes nothing a file can feel (common practice)
THROUGH_WITHIN_K = 5.0
FLASH_HOLD_MIN = 2.0  # tempering to colour at the fire (common practice)
HOLD_PER_MM_MIN = 60 / 25.4  # 1 h per inch of section (supplier sheets; common practice)
LONGEST_HOLD_H = 8.0  # what a patient smith would still do
CURVE_ERROR_HRC = 1.0  # scatter of published curves at one temperature (handbook spread)
FIT_ERROR_HRC = 1.5  # leave-one-steel-out error of the regression, 0.9 mean
START_WITHIN_MIN = {"water": 15, "oil": 30, "gas": 60, "plates": 60}  # common practice; cracks come with delay
GRID_C = np.arange(LOWEST_C, 701.0, 1.0)


@dataclass(frozen=True)
class Temper:
    kind: str
    temperature_C: float
    window_C: tuple
    hold_min: float
    heat_up_min: float | None
    cycles: int
    colour: str | None
    start_within_min: int
    reached: bool
    beyond_sheet: bool  # outside the tempering range the grade's own sheet gives
    needs_C: float | None
    longer_h: float | None  # hold in hours that would reach the aim at the oven's hottest, if one does
    accuracy_C: float
    final: dict  # place -> {"HRC": {low, mid, high}}
    final_HRC: np.ndarray | None
    final_low: np.ndarray | None
    final_high: np.ndarray | None
    curve_C: np.ndarray
    curve_HRC: np.ndarray
    curve_source: str
    tensile_MPa: float | None
    marks: tuple
    why: dict


def oven_row(kind):
    return next(row for row in table("temper_ovens") if row["kind"] == kind)


class Response:
    """Hardness of the fully hardened steel after a temper, in one form for tabulated curves and for the regression."""

    def __init__(self, steel, as_quenched_HRC):
        curve = tempering.grade_curve(steel.grade) if steel.grade else None
        alloyed = sum(steel.composition.get(e, 0.0) for e in ("Cr", "Ni", "Mo")) > 0.6
        self.constant = (
            20.0
            if steel.basis == "tabulated"
            else float(tempering.hollomon_jaffe_constant(steel.dissolved_C_pct, alloyed))
        )
        if curve is not None:
            self.knots_C, knots_HRC, hold_h, cycles, self.source = curve
            self.reference_h, self.fit, self.error = hold_h * cycles, False, CURVE_ERROR_HRC
        else:
            self.knots_C = tempering.GRANGE_BAUGHMAN_FIT[:, 0]
            composition = dict(steel.composition, C=steel.dissolved_C_pct)
            knots_HRC = hardness.HV_to_HRC(tempering.grange_baughman_fit_HV(composition, self.knots_C))
            self.reference_h, self.fit, self.error = 1.0, True, FIT_ERROR_HRC
            self.source = (
                "regression on Grange & Baughman 1956, Trans. ASM 48 (open set Raiipa Technologies, CC BY 4.0)"
            )
        first = min(UNTEMPERED_TO_C, self.knots_C[0] - 10)
        self.knots_HRC = np.minimum(knots_HRC, as_quenched_HRC) if steel.basis != "tabulated" else knots_HRC
        self._T = np.concatenate([[first], self.knots_C])
        self._HRC = np.concatenate([[max(as_quenched_HRC, self.knots_HRC[0])], self.knots_HRC])

    def HRC(self, temperature_C, total_h):
        """Hardness after a total time: the curve, read at the temperature that has the same P in its own time."""
        at = tempering.equivalent_temperature_C(temperature_C, total_h, self.reference_h, self.constant)
        end = self._T[-1]
        slope = (self._HRC[-1] - self._HRC[-2]) / (self._T[-1] - self._T[-2])
        return np.where(at > end, self._HRC[-1] + slope * (at - end), np.interp(at, self._T, self._HRC))


def tempered_HRC(response, found, temperature_C, total_h, place):
    """Hardness of a place after a temper: what is hard follows the curve, what is soft stays until it is overtaken."""
    hard_HV = hardness.HRC_to_HV(response.HRC(temperature_C, total_h))
    hard = found.fractions["martensite"][place] + found.fractions["retained_austenite"][place]
    soft_HV = np.minimum(found.soft_HV[place], hard_HV)
    return np.minimum(hardness.HV_to_HRC(hard * hard_HV + (1 - hard) * soft_HV), found.HRC[place])


def _hold(job, steel, section):
    """(minutes at heat, cycles), by section and family (common practice and supplier sheets)."""
    if job.temper.kind in ("torch", "residual-heat"):
        return FLASH_HOLD_MIN, 1
    tool = "tool steel" in steel.family and steel.hardening != "water"
    hold = max(120.0 if tool else 60.0, 15 * math.ceil(HOLD_PER_MM_MIN * section.width_mm / 15))
    cycles = 2 if steel.basis == "tabulated" or steel.dissolved_C_pct >= 0.6 else 1
    if "temper_cycles" in steel.temperatures:
        cycles = int(steel.temperatures["temper_cycles"][1])
    return hold, cycles


def temper(job, steel, section, quenched, found, aim_HRC):
    """`found` is the structure that goes into the oven (after any cold treatment), or None."""
    marks, oven = [], oven_row(job.temper.kind)
    hold_min, cycles = _hold(job, steel, section)
    hold_min = job.decided.get("temper_hold_min", hold_min)
    cycles = job.decided.get("temper_cycles", cycles)
    accuracy = job.temper.accuracy_C if job.temper.accuracy_C is not None else number(oven["accuracy_default_C"])
    total_h = hold_min * cycles / 60.0
    hottest = job.temper.max_C
    start = START_WITHIN_MIN[quenched.kind]
    hard_HRC = _fully_hard_HRC(steel, found)
    response = Response(steel, hard_HRC)
    low, high = aim_HRC
    target = (low + high) / 2
    curve_HRC = response.HRC(GRID_C, total_h)
    # Where no structure is known the temper is still that of the hardened steel.
    surface = curve_HRC if found is None else tempered_HRC(response, found, GRID_C, total_h, SURFACE)
    # Steel with secondary hardness is tempered on the far side of its peak; its sheet says from where.
    published = steel.temperatures.get("temper_C")
    allowed = (published[0] if published else LOWEST_C) <= GRID_C
    grid, surface = GRID_C[allowed], surface[allowed]
    needs = _first_at_most(grid, surface, target)
    window = (_first_at_most(grid, surface, high), _last_at_least(grid, surface, low))
    reached, longer = True, None
    if needs is None:
        needs, reached = float(GRID_C[-1]), False
    if "temper_C" in job.decided:
        chosen = job.decided["temper_C"]
        reached = chosen <= hottest
    else:
        chosen = float(nearest(needs, 5))
        if chosen > hottest:
            eases = window[0] is not None and window[0] <= hottest
            reached = bool(eases)
            chosen = float(5 * math.floor(hottest / 5))
            if not reached:
                longer = _longer(response, found, hottest, high, cycles)
    chosen = max(chosen, min(LOWEST_C, hottest)) if "temper_C" not in job.decided else chosen
    beyond_sheet = bool(published) and not published[0] <= chosen <= published[2]
    if beyond_sheet:
        marks.append(
            mark(
                "temper.temperature_C",
                f"outside the {published[0]:g}-{published[2]:g} °C the grade's sheet asks for: {published[3]}",
            )
        )
    if response.fit:
        out = outside(dict(steel.composition, C=steel.dissolved_C_pct), tempering.FIT_RANGE)
        if out:
            marks.append(mark("temper.temperature_C", "outside the data of the tempering regression: " + say(out)))
        if chosen < tempering.FIT_RANGE_C[0]:
            marks.append(
                mark(
                    "temper.temperature_C",
                    "below 204 °C the hardness is drawn between the regression and the as-quenched value",
                )
            )
    heat_up = None
    if job.temper.kind in ("torch", "residual-heat"):
        marks.append(mark("temper.heat_up_min", "the colour tells when it is there"))
    else:
        heat_up = _heat_up_min(section, chosen, oven)
    final, arrays = _final(response, found, chosen, total_h, accuracy)
    if found is not None and found.HRC[SURFACE] < low:
        marks.append(mark("temper.temperature_C", "the quench leaves it below the aim: no temper can raise it"))
    steel_set = "stainless" if steel.composition.get("Cr", 0) > 10 else "carbon"
    why = _why(steel, response, oven, section, hold_min, cycles, accuracy, found)
    tensile = _tensile(final)
    return Temper(
        job.temper.kind,
        rounded(chosen, 0),
        _window(window, hottest),
        rounded(hold_min, 0),
        rounded(heat_up, 0),
        int(cycles),
        colours.temper_colour(chosen, steel_set),
        start,
        reached,
        beyond_sheet,
        rounded(needs, 0) if not reached else None,
        longer,
        rounded(accuracy),
        final,
        *arrays,
        GRID_C[::10],
        curve_HRC[::10],
        response.source,
        tensile,
        tuple(marks),
        why,
    )


def _fully_hard_HRC(steel, found):
    """As-quenched hardness of this steel where it is hard through: the sheet's, or the model's."""
    if "as_quenched_HRC" in steel.temperatures:
        return steel.temperatures["as_quenched_HRC"][1]
    full = float(hardness.martensite_HRC(steel.dissolved_C_pct))
    return max(full, float(found.HRC.max())) if found is not None else full


def _first_at_most(grid, values, level):
    """The coolest temperature at which the hardness is down to a level, or None."""
    at = np.flatnonzero(values <= level + 1e-9)
    if len(at) == 0:
        return None
    i = at[0]
    if i == 0:
        return float(grid[0])
    share = (values[i - 1] - level) / max(values[i - 1] - values[i], 1e-9)
    return float(grid[i - 1] + share * (grid[i] - grid[i - 1]))


def _last_at_least(grid, values, level):
    """The hottest temperature of the first stretch in which the hardness is still at or above a level, or None."""
    below = np.flatnonzero(values < level - 1e-9)
    if len(below) == 0:
        return float(grid[-1])
    return None if below[0] == 0 else float(grid[below[0] - 1])


def _window(window, hottest):
    cool, hot = window
    if cool is None or hot is None or cool > hot:
        return (None, None)
    cool, hot = 5 * math.ceil(cool / 5), 5 * math.floor(min(hot, hottest) / 5)
    return (float(cool), float(hot)) if cool <= hot else (None, None)


def _longer(response, found, hottest, high, cycles):
    """Hours for each of the cycles at the oven's hottest that would bring the surface into the aim, or None."""
    for hold_h in (2.0, 3.0, 4.0, 6.0, LONGEST_HOLD_H):
        HRC = (
            response.HRC(hottest, hold_h * cycles)
            if found is None
            else tempered_HRC(response, found, hottest, hold_h * cycles, SURFACE)
        )
        if high >= HRC:
            return hold_h
    return None


def _heat_up_min(section, target_C, oven):
    convection, emissivity = number(oven["convection_W_m2K"]), number(oven["emissivity"])

    def boundary(surface_C, time_s):
        return convection + radiation_coefficient(surface_C, target_C, emissivity), np.full_like(surface_C, target_C)

    history = conduction.conduct(
        section.geometry,
        section.half_thickness_mm,
        steel_properties.on_heating(),
        ROOM_C,
        boundary,
        until=lambda T: T[:, 0] >= target_C - THROUGH_WITHIN_K,
        end_s=12 * 3600.0,
        largest_change_K=20.0,
        nodes=9,
    )
    return float(history.case()[0][-1]) / 60.0


def _final(response, found, temperature_C, total_h, accuracy_C):
    """Hardness after tempering at every place, with the oven's error and the models' in its band."""
    if found is None:
        HRC = {"HRC": {"low": None, "mid": None, "high": None}}
        return {"surface": HRC, "midradius": HRC, "centre": HRC}, (None, None, None)
    places = range(len(found.HRC))
    at = lambda T: np.array([float(tempered_HRC(response, found, T, total_h, p)) for p in places])  # noqa: E731
    mid, hot, cool = at(temperature_C), at(temperature_C + accuracy_C), at(max(temperature_C - accuracy_C, 60.0))
    # What was uncertain before the temper stays so where the structure is soft; martensite forgets it.
    soft = 1 - found.fractions["martensite"] - found.fractions["retained_austenite"]
    carried_low, carried_high = (found.HRC - found.low) * soft, (found.high - found.HRC) * soft
    low = mid - np.sqrt((mid - np.minimum(hot, mid)) ** 2 + response.error**2 + carried_low**2)
    high = mid + np.sqrt((np.maximum(cool, mid) - mid) ** 2 + response.error**2 + carried_high**2)
    high = np.maximum(np.minimum(high, np.maximum(found.high, mid)), mid)
    place = lambda i: {"HRC": {"low": rounded(low[i]), "mid": rounded(mid[i]), "high": rounded(high[i])}}  # noqa: E731
    return {"surface": place(SURFACE), "midradius": place(MIDRADIUS), "centre": place(CENTRE)}, (mid, low, high)


def _tensile(final):
    mid = final["surface"]["HRC"]["mid"]
    if mid is None:
        return None
    strength = float(hardness.iso_18265_tensile_MPa(hardness.HRC_to_HV(mid)))
    return None if strength != strength else float(nearest(strength, 10))


def _why(steel, response, oven, section, hold_min, cycles, accuracy, found):
    if response.fit:
        model = "regression of tempered martensite on composition, with Hollomon-Jaffe for time"
    else:
        model = "published curve of the grade, with Hollomon-Jaffe for time"
    inputs = f"{cycles} × {hold_min:g} min; constant {response.constant:.1f}; curve for {response.reference_h:g} h"
    source = response.source + "; Hollomon & Jaffe 1945, Trans. AIME 162, 223"
    final = note(
        "Hardness after tempering",
        model,
        inputs + f"; oven ±{accuracy:g} °C",
        source,
        f"curve ±{response.error:g} HRC",
        found is not None,
    )
    return {
        "temper.temperature_C": note(
            "Tempering temperature", model, inputs, source, f"{response.knots_C[0]:g}-{response.knots_C[-1]:g} °C"
        ),
        "temper.hold_min": note(
            "Time at heat",
            "1 h per 25 mm of section, with a minimum by steel",
            f"{section.width_mm:g} mm, {steel.family}",
            "supplier sheets (Crucible, Diamond Metals); common practice",
        ),
        "temper.heat_up_min": note(
            "Time to heat through",
            "transient conduction, EN 1993-1-2 properties; convection and radiation",
            f"{oven['name']}, half thickness {section.half_thickness_mm:.1f} mm",
            "EN 1993-1-2:2005 cl. 3.4.1; " + oven["source"],
        ),
        "final.surface": final,
        "final.midradius": final,
        "final.centre": final,
    }

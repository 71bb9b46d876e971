"""The verdict: does the plan reach the aim, why or why not, and what else would."""

import math
from dataclasses import dataclass

from pycore.stages.notes import note, rounded
from pycore.stages.quench import CENTRE, SURFACE
from pycore.stages.risk import MEANT_FOR, gentleness

REACHABLE_SHARE, BORDERLINE_SHARE = 0.55, 0.20
TENTH_TO_SPREAD = 2.56  # a 10-90 % band is 2.56 standard deviations wide


@dataclass(frozen=True)
class Proof:
    verdict: str
    confidence: float | None
    reasons: tuple
    alternatives: tuple
    why: dict


def share_inside(low, mid, high, aim):
    """Share of a normal spread with this 10-90 % band that lies inside the aim."""
    spread = max((high - low) / TENTH_TO_SPREAD, 0.3)
    below = lambda x: 0.5 * (1 + math.erf((x - mid) / spread / math.sqrt(2)))  # noqa: E731
    return below(aim[1] + 0.25) - below(aim[0] - 0.25)  # a tester reads to half a point


def proof(job, steel, section, heat, quenched, found, temper, aim_HRC):
    reasons, alternatives = [], []
    low, high = aim_HRC
    final = temper.final["surface"]["HRC"]
    if found is None:
        return Proof(
            "borderline",
            None,
            (f"No data say what {steel.name} becomes in {section.width_mm:g} mm with this quench.",),
            (
                {
                    "what": "Use a thinner section, or ask the steel's maker for its hardening depth.",
                    "gives": "a section the sheet covers",
                },
            ),
            {"verdict": note("Verdict", "no model holds", steel.name, "none", "", False)},
        )
    surface = float(found.HRC[SURFACE])
    confidence = share_inside(final["low"], final["mid"], final["high"], aim_HRC)
    if surface < low:
        verdict = "out-of-reach" if found.high[SURFACE] < low else "borderline"
        reasons.append(
            f"{quenched.medium_name} leaves the surface at about {surface:.0f} HRC, below the aim of {low:g}–{high:g}."
        )
        _harder(quenched, alternatives)
    elif not temper.reached:
        verdict = "out-of-reach"
        reasons.append(
            f"The {temper.kind.replace('-', ' ')} stops at {job.temper.max_C:g} °C; the aim of {low:g}–{high:g} HRC "
            f"needs about {temper.needs_C:g} °C. At {temper.temperature_C:g} °C the part stays at about "
            f"{final['mid']:.0f} HRC, too hard."
        )
        _hotter(temper, final, alternatives)
    else:
        verdict = (
            "reachable"
            if confidence >= REACHABLE_SHARE
            else "borderline"
            if confidence >= BORDERLINE_SHARE
            else "out-of-reach"
        )
        reasons.append(
            f"Quenched to about {surface:.0f} HRC and tempered at {temper.temperature_C:g} °C it comes to "
            f"{final['low']:.0f}–{final['high']:.0f} HRC at the surface."
        )
        if verdict != "reachable":
            _narrow(temper, final, aim_HRC, reasons, alternatives)
    if temper.beyond_sheet:
        verdict = "borderline" if verdict == "reachable" else verdict
        low_C, _, high_C, source = steel.temperatures["temper_C"]
        reasons.append(
            f"The grade's sheet tempers at {low_C:g}–{high_C:g} °C, not at {temper.temperature_C:g} °C: {source}."
        )
        alternatives.append(
            {
                "what": "Change the aim to what that range gives, or take another steel.",
                "gives": "the toughness the grade is known for",
            }
        )
    centre = float(found.HRC[CENTRE])
    if centre < low and surface >= low:
        reasons.append(f"The centre hardens to about {centre:.0f} HRC only: a hard shell over a softer core.")
    if quenched.crack_risk["grade"] == "high":
        reasons.append("High risk of cracking: " + "; ".join(quenched.crack_risk["reasons"]) + ".")
        verdict = "borderline" if verdict == "reachable" else verdict
        _gentler(job, steel, quenched, alternatives)
    if heat.measured_by != "pyrometer":
        window = heat.window_C[1] - heat.window_C[0]
        if heat.error_C * 2 > window + 20:
            reasons.append(
                f"Shade and magnet miss by ±{heat.error_C:g} °C and the window is {window:g} °C wide: "
                "harden a trial piece first."
            )
    why = {
        "verdict": note(
            "Verdict",
            "share of the expected band inside the aim",
            f"{100 * confidence:.0f} %",
            "our own; the bands are the models' published errors and the oven's",
            "",
        )
    }
    return Proof(verdict, rounded(confidence, 2), tuple(reasons), tuple(alternatives), why)


def _gentler(job, steel, quenched, alternatives):
    """What would lower the risk of cracking: the medium the grade is meant for, eased features."""
    if MEANT_FOR[steel.hardening] > gentleness(quenched.kind):
        medium = "still air" if steel.hardening == "air" else "oil"
        alternatives.append(
            {"what": f"Quench in {medium}: the grade is meant for it.", "gives": "a much lower risk of cracking"}
        )
    if job.part.features:
        alternatives.append(
            {
                "what": "Round the corners, plug the holes, fill the keyways.",
                "gives": "fewer places where a crack starts",
            }
        )


def _harder(quenched, alternatives):
    """What would leave it harder: another bath of the shop, agitation, another steel."""
    better = [other for other in quenched.others if other["surface_HRC"] is not None]
    if better:
        best = max(better, key=lambda other: other["surface_HRC"])
        alternatives.append(
            {
                "what": f"Quench in {best['medium_name']} instead ({best['why_not']}).",
                "gives": f"about {best['surface_HRC']:.0f} HRC at the surface before tempering",
            }
        )
    if quenched.agitation != "strong" and quenched.kind in ("water", "oil"):
        alternatives.append(
            {"what": "Move the part hard in the bath.", "gives": "faster cooling: try it on a coupon first"}
        )
    alternatives.append(
        {
            "what": "Take a steel that hardens deeper in this bath, or a thinner section.",
            "gives": "full hardness at the surface",
        }
    )


def _hotter(temper, final, alternatives):
    """What would bring it down to the aim: a longer hold, a hotter oven, the torch, another aim."""
    if temper.longer_h:
        alternatives.append(
            {
                "what": f"Hold {temper.cycles} × {temper.longer_h:g} h at {temper.temperature_C:g} °C.",
                "gives": "just inside the aim: time does slowly what heat does fast",
            }
        )
    alternatives.append(
        {"what": f"Use a kiln or a salt bath that holds {temper.needs_C:g} °C.", "gives": "the middle of the aim"}
    )
    alternatives.append(
        {
            "what": "Draw it to colour at the fire with a torch, after this oven temper.",
            "gives": "the aim, less evenly: ±20 °C by eye",
        }
    )
    alternatives.append(
        {
            "what": f"Accept {final['low']:.0f}–{final['high']:.0f} HRC.",
            "gives": "harder and more brittle than the use asks",
        }
    )


def _narrow(temper, final, aim_HRC, reasons, alternatives):
    """The aim is met in the middle but the spread is wide: say which error is to blame."""
    low, high = aim_HRC
    reasons.append(
        f"The spread of {final['low']:.0f}–{final['high']:.0f} HRC is wide against the aim of {low:g}–{high:g}."
    )
    alternatives.append(
        {
            "what": f"Put a thermometer beside the part in the oven (±{temper.accuracy_C:g} °C now).",
            "gives": "a narrower spread",
        }
    )
    alternatives.append(
        {
            "what": "Temper 15 °C cooler first, test, and go up in steps of 10 °C.",
            "gives": "the aim approached from the hard side",
        }
    )

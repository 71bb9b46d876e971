"""Cold treatment between quench and temper: turns retained austenite into martensite where the shop can."""

from dataclasses import dataclass, replace

from pycore.physics import hardness, martensite
from pycore.stages.notes import mark, note, rounded
from pycore.stages.quench import ROOM_C, SURFACE

COLD_C = {
    "freezer": -18.0,
    "dry-ice": -75.0,
    "liquid-nitrogen": -196.0,
}  # freezer, dry-ice slurry (practice), boiling LN2
HOLD_MIN_PER_25_MM, SHORTEST_MIN = 60.0, 60.0  # ASM Handbook 4A: about 1 h per 25 mm
WORTH_IT = 0.05  # under 5 % retained austenite there is nothing to gain


@dataclass(frozen=True)
class Cold:
    temperature_C: float
    hold_min: float
    retained_before: float
    retained_after: float
    why_do: str
    marks: tuple
    why: dict


def cold(job, steel, section, quenched):
    """(Cold or None, the structure that goes on): what a freezer, dry ice or nitrogen does to this steel."""
    found = quenched.structure
    if job.cold == "none" or found is None:
        return None, found
    retained = found.fractions["retained_austenite"]
    before = float(retained[SURFACE])
    if before < WORTH_IT:
        return None, found
    temperature = COLD_C[job.cold]
    ratio = float(
        martensite.koistinen_marburger_1959(steel.Ms_C, temperature)
        / martensite.koistinen_marburger_1959(steel.Ms_C, ROOM_C)
    )
    turned = retained * (1 - ratio)
    fractions = dict(
        found.fractions, retained_austenite=retained * ratio, martensite=found.fractions["martensite"] + turned
    )
    martensite_HV = float(hardness.HRC_to_HV(hardness.martensite_HRC(steel.dissolved_C_pct)))
    gain_HV = turned * max(0.0, martensite_HV - hardness.RETAINED_AUSTENITE_HV) * 0.5
    HV = found.HV + gain_HV
    HRC = hardness.HV_to_HRC(HV)
    up = HRC - found.HRC
    after = replace(found, HV=HV, HRC=HRC, low=found.low + 0.5 * up, high=found.high + up, fractions=fractions)
    hold = max(SHORTEST_MIN, HOLD_MIN_PER_25_MM * section.width_mm / 25.0)
    result = Cold(
        temperature,
        rounded(hold, 0),
        rounded(before, 3),
        rounded(before * ratio, 3),
        f"about {100 * before:.0f} % austenite is left after the quench; {100 * before * ratio:.0f} % after this",
        ()
        if job.cold != "freezer"
        else (mark("cold.temperature_C", "a household freezer is barely colder than needed to matter"),),
        {
            "cold.temperature_C": note(
                "Cold treatment",
                "Koistinen-Marburger, carried to the cold",
                f"Ms {steel.Ms_C:g} °C, {temperature:g} °C",
                "Koistinen & Marburger 1959, Acta Metall. 7, 59; half the gain in hardness counted, "
                "because austenite settles on standing",
                "plain Fe-C 0.37-1.1 % C",
                steel.basis == "modelled",
            )
        },
    )
    return result, after

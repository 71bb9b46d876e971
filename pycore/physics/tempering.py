"""Hardness after tempering: time and temperature as one parameter, over a grade's published curve."""

import functools

import numpy as np

from pycore.data import table
from pycore.physics.composition import amounts

ZERO_C_IN_K = 273.15
# HV after 1 h of martensite, least squares on Grange & Baughman 1956 (25 heats; open set Raiipa Technologies,
# CC BY 4.0): HV = a0 + a1 C + a2 C2 + Mn m + Si s + Ni n + Cr r + Mo q + V v. Rows: °C, then the coefficients.
GRANGE_BAUGHMAN_FIT = np.array(
    [
        [204.4, 316, 687, -239, 4, 28, -3, 28, 18, -60],
        [260.0, 300, 584, -160, 0, 51, 1, 20, -6, -57],
        [315.6, 273, 509, -148, 11, 74, 2, 28, -6, 2],
        [371.1, 221, 518, -226, 27, 72, 1, 61, 37, -25],
        [426.7, 193, 467, -199, 21, 53, 1, 61, 92, 46],
        [482.2, 160, 437, -178, 22, 38, 3, 54, 129, 82],
        [537.8, 143, 345, -115, 27, 30, 5, 54, 161, 166],
        [593.3, 128, 301, -125, 28, 35, 5, 56, 186, 254],
        [648.9, 150, 160, -38, 19, 31, 4, 59, 126, 103],
    ]
)
FIT_RANGE = {
    "C": (0.25, 0.82),
    "Mn": (0.3, 1.85),
    "Si": (0.05, 1.7),
    "Ni": (0.0, 3.4),
    "Cr": (0.0, 1.0),
    "Mo": (0.0, 0.33),
    "V": (0.0, 0.17),
}
FIT_RANGE_C = (204.4, 648.9)


def hollomon_jaffe_constant(C_pct, alloyed=False):
    """The constant C of the Hollomon-Jaffe parameter, time in hours.

    Inputs: C_pct, wt % carbon in solution, scalar or array; alloyed, True for alloy steel.
    Returns: constant, -, same shape.
    Valid: 0.25 to 1.2 % C; the optimum is flat, +-2. Raises: nothing.
    Source: Hollomon & Jaffe 1945, Trans. AIME 162, 223: 15 for 0.9-1.2 % C tool steels, 19.5 for 0.25-0.4 % C
        (from memory); 20 for alloy steel (general use); 17.5 for plain medium carbon, our best fit to Grange &
        Baughman 1956. Straight lines between.
    """
    if alloyed:
        return np.interp(C_pct, (0.5, 0.9), (20.0, 16.0))
    return np.interp(C_pct, (0.30, 0.45, 0.70), (19.5, 17.5, 15.0))


def hollomon_jaffe_parameter(temperature_C, time_h, constant):
    """Temper parameter P = T (C + log10 t).

    Inputs: temperature_C; time_h > 0 in hours; constant; scalars or arrays that broadcast.
    Returns: P in kelvin.
    Valid: about 1 minute to 1000 hours; says nothing of secondary hardening. Raises: nothing.
    Source: Hollomon & Jaffe 1945, Trans. AIME 162, 223-249.
    """
    return (np.asarray(temperature_C, float) + ZERO_C_IN_K) * (constant + np.log10(time_h))


def equivalent_temperature_C(temperature_C, time_h, reference_h, constant):
    """The temperature that does in a reference time what another does in its own.

    Inputs: temperature_C; time_h, reference_h > 0, hours; constant; scalars or arrays that broadcast.
    Returns: °C.
    Valid: as hollomon_jaffe_parameter. Raises: nothing.
    Source: Hollomon & Jaffe 1945, equal P.
    """
    P = hollomon_jaffe_parameter(temperature_C, time_h, constant)
    return P / (constant + np.log10(reference_h)) - ZERO_C_IN_K


def grange_baughman_fit_HV(composition, temperature_C):
    """Hardness of martensite tempered 1 h, from composition.

    Inputs: composition {element: wt %}, scalars or arrays; temperature_C, scalar or array that broadcasts.
    Returns: HV.
    Valid: FIT_RANGE and FIT_RANGE_C (held at the ends beyond); leave-one-steel-out error 0.9 HRC mean.
    Raises: nothing.
    Source: least squares on Grange & Baughman 1956, Trans. ASM 48 (see GRANGE_BAUGHMAN_FIT).
    """
    g = amounts(composition)
    terms = (1.0, g("C"), g("C") ** 2, g("Mn"), g("Si"), g("Ni"), g("Cr"), g("Mo"), g("V"))
    rows = [sum(c * t for c, t in zip(row[1:], terms)) for row in GRANGE_BAUGHMAN_FIT]
    T = np.asarray(temperature_C, float)
    at = np.clip(T, *FIT_RANGE_C)
    knots = GRANGE_BAUGHMAN_FIT[:, 0]
    i = np.clip(np.searchsorted(knots, at) - 1, 0, len(knots) - 2)
    w = (at - knots[i]) / (knots[i + 1] - knots[i])
    stack = np.array(np.broadcast_arrays(*rows)) if np.ndim(rows[0]) else np.array(rows)
    return stack[i] * (1 - w) + stack[i + 1] * w


@functools.cache
def grade_curve(grade):
    """A grade's published tempering curve.

    Inputs: grade id of grades.csv.
    Returns: (temperature_C, HRC, hold_h, cycles, source): two arrays of one length, two numbers, text; None
        where no curve is tabulated.
    Valid: small fully hardened pieces at the grade's usual austenitizing temperature. Raises: nothing.
    Source: tempering.csv, row by row.
    """
    rows = [row for row in table("tempering") if row["grade"] == grade]
    if not rows:
        return None
    rows.sort(key=lambda row: float(row["temper_C"]))
    return (
        np.array([float(r["temper_C"]) for r in rows]),
        np.array([float(r["HRC"]) for r in rows]),
        float(rows[0]["hold_h"] or 1),
        float(rows[0]["cycles"] or 1),
        "; ".join(dict.fromkeys(r["source"] for r in rows)),
    )

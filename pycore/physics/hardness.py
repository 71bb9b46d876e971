"""Hardness of the structures of steel, and the scales it is told in."""

import numpy as np

from pycore.data import columns
from pycore.physics.composition import amounts

# Hardness of martensite above the Hodge-Orehoski table (0.60 % C): plateau of fully hardened small pieces, the
# retained austenite counted apart (handbook values for W1, 1095, 52100; from memory).
PLATEAU_C_PCT = (0.60, 0.70, 0.80, 0.90, 1.20)
PLATEAU_HRC = (64.3, 65.4, 66.3, 66.8, 67.0)
RETAINED_AUSTENITE_HV = 250.0  # 200-300 HV for high-carbon austenite (from memory)
MAYNIER_RANGE = {
    "C": (0.1, 0.5),
    "Si": (0.0, 1.0),
    "Mn": (0.0, 2.0),
    "Ni": (0.0, 4.0),
    "Cr": (0.0, 3.0),
    "Mo": (0.0, 1.0),
    "V": (0.0, 0.2),
}
# Hardness of pearlite in eutectoid steel against the temperature at which it formed: isothermal diagram of
# 1080 (US Steel atlas; from memory, +-2 HRC).
PEARLITE_FORMED_C = (480.0, 540.0, 580.0, 620.0, 650.0, 680.0, 700.0)
PEARLITE_HV = (400.0, 395.0, 385.0, 345.0, 302.0, 245.0, 215.0)


def HRC_to_HV(HRC):
    """Vickers hardness of a Rockwell C reading.

    Inputs: HRC, scalar or array. Returns: HV, same shape.
    Valid: 20 to 68 HRC, non-austenitic steel; continued by the table's end slope below. Raises: nothing.
    Source: ASTM E140, Table 1 (e140.csv); Qvarnström's fit HV = (223 HRC + 14500)/(100 - HRC) below 20.
    """
    HRC = np.asarray(HRC, float)
    scale, HV = columns("e140", "HRC", "HV")
    order = np.argsort(scale)
    return np.where(
        HRC < 20,
        (223 * HRC + 14500) / (100 - np.minimum(HRC, 99)),
        np.interp(HRC, np.array(scale)[order], np.array(HV)[order]),
    )


def HV_to_HRC(HV):
    """Rockwell C reading of a Vickers hardness.

    Inputs: HV, scalar or array. Returns: HRC, same shape (below 20: outside the scale, for interpolation only).
    Valid: 238 to 940 HV, non-austenitic steel. Raises: nothing.
    Source: ASTM E140, Table 1 (e140.csv); Qvarnström's fit below 238 HV.
    """
    HV = np.asarray(HV, float)
    HRC, scale = columns("e140", "HRC", "HV")
    order = np.argsort(scale)
    return np.where(
        HV < 238, (100 * HV - 14500) / (HV + 223), np.interp(HV, np.array(scale)[order], np.array(HRC)[order])
    )


def iso_18265_tensile_MPa(HV):
    """Tensile strength that goes with a hardness.

    Inputs: HV, scalar or array. Returns: MPa, same shape; NaN outside the table.
    Valid: 80 to 650 HV, unalloyed and low-alloy steel; the least reliable of the conversions. Raises: nothing.
    Source: ISO 18265:2013, Table A.1 (iso18265.csv).
    """
    scale, strength = columns("iso18265", "HV", "Rm_MPa")
    return np.interp(HV, scale, strength, left=np.nan, right=np.nan)


def martensite_HRC(C_pct):
    """Hardness of 99.9 % martensite, from its carbon alone.

    Inputs: C_pct, wt % carbon in solution, scalar or array. Returns: HRC, same shape.
    Valid: 0.10 to 1.2 % C. Raises: nothing.
    Source: Hodge & Orehoski 1946, Trans. AIME 167 (hodge_orehoski.csv, to 0.60 % C); plateau above (from memory).
    """
    C, full = columns("hodge_orehoski", "C_pct", "M99_9")
    C, full = np.array(C + PLATEAU_C_PCT[1:]), np.array(full + PLATEAU_HRC[1:])
    return np.interp(C_pct, C, full)


def hodge_orehoski_HRC(C_pct, martensite_fraction):
    """Hardness of quenched steel with part martensite.

    Inputs: C_pct (wt %), martensite_fraction 0.5 to 0.999, numbers. Returns: HRC.
    Valid: 0.10 to 0.60 % C, 50 % martensite and more; held at the ends beyond. Raises: nothing.
    Source: Hodge & Orehoski 1946, Trans. AIME 167 (hodge_orehoski.csv).
    """
    shares = (("M50", 0.5), ("M80", 0.8), ("M90", 0.9), ("M95", 0.95), ("M99_9", 0.999))
    carbon = columns("hodge_orehoski", "C_pct")[0]
    values = [float(np.interp(C_pct, carbon, columns("hodge_orehoski", name)[0])) for name, _ in shares]
    return float(np.interp(martensite_fraction, [share for _, share in shares], values))


def maynier_1978_HV(composition, rate_700_C_per_h):
    """Hardness of martensite, bainite and ferrite-pearlite from composition and cooling rate.

    Inputs: composition {element: wt %}, scalars or arrays; rate_700_C_per_h, cooling rate at 700 °C in °C per
        hour, > 0, scalar or array.
    Returns: (HV martensite, HV bainite, HV ferrite-pearlite).
    Valid: MAYNIER_RANGE. Raises: nothing.
    Source: Maynier, Dollet & Bastien 1978, Hardenability Concepts with Applications to Steel, AIME.
    """
    g = amounts(composition)
    C, Si, Mn, Ni, Cr, Mo, V = (g(e) for e in ("C", "Si", "Mn", "Ni", "Cr", "Mo", "V"))
    rate = np.log10(rate_700_C_per_h)
    martensite = 127 + 949 * C + 27 * Si + 11 * Mn + 8 * Ni + 16 * Cr + 21 * rate
    bainite = (
        -323
        + 185 * C
        + 330 * Si
        + 153 * Mn
        + 65 * Ni
        + 144 * Cr
        + 191 * Mo
        + (89 + 53 * C - 55 * Si - 22 * Mn - 10 * Ni - 20 * Cr - 33 * Mo) * rate
    )
    ferrite_pearlite = (
        42
        + 223 * C
        + 53 * Si
        + 30 * Mn
        + 12.6 * Ni
        + 7 * Cr
        + 19 * Mo
        + (10 - 19 * Si + 4 * Ni + 8 * Cr + 130 * V) * rate
    )
    return martensite, bainite, ferrite_pearlite


def pearlite_HV(formed_C):
    """Hardness of pearlite in eutectoid steel, finer the colder it formed.

    Inputs: formed_C, mean temperature of formation, scalar or array. Returns: HV, same shape.
    Valid: 480 to 700 °C; held at the ends beyond. Raises: nothing.
    Source: isothermal transformation diagram of 1080 (US Steel atlas; from memory, +-2 HRC).
    """
    return np.interp(formed_C, PEARLITE_FORMED_C, PEARLITE_HV)

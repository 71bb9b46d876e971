"""Hardenability of alloy steel by calculation: ideal diameter and the Jominy curve of ASTM A255."""

import numpy as np

from pycore.data import columns, number, table
from pycore.physics.composition import amounts

INCH_MM = 25.4
A255_RANGE = {
    "C": (0.10, 0.70),
    "Mn": (0.50, 1.65),
    "Si": (0.15, 0.60),
    "Cr": (0.0, 1.35),
    "Ni": (0.0, 1.50),
    "Mo": (0.0, 0.55),
    "Cu": (0.0, 0.35),
    "V": (0.0, 0.20),
}  # ASTM A255-10, section 1.3
JOMINY_C_RANGE = (0.10, 0.65)
LAST_CUTOFF_J = 14.0
UNUSED_ABOVE_DI_IN = {24.0: 6.0}  # this row, as remembered, turns up again there and would soften deep-hardening steel
GRAIN_FACTOR = 1.08  # about 8 % of DI a grain-size number; closed form of Grossmann's base-carbon table


def a255_carbon_factor(C_pct):
    """Carbon factor of the ideal diameter at ASTM grain size 7.

    Inputs: C_pct, wt %, scalar or array. Returns: inches, same shape.
    Valid: 0.10 to 0.90 % C; held at the ends beyond. Raises: nothing.
    Source: ASTM A255, calculated hardenability, carbon factors (from memory; pieces join within 0.0011).
    """
    C = np.clip(np.asarray(C_pct, float), 0.0, 0.90)
    pieces = (
        0.54 * C,
        0.171 + 0.001 * C + 0.265 * C**2,
        0.115 + 0.268 * C - 0.038 * C**2,
        0.143 + 0.2 * C,
        0.062 + 0.409 * C - 0.135 * C**2,
    )
    return np.select([C <= 0.39, C <= 0.55, C <= 0.65, C <= 0.75], pieces[:4], pieces[4])


def a255_ideal_diameter_in(composition, grain_size=7.0):
    """Ideal critical diameter: the round that is half martensite at its centre in a perfect quench.

    Inputs: composition {element: wt %}, scalars or arrays; grain_size, ASTM number, scalar or array.
    Returns: DI in inches.
    Valid: A255_RANGE; not for hypereutectoid steel with carbides left (over-predicts 1.35 to 2.5 times).
    Raises: nothing.
    Source: ASTM A255 multiplying factors (from memory, checked by the standard's worked example, DI 1.72 in);
        grain size by Grossmann's base-carbon table.
    """
    g = amounts(composition)
    Mn = g("Mn")
    manganese = np.where(Mn <= 1.20, 3.3333 * Mn + 1.0, 5.10 * Mn - 1.12)
    return (
        a255_carbon_factor(g("C"))
        * manganese
        * (1 + 0.70 * g("Si"))
        * (1 + 0.363 * g("Ni"))
        * (1 + 2.16 * g("Cr"))
        * (1 + 3.00 * g("Mo"))
        * (1 + 0.365 * g("Cu"))
        * (1 + 1.73 * g("V"))
        * GRAIN_FACTOR ** (7.0 - np.asarray(grain_size, float))
    )


def a255_initial_hardness_HRC(C_pct):
    """Hardness at the quenched end: 100 % martensite.

    Inputs: C_pct, wt %, scalar or array. Returns: HRC, same shape.
    Valid: 0.10 to 0.70 % C; held at the ends beyond, where the polynomial turns over. Raises: nothing.
    Source: ASTM A255, initial hardness (from memory; agrees with Hodge & Orehoski 1946 within 0.1 HRC).
    """
    C = np.clip(np.asarray(C_pct, float), 0.10, 0.67)
    return 35.395 + 6.990 * C + 312.330 * C**2 - 821.744 * C**3 + 1015.479 * C**4 - 538.346 * C**5


def a255_dividing_factor(J_sixteenths, DI_in):
    """How much softer than the quenched end a Jominy station is.

    Inputs: J_sixteenths, distance in 1/16 in, scalar or array; DI_in, ideal diameter in inches, a number.
    Returns: factor >= 1, shape of J_sixteenths.
    Valid: J 1 to 32, DI 1 to 7 in (held beyond); stations the table lacks are interpolated. Raises: nothing.
    Source: ASTM A255 dividing factors, non-boron (a255_dividing.csv, from memory, row by row).
    """
    stations, factors = [1.0], [1.0]
    for row in table("a255_dividing"):
        J, at = float(row["J_sixteenths"]), float(np.clip(DI_in, 0.8, 7.0))
        if at > UNUSED_ABOVE_DI_IN.get(J, 7.0):
            continue
        # Past J 14 the 7 in of the table is its end, not a cut-off: the factor is still above 1 there.
        cutoff = number(row["cutoff_DI_in"]) or 7.0 if J <= LAST_CUTOFF_J else np.inf
        value = sum((number(row[f"a{k}"]) or 0.0) * at**k for k in range(6)) if at < cutoff else 1.0
        stations.append(J)
        factors.append(max(1.0, value))
    factors = np.maximum.accumulate(factors)  # the rows from memory cross a little near their cut-offs
    return np.interp(J_sixteenths, stations, factors)


def a255_jominy_HRC(composition, J_sixteenths, grain_size=7.0):
    """Hardness along the Jominy bar, calculated from composition.

    Inputs: composition {element: wt %}, numbers; J_sixteenths, distance in 1/16 in, scalar or array; grain_size.
    Returns: HRC, shape of J_sixteenths; below 20 the scale ends.
    Valid: A255_RANGE and JOMINY_C_RANGE, J 1 to 32. Raises: nothing.
    Source: ASTM A255, calculated hardenability (from memory).
    """
    DI = float(a255_ideal_diameter_in(composition, grain_size))
    return a255_initial_hardness_HRC(composition.get("C", 0.0)) / a255_dividing_factor(J_sixteenths, DI)


def jominy_distance_sixteenths(rate_704_C_per_s):
    """The Jominy station that cools as fast as a given place.

    Inputs: rate_704_C_per_s, cooling rate at 704 °C (1300 °F), > 0, scalar or array. Returns: 1/16 in.
    Valid: 1.9 to 272 °C/s (J 32 to J 1); held at the ends beyond. Raises: nothing.
    Source: cooling-rate scale of the SAE/AISI hardenability charts (jominy_cooling.csv), log-log between points.
    """
    J, rate = columns("jominy_cooling", "J_sixteenths", "rate_C_s")
    order = np.argsort(rate)
    return np.exp(
        np.interp(np.log(np.maximum(rate_704_C_per_s, 1e-9)), np.log(np.array(rate)[order]), np.log(np.array(J)[order]))
    )


def j1268_oil_surface_sixteenths(diameter_mm):
    """The Jominy station that hardens like the surface of a round quenched in oil.

    Inputs: diameter_mm of the round, > 0, scalar or array. Returns: 1/16 in, same shape.
    Valid: rounds to 97 mm (3.8 in) in mildly agitated oil; a straight line from zero below 20 mm, held beyond the end.
    Raises: nothing.
    Source: SAE J1268 / ASTM A304, header of the hardenability charts (j1268_surface.csv, from memory). Conduction with
        a bath's curve cools the skin of thick bars faster than this.
    """
    diameter, J = columns("j1268_surface", "diameter_in", "J_sixteenths")
    return np.interp(np.asarray(diameter_mm, float) / INCH_MM, (0.0, *diameter), (0.0, *J))

"""One-dimensional stand-ins for real sections: which round cools like a given flat or square."""

import numpy as np

BI = (0.0, 0.25, 0.5, 1.0, 2.0, 5.0, 10.0, 1000.0)
# Equivalent round D = f x thickness, from equal first-mode decay at the same heat-transfer coefficient, by width
# to thickness (1, 2, 4, infinite); Bi = h D / 2k of the round.
ASPECT = (1.0, 2.0, 4.0, 1000.0)
FACTOR = np.array(
    [
        [1.000, 1.018, 1.032, 1.051, 1.071, 1.085, 1.087, 1.083],
        [1.333, 1.357, 1.373, 1.394, 1.408, 1.406, 1.394, 1.369],
        [1.600, 1.625, 1.638, 1.645, 1.630, 1.579, 1.540, 1.485],
        [2.000, 1.960, 1.930, 1.870, 1.790, 1.670, 1.610, 1.531],
    ]
)
DENSITY_KG_MM3 = 7.85e-6  # EN 1993-1-2 clause 3.2.2


def equivalent_round_mm(thickness_mm, width_mm, Bi=1.0):
    """Diameter of the round bar that cools as a long rectangular bar does.

    Inputs: thickness_mm, width_mm >= thickness, numbers in mm; Bi, Biot number h D / 2k of the round, -.
    Returns: mm.
    Valid: long bars cooled alike on all sides, width up to 4 x thickness interpolated, beyond that towards a plate.
    Raises: nothing.
    Source: product solution of the conduction series (equal first-mode decay); check: flat 40 x 60 mm is 50 mm by
        ISO 683-1 / EN 10083-1, Annex A (from memory).
    """
    ratio = max(1.0, width_mm / thickness_mm)
    by_aspect = [float(np.interp(Bi, BI, row)) for row in FACTOR]
    return thickness_mm * float(np.interp(1 / ratio, [1 / a for a in ASPECT][::-1], by_aspect[::-1]))


def volume_mm3(shape, d, length_mm):
    """Volume of a part.

    Inputs: shape word; d {dimension: mm}; length_mm. Returns: mm3.
    Valid: the shapes of the house (round, square, flat, tube, ball, wedge, taper). Raises: KeyError for another.
    Source: solid geometry.
    """
    return {
        "round": lambda: np.pi / 4 * d["diameter"] ** 2 * length_mm,
        "square": lambda: d["width"] ** 2 * length_mm,
        "flat": lambda: d["thickness"] * d["width"] * length_mm,
        "tube": lambda: np.pi / 4 * (d["diameter"] ** 2 - d["bore"] ** 2) * length_mm,
        "ball": lambda: np.pi / 6 * d["diameter"] ** 3,
        "wedge": lambda: (d["edge"] + d["spine"]) / 2 * d["width"] * length_mm,
        "taper": lambda: np.pi / 12 * (d["edge"] ** 2 + d["edge"] * d["diameter"] + d["diameter"] ** 2) * length_mm,
    }[shape]()


def solid_mass_kg(volume):
    """Mass of steel. Inputs: volume in mm3. Returns: kg. Valid: any. Raises: nothing. Source: EN 1993-1-2, 3.2.2."""
    return volume * DENSITY_KG_MM3

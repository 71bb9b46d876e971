"""Critical temperatures on heating, and the carbon that austenite can hold."""

import numpy as np

from pycore.data import columns
from pycore.physics.composition import amounts

ANDREWS_RANGE = {
    "C": (0.0, 0.6),
    "Mn": (0.0, 2.0),
    "Si": (0.0, 1.8),
    "Ni": (0.0, 5.0),
    "Cr": (0.0, 5.0),
    "Mo": (0.0, 1.0),
}
EUTECTOID_C_PCT = 0.76  # Gustafson 1985 assessment: 0.761 % at 727 °C
EUTECTOID_TEMPERATURE_C = 727.0


def andrews_1965_Ac1_C(composition):
    """Ac1, where austenite begins to form on heating.

    Inputs: composition {element: wt %}, scalars or arrays of one shape.
    Returns: Ac1 in °C, same shape.
    Valid: ANDREWS_RANGE (low-alloy steel); standard error about 11.5 °C. Raises: nothing.
    Source: Andrews 1965, JISI 203, 721-727.
    """
    g = amounts(composition)
    return 723 - 10.7 * g("Mn") - 16.9 * g("Ni") + 29.1 * g("Si") + 16.9 * g("Cr") + 290 * g("As") + 6.38 * g("W")


def andrews_1965_Ac3_C(composition):
    """Ac3, where the last ferrite is gone on heating (the paper's short form).

    Inputs: composition {element: wt %}, scalars or arrays of one shape.
    Returns: Ac3 in °C, same shape.
    Valid: ANDREWS_RANGE, hypoeutectoid steel; standard error about 16.7 °C. Raises: nothing.
    Source: Andrews 1965, JISI 203, 721-727; the short form needs no P and Al analysis.
    """
    g = amounts(composition)
    return 910 - 203 * np.sqrt(g("C")) - 15.2 * g("Ni") + 44.7 * g("Si") + 104 * g("V") + 31.5 * g("Mo") + 13.1 * g("W")


def acm_Fe_C_C(C_pct):
    """Acm of plain Fe-C: where the last cementite dissolves at equilibrium.

    Inputs: C_pct, wt % carbon, scalar or array.
    Returns: °C, same shape.
    Valid: 0.76 to 1.5 % C; held at the ends beyond. Raises: nothing.
    Source: Fe-C assessment Gustafson 1985 with SGTE unary data, line solved as tabulated in acm_fe_c.csv.
    """
    temperature, carbon = columns("acm_fe_c", "temperature_C", "C_pct")
    return np.interp(C_pct, carbon, temperature)


def carbon_at_acm_pct(temperature_C):
    """Carbon that austenite of plain Fe-C holds beside cementite at equilibrium.

    Inputs: temperature_C, scalar or array.
    Returns: wt % C, same shape.
    Valid: 727 to 1100 °C; held at the ends beyond. Raises: nothing.
    Source: as acm_Fe_C_C. A short soak from spheroidized stock dissolves less than this.
    """
    temperature, carbon = columns("acm_fe_c", "temperature_C", "C_pct")
    return np.interp(temperature_C, temperature, carbon)

"""Where martensite starts, and how much austenite is left."""

import numpy as np

from pycore.physics.composition import amounts

MS_RANGE = {"C": (0.1, 0.6), "Mn": (0.0, 2.0), "Ni": (0.0, 5.0), "Cr": (0.0, 3.5), "Mo": (0.0, 1.0)}
VAN_BOHEMEN_RANGE = {
    "C": (0.1, 1.9),
    "Mn": (0.0, 2.0),
    "Si": (0.0, 2.0),
    "Cr": (0.0, 2.0),
    "Ni": (0.0, 4.0),
    "Mo": (0.0, 1.0),
}
KM_RATE_PER_K = 0.0110  # Koistinen & Marburger 1959
STEVEN_HAYNES_MF_OFFSET_K = 215.0  # Steven & Haynes 1956: Mf = Ms - 215 (+-15)


def andrews_1965_product_Ms_C(composition):
    """Martensite start by Andrews' product form.

    Inputs: composition of the austenite {element: wt %}, scalars or arrays.
    Returns: Ms in °C, same shape.
    Valid: MS_RANGE; flattens too much above 0.6 % C in solution. Raises: nothing.
    Source: Andrews 1965, JISI 203, 721-727 (from memory).
    """
    g = amounts(composition)
    C = g("C")
    return (
        512
        - 453 * C
        - 16.9 * g("Ni")
        + 15 * g("Cr")
        - 9.5 * g("Mo")
        + 217 * C**2
        - 71.5 * C * g("Mn")
        - 67.6 * C * g("Cr")
    )


def van_bohemen_2012_Ms_C(composition):
    """Martensite start with an exponential carbon term, good for high carbon in solution.

    Inputs: composition of the austenite {element: wt %}, scalars or arrays.
    Returns: Ms in °C, same shape.
    Valid: VAN_BOHEMEN_RANGE. Raises: nothing.
    Source: van Bohemen 2012, Mater. Sci. Technol. 28, 487 (from memory).
    """
    g = amounts(composition)
    return (
        565
        - 31 * g("Mn")
        - 13 * g("Si")
        - 10 * g("Cr")
        - 18 * g("Ni")
        - 12 * g("Mo")
        - 600 * (1 - np.exp(-0.96 * g("C")))
    )


def martensite_start_C(composition):
    """Ms by the form that fits the carbon in solution: Andrews' product to 0.6 % C, van Bohemen above.

    Inputs: composition of the austenite {element: wt %}, scalars or arrays.
    Returns: Ms in °C, same shape.
    Valid: MS_RANGE below 0.6 % C, VAN_BOHEMEN_RANGE above. Raises: nothing.
    Source: Andrews 1965; van Bohemen 2012. The two differ by at most about 5 °C at the join for plain and
    Cr steels, so the change-over is not smoothed.
    """
    return np.where(
        amounts(composition)("C") <= 0.6, andrews_1965_product_Ms_C(composition), van_bohemen_2012_Ms_C(composition)
    )


def koistinen_marburger_1959(Ms_C, temperature_C):
    """Fraction of austenite left when cooled to a temperature below Ms.

    Inputs: Ms_C and temperature_C, scalars or arrays that broadcast.
    Returns: fraction of the austenite present at Ms that is still austenite, 0 to 1; 1 above Ms.
    Valid: plain Fe-C of about 0.37 to 1.1 % C. Raises: nothing.
    Source: Koistinen & Marburger 1959, Acta Metall. 7, 59-60.
    """
    below_K = np.maximum(np.asarray(Ms_C, float) - temperature_C, 0.0)
    return np.exp(-KM_RATE_PER_K * below_K)

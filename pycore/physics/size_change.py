"""How much steel grows when it hardens, and how readily it cracks."""

import numpy as np

from pycore.physics.composition import amounts

CEMENTITE_C_PCT = 6.67
CEMENTITE_PER_STEEL_VOLUME = 7.85 / 7.69  # densities of steel and cementite, so that weight becomes volume
CRACKS_ABOVE_CEQ = 0.525  # water quench of round bar (Kunitake & Sugisawa; from memory)
SIZE_RANGE = {"C": (0.2, 1.2)}


def undissolved_carbide_pct(C_pct, dissolved_C_pct):
    """Volume of cementite left undissolved at heat.

    Inputs: C_pct, dissolved_C_pct, wt %, scalars or arrays. Returns: fraction of the volume in %.
    Valid: plain and low-alloy steel, carbide taken as cementite. Raises: nothing.
    Source: mass balance against cementite's 6.67 % C.
    """
    left = np.maximum(np.asarray(C_pct, float) - dissolved_C_pct, 0.0)
    return 100.0 * left / (CEMENTITE_C_PCT - np.asarray(dissolved_C_pct, float)) * CEMENTITE_PER_STEEL_VOLUME


def thelning_linear_change_pct(dissolved_C_pct, carbide_volume_pct, retained_austenite_pct):
    """Change of length from the spheroidized to the fully hardened state.

    Inputs: dissolved_C_pct, wt %; carbide_volume_pct, retained_austenite_pct, volume %; scalars or arrays.
    Returns: fraction of the length in %, growth positive; a third of the change in volume.
    Valid: SIZE_RANGE, hardened through, before tempering, which shrinks it again by about 0.1 to 0.15 %; two published
        sets of volumes differ by about 1 % in volume. Raises: nothing.
    Source: Thelning, Steel and its Heat Treatment: dV/V = (100 - Vc - Va)/100 x 1.68 C + Va/100 (-4.64 + 2.21 C)
        (from memory).
    """
    C, Vc, Va = (np.asarray(v, float) for v in (dissolved_C_pct, carbide_volume_pct, retained_austenite_pct))
    return ((100 - Vc - Va) / 100 * 1.68 * C + Va / 100 * (-4.64 + 2.21 * C)) / 3


def kunitake_carbon_equivalent(composition):
    """Carbon equivalent that ranks the tendency to quench cracks.

    Inputs: composition {element: wt %}, scalars or arrays. Returns: wt %.
    Valid: round bar of carbon and low-alloy steel in water; cracks become likely above 0.525; it ranks, it does not
        condemn oil. Raises: nothing.
    Source: Kunitake & Sugisawa, as given in ASM Handbook 4 (from memory): C + Mn/5 + Mo/5 + Cr/10 + Ni/50.
    """
    g = amounts(composition)
    return g("C") + g("Mn") / 5 + g("Mo") / 5 + g("Cr") / 10 + g("Ni") / 50

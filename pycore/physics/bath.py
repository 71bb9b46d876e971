"""Heat balance of a quench bath."""

import numpy as np

from pycore.physics.steel_properties import en_1993_1_2_enthalpy

OIL_RULE_L_PER_KG = 8.35  # 1 US gal per lb, common practice; traced to 1921 (MacKenzie, Thermal Processing)
FLASH_MARGIN_K = 50 * 5 / 9  # 29 CFR 1910.126(g): alarm 50 °F below flash; a difference of 50 °F is 27.8 K


def heat_given_up_kJ_kg(from_C, to_C):
    """Heat a kilogram of steel gives to the bath.

    Inputs: from_C, to_C, scalars or arrays. Returns: kJ/kg.
    Valid: 20 to 1200 °C. Raises: nothing.
    Source: EN 1993-1-2:2005, clause 3.4.1.2, integrated.
    """
    return (en_1993_1_2_enthalpy(from_C) - en_1993_1_2_enthalpy(to_C)) / 1000.0


def bath_rise_K(mass_kg, from_C, to_C, volume_L, density_kg_L, heat_capacity_kJ_kgK):
    """How much a bath warms when it takes all the heat of the load.

    Inputs: mass_kg of steel; from_C and to_C, its temperature in and out; volume_L; density_kg_L;
        heat_capacity_kJ_kgK; scalars or arrays.
    Returns: K.
    Valid: no loss to the surroundings, well stirred. Raises: nothing.
    Source: enthalpy balance with EN 1993-1-2; check: 8.35 L oil per kg gives about 38 to 40 K.
    """
    heat = np.asarray(mass_kg, float) * heat_given_up_kJ_kg(from_C, to_C)
    return heat / (np.asarray(volume_L, float) * density_kg_L * heat_capacity_kJ_kgK)


def volume_needed_L(mass_kg, from_C, to_C, allowed_rise_K, density_kg_L, heat_capacity_kJ_kgK):
    """The smallest bath that stays within an allowed rise.

    Inputs: as bath_rise_K, with allowed_rise_K > 0 in place of the volume. Returns: L.
    Valid: as bath_rise_K. Raises: nothing.
    Source: enthalpy balance with EN 1993-1-2.
    """
    heat = np.asarray(mass_kg, float) * heat_given_up_kJ_kg(from_C, to_C)
    return heat / (np.asarray(allowed_rise_K, float) * density_kg_L * heat_capacity_kJ_kgK)

"""Thermal properties of steel: on heating by EN 1993-1-2, in the quench as undercooled austenite."""

import functools

import numpy as np

EN_RANGE_C = (20.0, 1200.0)
EN_DENSITY_KG_M3 = 7850.0  # EN 1993-1-2 clause 3.2.2 (constant)
AUSTENITE_DENSITY_KG_M3 = 7650.0  # C60-type quench-simulation set (Denis, Sjöström; from memory)


def en_1993_1_2_specific_heat(temperature_C):
    """Specific heat of carbon steel on heating, with its peak at 735 °C.

    Inputs: temperature_C, scalar or array.
    Returns: J/kgK, same shape.
    Valid: 20 to 1200 °C; held at the ends beyond. Raises: nothing.
    Source: EN 1993-1-2:2005, clause 3.4.1.2.
    """
    T = np.clip(np.asarray(temperature_C, float), *EN_RANGE_C)
    cold = 425 + 0.773 * T - 1.69e-3 * T**2 + 2.22e-6 * T**3
    rising = 666 + 13002 / (738 - np.clip(T, 600, 735))
    falling = 545 + 17820 / (np.clip(T, 735, 900) - 731)
    return np.where(T < 600, cold, np.where(T < 735, rising, np.where(T < 900, falling, 650.0)))


def en_1993_1_2_conductivity(temperature_C):
    """Thermal conductivity of carbon steel.

    Inputs: temperature_C, scalar or array.
    Returns: W/mK, same shape.
    Valid: 20 to 1200 °C; held at the ends beyond. Raises: nothing.
    Source: EN 1993-1-2:2005, clause 3.4.1.3.
    """
    T = np.clip(np.asarray(temperature_C, float), *EN_RANGE_C)
    return np.where(T < 800, 54 - 3.33e-2 * T, 27.3)


def en_1993_1_2_enthalpy(temperature_C):
    """Heat to bring carbon steel from 20 °C to a temperature, integrated in closed form.

    Inputs: temperature_C, scalar or array.
    Returns: J/kg above 20 °C, same shape.
    Valid: 20 to 1200 °C; beyond, continued with the end value of the specific heat. Raises: nothing.
    Source: integral of EN 1993-1-2:2005, clause 3.4.1.2.
    """
    T = np.asarray(temperature_C, float)
    polynomial = lambda t: 425 * t + 0.3865 * t**2 - 1.69e-3 / 3 * t**3 + 5.55e-7 * t**4  # noqa: E731
    t1, t2, t3 = np.clip(T, 20, 600), np.clip(T, 600, 735), np.clip(T, 735, 900)
    heat = polynomial(t1) - polynomial(20.0)
    heat = heat + 666 * (t2 - 600) + 13002 * np.log(138 / (738 - t2))
    heat = heat + 545 * (t3 - 735) + 17820 * np.log((t3 - 731) / 4)
    return heat + 650 * np.maximum(T - 900, 0.0) + 439.8 * np.minimum(T - 20, 0.0)


def austenite_conductivity(temperature_C):
    """Thermal conductivity of austenite.

    Inputs: temperature_C, scalar or array.
    Returns: W/mK, same shape.
    Valid: 0 to 1100 °C, low-alloy steel. Raises: nothing.
    Source: C60-type set of the quench-simulation literature (Denis, Sjöström; from memory), k = 15 + 0.0113 T.
    """
    return 15.0 + 0.0113 * np.asarray(temperature_C, float)


def austenite_specific_heat(temperature_C):
    """Specific heat of undercooled austenite; it has no peak, so cooling does not use the EN curve.

    Inputs: temperature_C, scalar or array.
    Returns: J/kgK, same shape.
    Valid: 0 to 1100 °C, low-alloy steel. Raises: nothing.
    Source: as austenite_conductivity; rho c of 4.15, 4.40, 4.67, 4.90 MJ/m3K at 0, 300, 600, 900 °C.
    """
    rho_c = np.interp(temperature_C, (0, 300, 600, 900), (4.15e6, 4.40e6, 4.67e6, 4.90e6))
    return rho_c / AUSTENITE_DENSITY_KG_M3


class Material:
    """Properties as the conduction solver wants them: conductivity, and heat content with its inverse.

    The solver steps in heat content, because the specific heat of steel on heating has a peak that a
    step across 735 °C would jump over.
    """

    def __init__(self, density_kg_m3, conductivity, specific_heat, enthalpy=None):
        self.density, self.conductivity, self.specific_heat = density_kg_m3, conductivity, specific_heat
        self._T = np.concatenate([np.arange(-200.0, 1400.0, 2.0), np.arange(733.0, 738.0, 0.05)])
        self._T = np.unique(self._T)
        if enthalpy is not None:
            self._H = enthalpy(self._T)
        else:
            middle = (self._T[1:] + self._T[:-1]) / 2
            self._H = np.concatenate([[0.0], np.cumsum(specific_heat(middle) * np.diff(self._T))])

    def heat_content(self, temperature_C):
        return np.interp(temperature_C, self._T, self._H)

    def temperature(self, heat_J_kg):
        return np.interp(heat_J_kg, self._H, self._T)


@functools.cache
def on_heating():
    """Material for heating. Inputs: none. Returns: Material (kg/m3, W/mK, J/kg; no shapes). Valid: 20 to 1200 °C.

    Raises: nothing. Source: EN 1993-1-2:2005, clauses 3.2.2 and 3.4.1.
    """
    return Material(EN_DENSITY_KG_M3, en_1993_1_2_conductivity, en_1993_1_2_specific_heat, en_1993_1_2_enthalpy)


@functools.cache
def on_quenching():
    """Material for the quench. Inputs: none. Returns: Material (kg/m3, W/mK, J/kg). Valid: 0 to 1100 °C.

    Raises: nothing. Source: austenite_conductivity, austenite_specific_heat.
    """
    return Material(AUSTENITE_DENSITY_KG_M3, austenite_conductivity, austenite_specific_heat)


def constant(density_kg_m3, conductivity_W_mK, specific_heat_J_kgK):
    """Material with constant properties, for checks against the analytic series.

    Inputs: density_kg_m3, conductivity_W_mK, specific_heat_J_kgK, scalars > 0. Returns: Material.
    Valid: any positive values. Raises: nothing. Source: definition of constant properties.
    """
    flat = lambda value: lambda T: np.full_like(np.asarray(T, float), value)  # noqa: E731
    return Material(density_kg_m3, flat(conductivity_W_mK), flat(specific_heat_J_kgK))

"""What the fire takes from the skin: scale and carbon."""

import numpy as np

R_GAS = 8.314  # J/molK
SCALE_RANGE_C = (700.0, 1250.0)
DECARB_RANGE_C = (760.0, 1200.0)
ERF_95 = 1.386  # erf(1.386) = 0.95, so depth to 95 % of the carbon is 2 x 1.386 sqrt(D t)


def paidassi_scale_mm(temperature_C, time_min):
    """Scale on iron and low-carbon steel in air, parabolic in time.

    Inputs: temperature_C, time_min, scalars or arrays that broadcast.
    Returns: thickness of the scale, mm; 0 at zero time.
    Valid: SCALE_RANGE_C; held at the ends' rate law beyond; steels with Cr or Si scale 2 to 10 times less.
    Raises: nothing.
    Source: Païdassi data as reduced by Chen & Yuen 2003, Oxid. Met. 59 (from memory): x2 = k t,
        k = 6.1 exp(-169452/RT) cm2/s.
    """
    kelvin = np.asarray(temperature_C, float) + 273.15
    rate_cm2_s = 6.1 * np.exp(-169452.0 / (R_GAS * kelvin))
    return 10.0 * np.sqrt(rate_cm2_s * np.maximum(np.asarray(time_min, float), 0.0) * 60.0)


def tibbetts_diffusivity_m2_s(temperature_C, C_pct):
    """Diffusivity of carbon in austenite.

    Inputs: temperature_C, C_pct (wt %), scalars or arrays that broadcast. Returns: m2/s.
    Valid: DECARB_RANGE_C, 0.1 to 1.2 % C. Raises: nothing.
    Source: Tibbetts 1980, J. Appl. Phys. 51 (from memory): D = 0.47 exp(-1.6 C) exp(-(37000-6600 C)/RT) cm2/s.
    """
    kelvin = np.asarray(temperature_C, float) + 273.15
    C = np.asarray(C_pct, float)
    return 0.47e-4 * np.exp(-1.6 * C) * np.exp(-(37000 - 6600 * C) / (1.987 * kelvin))


def decarburized_depth_mm(temperature_C, time_min, C_pct):
    """Depth to which a bare surface in air loses carbon (95 % of the bulk carbon reached there).

    Inputs: temperature_C, time_min, C_pct, scalars or arrays that broadcast. Returns: mm.
    Valid: DECARB_RANGE_C, surface held at 0 % C, no ferrite band, scale recession not taken off: an upper bound.
    Raises: nothing.
    Source: error-function solution of Fick's law with tibbetts_diffusivity_m2_s at half the bulk carbon.
    """
    D = tibbetts_diffusivity_m2_s(temperature_C, np.asarray(C_pct, float) / 2)
    return 1000.0 * 2 * ERF_95 * np.sqrt(D * np.maximum(np.asarray(time_min, float), 0.0) * 60.0)

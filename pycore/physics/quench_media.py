"""Heat transfer from a hot surface to what it is quenched in."""

import functools

import numpy as np

from pycore.data import number, table

STEFAN_BOLTZMANN = 5.670374e-8  # W/m2K4, CODATA 2018
ZERO_C_IN_K = 273.15
OXIDISED_EMISSIVITY = 0.8  # oxidised steel 125-600 °C: 0.78-0.82 (Madding / Mikaelyan emissivity tables)
STILL_AIR_CONVECTION = 9.0  # W/m2K, small parts: 8-12 by Churchill & Chu 1975 (from memory)
FAN_AIR_CONVECTION = 60.0  # W/m2K, 5 m/s over 25 mm by Churchill & Bernstein 1977 (from memory)
PLATES_CONDUCTANCE = 2500.0  # W/m2K, clamped aluminium 2000-4000 (Incropera table 3.1; from memory)
BOILING_BELOW_C = 100.0  # agitation multiplies the part of the curve that lies above the convection end
AGITATIONS = ("still", "moderate", "strong")


def radiation_coefficient(surface_C, surroundings_C, emissivity=OXIDISED_EMISSIVITY):
    """Radiation from a small part to large surroundings, as a coefficient.

    Inputs: surface_C, surroundings_C, scalars or arrays that broadcast; emissivity, 0 to 1.
    Returns: W/m2K, to be multiplied by (surface - surroundings).
    Valid: grey surfaces, part small against its surroundings. Raises: nothing.
    Source: Stefan-Boltzmann law in its factored form.
    """
    a, b = np.asarray(surface_C, float) + ZERO_C_IN_K, np.asarray(surroundings_C, float) + ZERO_C_IN_K
    return emissivity * STEFAN_BOLTZMANN * (a + b) * (a * a + b * b)


@functools.cache
def _curves(medium):
    rows = {}
    for row in table("boiling"):
        if row["medium"] == medium:
            rows.setdefault(float(row["bath_C"]), []).append((float(row["surface_C"]), float(row["h_W_m2K"])))
    surface = np.linspace(0.0, 1000.0, 201)
    baths = sorted(rows)
    return surface, np.array(baths), np.array([np.interp(surface, *zip(*sorted(rows[bath]))) for bath in baths])


@functools.cache
def agitation_factor(medium, agitation):
    """How much faster a moved bath takes heat than a still one.

    Inputs: medium id of media.csv; agitation "still", "moderate" or "strong".
    Returns: factor on the boiling part of the curve, -.
    Valid: the media of media.csv. Raises: ValueError for a medium that is not there.
    Source: Grossmann severity by agitation (ASM Handbook 4; from memory), as given in media.csv.
    """
    for row in table("media"):
        if row["id"] == medium:
            return number(row[agitation]) or 1.0
    raise ValueError(f"medium {medium!r} is not in media.csv")


def liquid_coefficient(medium, bath_C, agitation="still"):
    """Heat transfer of a liquid quenchant against surface temperature.

    Inputs: medium id with rows in boiling.csv; bath_C, °C; agitation word.
    Returns: (surface_C, h_W_m2K), two arrays of one length, to interpolate in.
    Valid: bath temperatures of the table, held at its ends beyond; real spread +-30 to 50 %.
    Raises: ValueError where the medium has no curve.
    Source: boiling.csv (synthesis from published anchors: Gür & Tekkaya water curve; Buczek & Telejko 2013;
        Kobasko et al. 2010 for vegetable oils; ASM Handbook 4 effective values).
    """
    surface, baths, curves = _curves(medium)
    if len(baths) == 0:
        raise ValueError(f"medium {medium!r} has no boiling curve")
    still = np.array([np.interp(bath_C, baths, column) for column in curves.T]) if len(baths) > 1 else curves[0]
    convection_end = float(np.interp(BOILING_BELOW_C, surface, still))
    moved = np.where(still > convection_end, still * agitation_factor(medium, agitation), still)
    return surface, moved


def air_coefficient(surface_C, air_C=20.0, fan=False):
    """Heat transfer to still or blown air: convection and radiation.

    Inputs: surface_C, scalar or array; air_C; fan, bool.
    Returns: W/m2K, same shape as surface_C.
    Valid: small oxidised parts, 50 to 1100 °C, fan about 5 m/s. Raises: nothing.
    Source: Churchill & Chu 1975, Churchill & Bernstein 1977 (from memory) and Stefan-Boltzmann.
    """
    convection = FAN_AIR_CONVECTION if fan else STILL_AIR_CONVECTION
    return convection + radiation_coefficient(surface_C, air_C)


def quench_coefficient(medium, kind, bath_C, agitation):
    """The heat-transfer curve of any medium of the house.

    Inputs: medium id; kind "water", "oil", "gas" or "plates" (media.csv); bath_C; agitation word.
    Returns: (surface_C in °C, h_W_m2K in W/m2K), two arrays of one length.
    Valid: as liquid_coefficient and air_coefficient; plates clamped flat on both faces, scale lowers it.
    Raises: ValueError where the medium is unknown.
    Source: the two functions above; Incropera table 3.1 for plates (from memory).
    """
    if kind in ("water", "oil"):
        return liquid_coefficient(medium, bath_C, agitation)
    surface = np.linspace(0.0, 1200.0, 241)
    if kind == "plates":
        return surface, np.full_like(surface, PLATES_CONDUCTANCE)
    return surface, air_coefficient(surface, bath_C, fan=medium == "fan-air")

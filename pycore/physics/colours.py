"""Words for the light of hot steel and for the film of tempering."""

from pycore.data import table

MAGNET_LETS_GO_C = 770.0  # Curie point of ferrite 769-770 °C
FIRST_GLOW_C = 540.0  # common practice: just visible in subdued light (Stirling 1905: 525)


def _band(name, temperature_C, **only):
    rows = [row for row in table(name) if all(row.get(key, value) == value for key, value in only.items())]
    rows.sort(key=lambda row: float(row["low_C"]))
    if not rows or temperature_C < float(rows[0]["low_C"]):
        return None
    inside = [row for row in rows if float(row["low_C"]) <= temperature_C]
    return inside[-1]["name"]


def heat_colour(temperature_C):
    """The shade of glowing steel in subdued light, or None below the first glow.

    Inputs: temperature_C, a number. Returns: text or None.
    Valid: 400 to 1400 °C; eyes and light shift it by +-50 K. Raises: nothing.
    Source: heat_colours.csv (Chapman, Workshop Technology; Stirling 1905).
    """
    return _band("heat_colours", temperature_C)


def temper_colour(temperature_C, steel="carbon"):
    """The oxide colour of bright steel after tempering in air, or None below the first colour.

    Inputs: temperature_C, a number; steel "carbon" or "stainless". Returns: text or None.
    Valid: minutes at the fire; an hour in an oven reads hotter than the oven. Raises: nothing.
    Source: temper_colours.csv (The Working of Steel 1921, mean of five sources).
    """
    return _band("temper_colours", temperature_C, steel=steel)

"""The closed lists of words a job may use, with the other spellings people type."""

from pycore.data import number, table

SHAPES = {
    "round": ("round bar", ("diameter",), ("length",)),
    "square": ("square bar", ("width",), ("length",)),
    "flat": ("flat bar", ("thickness", "width"), ("length",)),
    "tube": ("tube", ("diameter", "bore"), ("length",)),
    "ball": ("ball", ("diameter",), ()),
    "wedge": ("blade or wedge", ("edge", "spine", "width"), ("length",)),
    "taper": ("round taper", ("edge", "diameter", "length"), ()),
}
DIMENSION_NAMES = {
    "diameter": "diameter",
    "length": "length",
    "width": "width",
    "thickness": "thickness",
    "bore": "bore",
    "edge": "edge thickness",
    "spine": "spine thickness",
}
FEATURES = {
    "hole": "hole",
    "sharp-corner": "sharp inside corner",
    "section-step": "step in section",
    "thread": "thread",
    "keyway": "keyway",
}
ZONES = {"all": "hard all over", "edge": "hard at the edge", "tip": "hard at the tip"}
CONDITIONS = {
    "annealed": "annealed",
    "normalized": "normalized",
    "forged": "forged",
    "cold-drawn": "cold drawn",
    "hardened": "hardened before",
    "unknown": "condition unknown",
}
HEATS = {
    "kiln": "electric kiln",
    "gas-forge": "gas forge",
    "coal-forge": "coal forge",
    "salt": "salt bath",
    "torch": "torch",
}
ATMOSPHERES = {
    "air": "air",
    "coated": "anti-scale coating",
    "foil": "foil wrap",
    "inert": "inert gas",
    "reducing": "reducing flame",
}
TEMPERS = {
    "kitchen-oven": "kitchen oven",
    "toaster-oven": "toaster oven",
    "kiln": "electric kiln",
    "salt": "salt bath",
    "torch": "torch, to colour",
    "residual-heat": "residual heat, to colour",
}
COLDS = {"none": "none", "freezer": "household freezer", "dry-ice": "dry ice", "liquid-nitrogen": "liquid nitrogen"}
AGITATIONS = {"still": "still", "moderate": "moved", "strong": "moved hard"}
UNITS = {"mm": "mm", "in": "inches"}
ELEMENTS = {
    "C": 2.0,
    "Mn": 2.5,
    "Si": 2.5,
    "Cr": 20.0,
    "Ni": 5.0,
    "Mo": 6.0,
    "V": 3.0,
    "W": 7.0,
    "Cu": 1.0,
    "P": 0.1,
    "S": 0.4,
    "Al": 0.2,
    "B": 0.01,
    "Co": 12.0,
    "Nb": 0.5,
    "Ti": 0.5,
    "N": 0.3,
}
OTHER_SPELLINGS = {
    "oven": "kitchen-oven",
    "kitchen": "kitchen-oven",
    "domestic-oven": "kitchen-oven",
    "toaster": "toaster-oven",
    "furnace": "kiln",
    "electric-kiln": "kiln",
    "gas": "gas-forge",
    "forge": "gas-forge",
    "coal": "coal-forge",
    "charcoal-forge": "coal-forge",
    "salt-bath": "salt",
    "residual": "residual-heat",
    "normalised": "normalized",
    "cold-drawn-bar": "cold-drawn",
    "dry ice": "dry-ice",
    "inch": "in",
    "inches": "in",
    "bar": "round",
    "blade": "wedge",
}


def tidy(word):
    """A typed word in the form ids have: lower case, hyphens."""
    return "-".join(str(word).strip().lower().replace("_", " ").split())


def find_word(word, allowed):
    """The id meant by a typed word, or None."""
    key = tidy(word)
    key = key if key in allowed else OTHER_SPELLINGS.get(key, key)
    return key if key in allowed else None


def _index(name, *fields):
    """Every id and alias of a table, tidied, to the id."""
    found = {}
    for row in table(name):
        for field in fields:
            for text in (row.get(field) or "").split("|"):
                if text.strip():
                    found.setdefault(tidy(text), row["id"])
    return found


def find_row(name, typed):
    """The row of grades, uses or media meant by a typed id or alias, or None."""
    fields = ("id", "aliases") if name == "grades" else ("id", "aliases", "name")
    wanted = _index(name, *fields).get(tidy(typed))
    return next((row for row in table(name) if row["id"] == wanted), None)


def media_row(medium):
    """Row of media.csv by id."""
    return next(row for row in table("media") if row["id"] == medium)


def is_liquid(row):
    return row["kind"] in ("water", "oil")


def default_bath_C(row):
    return number(row["default_C"]) if number(row["default_C"]) is not None else 20.0

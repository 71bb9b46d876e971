"""Jobs of the trade, as plain dictionaries; each call gives a fresh copy."""

import copy

_JOBS = {
    "cold chisel": {
        "schema": "quenchwright.job/1", "title": "Cold chisel", "quantity": 4, "units": "mm",
        "steel": {"grade": "W1"},
        "part": {"shape": "round", "dimensions_mm": {"diameter": 20, "length": 180}, "zone": "tip", "zone_mm": 40, "condition": "forged"},
        "aim": {"use": "cold-chisel"},
        "shop": {
            "heat": {"kind": "coal-forge", "pyrometer": False},
            "baths": [{"medium": "brine", "volume_L": 12, "temperature_C": 20, "agitation": "moderate"}],
            "temper": {"kind": "kitchen-oven", "max_C": 260, "accuracy_C": 12},
        },
    },
    "leaf spring": {
        "title": "Leaf spring", "steel": {"grade": "5160"},
        "part": {"shape": "flat", "dimensions_mm": {"thickness": 6, "width": 45, "length": 400}, "condition": "annealed"},
        "aim": {"use": "flat-spring"},
        "shop": {
            "heat": {"kind": "gas-forge"},
            "baths": [{"medium": "canola", "volume_L": 15, "temperature_C": 55}],
            "temper": {"kind": "kitchen-oven", "max_C": 260},
        },
    },
    "punch": {
        "title": "Blanking punch", "steel": {"grade": "O1"},
        "part": {"shape": "round", "dimensions_mm": {"diameter": 16, "length": 90}, "condition": "annealed"},
        "aim": {"hardness_HRC": [58, 60]},
        "shop": {
            "heat": {"kind": "kiln", "accuracy_C": 8, "atmosphere": "foil"},
            "baths": [{"medium": "medium-oil", "volume_L": 20}],
            "temper": {"kind": "kiln"},
        },
    },
    "shear blade": {
        "title": "Shear blade", "steel": {"grade": "A2"},
        "part": {"shape": "flat", "dimensions_mm": {"thickness": 12, "width": 50, "length": 150}, "features": ["hole"], "condition": "annealed"},
        "aim": {"hardness_HRC": [58, 61]},
        "shop": {
            "heat": {"kind": "kiln", "atmosphere": "foil"}, "baths": [{"medium": "still-air"}, {"medium": "plates"}],
            "temper": {"kind": "kiln"}, "cold": "dry-ice",
        },
    },
    "certificate shaft": {
        "title": "Shaft", "steel": {"chemistry": {"C": 0.42, "Mn": 0.80, "Si": 0.25, "Cr": 1.0, "Mo": 0.20}, "grain_size": 7},
        "part": {"shape": "round", "dimensions_mm": {"diameter": 30, "length": 200}, "features": ["keyway"], "condition": "normalized"},
        "aim": {"hardness_HRC": [30, 36]},
        "shop": {
            "heat": {"kind": "kiln"}, "baths": [{"medium": "fast-oil", "volume_L": 60}, {"medium": "water", "volume_L": 60}],
            "temper": {"kind": "kiln"},
        },
    },
    "blade in inches": {
        "title": "Blade", "units": "in", "steel": {"grade": "1084"},
        "part": {"shape": "wedge", "dimensions_mm": {"edge": "0.03", "spine": "3/16", "width": "1 1/4", "length": "9 in"}, "condition": "normalized"},
        "aim": {"hardness_HRC": [58, 61]},
        "shop": {
            "heat": {"kind": "gas-forge", "pyrometer": True}, "baths": [{"medium": "canola", "volume_L": 8}],
            "temper": {"kind": "toaster-oven"},
        },
    },
}  # fmt: skip
NAMES = tuple(_JOBS)


def sample(name="cold chisel", **changes):
    """A fresh job; changes are given by path, dots as double underscores: part__zone="all". None takes a field out."""
    job = copy.deepcopy(_JOBS[name])
    for path, value in changes.items():
        *way, last = path.split("__")
        holder = job
        for step in way:
            holder = holder.setdefault(step, {})
        if value is None:
            holder.pop(last, None)
        else:
            holder[last] = value
    return job

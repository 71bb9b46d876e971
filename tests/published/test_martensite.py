"""Martensite start and retained austenite against atlas values and print."""

import numpy as np
import pytest

from pycore.physics import martensite
from pycore.plan import plan

STEELS = {
    "1050": {"C": 0.50, "Mn": 0.75, "Si": 0.20},
    "1080": {"C": 0.80, "Mn": 0.75, "Si": 0.20},
    "4140": {"C": 0.40, "Mn": 0.88, "Si": 0.25, "Cr": 0.95, "Mo": 0.20},
    "4340": {"C": 0.40, "Mn": 0.70, "Si": 0.25, "Ni": 1.80, "Cr": 0.80, "Mo": 0.25},
    "5160": {"C": 0.60, "Mn": 0.88, "Si": 0.25, "Cr": 0.80},
    "1095 matrix": {"C": 0.80, "Mn": 0.40, "Si": 0.20},
    "1095 all dissolved": {"C": 0.95, "Mn": 0.40, "Si": 0.20},
    "52100 matrix": {"C": 0.62, "Mn": 0.35, "Si": 0.25, "Cr": 1.20},
}
# Hand-worked from the printed formulas: Andrews 1965 product form; van Bohemen 2012, Mater. Sci. Technol. 28, 487.
WORKED = {
    "1050": (313, 310), "1080": (246, 217.5), "4140": (327, 331), "4340": (303, 305), "5160": (260, 264),
    "1095 matrix": (266, 228), "1095 all dissolved": (250, 191), "52100 matrix": (267, 270),
}  # fmt: skip
# Atlas of isothermal transformation diagrams and handbooks repeating it (from memory): steel, composition, Ms °C.
ATLAS_MS = [
    ("1050", {"C": 0.50, "Mn": 0.75, "Si": 0.20}, 320),
    ("1060", {"C": 0.60, "Mn": 0.75, "Si": 0.20}, 290),
    ("1080", {"C": 0.80, "Mn": 0.75, "Si": 0.20}, 220),
    ("4130", {"C": 0.30, "Mn": 0.50, "Si": 0.25, "Cr": 0.95, "Mo": 0.20}, 380),
    ("4140", STEELS["4140"], 340),
    ("4340", STEELS["4340"], 290),
    ("5140", {"C": 0.40, "Mn": 0.80, "Si": 0.25, "Cr": 0.80}, 330),
    ("5160", STEELS["5160"], 257),
    ("6150", {"C": 0.50, "Mn": 0.80, "Si": 0.25, "Cr": 0.95, "V": 0.18}, 285),
    ("8620", {"C": 0.20, "Mn": 0.80, "Si": 0.25, "Ni": 0.55, "Cr": 0.50, "Mo": 0.20}, 395),
    ("8640", {"C": 0.40, "Mn": 0.88, "Si": 0.25, "Ni": 0.55, "Cr": 0.50, "Mo": 0.20}, 320),
    ("9260", {"C": 0.60, "Mn": 0.88, "Si": 2.00}, 275),
]
# Koistinen & Marburger 1959, Acta Metall. 7, 59: f = exp(-0.0110 (Ms - T)), worked in % for 20, -80 and -196 °C.
KOISTINEN_MARBURGER = [
    (150, 23.9, 8.0, 2.2), (200, 13.8, 4.6, 1.3), (220, 11.1, 3.7, 1.0), (250, 8.0, 2.7, 0.7), (300, 4.6, 1.5, 0.4),
    (350, 2.7, 0.9, 0.2),
]  # fmt: skip


@pytest.mark.parametrize("steel", STEELS, ids=lambda s: f"Andrews 1965 and van Bohemen 2012, {s}")
def test_formulas_as_printed(steel):
    product, exponential = WORKED[steel]
    assert float(martensite.andrews_1965_product_Ms_C(STEELS[steel])) == pytest.approx(product, abs=0.6)
    assert float(martensite.van_bohemen_2012_Ms_C(STEELS[steel])) == pytest.approx(exponential, abs=0.6)


def test_atlas_Ms_of_12_steels():
    """Atlas values (from memory). No formula is honest below ±15 °C; the chosen pair must stay inside it on the mean."""
    errors = np.array([float(martensite.martensite_start_C(c)) - Ms for _, c, Ms in ATLAS_MS])
    assert abs(errors).mean() < 12 and abs(errors).max() < 30


@pytest.mark.parametrize("row", KOISTINEN_MARBURGER, ids=lambda r: f"Koistinen & Marburger 1959, Ms {r[0]}")
def test_koistinen_marburger(row):
    Ms, *percent = row
    left = 100 * martensite.koistinen_marburger_1959(Ms, np.array([20.0, -80.0, -196.0]))
    assert left == pytest.approx(percent, abs=0.06)


def test_offsets_of_koistinen_marburger():
    """The same law: 50, 90 and 99 % martensite lie 63, 209 and 419 K under any Ms."""
    left = martensite.koistinen_marburger_1959(300.0, 300.0 - np.array([63.0, 209.3, 418.7]))
    assert left == pytest.approx([0.5, 0.1, 0.01], abs=0.001)
    assert martensite.koistinen_marburger_1959(200.0, 250.0) == 1.0


def retained_52100(austenitize_C):
    job = {
        "steel": {"grade": "52100"},
        "part": {"shape": "round", "dimensions_mm": {"diameter": 10, "length": 60}, "condition": "annealed"},
        "aim": {"hardness_HRC": [58, 62]},
        "shop": {
            "heat": {"kind": "kiln"},
            "baths": [{"medium": "fast-oil", "agitation": "moderate"}],
            "temper": {"kind": "kiln"},
        },
        "decided": {"austenitize_C": austenitize_C},
    }
    return 100 * plan(job).to_json()["as_quenched"]["surface"]["phases"]["retained_austenite"]


# Retained austenite of 52100 held 25 minutes and oil quenched (MIT thesis, as reported second hand): °C, %.
MIT_52100 = [(816, 8.0), (843, 15.0), (871, 18.0)]


def test_retained_austenite_of_52100_rises_with_heat():
    """Each measured step up in heat leaves more austenite; the model must follow and be right at the coolest."""
    found = [retained_52100(T) for T, _ in MIT_52100]
    assert found[0] < found[1] < found[2]
    assert found[0] == pytest.approx(8.0, abs=5.0)


def test_retained_austenite_of_52100_is_at_most_8_points_low():
    """Measured 8, 15, 18 %; the model's band is ±8 points (reached: 7, 8, 11), always on the low side so far."""
    for T, measured in MIT_52100:
        assert retained_52100(T) == pytest.approx(measured, abs=8.0), T

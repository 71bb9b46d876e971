"""Critical temperatures against handbook values and the Fe-C diagram."""

import numpy as np
import pytest

from pycore.physics import critical

# Compositions the check values are told for (nominal SAE).
STEELS = {
    "1050": {"C": 0.50, "Mn": 0.75, "Si": 0.20},
    "1080": {"C": 0.80, "Mn": 0.75, "Si": 0.20},
    "4140": {"C": 0.40, "Mn": 0.88, "Si": 0.25, "Cr": 0.95, "Mo": 0.20},
    "4340": {"C": 0.40, "Mn": 0.70, "Si": 0.25, "Ni": 1.80, "Cr": 0.80, "Mo": 0.25},
    "5160": {"C": 0.60, "Mn": 0.88, "Si": 0.25, "Cr": 0.80},
}
# Hand-worked from Andrews 1965, JISI 203, 721-727: guards the coefficients, says nothing about steel.
ANDREWS = {
    "1050": (720.8, 775.4),
    "1080": (720.8, 737.4),
    "4140": (736.9, 799.1),
    "4340": (705.9, 773.3),
    "5160": (734.4, 763.9),
}
# ASM Handbook vol. 4 (1991), Annealing of Steel, approximate critical temperatures, 28 °C/h (from memory):
# steel, C, Mn, Si, Ni, Cr, Mo, V, Ac1, Ac3. Nominal compositions; hypoeutectoid steels only.
ASM_4_1991 = [
    ("1020", 0.20, 0.45, 0.22, 0, 0, 0, 0, 725, 845),
    ("1030", 0.31, 0.75, 0.22, 0, 0, 0, 0, 725, 815),
    ("1040", 0.40, 0.75, 0.22, 0, 0, 0, 0, 725, 795),
    ("1050", 0.50, 0.75, 0.22, 0, 0, 0, 0, 725, 770),
    ("1060", 0.60, 0.75, 0.22, 0, 0, 0, 0, 725, 765),
    ("1070", 0.70, 0.75, 0.22, 0, 0, 0, 0, 725, 730),
    ("4130", 0.30, 0.50, 0.22, 0, 0.95, 0.20, 0, 760, 810),
    ("4140", 0.40, 0.88, 0.22, 0, 0.95, 0.20, 0, 730, 805),
    ("4340", 0.40, 0.70, 0.22, 1.80, 0.80, 0.25, 0, 725, 775),
    ("5140", 0.40, 0.80, 0.22, 0, 0.80, 0, 0, 740, 790),
    ("5160", 0.60, 0.88, 0.22, 0, 0.80, 0, 0, 710, 765),
    ("6150", 0.50, 0.80, 0.22, 0, 0.95, 0, 0.18, 750, 790),
    ("8620", 0.20, 0.80, 0.22, 0.55, 0.50, 0.20, 0, 730, 830),
    ("8640", 0.40, 0.88, 0.22, 0.55, 0.50, 0.20, 0, 730, 780),
    ("9260", 0.60, 0.88, 2.00, 0, 0, 0, 0, 745, 815),
]
# Fe-C diagram solved from the assessment of Gustafson 1985, Scand. J. Metall. 14 (C %, Acm °C).
GUSTAFSON_1985 = [(0.80, 743), (0.90, 782), (0.95, 801), (1.00, 819), (1.10, 856), (1.20, 891), (1.30, 925), (1.50, 989)]
# The same line read the other way (°C, C % in austenite beside cementite).
GUSTAFSON_1985_C = [
    (727, 0.761), (760, 0.844), (790, 0.922), (815, 0.988), (845, 1.070), (870, 1.141), (900, 1.227), (950, 1.377),
    (1000, 1.535), (1050, 1.70), (1100, 1.875),
]  # fmt: skip


def handbook_errors(formula, column):
    names = ("C", "Mn", "Si", "Ni", "Cr", "Mo", "V")
    return np.array([float(formula(dict(zip(names, row[1:8])))) - row[column] for row in ASM_4_1991])


@pytest.mark.parametrize("steel", STEELS, ids=lambda s: f"Andrews 1965, {s}")
def test_andrews_as_printed(steel):
    Ac1, Ac3 = ANDREWS[steel]
    assert float(critical.andrews_1965_Ac1_C(STEELS[steel])) == pytest.approx(Ac1, abs=0.06)
    assert float(critical.andrews_1965_Ac3_C(STEELS[steel])) == pytest.approx(Ac3, abs=0.06)


def test_handbook_Ac1_of_15_steels():
    """ASM Handbook vol. 4 (1991); between good sources ±15 °C is usual."""
    errors = handbook_errors(critical.andrews_1965_Ac1_C, 8)
    assert abs(errors).mean() < 15 and abs(errors).max() < 30


def test_handbook_Ac3_of_15_steels():
    """ASM Handbook vol. 4 (1991)."""
    errors = handbook_errors(critical.andrews_1965_Ac3_C, 9)
    assert abs(errors).mean() < 10 and abs(errors).max() < 30


@pytest.mark.parametrize(("C_pct", "expected_C"), GUSTAFSON_1985, ids=lambda v: f"Gustafson 1985 Acm {v}")
def test_acm(C_pct, expected_C):
    assert float(critical.acm_Fe_C_C(C_pct)) == pytest.approx(expected_C, abs=1.5)


@pytest.mark.parametrize(("temperature_C", "C_pct"), GUSTAFSON_1985_C, ids=lambda v: f"Gustafson 1985 {v}")
def test_carbon_beside_cementite(temperature_C, C_pct):
    assert float(critical.carbon_at_acm_pct(temperature_C)) == pytest.approx(C_pct, abs=0.003)


def test_accm_of_100Cr6():
    """Lucefin card 100Cr6 (EN ISO 683-17): Ac1 755, Accm 850 °C; the Fe-C line shifted by Ac1 - 727."""
    assert float(critical.acm_Fe_C_C(1.0)) + 755 - critical.EUTECTOID_TEMPERATURE_C == pytest.approx(850, abs=5)

"""Growth on hardening and the carbon equivalent for quench cracks, against figures worked out by hand and measured."""

import pytest

from pycore.physics import size_change

# Thelning's formula with the carbide and austenite of each grade, worked by hand: C, carbide %, austenite %, linear %.
THELNING = [("A2", 0.60, 6, 15, 0.10), ("D2", 0.60, 14, 20, 0.00), ("O1", 0.80, 2, 9, 0.31)]
# Kunitake & Sugisawa: nominal chemistry of the grade and its carbon equivalent (from memory).
KUNITAKE = [
    ("1045", {"C": 0.45, "Mn": 0.75}, 0.60),
    ("4140", {"C": 0.40, "Mn": 0.875, "Cr": 0.95, "Mo": 0.20}, 0.71),
    ("5160", {"C": 0.60, "Mn": 0.875, "Cr": 0.80}, 0.86),
    ("52100", {"C": 1.00, "Mn": 0.35, "Cr": 1.45}, 1.22),
]


@pytest.mark.parametrize("row", THELNING, ids=lambda r: f"Thelning, {r[0]}")
def test_thelning(row):
    _, C, carbide, austenite, percent = row
    assert float(size_change.thelning_linear_change_pct(C, carbide, austenite)) == pytest.approx(percent, abs=0.012)


def test_A2_against_the_maker():
    """Crucible Airkool (A2) sheet: +0.07 to +0.10 % after tempering at 205 to 315 °C."""
    assert 0.05 <= float(size_change.thelning_linear_change_pct(0.60, 6, 15)) <= 0.13


@pytest.mark.parametrize("row", KUNITAKE, ids=lambda r: f"Kunitake & Sugisawa, {r[0]}")
def test_carbon_equivalent(row):
    _, composition, expected = row
    assert float(size_change.kunitake_carbon_equivalent(composition)) == pytest.approx(expected, abs=0.012)


def test_cementite_left_in_52100():
    """52100 at 840-850 °C: 3-8 % by volume with 0.60 to 0.85 % C dissolved (literature range, from memory)."""
    assert 3 <= float(size_change.undissolved_carbide_pct(1.0, 0.75)) <= 8

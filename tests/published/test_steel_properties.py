"""EN 1993-1-2 properties, and the austenite set, against their own tables."""

import numpy as np
import pytest

from pycore.physics import steel_properties as steel

# EN 1993-1-2:2005 cl. 3.4.1, worked: °C, c J/kgK, k W/mK, heat content above 20 °C kJ/kg.
EN_1993_1_2 = [
    (20, 439.8, 53.33, 0), (100, 487.6, 50.67, 37.21), (200, 529.8, 47.34, 88.19), (300, 564.7, 44.01, 142.92),
    (400, 605.9, 40.68, 201.34), (500, 666.5, 37.35, 264.75), (600, 760.2, 34.02, 335.74), (700, 1008.2, 30.69, 419.11),
    (735, 5000, 29.52, 475.43), (750, 1482.9, 29.02, 511.37), (800, 803.3, 27.3, 561.60), (815, 757.1, 27.3, 573.28),
    (850, 694.7, 27.3, 598.56), (900, 650, 27.3, 632.06), (1000, 650, 27.3, 697.06), (1050, 650, 27.3, 729.56),
    (1200, 650, 27.3, 827.06),
]  # fmt: skip
# Quench-simulation set for C60 (Denis, Sjöström; from memory): °C, k austenite, rho c MJ/m3K.
AUSTENITE = [(0, 15.0, 4.15), (300, 18.0, 4.40), (600, 21.7, 4.67), (900, 25.1, 4.90)]


@pytest.mark.parametrize("row", EN_1993_1_2, ids=lambda r: f"EN 1993-1-2 3.4.1, {r[0]} °C")
def test_en_1993_1_2(row):
    T, c, k, H = row
    assert float(steel.en_1993_1_2_specific_heat(T)) == pytest.approx(c, rel=2e-4)
    assert float(steel.en_1993_1_2_conductivity(T)) == pytest.approx(k, abs=0.01)
    assert float(steel.en_1993_1_2_enthalpy(T)) / 1000 == pytest.approx(H, abs=0.01)


def test_closed_form_is_the_integral():
    """The closed form against the specific heat summed up in steps of 0.01 K, the 735 °C peak included."""
    T = np.arange(20.0, 1200.005, 0.01)
    c = steel.en_1993_1_2_specific_heat((T[1:] + T[:-1]) / 2)
    summed = np.concatenate([[0.0], np.cumsum(c * 0.01)])
    assert abs(steel.en_1993_1_2_enthalpy(T) - summed).max() < 20  # J/kg of 827 000


def test_heat_to_austenitize():
    """Common figure 590-620 kJ/kg to 850 °C; EN 1993-1-2 gives 598.6."""
    assert float(steel.en_1993_1_2_enthalpy(850)) == pytest.approx(598_560, abs=10)


def test_heat_against_pure_iron():
    """NIST-JANAF iron, H(1000 K) - H(298 K) = 24.4 kJ/mol = 436 kJ/kg (from memory); steel by EN at 727 °C within 5 %."""
    assert float(steel.en_1993_1_2_enthalpy(726.85)) / 1000 == pytest.approx(436, rel=0.05)


@pytest.mark.parametrize("row", AUSTENITE, ids=lambda r: f"Denis / Sjöström C60, {r[0]} °C")
def test_austenite(row):
    T, k, rho_c = row
    assert float(steel.austenite_conductivity(T)) == pytest.approx(k, abs=0.5)
    c = float(steel.austenite_specific_heat(T))
    assert c * steel.AUSTENITE_DENSITY_KG_M3 / 1e6 == pytest.approx(rho_c, abs=0.001)


def test_austenite_matches_hand_constants():
    """k 25, c 620 for hand checks from 845 to 500 °C: the set averages within 15 %."""
    T = np.arange(500.0, 846.0)
    assert steel.austenite_conductivity(T).mean() == pytest.approx(25, rel=0.15)
    assert steel.austenite_specific_heat(T).mean() == pytest.approx(620, rel=0.05)


@pytest.mark.parametrize("material", [steel.on_heating(), steel.on_quenching(), steel.constant(7650, 25, 620)],
                         ids=["on heating", "on quenching", "constant"])
def test_heat_content_and_temperature_are_inverse(material):
    T = np.array([0.0, 20.0, 400.0, 700.0, 734.9, 735.1, 760.0, 900.0, 1150.0])
    assert material.temperature(material.heat_content(T)) == pytest.approx(T, abs=0.01)

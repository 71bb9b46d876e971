"""Bath heat balance against rules of the trade and the law."""

import pytest

from pycore.physics import bath

MINERAL_OIL = {"density_kg_L": 0.87, "heat_capacity_kJ_kgK": 2.0}
WATER = {"density_kg_L": 0.995, "heat_capacity_kJ_kgK": 4.18}


def test_oil_rule_of_one_gallon_a_pound():
    """1 US gal/lb = 8.35 L/kg raises the oil about 38 °C (70 °F): MacKenzie, Thermal Processing, Revisiting the 1:1 rule."""
    assert pytest.approx(bath.OIL_RULE_L_PER_KG, abs=0.01) == 231 * 0.0163871 / 0.45359237  # 1 US gal is 231 in3
    assert 37 <= float(bath.bath_rise_K(1.0, 850, 60, 8.35, **MINERAL_OIL)) <= 41


def test_water_at_14_4_litres_a_kilogram():
    """581 kJ/kg (EN 1993-1-2, 850 to 60 °C) into 14.4 L of water is 10 K."""
    assert float(bath.bath_rise_K(1.0, 850, 60, 14.4, **WATER)) == pytest.approx(10, abs=0.4)
    assert float(bath.volume_needed_L(1.0, 850, 60, 10.0, **WATER)) == pytest.approx(14.0, abs=0.5)


def test_heat_given_up():
    """EN 1993-1-2:2005 cl. 3.4.1.2 integrated: 850 to 60 °C is 581 kJ/kg."""
    assert float(bath.heat_given_up_kJ_kg(850, 60)) == pytest.approx(581, abs=1)


def test_flash_margin():
    """WAC 296-835-13005 / 29 CFR 1910.126(g): 50 °F below the flash point, a difference of 27.8 K (not 10 °C)."""
    assert pytest.approx(27.8, abs=0.05) == bath.FLASH_MARGIN_K


def test_volume_and_rise_are_one_balance():
    volume = bath.volume_needed_L(2.5, 830, 65, 38.0, **MINERAL_OIL)
    assert float(bath.bath_rise_K(2.5, 830, 65, volume, **MINERAL_OIL)) == pytest.approx(38.0)

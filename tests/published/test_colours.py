"""Heat and temper colours, as the trade tells them."""

import pytest

from pycore.data import table
from pycore.physics import colours

# The Working of Steel 1921, mean of five sources: °C, word that the house's name must hold.
WORKING_OF_STEEL_1921 = [
    (221, "yellow"), (237, "light straw"), (248, "dark straw"), (273, "purple"), (288, "purple"), (300, "blue"),
    (317, "pale blue"), (331, "greenish"),
]  # fmt: skip


def test_first_glow():
    """Common practice: steel just begins to glow near 540 °C in subdued light (Stirling 1905: 525)."""
    assert pytest.approx(540, abs=20) == colours.FIRST_GLOW_C
    first = colours.heat_colour(540)
    assert first is not None and "faint" in first
    assert colours.heat_colour(380) is None


def test_magnet_lets_go():
    """Common practice: a magnet lets go near 770 °C (Curie point of ferrite 769-770 °C)."""
    assert pytest.approx(770, abs=2) == colours.MAGNET_LETS_GO_C


@pytest.mark.parametrize(
    ("temperature_C", "word"), [(660, "cherry"), (830, "cherry"), (870, "red"), (920, "orange"), (1100, "yellow")],
    ids=lambda v: f"Chapman, Workshop Technology {v}",
)
def test_heat_colours_are_near_chapman(temperature_C, word):
    """Chapman and Stirling differ by up to 80 °C; these lie where both would say the same family of shades."""
    assert word in colours.heat_colour(temperature_C)


@pytest.mark.parametrize(("temperature_C", "word"), WORKING_OF_STEEL_1921, ids=lambda v: f"The Working of Steel 1921 {v}")
def test_temper_colours(temperature_C, word):
    assert word in colours.temper_colour(temperature_C)


def test_stainless_colours_come_hotter():
    """BSSA table (from memory): pale yellow 290, blue 540 °C on 18 Cr."""
    assert colours.temper_colour(230, "stainless") is None
    assert colours.temper_colour(290, "stainless") == "pale yellow"
    assert "blue" in colours.temper_colour(540, "stainless")


@pytest.mark.parametrize("name", ["heat_colours", "temper_colours"])
def test_every_shade_is_reached(name):
    function = colours.heat_colour if name == "heat_colours" else colours.temper_colour
    for row in table(name):
        middle = (float(row["low_C"]) + float(row["high_C"])) / 2
        extra = {"steel": row["steel"]} if "steel" in row else {}
        assert function(middle, **extra) == row["name"]

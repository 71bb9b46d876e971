"""Equivalent sections, volumes and masses."""

import math

import pytest

from pycore.physics import sections

# Equal first-mode decay, product solutions of the conduction series: Bi of the round, then D / thickness for
# square, flat 2:1, flat 4:1 and plate.
FACTORS = [
    (0.25, 1.018, 1.357, 1.625, 1.96), (0.5, 1.032, 1.373, 1.638, 1.93), (1, 1.051, 1.394, 1.645, 1.87),
    (2, 1.071, 1.408, 1.630, 1.79), (5, 1.085, 1.406, 1.579, 1.67), (10, 1.087, 1.394, 1.540, 1.61),
]  # fmt: skip


@pytest.mark.parametrize("Bi", [0.15, 0.5, 2.5, 10], ids=lambda Bi: f"EN 10083-1 Annex A (from memory), Bi {Bi}")
def test_flat_40_by_60(Bi):
    """ISO 683-1 / EN 10083-1 Annex A: flat 40 x 60 mm counts as 50 mm round; conduction theory 48.9 to 51.6."""
    assert sections.equivalent_round_mm(40, 60, Bi) == pytest.approx(50, abs=2.1)


@pytest.mark.parametrize("row", FACTORS, ids=lambda r: f"first-mode decay, Bi {r[0]}")
def test_factors(row):
    Bi, square, flat2, flat4, plate = row
    assert sections.equivalent_round_mm(10, 10, Bi) / 10 == pytest.approx(square, abs=0.002)
    assert sections.equivalent_round_mm(10, 20, Bi) / 10 == pytest.approx(flat2, abs=0.002)
    assert sections.equivalent_round_mm(10, 40, Bi) / 10 == pytest.approx(flat4, abs=0.002)
    assert sections.equivalent_round_mm(10, 1e5, Bi) / 10 == pytest.approx(plate, abs=0.005)


def test_closed_forms_for_an_ideal_quench():
    """Infinite Bi: plate 2.4048/(pi/2), square 2.4048/(pi/2 sqrt 2)."""
    assert sections.equivalent_round_mm(1, 1e5, 1e4) == pytest.approx(2.4048 / (math.pi / 2), abs=0.003)
    assert sections.equivalent_round_mm(1, 1, 1e4) == pytest.approx(2.4048 / (math.pi / 2 * math.sqrt(2)), abs=0.003)


def test_equal_surface_to_volume_in_air():
    """Lumped: a round cools like a plate of half its thickness, a square bar like its own round."""
    assert sections.equivalent_round_mm(10, 1e6, 0.0) == pytest.approx(20, abs=0.02)
    assert sections.equivalent_round_mm(10, 10, 0.0) == pytest.approx(10)


def test_masses():
    """A 25 mm round a metre long weighs 3.85 kg, a 10 x 50 flat 3.93 kg (steel tables, 7.85 kg/dm3)."""
    bar = sections.volume_mm3("round", {"diameter": 25}, 1000)
    flat = sections.volume_mm3("flat", {"thickness": 10, "width": 50}, 1000)
    assert float(sections.solid_mass_kg(bar)) == pytest.approx(3.85, abs=0.01)
    assert float(sections.solid_mass_kg(flat)) == pytest.approx(3.93, abs=0.01)


def test_volumes_meet_where_shapes_meet():
    round_ = sections.volume_mm3("round", {"diameter": 10}, 100)
    assert sections.volume_mm3("taper", {"edge": 10, "diameter": 10}, 100) == pytest.approx(round_)
    assert sections.volume_mm3("tube", {"diameter": 10, "bore": 0}, 100) == pytest.approx(round_)
    assert sections.volume_mm3("square", {"width": 7}, 100) == pytest.approx(
        sections.volume_mm3("wedge", {"edge": 7, "spine": 7, "width": 7}, 100))
    assert sections.volume_mm3("ball", {"diameter": 2}, 0) == pytest.approx(4 / 3 * math.pi)
    with pytest.raises(KeyError):
        sections.volume_mm3("cone", {}, 1)

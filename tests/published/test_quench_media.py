"""Heat transfer of the baths: published anchors and the behaviour every shop knows."""

import itertools

import numpy as np
import pytest

from pycore.physics import conduction, hardenability, quench_media, steel_properties

# h at one surface temperature and its radiation part to 20 °C, emissivity 0.8 (Stefan-Boltzmann): °C, W/m2K.
RADIATION = [(200, 10.8), (400, 23.6), (600, 44.9), (700, 59.3), (800, 76.7), (850, 86.6), (900, 97.3), (1050, 134.7)]
# Incropera: near a furnace's own temperature h is 4 e s T3; 850 °C 257, 200 °C 19.2 W/m2K.
NEAR = [(850, 257), (200, 19.2)]


def h(medium, bath_C, surface_C, agitation="still"):
    return float(np.interp(surface_C, *quench_media.liquid_coefficient(medium, bath_C, agitation)))


def rate_at_704(medium, kind, bath_C, agitation, diameter_mm, place=0.0, start_C=845.0):
    """Cooling rate at 704 °C in a round (place 0 its centre)."""
    surface, values = quench_media.quench_coefficient(medium, kind, bath_C, agitation)
    boundary = lambda T, time: (np.interp(T, surface, values), np.full_like(T, bath_C))  # noqa: E731
    history = conduction.conduct("cylinder", diameter_mm / 2, steel_properties.on_quenching(), start_C, boundary,
                                 until=lambda T: T.max(axis=1) < 450.0, end_s=8000.0)
    time, _ = history.case()
    curve = np.minimum.accumulate(history.at(place) if place else history.case()[1][:, 0])
    at = lambda T: float(np.interp(-T, -curve, time))  # noqa: E731
    return 20 / (at(694) - at(714))


@pytest.mark.parametrize(("surface_C", "expected"), RADIATION, ids=lambda v: f"Stefan-Boltzmann {v}")
def test_radiation(surface_C, expected):
    assert float(quench_media.radiation_coefficient(surface_C, 20.0)) == pytest.approx(expected, rel=0.006)


@pytest.mark.parametrize(("surface_C", "expected"), NEAR, ids=lambda v: f"Incropera 4 e s T3 {v}")
def test_radiation_near_the_walls(surface_C, expected):
    assert float(quench_media.radiation_coefficient(surface_C - 0.01, surface_C)) == pytest.approx(expected, rel=0.01)


@pytest.mark.parametrize(("surface_C", "expected"), [(850, 95), (704, 70), (200, 25)], ids=lambda v: f"Churchill & Chu 1975 {v}")
def test_still_air(surface_C, expected):
    """Total of convection 8-12 and radiation (from memory); at 200 °C ±30 %."""
    assert float(quench_media.air_coefficient(surface_C)) == pytest.approx(expected, rel=0.05 if surface_C > 300 else 0.3)


@pytest.mark.parametrize(
    ("diameter_mm", "rate"), [(6, 6.7), (12.5, 3.2), (25, 1.6), (50, 0.81)], ids=lambda v: f"lumped still air {v}"
)
def test_rounds_in_still_air(diameter_mm, rate):
    """1/D law of lumped cooling at 704 °C (emissivity 0.8, convection 10, c 620); the solver's c is a little lower."""
    assert rate_at_704("still-air", "gas", 20, "still", diameter_mm) == pytest.approx(rate, rel=0.12)


def test_water_loses_its_bite_when_warm():
    """ASM Handbook 4 (Bates & Totten): still water at 700 °C falls from 5000 to 1000 W/m2K between 32 and 55 °C; the
    curve must lose at least three parts in four of it between 20 and 55 °C, and more with every degree."""
    values = [h("water", T, 700.0) for T in (20, 32, 40, 55, 60)]
    assert all(a > b for a, b in itertools.pairwise(values))
    assert values[0] / values[3] > 4


def test_water_peak_moves_down_when_warm():
    """Leidenfrost: the blanket of warm water holds to lower surface temperature (Totten & Bates, from memory)."""
    peaks = [float(quench_media.liquid_coefficient("water", T)[0][np.argmax(quench_media.liquid_coefficient("water", T)[1])]) for T in (20, 60)]
    assert peaks[1] < peaks[0] <= 500


def test_water_peak_as_gur_and_tekkaya():
    """Gür & Tekkaya: 13 492 W/m2K at 430 °C, 437 at 800 °C (from memory)."""
    assert h("water", 20, 430) == pytest.approx(13492, rel=0.02)
    assert h("water", 20, 800) == pytest.approx(437, rel=0.05)


@pytest.mark.parametrize(
    ("oil", "low_C", "high_C"), [("fast-oil", 560, 680), ("medium-oil", 480, 600), ("canola", 620, 720)],
    ids=lambda v: f"Kobasko 2010, Totten & Bates {v}",
)
def test_oils_peak_in_their_band(oil, low_C, high_C):
    """Peak rate of fast oil at 600-640, medium 550-600 (conventional 500-540), canola 650-700 °C (from memory)."""
    surface, values = quench_media.liquid_coefficient(oil, 60)
    assert low_C <= surface[np.argmax(values)] <= high_C


def test_canola_has_no_blanket():
    """Kobasko et al. 2010, Strojniski vestnik 56: vegetable oils show no film boiling; faster than mineral oil when hot."""
    assert h("canola", 60, 850) > 3 * h("medium-oil", 60, 850)
    assert h("canola", 60, 300) < h("medium-oil", 60, 300) * 1.2


def test_brine_has_no_blanket():
    """8-10 % salt suppresses the blanket (Machinery's Handbook): at 850 °C many times still water."""
    assert h("brine", 20, 850) > 10 * h("water", 20, 850)


def test_oil_convection_end():
    """Kobasko: convection stage of oil 250-300 W/m2K; all oils at 200 °C within a third of it."""
    for oil in ("fast-oil", "medium-oil", "canola"):
        assert 180 <= h(oil, 60, 200) <= 400


@pytest.mark.parametrize("medium", ["water", "brine", "fast-oil", "medium-oil", "canola"])
def test_moving_the_bath_cools_faster(medium):
    """Grossmann severity rises with agitation (ASM Handbook 4): still, moderate, strong."""
    still, moderate, strong = (h(medium, 40, 600, a) for a in ("still", "moderate", "strong"))
    assert still < moderate < strong <= 2.5 * still


def test_media_in_the_order_of_the_trade():
    """Air, oil, water, brine: the old order of severity (Grossmann & Bain)."""
    rates = [rate_at_704(m, k, 20 if k != "oil" else 60, "moderate", 25.0, place=0.5) for m, k in
             (("still-air", "gas"), ("fan-air", "gas"), ("medium-oil", "oil"), ("fast-oil", "oil"), ("water", "water"), ("brine", "water"))]
    assert all(a < b for a, b in itertools.pairwise(rates)), rates


@pytest.mark.parametrize(
    ("medium", "kind", "low", "high"),
    [("water", "water", 40, 75), ("fast-oil", "oil", 15, 45), ("still-air", "gas", 1.4, 2.1)],
    ids=lambda v: f"25 mm round, published spread {v}",
)
def test_centre_of_a_25_mm_round(medium, kind, low, high):
    """Typical published rates at 704 °C in the centre of 25 mm: agitated water 50-70, oil 15-30, still air 1.5-2 K/s."""
    assert low <= rate_at_704(medium, kind, 20 if kind != "oil" else 60, "moderate", 25.0) <= high


def test_50_mm_in_water_is_near_jominy_8():
    """SAE J1268 chart header: 2 in round, mild water, centre at J8; Callister 11.19 says J6. Charts differ by 2/16 in."""
    J = hardenability.jominy_distance_sixteenths(rate_at_704("water", "water", 20, "moderate", 50.8))
    assert 5 <= float(J) <= 10


def test_an_unknown_medium_is_refused():
    with pytest.raises(ValueError, match="no boiling curve"):
        quench_media.liquid_coefficient("mercury", 20)
    with pytest.raises(ValueError, match=r"media\.csv"):
        quench_media.agitation_factor("mercury", "still")

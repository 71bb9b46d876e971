"""Whole quenches against print: critical diameters of W-type steel in brine, and hardness through bars of many sizes.

The bars' heat analyses, grain sizes and hardness are recalled from the handbook ("from memory"), single heats; what
stands here as a ceiling is what the program reaches today, rounded up by a tenth, so that it cannot get worse unseen.
"""

import csv
import functools
import pathlib

import numpy as np
import pytest

from pycore.physics import conduction, hardenability, quench_media, steel_properties
from pycore.plan import plan
from pycore.stages.structure import jominy_rate_C_per_s

DATA = pathlib.Path(__file__).parent / "data"
W_HEATS = tuple(csv.DictReader(open(DATA / "w_heats.csv", encoding="utf-8", newline="")))  # noqa: SIM115
BARS = tuple(csv.DictReader(open(DATA / "bars_by_size.csv", encoding="utf-8", newline="")))  # noqa: SIM115
ELEMENTS = ("C", "Mn", "Si", "Ni", "Cr", "Mo", "V", "S")
# The handbook's agitated baths, in the house's media.
BATHS = {"oil": ("medium-oil", "moderate"), "water": ("water", "moderate"), "brine": ("brine", "moderate")}


def quenched(row, medium, diameter_mm, austenitize_C, grain_size):
    """Plan of a bar with a certificate's chemistry; elements the source does not give take the program's residuals."""
    bath, agitation = BATHS[medium]
    return plan({
        "steel": {"chemistry": {e: float(row[e]) for e in ELEMENTS if row.get(e)}, "grain_size": grain_size},
        "part": {"shape": "round", "dimensions_mm": {"diameter": diameter_mm, "length": 6 * diameter_mm}, "condition": "normalized"},
        "aim": {"hardness_HRC": [20, 68]},
        "shop": {
            "heat": {"kind": "kiln"},
            "baths": [{"medium": bath, "agitation": agitation}],
            "temper": {"kind": "kiln", "max_C": 700},
        },
        "decided": {"austenitize_C": austenitize_C},
    }).to_json()["as_quenched"]


@functools.cache
def critical_diameter_mm(heat):
    """Largest round that is half martensite in its centre: brine 20 °C, moderate, from 790 °C, grain size 7."""
    small, large = 1.0, 60.0
    for _ in range(11):
        middle = (small + large) / 2
        phases = quenched(W_HEATS[heat], "brine", middle, 790, 7)["centre"]["phases"]
        hard = phases["martensite"] + phases["retained_austenite"] >= 0.5
        small, large = (middle, large) if hard else (small, middle)
    return (small + large) / 2


def w_ratio(heat):
    return critical_diameter_mm(heat) / float(W_HEATS[heat]["critical_diameter_mm"])


def test_w_type_critical_diameters_in_brine():
    """Roberts, Krauss & Kennedy, Tool Steels, Table 7-3: within 30 % for at least 9 of the 12 heats. One factor of the
    kinetics (carbide_nucleation) was set on these heats, so this guards it and does not prove it."""
    ratios = np.array([w_ratio(heat) for heat in range(12)])
    assert (abs(ratios - 1) <= 0.30).sum() >= 9, ratios


def test_w_type_order_of_depth():
    """Tool Steels, Table 7-3: shallow heats stay shallow and deep ones deep (rank correlation)."""
    found = [critical_diameter_mm(heat) for heat in range(12)]
    observed = [float(row["critical_diameter_mm"]) for row in W_HEATS]
    ranks = [np.argsort(np.argsort(values)) for values in (found, observed)]
    assert np.corrcoef(*ranks)[0, 1] > 0.85


@functools.cache
def bar_errors(steel, medium):
    """Calculated minus published HRC, and whether the published value lies in the band told, for one steel's bars."""
    plans, errors, inside = {}, [], []
    for row in BARS:
        if (row["steel"], row["medium"]) != (steel, medium):
            continue
        D = float(row["diameter_mm"])
        if D not in plans:
            plans[D] = quenched(row, medium, D, float(row["austenitize_C"]), float(row["grain_size"]))
        found, published = plans[D][row["position"]]["HRC"], float(row["HRC"])
        errors.append(found["mid"] - published)
        inside.append(found["low"] - 0.5 <= published <= found["high"] + 0.5)
    return np.array(errors), np.array(inside)


ALLOY = ("4130", "4140", "4340", "5140", "5160", "6150", "8740")
# Bethlehem Steel, Modern Steels and Their Properties, rounds of 12.7 to 102 mm: steel, bath, ceiling of the mean error.
CEILINGS = [
    ("1030", "water", 9.3), ("1040", "oil", 4.6), ("1040", "water", 5.8), ("1050", "water", 7.7), ("1060", "oil", 3.9),
    ("1080", "oil", 5.9), ("1095", "oil", 5.1), ("1095", "water", 7.4), ("1141", "oil", 3.5), ("1144", "oil", 7.3),
    ("1340", "oil", 5.8), ("4130", "water", 1.7), ("4140", "oil", 6.2), ("4340", "oil", 1.4), ("5140", "oil", 4.5),
    ("5160", "oil", 2.7), ("6150", "oil", 6.7), ("8740", "oil", 2.0),
]  # fmt: skip


@pytest.mark.parametrize("row", CEILINGS, ids=lambda r: f"Bethlehem, {r[0]} {r[1]}")
def test_bars_by_size(row):
    steel, medium, ceiling = row
    errors, _ = bar_errors(steel, medium)
    assert abs(errors).mean() <= ceiling


def test_bars_by_size_all_together():
    """Bethlehem, 198 values of 18 bars: mean error under 4.9 HRC (reached 4.4), and 2.5 HRC over the steels and sizes that a
    small shop hardens through: alloy steel to 25 mm."""
    everything = np.concatenate([bar_errors(steel, medium)[0] for steel, medium, _ in CEILINGS])
    assert len(everything) == 198 and abs(everything).mean() <= 4.9
    small = np.concatenate([bar_errors(steel, medium)[0][:6] for steel, medium, _ in CEILINGS if steel in ALLOY])
    assert abs(small).mean() <= 2.5


def test_bands_hold_the_bars():
    """Bethlehem, the same 198 values: nearly eight in ten lie inside the 10-90 % band that was told, half a point allowed."""
    inside = np.concatenate([bar_errors(steel, medium)[1] for steel, medium, _ in CEILINGS])
    assert 0.70 <= inside.mean() <= 0.95


# SAE J1268 / ASTM A304 chart header: round (in) whose place hardens as a Jominy station, mild agitation (from memory).
OIL_CENTRE = [(0.6, 4), (1.0, 6), (1.4, 8), (1.7, 10), (2.0, 12)]
OIL_THREE_QUARTERS = [(1.0, 4), (1.6, 6), (2.0, 8), (2.4, 10), (2.8, 12)]
OIL_SURFACE = [(0.8, 2), (1.8, 4), (2.5, 6), (3.0, 8), (3.8, 12)]
WATER_CENTRE = [(1.2, 4), (1.6, 6), (2.0, 8), (2.4, 10), (2.8, 12)]
WATER_THREE_QUARTERS = [(2.0, 4), (2.9, 6), (3.8, 8)]


def jominy_station(medium, diameter_in, place):
    bath, agitation = BATHS[medium]
    bath_C = 60.0 if medium == "oil" else 20.0
    surface, h = quench_media.quench_coefficient(bath, medium, bath_C, agitation)
    history = conduction.conduct(
        "cylinder", diameter_in * 12.7, steel_properties.on_quenching(), 845.0,
        lambda T, time: (np.interp(T, surface, h), np.full_like(T, bath_C)), until=lambda T: T.max(axis=1) < 300, end_s=9000.0,
    )
    rate = jominy_rate_C_per_s(history.case()[0], np.array([history.at(place)]))
    return float(hardenability.jominy_distance_sixteenths(rate)[0])


@pytest.mark.parametrize(
    ("medium", "place", "chart"),
    [("oil", 0.0, OIL_CENTRE), ("oil", 0.75, OIL_THREE_QUARTERS), ("water", 0.0, WATER_CENTRE), ("water", 0.75, WATER_THREE_QUARTERS)],
    ids=["SAE J1268 oil centre", "SAE J1268 oil 3/4 radius", "SAE J1268 water centre", "SAE J1268 water 3/4 radius"],
)
def test_equivalent_jominy_station(medium, place, chart):
    """Published charts differ among themselves by 2/16 in; so may this."""
    for diameter_in, J in chart:
        assert jominy_station(medium, diameter_in, place) == pytest.approx(J, abs=2.2), (diameter_in, J)


def test_skin_of_thick_bars_in_oil_is_told_too_hard():
    """SAE J1268, surface in mild oil: J12 at 3.8 in, where the curve gives about J5.5. Right within 3/16 to 2.5 in; beyond,
    a known fault of the heat-transfer curve (ceiling 7/16)."""
    errors = [jominy_station("oil", D, 1.0) - J for D, J in OIL_SURFACE]
    assert max(abs(e) for e in errors[:3]) <= 3.0
    assert max(abs(e) for e in errors) <= 7.0


# Lucefin card 100Cr6 1.3505, hardness from surface to core, oil from 850 °C, grain size 7-8 (read):
# diameter mm, HRC at the surface, at half the radius, in the centre.
LUCEFIN_100CR6 = [(20, 65.0, 64.0, 64.0), (30, 64.0, 60.5, 58.0), (40, 62.0, 52.0, 50.0)]


def errors_100Cr6(row):
    diameter, *published = row
    found = plan({
        "steel": {"grade": "52100", "grain_size": 7.5},
        "part": {"shape": "round", "dimensions_mm": {"diameter": diameter, "length": 6 * diameter}, "condition": "annealed"},
        "aim": {"hardness_HRC": [58, 62]},
        "shop": {
            "heat": {"kind": "kiln"}, "baths": [{"medium": "medium-oil", "agitation": "moderate"}], "temper": {"kind": "kiln"},
        },
        "decided": {"austenitize_C": 850},
    }).to_json()["as_quenched"]
    return np.array([found[place]["HRC"]["mid"] for place in ("surface", "midradius", "centre")]) - published


def test_100Cr6_of_20_mm_hardens_through():
    """Lucefin card 100Cr6: 65 at the surface, 64 in the centre of 20 mm."""
    assert abs(errors_100Cr6(LUCEFIN_100CR6[0])).max() <= 2.0


def test_100Cr6_depth_is_told_too_great():
    """Lucefin card 100Cr6: 30 mm is 58, 40 mm 50 HRC in the centre. The kinetics harden 52100 about half as deep again; never
    shallower. A ceiling (reached: 7 and 13 HRC too hard)."""
    for row, ceiling in zip(LUCEFIN_100CR6[1:], (7.5, 14.5)):
        errors = errors_100Cr6(row)
        assert abs(errors).max() <= ceiling and errors.min() > -2.0, row


def test_O1_hardens_through_50_mm_in_oil():
    """Eastern Tool Steel O1 sheet: full hardness only below 75 mm. 50 mm at least 61 HRC in the centre, 100 mm well under."""
    def centre(diameter):
        made = plan({
            "steel": {"grade": "O1"},
            "part": {"shape": "round", "dimensions_mm": {"diameter": diameter, "length": 4 * diameter}, "condition": "annealed"},
            "aim": {"hardness_HRC": [58, 60]},
            "shop": {"heat": {"kind": "kiln"}, "baths": [{"medium": "medium-oil", "agitation": "moderate"}], "temper": {"kind": "kiln"}},
        })
        return made.to_json()["as_quenched"]["centre"]["HRC"]["mid"]

    assert centre(50) >= 61 and centre(100) < 58


def test_1040_of_50_mm_in_water_between_two_sources():
    """Callister, Introduction, fig. 11.19: 1040, 50 mm round, mildly agitated water, about 28 HRC in the centre; Bethlehem's
    1040 bar of half that size reads 18 there. The sources disagree; reached: 20, nearer the measured bar."""
    row = {"C": "0.40", "Mn": "0.75", "Si": "0.22", "Ni": "", "Cr": "", "Mo": "", "V": ""}
    assert quenched(row, "water", 50, 845, 7)["centre"]["HRC"]["mid"] == pytest.approx((28 + 18) / 2, abs=5)

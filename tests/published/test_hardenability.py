"""Calculated hardenability against the standard's example, the H-bands and the charts of cooling rate."""

import csv
import pathlib

import numpy as np
import pytest

from pycore.physics import hardenability, hardness

DATA = pathlib.Path(__file__).parent / "data"
# ASTM A255, worked example: modified SAE 4118 (from memory; product recomputed).
STEEL_4118 = {"C": 0.22, "Mn": 0.80, "Si": 0.18, "Ni": 0.10, "Cr": 0.43, "Mo": 0.25}
# Middle of the H-steels' composition windows (SAE J1268).
MIDDLE = {
    "4140H": {"C": 0.40, "Mn": 0.875, "Si": 0.25, "Cr": 0.975, "Mo": 0.20},
    "4340H": {"C": 0.40, "Mn": 0.75, "Si": 0.25, "Ni": 1.80, "Cr": 0.80, "Mo": 0.25},
    "8640H": {"C": 0.40, "Mn": 0.85, "Si": 0.25, "Ni": 0.55, "Cr": 0.50, "Mo": 0.20},
    "8630H": {"C": 0.30, "Mn": 0.775, "Si": 0.25, "Ni": 0.55, "Cr": 0.50, "Mo": 0.20},
    "8620H": {"C": 0.20, "Mn": 0.775, "Si": 0.25, "Ni": 0.55, "Cr": 0.50, "Mo": 0.20},
    "6150H": {"C": 0.50, "Mn": 0.75, "Si": 0.25, "Cr": 0.95, "V": 0.15},
    "5160H": {"C": 0.60, "Mn": 0.875, "Si": 0.25, "Cr": 0.80},
    "5140H": {"C": 0.40, "Mn": 0.80, "Si": 0.25, "Cr": 0.80},
    "4130H": {"C": 0.30, "Mn": 0.475, "Si": 0.25, "Cr": 0.975, "Mo": 0.20},
    "9260H": {"C": 0.60, "Mn": 0.875, "Si": 1.95},
}
OUTSIDE_THE_METHOD = {"9260H"}  # Si 1.95 % against 0.15-0.60 %
# Cooling rate at 704 °C on the Jominy bar: SAE charts; Callister, Fundamentals, figs 14.9/14.10: J, °C/s.
CALLISTER_RATES = [(1, 270), (2, 170), (4, 70), (6, 31), (8, 18), (12, 9), (16, 5.6), (20, 3.9), (24, 2.8), (32, 2.0)]
# ASTM A255 initial and half-martensite hardness (from memory): C %, HRC.
INITIAL = [(0.20, 44), (0.30, 50), (0.40, 56), (0.50, 61), (0.60, 64)]
HALF = [(0.20, 32), (0.30, 37), (0.40, 42), (0.50, 47), (0.60, 51)]


def band(steel):
    """[(J, highest or None, lowest or None)] of SAE J1268 / ASTM A304 (from memory, ±1 HRC)."""
    number = lambda text: float(text) if text else None  # noqa: E731
    with open(DATA / "h_bands.csv", encoding="utf-8", newline="") as file:
        return [(int(r["J"]), number(r["high_HRC"]), number(r["low_HRC"])) for r in csv.DictReader(file) if r["steel"] == steel]


def misses(steel):
    """How far each station lies outside its band in whole HRC, as hardness is read (0 inside)."""
    rows = band(steel)
    found = np.round(hardenability.a255_jominy_HRC(MIDDLE[steel], np.array([J for J, _, _ in rows], float)))
    return np.array([
        max(0.0, HRC - high if high is not None else 0.0, low - HRC if low is not None else 0.0)
        for HRC, (_, high, low) in zip(found, rows)
    ])


def test_ideal_diameter_worked_example():
    """ASTM A255, modified 4118: DI 1.72 in."""
    assert float(hardenability.a255_ideal_diameter_in(STEEL_4118)) == pytest.approx(1.72, abs=0.01)


@pytest.mark.parametrize(("C_pct", "inches"), [(0.20, 0.108), (0.39, 0.2106), (0.50, 0.2378), (0.60, 0.2621), (0.80, 0.3028)],
                         ids=lambda v: f"ASTM A255 carbon factor {v}")
def test_carbon_factor(C_pct, inches):
    assert float(hardenability.a255_carbon_factor(C_pct)) == pytest.approx(inches, abs=0.0012)


def test_factors_join():
    """The pieces of the carbon and manganese factors meet (ASTM A255): no step larger than 0.0012 in, 0.3 %."""
    C = np.array([0.39, 0.55, 0.65, 0.75])
    assert hardenability.a255_carbon_factor(C + 1e-6) - hardenability.a255_carbon_factor(C) == pytest.approx(0, abs=0.0012)
    below, above = (hardenability.a255_ideal_diameter_in({"C": 0.4, "Mn": Mn}) for Mn in (1.2, 1.2 + 1e-6))
    assert above == pytest.approx(below, rel=0.003)


def test_grain_size_is_eight_percent_a_number():
    """Grossmann's base-carbon table: 0.40 C, grain sizes 6, 7, 8 give 0.2300, 0.2130, 0.1976."""
    DI = [float(hardenability.a255_ideal_diameter_in({"C": 0.40}, G)) for G in (6, 7, 8)]
    assert DI[0] / DI[1] == pytest.approx(0.2300 / 0.2130, rel=0.01) and DI[2] / DI[1] == pytest.approx(0.1976 / 0.2130, rel=0.01)


@pytest.mark.parametrize(("C_pct", "HRC"), INITIAL, ids=lambda v: f"ASTM A255 IH {v}")
def test_initial_hardness(C_pct, HRC):
    assert float(hardenability.a255_initial_hardness_HRC(C_pct)) == pytest.approx(HRC, abs=0.6)


@pytest.mark.parametrize(("C_pct", "HRC"), HALF, ids=lambda v: f"ASTM A255 H50 {v}")
def test_half_martensite_hardness_by_hodge_orehoski(C_pct, HRC):
    assert hardness.hodge_orehoski_HRC(C_pct, 0.5) == pytest.approx(HRC, abs=0.6)


def test_jominy_of_the_worked_example():
    """ASTM A255 dividing factors worked by hand for DI 1.72, IH 45.4."""
    found = hardenability.a255_jominy_HRC(STEEL_4118, np.array([1, 2, 3, 4, 6, 8, 10, 12]))
    assert found == pytest.approx([45, 44, 40, 32, 23, 21, 19, 17], abs=0.8)


def test_curves_fall_and_deeper_steel_is_harder():
    """No station is harder than one nearer the end; no larger ideal diameter is softer anywhere (to 2 % at the joins)."""
    J = np.arange(1.0, 33.0)
    curves = np.array([hardenability.a255_dividing_factor(J, DI) for DI in np.arange(1.0, 8.0, 0.1)])
    assert (np.diff(curves, axis=1) >= -1e-12).all()
    assert (np.diff(curves, axis=0) <= 0.02).all()


@pytest.mark.parametrize("steel", [s for s in MIDDLE if s not in OUTSIDE_THE_METHOD], ids=lambda s: f"SAE J1268 {s}")
def test_middle_chemistry_lies_in_the_band(steel):
    """Where the method holds, no station is more than 2 HRC outside (5 near J5 to J7 of 5160, where A255's rows for
    those stations are not at hand and are drawn between J4 and J6, J8)."""
    assert misses(steel).max() <= 2 or (steel == "5160H" and misses(steel).max() <= 5)


def test_share_of_points_in_the_bands():
    """SAE J1268 / ASTM A304: at least 90 % of the points of nine steels within the method's range."""
    found = np.concatenate([misses(steel) for steel in MIDDLE if steel not in OUTSIDE_THE_METHOD])
    assert len(found) > 130 and (found == 0).mean() >= 0.90


def test_silicon_outside_the_range_reads_low():
    """9260H, Si outside A255: from J12 on it comes out below the band, by up to 6 HRC. Known, and marked in the plan."""
    assert 0 < misses("9260H").max() <= 7
    assert hardenability.A255_RANGE["Si"][1] < MIDDLE["9260H"]["Si"]


@pytest.mark.parametrize(("J", "rate"), CALLISTER_RATES, ids=lambda v: f"Callister 14.9 {v}")
def test_jominy_distance(J, rate):
    assert float(hardenability.jominy_distance_sixteenths(rate)) == pytest.approx(J, rel=0.04)


def test_jominy_rates_fall_all_along():
    rates = np.geomspace(2.0, 270.0, 60)
    assert (np.diff(hardenability.jominy_distance_sixteenths(rates)) < 0).all()


@pytest.mark.parametrize("diameter_in, station", [(0.8, 2), (1.8, 4), (2.5, 6), (3.0, 8), (3.8, 12)],
                         ids=lambda v: f"SAE J1268 chart header, {v}")  # fmt: skip
def test_surface_of_rounds_in_oil(diameter_in, station):
    """SAE J1268 / ASTM A304, header of the charts, mildly agitated oil, surface (from memory)."""
    assert float(hardenability.j1268_oil_surface_sixteenths(diameter_in * 25.4)) == pytest.approx(station, abs=0.01)

"""Decomposition of austenite against the papers' own check values and textbook cooling rates."""

import itertools

import numpy as np
import pytest

from pycore.physics import kinetics, martensite

STEEL_1080 = {"C": 0.80, "Mn": 0.75, "Si": 0.20}
STEEL_4140 = {"C": 0.40, "Mn": 0.88, "Si": 0.25, "Cr": 0.95, "Mo": 0.20}
STEEL_4340 = {"C": 0.40, "Mn": 0.70, "Si": 0.25, "Ni": 1.80, "Cr": 0.80, "Mo": 0.25}
STEEL_5160 = {"C": 0.60, "Mn": 0.88, "Si": 0.25, "Cr": 0.80}
EUTECTOID = {"C": 0.77, "Mn": 0.70, "Si": 0.20}
COMMERCIAL = EUTECTOID | {"Cr": 0.08, "Ni": 0.08, "Mo": 0.02}  # residuals of commercial bar, as the program assumes
# Integral of 1/growth up to X: Kirkaldy & Venugopalan 1984 (2/3) and Li et al. 1998 (0.4), worked numerically.
INTEGRALS = [
    (0.01, 0.6406, 0.1043), (0.05, 1.0720, 0.2689), (0.10, 1.3261, 0.4012), (0.50, 2.1795, 1.0259),
    (0.90, 3.0328, 1.6506), (0.99, 3.7183, 1.9474),
]  # fmt: skip


def integral(X, power=2 / 3, late=0.0):
    """Time integral of the rate form from 0 to X, without the speed; u = x^(1/4) tames its start."""
    u = np.linspace(0.0, X**0.25, 8001)
    middle = (u[1:] + u[:-1]) / 2
    x = middle**4
    inside = 1 / (x ** (power * (1 - x)) * (1 - x) ** (power * x) * np.exp(-late * x * x))
    return float((inside * 4 * middle**3 * np.diff(u)).sum())


def speeds(model, composition, temperature_C, Ae1, Bs, Ae3=785.0, grain_size=7.0):
    return [float(s) for s in model(composition, temperature_C, Ae3_C=Ae3, Ae1_C=Ae1, Bs_C=Bs, grain_size=grain_size)]


@pytest.mark.parametrize("row", INTEGRALS, ids=lambda r: f"Kirkaldy & Venugopalan 1984 / Li 1998, X {r[0]}")
def test_growth_integrals(row):
    X, kirkaldy, li = row
    assert integral(X) == pytest.approx(kirkaldy, rel=0.002)
    assert integral(X, power=0.4) == pytest.approx(li, rel=0.002)


@pytest.mark.parametrize(("power", "late"), [(2 / 3, 0.0), (0.4, 0.0), (2 / 3, 2.775)])
def test_growth_is_the_printed_form(power, late):
    x = np.array([0.01, 0.2, 0.5, 0.8, 0.99])
    printed = x ** (power * (1 - x)) * (1 - x) ** (power * x) * np.exp(-late * x * x)
    assert kinetics.growth(x, late, power) == pytest.approx(printed)


@pytest.mark.parametrize(("X", "seconds"), [(0.01, 0.575), (0.50, 1.96), (0.99, 3.34)],
                         ids=lambda v: f"Kirkaldy & Venugopalan 1984, pearlite 1080 550 °C {v}")
def test_kirkaldy_pearlite_of_1080(X, seconds):
    _, pearlite, _ = speeds(kinetics.kirkaldy_venugopalan_1984_speeds, STEEL_1080, 550.0, 721, 500)
    assert integral(X) / pearlite == pytest.approx(seconds, rel=0.005)


@pytest.mark.parametrize(("X", "seconds"), [(0.01, 2.63), (0.50, 10.0)], ids=lambda v: f"Kirkaldy & Venugopalan 1984, bainite 4140 450 °C {v}")
def test_kirkaldy_bainite_of_4140(X, seconds):
    Bs = float(kinetics.kirkaldy_venugopalan_1984_Bs_C(STEEL_4140))
    assert pytest.approx(542.8, abs=0.1) == Bs
    _, _, bainite = speeds(kinetics.kirkaldy_venugopalan_1984_speeds, STEEL_4140, 450.0, 737, Bs)
    late = 1.9 * 0.40 + 2.5 * 0.88 + 1.7 * 0.95 + 4 * 0.20 - 2.6
    assert integral(X, late=late) / bainite == pytest.approx(seconds, rel=0.005)


@pytest.mark.parametrize(
    ("composition", "Ae1", "temperature_C", "seconds"),
    [(STEEL_1080, 721, 550.0, (0.98, 9.63, 18.3)), (STEEL_1080, 721, 650.0, (2.22, 21.8, 41.3)), (STEEL_4140, 737, 620.0, (68.4, 673, 1277))],
    ids=["Li 1998, pearlite 1080 550 °C", "Li 1998, pearlite 1080 650 °C", "Li 1998, pearlite 4140 620 °C"],
)
def test_li_pearlite(composition, Ae1, temperature_C, seconds):
    _, pearlite, _ = speeds(kinetics.li_1998_speeds, composition, temperature_C, Ae1, 500)
    assert [integral(X, 0.4) / pearlite for X in (0.01, 0.5, 0.99)] == pytest.approx(seconds, rel=0.006)


def test_li_bainite_of_4140():
    """Li et al. 1998, 450 °C, Bs 536.7: 1, 50 and 99 % after 6.92, 68.0 and 129 s."""
    Bs = 637 - 58 * 0.40 - 35 * 0.88 - 34 * 0.95 - 41 * 0.20
    _, _, bainite = speeds(kinetics.li_1998_speeds, STEEL_4140, 450.0, 737, Bs)
    assert [integral(X, 0.4) / bainite for X in (0.01, 0.5, 0.99)] == pytest.approx([6.92, 68.0, 129], rel=0.006)


def test_ferrite_start_of_4140():
    """The atlas shows about 10 s at 650 °C (from memory); with 23 500 cal/mol the form gives 10.9 s."""
    ferrite, _, _ = speeds(kinetics.li_1998_speeds, STEEL_4140, 650.0, 737, 540)
    assert integral(0.01, 0.4) / ferrite == pytest.approx(10.9, rel=0.01)


# Noses of the 1 % curves in Li's form (27 500 cal/mol, Andrews Ae1, grain size 7; 1080 size 6): s, °C.
NOSES = [
    ("1080", STEEL_1080, 720.8, 6.0, 1.2, 568), ("4140", STEEL_4140, 736.9, 7.0, 59, 580), ("4340", STEEL_4340, 705.9, 7.0, 851, 556),
    ("5160", STEEL_5160, 734.4, 7.0, 8.4, 578),
]  # fmt: skip


@pytest.mark.parametrize("row", NOSES, ids=lambda r: f"Li 1998, pearlite nose {r[0]}")
def test_pearlite_noses(row):
    _, composition, Ae1, grain_size, seconds, at_C = row
    T = np.arange(450.0, 700.0)
    _, pearlite, _ = kinetics.li_1998_speeds(composition, T, Ae3_C=785, Ae1_C=Ae1, Bs_C=500, grain_size=grain_size)
    starts = integral(0.01, 0.4) / pearlite
    assert starts.min() == pytest.approx(seconds, rel=0.03)
    assert T[np.argmin(starts)] == pytest.approx(at_C, abs=4)


def test_nose_of_1080_in_the_house_model():
    """US Steel atlas, 1080 (grain size 6): pearlite begins after about 0.7 to 1 s near 540 °C (from memory). The speeds
    used for plain steel must be within a factor of 2.5."""
    T = np.arange(480.0, 680.0)
    _, pearlite, _ = kinetics.kirkaldy_venugopalan_1984_speeds(STEEL_1080, T, Ae3_C=737, Ae1_C=727, Bs_C=500, grain_size=6)
    starts = integral(0.01) / pearlite
    assert 0.85 / 2.5 < starts.min() < 0.85 * 2.5
    assert 510 <= T[np.argmin(starts)] <= 590


def cooled(rate_C_s, composition=EUTECTOID, Ae1=727.0, Ae3=727.0, **options):
    T = np.arange(800.0, 150.0, -2.0)
    Ms = float(martensite.martensite_start_C(composition))
    Bs = float(kinetics.kirkaldy_venugopalan_1984_Bs_C(composition))
    return kinetics.decompose((T[0] - T) / rate_C_s, T[None, :], composition, Ae3_C=Ae3, Ae1_C=Ae1, Bs_C=Bs, Ms_C=Ms, **options)


def critical_rate(share, composition, grain_size):
    """Cooling rate at which what is not martensite makes up `share`."""
    slow, fast = 1.0, 4000.0
    for _ in range(40):
        middle = (slow * fast) ** 0.5
        found = cooled(middle, composition, grain_size=grain_size)
        soft = float(found["ferrite"][0] + found["pearlite"][0] + found["bainite"][0])
        slow, fast = (middle, fast) if soft > share else (slow, middle)
    return slow


@pytest.mark.parametrize("grain_size", [6, 7], ids=lambda g: f"Callister 11.27, grain size {g}")
def test_eutectoid_critical_cooling_rates(grain_size):
    """Callister, Fundamentals, CCT of eutectoid steel: all martensite from 140 °C/s, all pearlite under 35 °C/s; within a
    factor of 2 for steel with the residuals of commercial bar."""
    assert 140 / 2 <= critical_rate(0.01, COMMERCIAL, grain_size) <= 140 * 2
    assert 35 / 2 <= critical_rate(0.95, COMMERCIAL, grain_size) <= 35 * 2


def test_eutectoid_without_residuals_is_too_fast():
    """The same figure for steel without a trace of Cr, Ni, Mo: the speeds, as remembered, come out a factor of 3 too fast
    (grain size 6), because trace Mo weighs heavily in them. A ceiling, so that it gets no worse."""
    assert critical_rate(0.01, EUTECTOID, 6) <= 140 * 3.3
    assert critical_rate(0.95, EUTECTOID, 6) <= 35 * 2.1


def test_4340_critical_cooling_rate():
    """Callister, Fundamentals, CCT of 4340: all martensite from 8.3 °C/s, bainite begins below; within a factor of 2. At
    0.3 °C/s bainite is the greater part, at 0.006 °C/s it is all ferrite and pearlite."""
    def cool_4340(rate):
        found = cooled(rate, STEEL_4340, Ae1=725.0, Ae3=775.0)
        return {name: float(found[name][0]) for name in ("ferrite", "pearlite", "bainite")}

    assert sum(cool_4340(8.3 * 2).values()) < 0.01 < sum(cool_4340(8.3 / 2).values())
    assert cool_4340(0.3)["bainite"] > 0.5
    slow = cool_4340(0.006)
    assert slow["bainite"] < 0.02 and slow["ferrite"] + slow["pearlite"] > 0.98


def test_slower_is_softer():
    rates = (2.0, 10.0, 40.0, 160.0, 640.0)
    soft = [sum(float(cooled(r)[name][0]) for name in ("ferrite", "pearlite", "bainite")) for r in rates]
    assert all(a >= b - 1e-9 for a, b in itertools.pairwise(soft))
    assert soft[0] == pytest.approx(1.0, abs=0.01) and soft[-1] < 0.01


def test_slow_cooling_gives_the_lever_rule():
    """Fe-C: 0.40 C cooled slowly is (0.76 - 0.40)/(0.76 - 0.02) = 49 % ferrite, the rest pearlite."""
    found = cooled(0.05, {"C": 0.40, "Mn": 0.70, "Si": 0.20}, Ae1=727.0, Ae3=787.0)
    assert float(found["ferrite"][0]) == pytest.approx(0.486, abs=0.03)
    assert float(found["ferrite"][0] + found["pearlite"][0] + found["bainite"][0]) == pytest.approx(1.0, abs=0.01)


def test_pearlite_forms_hotter_when_slower():
    hot, cold = (float(cooled(r)["pearlite_formed_C"][0]) for r in (0.2, 20.0))
    assert 640 < hot < 720 and cold < hot


def test_alloy_weight_and_carbide_factor():
    assert kinetics.alloy_weight(STEEL_1080) == 0.0 and kinetics.alloy_weight(STEEL_4140) == 1.0
    lean, rich = ({"C": 1.0, "Mn": Mn, "Cr": 0.1} for Mn in (0.10, 0.45))
    assert kinetics.carbide_nucleation(lean, 0.82) > kinetics.carbide_nucleation(rich, 0.82) > 1.0
    assert kinetics.carbide_nucleation(lean, 1.0) == 1.0  # nothing undissolved, no change

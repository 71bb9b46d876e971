"""The conduction solver against analytic solutions: series, radiation in closed form, energy, 1/x2 law, Jominy bar."""

import math

import numpy as np
import pytest

from pycore.data import columns
from pycore.physics import conduction, steel_properties
from pycore.physics.quench_media import radiation_coefficient

RHO, K, C = 7650.0, 25.0, 620.0
ALPHA = K / (RHO * C)
HALF_MM, START_C, BATH_C = 12.5, 845.0, 25.0
GEOMETRIES = tuple(conduction.GEOMETRY_POWER)
# Full series, 60 terms (eigenvalues agree with Incropera Table 5.1): Bi, Fo, then centre and surface of slab,
# cylinder and sphere. For places without scipy.
SERIES = [
    (0.1, 0.5, 0.96798, 0.92178, 0.92934, 0.88459, 0.88899, 0.84605),
    (0.1, 2.0, 0.83733, 0.79714, 0.69358, 0.66017, 0.57191, 0.54429),
    (1, 0.05, 0.99975, 0.79038, 0.99890, 0.76964, 0.99687, 0.74769),
    (1, 0.2, 0.95064, 0.64339, 0.87017, 0.57023, 0.77231, 0.49591),
    (1, 0.5, 0.77253, 0.50452, 0.54859, 0.35279, 0.37078, 0.23605),
    (1, 1.0, 0.53386, 0.34818, 0.24938, 0.16034, 0.10798, 0.06874),
    (10, 0.05, 0.99853, 0.23233, 0.99367, 0.20093, 0.98256, 0.17119),
    (10, 0.2, 0.82925, 0.12248, 0.60023, 0.07484, 0.38266, 0.04106),
    (10, 0.5, 0.45464, 0.06433, 0.14580, 0.01776, 0.03448, 0.00365),
]
# Radiating plate 10 mm, rho 7850, c 650, emissivity 0.8 (Incropera ch. 5 closed form): from, to, walls °C, s.
RADIATION = [
    (20, 200, 850, 64.59), (20, 500, 850, 183.64), (20, 800, 850, 423.03), (20, 840, 850, 588.17),
    (850, 800, 20, 19.469), (850, 700, 20, 71.559), (850, 500, 20, 276.70),
]  # fmt: skip


def never(T):
    return np.zeros(len(T), bool)


def fixed(h, around_C):
    return lambda surface, time: (np.full_like(surface, h), np.full_like(surface, around_C))


def theta(geometry, Bi, Fo, **options):
    """(centre, surface) relative temperature by the solver, constant properties."""
    radius = HALF_MM / 1000
    end = Fo * radius**2 / ALPHA
    history = conduction.conduct(geometry, HALF_MM, steel_properties.constant(RHO, K, C), START_C,
                                 fixed(Bi * K / radius, BATH_C), until=never, end_s=end, **options)
    time, T = history.case()
    assert time[-1] == pytest.approx(end, rel=1e-6)
    relative = (T[-1] - BATH_C) / (START_C - BATH_C)
    return relative[0], relative[-1]


@pytest.mark.parametrize("row", SERIES, ids=lambda r: f"Incropera 5.5-5.6, Bi {r[0]} Fo {r[1]}")
def test_series_table(row):
    Bi, Fo, *expected = row
    found = [value for geometry in GEOMETRIES for value in theta(geometry, Bi, Fo)]
    assert found == pytest.approx(expected, abs=0.005)


def series(geometry, Bi, Fo, x, terms=80):
    """Analytic solution (Carslaw & Jaeger, Conduction of Heat in Solids; Incropera 5.5-5.6)."""
    special = pytest.importorskip("scipy.special")
    brentq = pytest.importorskip("scipy.optimize").brentq
    f = {
        "slab": lambda z: z * np.sin(z) - Bi * np.cos(z),
        "cylinder": lambda z: z * special.j1(z) - Bi * special.j0(z),
        "sphere": lambda z: (1 - Bi) * np.sin(z) - z * np.cos(z),
    }[geometry]
    grid = np.linspace(1e-6, terms * np.pi + 3, 60 * terms)
    sign = np.flatnonzero(f(grid)[:-1] * f(grid)[1:] < 0)
    z = np.array([brentq(f, grid[i], grid[i + 1]) for i in sign[:terms]])
    if geometry == "slab":
        weight, shape = 4 * np.sin(z) / (2 * z + np.sin(2 * z)), np.cos(z * x)
    elif geometry == "cylinder":
        j0, j1 = special.j0(z), special.j1(z)
        weight, shape = 2 / z * j1 / (j0**2 + j1**2), special.j0(z * x)
    else:
        weight, shape = 4 * (np.sin(z) - z * np.cos(z)) / (2 * z - np.sin(2 * z)), np.sinc(z * x / np.pi)
    return float((weight * shape * np.exp(-z * z * Fo)).sum())


@pytest.mark.native
@pytest.mark.parametrize("geometry", GEOMETRIES)
@pytest.mark.parametrize("Bi", [0.1, 0.5, 1.0, 5.0, 10.0, 50.0])
def test_series_with_scipy(geometry, Bi):
    """Carslaw & Jaeger: 25 nodes, five times each, centre and surface within 0.5 % of the full fall."""
    for Fo in (0.02, 0.05, 0.2, 0.5, 1.0):
        exact = series(geometry, Bi, Fo, 0.0), series(geometry, Bi, Fo, 1.0)
        assert theta(geometry, Bi, Fo) == pytest.approx(exact, abs=0.005), Fo


@pytest.mark.native
@pytest.mark.parametrize("geometry", GEOMETRIES)
def test_second_order_in_space(geometry):
    """Halving the mesh takes the error down by about four."""
    exact = series(geometry, 1.0, 0.2, 0.0)
    errors = [abs(theta(geometry, 1.0, 0.2, nodes=n, largest_change_K=0.5)[0] - exact) for n in (11, 21, 41)]
    orders = np.log2(np.array(errors[:-1]) / errors[1:])
    assert (orders > 1.7).all(), orders


@pytest.mark.parametrize("geometry", GEOMETRIES)
def test_second_order_in_time(geometry):
    """Halving the step takes the error down by about four, against a run with steps a tenth as long."""
    best = theta(geometry, 1.0, 0.2, nodes=13, largest_change_K=0.4)[0]
    errors = [abs(theta(geometry, 1.0, 0.2, nodes=13, largest_change_K=change)[0] - best) for change in (16, 8, 4)]
    orders = np.log2(np.array(errors[:-1]) / errors[1:])
    assert (orders > 1.6).all(), orders


@pytest.mark.parametrize("row", RADIATION, ids=lambda r: f"Incropera ch. 5 radiation, {r[0]} to {r[1]} °C")
def test_radiation_in_closed_form(row):
    start, to, walls, seconds = row
    heating = to > start
    plate = steel_properties.constant(7850, 1e4, 650)  # conducts so well that it is one temperature
    history = conduction.conduct(
        "slab", 5.0, plate, start,
        lambda surface, time: (radiation_coefficient(surface, walls, 0.8), np.full_like(surface, walls)),
        until=lambda T: (T[:, 0] >= to) if heating else (T[:, 0] <= to), end_s=2000.0, largest_change_K=5.0, nodes=7,
    )
    time, T = history.case()
    sign = 1 if heating else -1
    assert float(np.interp(sign * to, sign * T[:, 0], time)) == pytest.approx(seconds, rel=0.004)


@pytest.mark.parametrize("geometry", GEOMETRIES)
def test_no_energy_is_lost_across_the_735_peak(geometry):
    """Heat taken in through the surface is the heat found inside, EN 1993-1-2 properties, 20 to 850 °C."""
    flux, half = 40e3, 0.010
    history = conduction.conduct(
        geometry, 1000 * half, steel_properties.on_heating(), 20.0,
        lambda surface, time: (np.full_like(surface, 1e-9), surface + flux / 1e-9),
        until=lambda T: T[:, 0] >= 850, end_s=3000.0,
    )
    time, T = history.case()
    volume = conduction.Mesh(geometry).volume
    inside = (steel_properties.en_1993_1_2_enthalpy(T[-1]) * volume).sum() * half * steel_properties.EN_DENSITY_KG_M3
    assert inside / (flux * time[-1]) == pytest.approx(1.0, abs=1e-4)


def test_heat_up_of_a_25_mm_round():
    """EN properties, furnace 850 °C, emissivity 0.8, convection 10, lumped: 874 s to 840 °C. The true centre lags a little."""
    history = conduction.conduct(
        "cylinder", 12.5, steel_properties.on_heating(), 20.0,
        lambda surface, time: (10 + radiation_coefficient(surface, 850.0, 0.8), np.full_like(surface, 850.0)),
        until=lambda T: T[:, 0] >= 840, end_s=4000.0, largest_change_K=25.0, nodes=15,
    )
    assert history.case()[0][-1] == pytest.approx(874, rel=0.05)


def end_quenched(x_mm, h, alpha=6e-6, conductivity=27.3):
    """Rate at 704 °C and time to it, at distances from the jet of a bar quenched at one end."""
    material = steel_properties.constant(conductivity / (alpha * 600), conductivity, 600)
    history = conduction.conduct("slab", 101.6, material, 845.0, fixed(h, 24.0), until=never, end_s=260.0,
                                 nodes=161, largest_change_K=5.0)
    time, _ = history.case()
    found = []
    for x in x_mm:
        curve = history.at(1 - x / 101.6)
        at = lambda T, y=curve: float(np.interp(-T, -y, time))  # noqa: E731
        found.append((10 / (at(699) - at(709)), at(704)))
    return np.array(found).T


def test_one_over_x_squared():
    """Semi-infinite, perfect quench, a = 6e-6 m2/s: rate dT (4/sqrt(pi)) a z3 exp(-z2)/x2 with z = erfinv(680/821)
    (Carslaw & Jaeger 2.4): J4 97.8, J8 24.45, J16 6.11 K/s; 1.80, 7.20, 28.8 s."""
    z = 0.96635
    assert math.erf(z) == pytest.approx(680 / 821, abs=1e-4)
    rates, times = end_quenched((6.35, 12.7, 25.4), h=1e7)
    assert rates == pytest.approx([97.8, 24.45, 6.11], rel=0.015)
    assert times == pytest.approx([1.80, 7.20, 28.8], rel=0.015)


def test_jominy_bar_cools_as_the_charts_say():
    """SAE / AISI chart scale at 704 °C, J2 to J16, within 20 % with 15 kW/m2K at the end (sides insulated, 1-D)."""
    J = np.array([2, 3, 4, 6, 8, 12, 16])
    published = dict(zip(*columns("jominy_cooling", "J_sixteenths", "rate_C_s")))
    rates, _ = end_quenched(J * 25.4 / 16, h=15000.0)
    assert rates == pytest.approx([published[j] for j in J], rel=0.20)


def test_cases_side_by_side_are_as_alone():
    """A leading case axis changes nothing: three sizes at once equal three runs."""
    sizes = np.array([5.0, 12.5, 30.0])
    material = steel_properties.on_quenching()
    options = {"until": lambda T: T.max(axis=1) < 100.0, "end_s": 5000.0}
    together = conduction.conduct("cylinder", sizes, material, 830.0, fixed(2000.0, 40.0), **options)
    for i, size in enumerate(sizes):
        time, T = together.case(i)
        alone_time, alone_T = conduction.conduct("cylinder", size, material, 830.0, fixed(2000.0, 40.0), **options).case()
        at = lambda y, t: np.interp(-400.0, -y[:, 0], t)  # noqa: E731
        assert at(T, time) == pytest.approx(at(alone_T, alone_time), rel=0.01)


def test_a_geometry_it_does_not_know_is_refused():
    with pytest.raises(ValueError, match="slab, cylinder or sphere"):
        conduction.conduct("cone", 5.0, steel_properties.on_quenching(), 800.0, fixed(1.0, 20.0), until=never, end_s=1.0)


@pytest.mark.parametrize("radius_mm", [3.0, 3.4, 6.0, 12.5])
def test_the_end_is_told_where_it_is_reached(radius_mm):
    """The last step of a dying exponential is long; the time told must still be that of the crossing: coarse steps within 8 %
    of fine ones, and the end temperature met within 1 K."""
    times = []
    for change in (18.0, 2.0):
        history = conduction.conduct("cylinder", radius_mm, steel_properties.on_quenching(), 800.0, fixed(900.0, 60.0),
                                     until=lambda T: T.max(axis=1) <= 70.0, end_s=5000.0, largest_change_K=change)
        time, T = history.case()
        assert 69.0 <= T[-1].max() <= 70.01
        times.append(time[-1])
    assert times[0] == pytest.approx(times[1], rel=0.08)

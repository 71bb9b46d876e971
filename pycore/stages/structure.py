"""From cooling curves to structure and hardness, place by place through the section."""

from dataclasses import dataclass

import numpy as np

from pycore.physics import hardenability, hardness, kinetics, martensite
from pycore.physics.validity import outside
from pycore.stages.notes import rounded

# Carbon in solution to 0.9 %: the W-type heats on which carbide_nucleation was set stand that far out.
KINETICS_RANGE = {**kinetics.KV_RANGE, "C": (0.1, 0.9)}
PHASES = ("ferrite", "pearlite", "bainite", "martensite", "retained_austenite")
RATE_CHECK_C = 704.0  # 1300 °F, where the Jominy scale is told
RATE_END_C = 500.0
FASTEST_TOLD_C_PER_S = 1000.0  # far beyond the scale's 272 °C/s at J 1; a wetted skin has no rate worth telling
SEMI_INFINITE_RATIO = 0.622  # mean rate 704-500 °C over rate at 704 °C, erf solution of the end-quenched bar
# Width of the bands, set once: nearly eight in ten of the published bars by size lie inside (tests/published/test_bars.py).
MODEL_ERROR_HRC = 2.0  # fully hardened: scatter of as-quenched tables about Hodge & Orehoski
SOFT_ERROR_HRC, STEEP_ERROR_HRC = 3.0, 5.0  # more where soft; most where half martensite, steep in the rate
JOMINY_DOUBT = 1.4  # factor on the Jominy distance: bath curves are known to ±30-50 %
SECOND_OPINION = 0.5  # share of the kinetics' disagreement that goes into the band
SKIN_ERROR_HRC_PER_MM, SKIN_FROM_MM, SKIN_PLACES = 0.25, 10.0, 0.8
# The round that cools like a section in oil, over its thickness (equal first-mode decay, Bi about 1).
ROUND_PER_SECTION = {"slab": 1.87, "cylinder": 1.0, "sphere": 0.69}
MARTENSITE_SHARES = (0.5, 0.8, 0.9, 0.95, 0.999)  # columns of Hodge & Orehoski 1946
UNKNOWN_PEARLITE_C = 620.0  # where pearlite is taken to form if the kinetics formed none (from memory)
FERRITE_HV = 180.0  # ferrite in low-alloy steel (from memory)


@dataclass(frozen=True)
class Structure:
    """Arrays over the places looked at, from the surface inwards."""

    HV: np.ndarray
    HRC: np.ndarray
    low: np.ndarray
    high: np.ndarray
    fractions: dict  # phase -> array
    soft_HV: np.ndarray  # mean hardness of what is neither martensite nor retained austenite
    rate_C_per_s: np.ndarray  # as the Jominy scale has it
    by: str  # which model gave the hardness
    second_HRC: np.ndarray | None  # the kinetics' own opinion where the Jominy curve gave the hardness


def jominy_rate_C_per_s(time_s, curves_C):
    """Rate of each curve on the Jominy scale: mean of the rate at 704 °C and the one that its time to 500 °C implies.

    The two are one for an end-quenched bar; under a vapour film or near a surface they differ, and the mean of
    their logarithms stands between.
    """
    rates = []
    for curve in curves_C:
        passed = (RATE_CHECK_C + 10, RATE_CHECK_C, RATE_CHECK_C - 10, RATE_END_C)
        above, check, below, end = np.interp(np.negative(passed), -np.minimum.accumulate(curve), time_s)
        local = 20.0 / max(below - above, 1e-3)
        whole = (RATE_CHECK_C - RATE_END_C) / max(end - check, 1e-3) / SEMI_INFINITE_RATIO
        rates.append(min(np.sqrt(local * whole), FASTEST_TOLD_C_PER_S))
    return np.array(rates)


def structure_of(steel, time_s, curves_C, end_C, places, geometry, half_thickness_mm, kind):
    """Structure along cooling curves (places, steps) of a modelled steel, cooled at last to end_C."""
    C, Ms = steel.austenite["C"], steel.Ms_C
    Ae3 = max(steel.Ac3_C or steel.Ac1_C, steel.Ac1_C + 1)
    formed = kinetics.decompose(
        time_s,
        curves_C,
        steel.austenite,
        Ae3_C=Ae3,
        Ae1_C=steel.Ac1_C,
        Bs_C=float(kinetics.kirkaldy_venugopalan_1984_Bs_C(steel.austenite)),
        Ms_C=Ms,
        grain_size=steel.grain_size,
        nucleation=kinetics.carbide_nucleation(steel.composition, steel.dissolved_C_pct),
    )
    rate = jominy_rate_C_per_s(time_s, curves_C)
    soft = {name: formed[name] for name in ("ferrite", "pearlite", "bainite")}
    share_soft = sum(soft.values())
    retained = float(martensite.koistinen_marburger_1959(Ms, end_C))
    hard_HV = _hard_HV(C, retained)
    soft_HV, softest_HV = _soft_HV(steel, soft, formed["pearlite_formed_C"], rate)
    HV = (1 - share_soft) * hard_HV + share_soft * soft_HV
    HRC = hardness.HV_to_HRC(HV)
    by = "kinetics with additivity (Kirkaldy & Venugopalan 1984; Li 1998)"
    error = MODEL_ERROR_HRC + SOFT_ERROR_HRC * share_soft + STEEP_ERROR_HRC * 4 * (1 - share_soft) * share_soft
    low, high, second = HRC - error, HRC + error, None
    if steel.DI_mm is not None and not outside({"C": C}, {"C": hardenability.JOMINY_C_RANGE}):
        by = "ASTM A255 Jominy equivalence; phases by kinetics, scaled to it"
        second = HRC
        J = hardenability.jominy_distance_sixteenths(rate)
        if kind == "oil":
            J = np.maximum(J, _skin_station(places, geometry, half_thickness_mm))
        HRC, low, high = _by_jominy(steel, J, hardness.HV_to_HRC(softest_HV), second)
        HV = hardness.HRC_to_HV(HRC)
        share_soft, soft = _scaled(steel, soft, share_soft, HRC, hardness.HV_to_HRC(softest_HV))
    hard = 1 - share_soft
    fractions = {**soft, "martensite": hard * (1 - retained), "retained_austenite": hard * retained}
    # Published bars are softer at the skin the thicker they are; the models do not show all of it.
    low = low - SKIN_ERROR_HRC_PER_MM * max(0.0, half_thickness_mm - SKIN_FROM_MM) * (np.asarray(places) >= SKIN_PLACES)
    ceiling = hardness.HV_to_HRC(hard_HV) + MODEL_ERROR_HRC / 2
    high = np.maximum(np.minimum(high, ceiling), HRC)
    return Structure(HV, HRC, np.clip(low, 0.0, HRC), high, fractions, soft_HV, rate, by, second)


def _skin_station(places, geometry, half_thickness_mm):
    """Jominy stations below which the skin of a part in oil does not go, by the published chart, fading inwards."""
    round_mm = 2 * half_thickness_mm * ROUND_PER_SECTION[geometry]
    inwards = np.clip((np.asarray(places) - SKIN_PLACES) / (1 - SKIN_PLACES), 0.0, 1.0)
    return inwards * float(hardenability.j1268_oil_surface_sixteenths(round_mm))


def _by_jominy(steel, J, floor_HRC, kinetics_HRC):
    """(mid, low, high) HRC by the Jominy curve, with the bath's doubt and the second opinion of the kinetics in the band."""
    # The dividing factors run on below the softest structure the steel can have at that rate: it is the floor.
    at = lambda distance: np.maximum(  # noqa: E731
        hardenability.a255_jominy_HRC(steel.austenite, distance, steel.grain_size), floor_HRC
    )
    mid, slower, faster = at(J), at(J * JOMINY_DOUBT), at(np.maximum(J / JOMINY_DOUBT, 1.0))
    second = SECOND_OPINION * (kinetics_HRC - mid)
    low = np.minimum(slower, mid + np.minimum(second, 0.0)) - MODEL_ERROR_HRC
    return mid, low, np.maximum(faster, mid + np.maximum(second, 0.0)) + MODEL_ERROR_HRC


def _hard_HV(C_pct, retained):
    """Hardness of fully hardened structure: martensite with the austenite left in it."""
    martensite_HV = float(hardness.HRC_to_HV(hardness.martensite_HRC(C_pct)))
    # The tables' martensite holds the austenite usual for its carbon; only more than that softens.
    usual = float(np.interp(C_pct, (0.4, 0.6, 0.8, 1.0), (0.02, 0.045, 0.09, 0.17)))  # handbook (from memory)
    extra = max(0.0, retained - usual)
    return martensite_HV * (1 - extra) + hardness.RETAINED_AUSTENITE_HV * extra


def _soft_HV(steel, soft, formed_C, rate):
    """(mean hardness of ferrite, pearlite and bainite together, hardness of ferrite and pearlite alone)."""
    composition = dict(steel.composition, C=min(steel.composition["C"], 0.5))  # Maynier's range ends at 0.5 % C
    _, bainite, ferrite_pearlite = hardness.maynier_1978_HV(composition, np.maximum(rate, 0.02) * 3600.0)
    both = soft["ferrite"] + soft["pearlite"]
    lever = min(1.0, steel.austenite["C"] / kinetics.EUTECTOID_C_PCT)
    pearlite_share = np.where(both > 0.02, soft["pearlite"] / np.maximum(both, 1e-9), lever)
    pearlite = hardness.pearlite_HV(np.where(np.isnan(formed_C), UNKNOWN_PEARLITE_C, formed_C))
    by_fineness = pearlite_share * pearlite + (1 - pearlite_share) * FERRITE_HV
    weight = np.clip((steel.austenite["C"] - 0.4) / 0.35, 0.0, 1.0)  # Maynier up to 0.4 % C, fineness from 0.75
    ferrite_pearlite = (1 - weight) * ferrite_pearlite + weight * by_fineness
    bainite = np.maximum(bainite, ferrite_pearlite)
    total = both + soft["bainite"]
    mixed = (both * ferrite_pearlite + soft["bainite"] * bainite) / np.maximum(total, 1e-9)
    return np.where(total > 1e-6, mixed, bainite), ferrite_pearlite


def _scaled(steel, soft, share_soft, HRC, softest_HRC):
    """(soft share, soft fractions) that go with a hardness from the Jominy curve, in the proportions of the kinetics.

    Down to half martensite by Hodge & Orehoski; below, in a straight line to the softest structure.
    """
    known = np.array(MARTENSITE_SHARES)
    HRC_known = np.array([hardness.hodge_orehoski_HRC(steel.austenite["C"], share) for share in known])
    below = 0.5 * np.clip((HRC - softest_HRC) / np.maximum(HRC_known[0] - softest_HRC, 0.1), 0.0, 1.0)
    need = 1.0 - np.where(HRC_known[0] > HRC, below, np.interp(HRC, HRC_known, known))
    need = np.where(need < 2e-3, 0.0, need)  # the table ends at 99.9 %
    none = share_soft < 1e-3
    proportions = {
        name: np.where(none, 1.0 if name == "bainite" else 0.0, value / np.maximum(share_soft, 1e-9))
        for name, value in soft.items()
    }
    return need, {name: proportions[name] * need for name in soft}


def tabulated_structure(steel, places, half_thickness_mm, hardens_mm):
    """Structure of a high-alloy grade from its sheet: hard through where the section is within its limit, else None."""
    if 2 * half_thickness_mm > hardens_mm:
        return None
    low, mid, high, _ = steel.temperatures["as_quenched_HRC"]
    retained = steel.temperatures.get("retained_austenite_pct", (None, 10.0, None, ""))[1] / 100.0
    ones = np.ones(places)
    fractions = {
        "ferrite": 0 * ones,
        "pearlite": 0 * ones,
        "bainite": 0 * ones,
        "martensite": ones * (1 - retained),
        "retained_austenite": ones * retained,
    }
    HRC = ones * mid
    return Structure(
        hardness.HRC_to_HV(HRC),
        HRC,
        ones * low,
        ones * high,
        fractions,
        ones * hardness.HRC_to_HV(low),
        ones * np.nan,
        "tabulated for the grade",
        None,
    )


def place_json(structure, index):
    """One place of the section for the plan."""
    if structure is None:
        return {"HRC": {"low": None, "mid": None, "high": None}, "phases": dict.fromkeys(PHASES)}
    return {
        "HRC": {
            "low": rounded(structure.low[index]),
            "mid": rounded(structure.HRC[index]),
            "high": rounded(structure.high[index]),
        },
        "phases": {name: rounded(structure.fractions[name][index], 3) for name in PHASES},
    }

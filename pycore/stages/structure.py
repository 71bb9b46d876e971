"""From cooling curves to structure and hardness, place by place through the section."""

from dataclasses import dataclass

import numpy as np

from pycore.physics import hardenability, hardness, kinetics, martensite
from pycore.physics.validity import outside
from pycore.stages.notes import rounded

PHASES = ("ferrite", "pearlite", "bainite", "martensite", "retained_austenite")
RATE_CHECK_C = 704.0  # 1300 °F, where the Jominy scale is told
RATE_END_C = 500.0
SEMI_INFINITE_RATIO = 0.622  # mean rate 704-500 °C over rate at 704 °C, erf solution of the end-quenched bar
MODEL_ERROR_HRC = 2.0  # fully hardened: scatter of as-quenched tables about Hodge & Orehoski
STEEP_ERROR_HRC = 6.0  # half martensite: a small change of rate moves hardness this far
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
    disagreement_HRC: float


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
        rates.append(np.sqrt(local * whole))
    return np.array(rates)


def structure_of(steel, time_s, curves_C, end_C):
    """Structure along cooling curves (places, steps) of a modelled steel, cooled at last to end_C."""
    C, Ms = steel.austenite["C"], steel.Ms_C
    carbide = steel.Acm_C is not None and steel.dissolved_C_pct < steel.composition["C"]
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
        nucleation=kinetics.carbide_nucleation(steel.composition) if carbide else 1.0,
    )
    rate = jominy_rate_C_per_s(time_s, curves_C)
    soft = {name: formed[name] for name in ("ferrite", "pearlite", "bainite")}
    share_soft = sum(soft.values())
    retained = float(martensite.koistinen_marburger_1959(Ms, end_C))
    hard_HV = _hard_HV(C, retained)
    soft_HV, softest_HV = _soft_HV(steel, soft, formed["pearlite_formed_C"], rate)
    HV = (1 - share_soft) * hard_HV + share_soft * soft_HV
    HRC = hardness.HV_to_HRC(HV)
    by, disagreement = "kinetics with additivity (Kirkaldy & Venugopalan 1984; Li 1998)", 0.0
    if steel.DI_mm is not None and not outside({"C": C}, {"C": hardenability.JOMINY_C_RANGE}):
        J = hardenability.jominy_distance_sixteenths(rate)
        second = hardenability.a255_jominy_HRC(steel.composition, J, steel.grain_size)
        # The dividing factors run on below the softest structure the steel can have at that rate.
        second = np.maximum(second, hardness.HV_to_HRC(softest_HV))
        disagreement = float(np.max(np.abs(second - HRC)))
        by = "ASTM A255 Jominy equivalence; phases by kinetics, scaled to it"
        HRC = second
        HV = hardness.HRC_to_HV(HRC)
        share_soft, soft = _scaled(soft, share_soft, HV, hard_HV, soft_HV)
        soft_HV = np.where(share_soft > 1e-6, (HV - (1 - share_soft) * hard_HV) / np.maximum(share_soft, 1e-6), soft_HV)
    hard = 1 - share_soft
    fractions = {**soft, "martensite": hard * (1 - retained), "retained_austenite": hard * retained}
    error = (
        MODEL_ERROR_HRC
        + (STEEP_ERROR_HRC - MODEL_ERROR_HRC) * 4 * hard * share_soft
        + 0.25 * min(disagreement, 12) * (share_soft > 0.05)
    )
    ceiling = hardness.HV_to_HRC(hard_HV) + MODEL_ERROR_HRC / 2
    return Structure(
        HV,
        HRC,
        np.maximum(HRC - error, 0.0),
        np.maximum(np.minimum(HRC + error, ceiling), HRC),
        fractions,
        soft_HV,
        rate,
        by,
        disagreement,
    )


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


def _scaled(soft, share_soft, HV, hard_HV, soft_HV):
    """Soft fractions that give the hardness found by the Jominy equivalence, in the proportions of the kinetics."""
    need = np.clip((hard_HV - HV) / np.maximum(hard_HV - soft_HV, 1.0), 0.0, 1.0)
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
        0.0,
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

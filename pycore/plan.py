"""plan(job) -> Plan: the stages of the trade, in order."""

import hashlib
import json
from dataclasses import dataclass

import numpy as np

from pycore import DATA_EDITION, __version__
from pycore.job import Job, parse_job
from pycore.stages import say
from pycore.stages.austenitize import austenitize
from pycore.stages.cautions import cautions
from pycore.stages.cold import cold
from pycore.stages.facts import facts_of
from pycore.stages.faults import faults
from pycore.stages.notes import note, rounded
from pycore.stages.proof import proof
from pycore.stages.quench import CENTRE, MIDRADIUS, PLACES, SURFACE, quench
from pycore.stages.section import section_of
from pycore.stages.stations import CRITICAL, stations
from pycore.stages.steel import steel_of
from pycore.stages.steps import steps
from pycore.stages.structure import place_json
from pycore.stages.temper import temper

SCHEMA = "quenchwright.plan/1"
CURVE_POINTS = 60


@dataclass(frozen=True)
class Plan:
    job: Job
    section: object
    steel: object
    aim_HRC: tuple
    austenitize: object
    quench: object
    cold: object
    temper: object
    proof: object
    cautions: tuple
    steps: tuple
    stations: tuple
    faults: tuple

    def to_json(self, date=None):
        return _to_json(self, date)


def plan(job):
    """The whole run for a job (a Job, or a dictionary to be parsed). InputErrors where the job is faulty."""
    if not isinstance(job, Job):
        job = parse_job(job)
    use = say.use_row(job.use)
    aim_HRC = job.hardness_HRC or say.use_range(use)
    section = section_of(job)
    steel = steel_of(job)
    heat = austenitize(job, steel, section)
    quenched = quench(job, steel, section, heat, aim_HRC)
    chilled, hardened = cold(job, steel, section, quenched)
    tempered = temper(job, steel, section, quenched, hardened, aim_HRC)
    proven = proof(job, steel, section, heat, quenched, hardened, tempered, aim_HRC)
    spoken = cautions(facts_of(job, steel, section, heat, quenched, chilled, tempered, aim_HRC, use))
    listed = steps(job, steel, section, heat, quenched, chilled, tempered, aim_HRC, use, spoken)
    return Plan(
        job,
        section,
        steel,
        aim_HRC,
        heat,
        quenched,
        chilled,
        tempered,
        proven,
        spoken,
        listed,
        stations(job, heat, quenched, chilled, tempered, listed),
        faults(job, steel, heat, quenched, tempered, aim_HRC),
    )


def _to_json(plan, date):
    job, steel, heat, quenched, tempered = plan.job, plan.steel, plan.austenitize, plan.quench, plan.temper
    use, job_json = say.use_row(job.use), job.to_json()
    stages = [steel, heat, quenched, plan.cold, tempered, plan.proof]
    why = {"aim": _aim_note(job, use)}
    for stage in stages:
        why.update(stage.why if stage is not None else {})
    marks = [m for stage in [plan.section, *stages[:-1]] if stage is not None for m in stage.marks]
    return {
        "schema": SCHEMA,
        "version": __version__,
        "data_edition": DATA_EDITION,
        "date": date,
        "id": hashlib.sha256(json.dumps(job_json, sort_keys=True).encode()).hexdigest()[:8].upper(),
        "job": job_json,
        "title": job.title,
        "quantity": job.quantity,
        "units": job.units,
        "summary": {
            "steel": steel.name,
            "part": say.part_phrase(job, plan.section),
            "aim": f"{say.span(*plan.aim_HRC)} HRC" + (f" ({use['name'].lower()})" if use else ""),
            "shop": say.shop_phrase(job),
        },
        "aim": {
            "HRC": list(plan.aim_HRC),
            "use": job.use,
            "name": use["name"] if use else None,
            "source": "stated by you" if job.hardness_HRC else use["source"],
        },
        "verdict": plan.proof.verdict,
        "confidence": plan.proof.confidence,
        "reasons": list(plan.proof.reasons),
        "alternatives": list(plan.proof.alternatives),
        "section": {
            "geometry": plan.section.geometry,
            "half_thickness_mm": rounded(plan.section.half_thickness_mm, 2),
            "width_mm": rounded(plan.section.width_mm, 2),
            "thinnest_mm": rounded(plan.section.thinnest_mm, 2),
            "zone_mm": rounded(plan.section.zone_mm, 1),
            "mass_kg": rounded(plan.section.mass_kg, 3),
            "taken_as": plan.section.aspect_note,
        },
        "steel": {
            "grade": steel.grade,
            "name": steel.name,
            "basis": steel.basis,
            "composition": {e: round(v, 4) for e, v in steel.composition.items()},
            "Ac1_C": steel.Ac1_C,
            "Ac3_C": steel.Ac3_C,
            "Acm_C": steel.Acm_C,
            "Ms_C": steel.Ms_C,
            "Mf_C": steel.Mf_C,
            "DI_mm": steel.DI_mm,
            "jominy": steel.jominy,
            "dissolved_C_pct": steel.dissolved_C_pct,
            "grain_size": steel.grain_size,
            "prior": steel.prior,
        },
        "austenitize": _fields(
            heat,
            "temperature_C window_C preheat heat_up_min soak_min soak_max_min total_min thin_at_heat_min scale_mm decarb_mm "
            "stock_mm colour magnet_lets_go_C measured_by error_C",
        ),
        "quench": _fields(
            quenched,
            "medium medium_name kind bath_C bath_window_C agitation bath_rise_C volume_L volume_needed_L transfer_s "
            "bath_entry_C out_of_bath_C time_in_bath_s rate_704_C_per_s flash_C crack_risk size_change_pct others",
        ),
        "as_quenched": {
            name: place_json(quenched.structure, i)
            for name, i in (("surface", SURFACE), ("midradius", MIDRADIUS), ("centre", CENTRE))
        },
        "cold": None
        if plan.cold is None
        else _fields(plan.cold, "temperature_C hold_min retained_before retained_after") | {"why": plan.cold.why_do},
        "temper": _fields(
            tempered,
            "kind temperature_C window_C hold_min heat_up_min cycles colour start_within_min reached needs_C "
            "longer_h accuracy_C tensile_MPa",
        ),
        "final": tempered.final,
        "profile": _profile(plan),
        "cooling": _cooling(quenched),
        "tempering_curve": {
            "temperature_C": _list(tempered.curve_C, 0),
            "HRC": _list(tempered.curve_HRC, 1),
            "source": tempered.curve_source,
        },
        "stations": list(plan.stations),
        "critical": list(CRITICAL),
        "steps": list(plan.steps),
        "faults": list(plan.faults),
        "cautions": list(plan.cautions),
        "marks": marks,
        "why": why,
        "sources": list(
            dict.fromkeys([entry["source"] for entry in why.values()] + [c["source"] for c in plan.cautions])
        ),
    }


def _aim_note(job, use):
    if job.hardness_HRC:
        return note("Hardness aimed for", "stated by you", f"{say.span(*job.hardness_HRC)} HRC", "the job")
    return note("Hardness aimed for", use["confidence"], use["name"], use["source"])


def _fields(stage, names):
    plain = lambda v: list(v) if isinstance(v, tuple) else v  # noqa: E731
    return {name: plain(getattr(stage, name)) for name in names.split()}


def _list(values, digits):
    return [rounded(v, digits) for v in values]


def _profile(plan):
    """Hardness from the surface to the centre, before and after the temper; None where no structure is known."""
    found, tempered = plan.quench.structure, plan.temper
    if found is None:
        return None
    half = plan.section.width_mm / 2
    return {
        "depth_mm": [rounded(half * (1 - x), 2) for x in PLACES],
        "width_mm": rounded(plan.section.width_mm, 2),
        "as_quenched_HRC": {"low": _list(found.low, 1), "mid": _list(found.HRC, 1), "high": _list(found.high, 1)},
        "final_HRC": {
            "low": _list(tempered.final_low, 1),
            "mid": _list(tempered.final_HRC, 1),
            "high": _list(tempered.final_high, 1),
        },
    }


def _cooling(quenched):
    """The two cooling curves thinned to what a drawing needs."""
    pick = np.unique(np.linspace(0, len(quenched.time_s) - 1, CURVE_POINTS).astype(int))
    return {
        "time_s": _list(quenched.time_s[pick], 2),
        "surface_C": _list(quenched.curves_C[SURFACE][pick], 0),
        "centre_C": _list(quenched.curves_C[CENTRE][pick], 0),
    }

"""Risk of cracking and warping, graded by points with its reasons (common practice; the steel's part by Kunitake)."""

from pycore.physics.size_change import CRACKS_ABOVE_CEQ, kunitake_carbon_equivalent

MEDIUM_POINTS = {"brine": 4.0, "water": 3.0, "fast-oil": 1.5, "medium-oil": 1.0, "canola": 1.0, "plates": 0.5}
FEATURE_POINTS = {"sharp-corner": 2.0, "keyway": 2.0, "hole": 1.0, "section-step": 1.0, "thread": 1.0}
LIMITS = (("low", 4.0), ("moderate", 6.5), ("high", 1e9))
MEANT_FOR = {"water": 0, "oil": 1, "air": 2}


def gentleness(kind):
    """How mild a kind of medium is, on the scale of MEANT_FOR."""
    return {"water": 0, "oil": 1}.get(kind, 2)


def crack_risk(job, steel, section, medium, kind):
    """{"grade": low, moderate or high, "reasons": [...]} for a part quenched in a medium."""
    points, reasons = MEDIUM_POINTS.get(medium, 0.0), []
    harsher_by = MEANT_FOR[steel.hardening] - gentleness(kind)
    if harsher_by > 0:
        points += 1.5 * harsher_by + (0.5 if kind == "water" else 0.0)
        reasons.append(
            f"{steel.name.split(',')[0]} is meant for {steel.hardening}, "
            f"not for {'water' if kind == 'water' else 'oil'}"
        )
    if steel.Ms_C < 200 and kind in ("water", "oil"):
        points += 1.5
        reasons.append(f"martensite forms late and cold (Ms {steel.Ms_C:.0f} °C)")
    elif steel.Ms_C < 270 and kind == "water":
        points += 1.0
        reasons.append(f"martensite forms below 270 °C (Ms {steel.Ms_C:.0f} °C)")
    equivalent = float(kunitake_carbon_equivalent(steel.composition))
    if kind == "water" and equivalent > CRACKS_ABOVE_CEQ:
        points += min(1.5, 2 * (equivalent - CRACKS_ABOVE_CEQ))
        reasons.append(f"carbon equivalent {equivalent:.2f} %, cracks are likely in water above {CRACKS_ABOVE_CEQ:g} %")
    for feature in job.part.features:
        points += FEATURE_POINTS[feature]
        reasons.append(
            {
                "sharp-corner": "a sharp inside corner",
                "keyway": "a keyway",
                "hole": "a hole",
                "section-step": "a step in section",
                "thread": "a thread",
            }[feature]
        )
    if section.width_mm / section.thinnest_mm > 2:
        points += 1.0
        reasons.append(f"thick beside thin ({section.width_mm:g} and {section.thinnest_mm:g} mm)")
    if job.part.condition == "hardened":
        points += 1.0
        reasons.append("it was hardened before: anneal or normalize first")
    if kind == "water" and job.part.condition == "forged":
        points += 0.5
        reasons.append("forged: normalize, or coarse grain will crack in water")
    if job.part.zone != "all":
        points -= 1.0
    grade = next(name for name, limit in LIMITS if points < limit)
    return {"grade": grade, "reasons": reasons or ["nothing out of the ordinary"]}

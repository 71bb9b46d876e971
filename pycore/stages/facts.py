"""Facts about a plan that cautions hang on, worked out once. Their meanings stand in data/cautions.toml."""

from pycore.physics.bath import FLASH_MARGIN_K


def facts_of(job, steel, section, heat, quenched, cold, temper, aim_HRC, use):
    """The set of facts true for this plan."""
    medium, kind, part = quenched.medium, quenched.kind, job.part
    C, Cr, Ni = (steel.composition.get(e, 0.0) for e in ("C", "Cr", "Ni"))
    hottest_bath = quenched.bath_C + (quenched.bath_rise_C or 0.0)
    T = temper.temperature_C
    found = quenched.structure
    expected = found.HRC[0] if found is not None else aim_HRC[1]
    oven = temper.kind
    true = {
        "always": True,
        "oil": kind == "oil",
        "vegetable-oil": medium == "canola",
        "water": medium == "water",
        "brine": medium == "brine",
        "air-quench": kind == "gas",
        "plates": kind == "plates",
        "near-flash": kind == "oil" and (quenched.flash_C is None or hottest_bath > quenched.flash_C - FLASH_MARGIN_K),
        "bath-too-small": bool(
            quenched.volume_L and quenched.volume_needed_L and quenched.volume_L < quenched.volume_needed_L
        ),
        "partial-quench": part.zone != "all",
        "coal-forge": job.heat.kind == "coal-forge",
        "gas-forge": job.heat.kind == "gas-forge",
        "kiln": job.heat.kind == "kiln",
        "salt": job.heat.kind == "salt",
        "torch": job.heat.kind == "torch",
        "kitchen-oven": oven == "kitchen-oven",
        "toaster-oven": oven == "toaster-oven",
        "domestic-oven": oven in ("kitchen-oven", "toaster-oven"),
        "temper-kiln": oven == "kiln",
        "temper-salt": oven == "salt",
        "temper-torch": oven == "torch",
        "residual-heat": oven == "residual-heat",
        "tube": part.shape == "tube",
        **{name: name in part.features for name in ("hole", "sharp-corner", "section-step", "thread", "keyway")},
        "thin": section.thinnest_mm < 3,
        "thin-and-thick": section.width_mm > 2 * section.thinnest_mm,
        **{name: job.heat.atmosphere == name for name in ("foil", "coated", "inert", "reducing")},
        "atmosphere-air": job.heat.atmosphere == "air",
        "no-pyrometer": not job.heat.pyrometer,
        "high-alloy": Cr > 4,
        "never-normalize": steel.normalize == "never",
        "struck": bool(use) and use["struck"] == "yes",
        "shock-high": bool(use) and use["shock"] == "high",
        "spring": bool(use) and use["id"] in ("flat-spring", "coil-spring"),
        "hardness-over-58": max(aim_HRC[1], expected) > 58,
        "untempered": expected >= 50,
        "temper-over-260": T > 260,
        "tempered-martensite-embrittlement": 250 <= T <= 400 and C <= 0.7 and Cr <= 4,
        "temper-embrittlement": 375 <= T <= 575
        and steel.composition.get("Mo", 0.0) < 0.2
        and ((steel.composition.get("Mn", 0.0) > 0.6 and (Cr > 0.2 or Ni > 0.2)) or Cr > 1 or Ni > 1),
        "cold-freezer": cold is not None and job.cold == "freezer",
        "dry-ice": cold is not None and job.cold == "dry-ice",
        "liquid-nitrogen": cold is not None and job.cold == "liquid-nitrogen",
        "fume-over-1000": heat.temperature_C > 1000,
        "forged": part.condition == "forged",
        "unknown-condition": part.condition == "unknown",
        "cold-drawn": part.condition == "cold-drawn",
        "hardened-before": part.condition == "hardened",
        "quantity-over-1": job.quantity > 1,
    }
    return frozenset(name for name, value in true.items() if value)

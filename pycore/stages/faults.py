"""What to do when it comes out soft, hard, bent or cracked."""

from pycore.stages.quench import SURFACE
from pycore.stages.steps import file_skates


def _soft_sign(quenched):
    """How softness shows after the quench: by the file where it should skate, else by the tester."""
    found = quenched.structure
    if found is None or file_skates(found):
        return "File bites before the temper"
    return f"Under {found.low[SURFACE]:.0f} HRC before the temper"


def faults(job, steel, heat, quenched, temper, aim_HRC):
    """What to do if it comes out soft, hard, bent or cracked."""
    again = ("anneal" if steel.normalize == "never" else "normalize") + ", then harden once more"
    slow = {
        "water": "a still or warm bath",
        "oil": "oil too cold and thick, or too little of it",
        "gas": "too thick for air",
        "plates": "scale between the plates",
    }[quenched.kind]
    hotter = "" if temper.reached else f" This oven stops at {job.temper.max_C:g} °C."
    scrap = "Scrap it: no heat closes a crack. Next one: "
    cooler = "10 °C cooler, " if heat.measured_by == "pyrometer" else "a shade cooler, "
    return (
        {
            "sign": _soft_sign(quenched),
            "cause": f"lost skin, too cold, too slow, {slow}",
            "then": f"Stone deeper and test again. Still soft: {again}; twice at most.",
        },
        {
            "sign": f"Over {aim_HRC[1]:g} HRC after it",
            "cause": "the oven reads high",
            "then": f"Temper again 10–15 °C hotter.{hotter}",
        },
        {
            "sign": f"Under {aim_HRC[0]:g} HRC after it",
            "cause": "oven too hot, or soft from the quench",
            "then": f"Tempering cannot bring it back: {again}.",
        },
        {
            "sign": "Bent",
            "cause": "uneven heat, old strain, went in at a slant",
            "then": "True it above 200 °C on the way down, or clamp it past straight in the temper. Never cold.",
        },
        {
            "sign": "Cracked",
            "cause": "too hot, sharp corner, late temper",
            "then": scrap + cooler + "corners rounded, into the temper sooner.",
        },
    )

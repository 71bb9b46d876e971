"""What stands on the heat line, left to right, each with the number of its step."""

from pycore import words
from pycore.stages import say

SHORT = {
    "water": "water",
    "brine": "brine",
    "fast-oil": "oil",
    "medium-oil": "oil",
    "canola": "canola",
    "still-air": "still air",
    "fan-air": "fan air",
    "plates": "plates",
}
CRITICAL = ("austenitize", "soak", "transfer", "quench", "temper", "hold")  # what must be read from across the shop


def stations(job, heat, quenched, cold, temper, listed):
    """What stands on the heat line, left to right, each with the number of its step."""
    number = {step["id"]: step["n"] for step in listed}
    on_line = []

    def add(id_, label, value, unit, other, note, temperature_C, order, why=None):
        on_line.append(
            {
                "id": id_,
                "label": label,
                "value": value,
                "unit": unit,
                "other": other,
                "note": note,
                "temperature_C": temperature_C,
                "order": order,
                "why": why,
            }
        )

    preheats = [step["n"] for step in listed if step["id"] == "preheat"]
    for n, stage in zip(preheats, heat.preheat):
        T = stage["temperature_C"]
        add(
            "preheat",
            "preheat",
            f"{T:.0f}",
            "°C",
            f"{say.fahrenheit(T)} °F",
            f"{stage['hold_min']:.0f} min",
            T,
            n,
        )
    T = heat.temperature_C
    add(
        "austenitize",
        "heat to",
        f"{T:.0f}",
        "°C",
        f"{say.fahrenheit(T)} °F",
        heat.colour,
        T,
        number["austenitize"],
        "austenitize.temperature_C",
    )
    value, unit = say.minutes(heat.soak_min).split(" ")
    add(
        "soak",
        "soak once even",
        value,
        unit,
        "",
        f"{say.minutes(heat.soak_max_min)} at most",
        T,
        number["soak"],
        "austenitize.soak_min",
    )
    walk_value, walk_unit = say.seconds(quenched.transfer_s).split(" ")
    short = SHORT[quenched.medium]
    add(
        "transfer",
        f"fire to {short}",
        walk_value,
        walk_unit,
        "",
        "straight down" if quenched.kind in ("water", "oil") else "",
        None,
        number["transfer"],
        "quench.transfer_s",
    )
    low, high = quenched.bath_window_C
    out = f"out at {quenched.out_of_bath_C:.0f} °C, {say.seconds(quenched.time_in_bath_s)}"
    if quenched.kind in ("water", "oil"):
        add(
            "quench",
            quenched.medium_name,
            say.span(low, high),
            "°C",
            say.span_F(low, high),
            out,
            quenched.bath_C,
            number["transfer"],
            "quench.time_in_bath_s",
        )
    else:
        add(
            "quench",
            short,
            f"{quenched.out_of_bath_C:.0f}",
            "°C",
            f"{say.fahrenheit(quenched.out_of_bath_C)} °F",
            f"after {say.seconds(quenched.time_in_bath_s)}",
            quenched.out_of_bath_C,
            number["out"],
            "quench.time_in_bath_s",
        )
    if cold is not None:
        add(
            "cold",
            words.COLDS[job.cold],
            f"{cold.temperature_C:.0f}".replace("-", "−"),
            "°C",
            f"{say.fahrenheit(cold.temperature_C)} °F".replace("-", "−"),
            say.minutes(cold.hold_min),
            cold.temperature_C,
            number["cold"],
            "cold.temperature_C",
        )
    T = temper.temperature_C
    add(
        "temper",
        "temper at",
        f"{T:.0f}",
        "°C",
        f"{say.fahrenheit(T)} °F",
        temper.colour or "",
        T,
        number["temper"],
        "temper.temperature_C",
    )
    value, unit = say.hold(temper.hold_min, temper.cycles)
    add(
        "hold",
        "hold",
        value,
        unit,
        "",
        "cool between" if temper.cycles > 1 else "once through",
        T,
        number["temper"],
        "temper.hold_min",
    )
    return tuple(on_line)

"""Numbers and texts of a plan as they stand on paper: rounded, with units, never a bare null."""
import math
import re

NOT_COMPUTED = "not computed"
WHOLE = 19        # a part of a line of this many characters or fewer is never broken


def is_number(value):
    """A finite number (and not a truth value)."""
    return isinstance(value, (int, float)) and not isinstance(value, bool) and math.isfinite(value)


def clean(value):
    """Any value of a plan as one line of text; null, NaN and the like become nothing."""
    if value is None or isinstance(value, bool):
        return ""
    if isinstance(value, (int, float)):
        return number(value) if math.isfinite(value) else ""
    if isinstance(value, str):
        return re.sub(r"(?<![\w.])-(?=\d)", "−", " ".join(value.split()))    # a real minus sign
    if isinstance(value, (list, tuple)):
        return ", ".join(part for part in map(clean, value) if part)
    return ""


UNIT_AFTER_NUMBER = re.compile(r"(?<=\d) (?=(?:°C|°F|%|mm|cm|kg|in|min|h|s|L|HRC)(?!\w))")


def bound(text):
    """`text` with every number held to its unit by a space that does not break."""
    return UNIT_AFTER_NUMBER.sub("\u00a0", text)


def number(value, digits=3):
    """A number to three figures, no trailing zeros, a real minus sign."""
    if not is_number(value):
        return NOT_COMPUTED
    if value == 0:
        return "0"
    places = max(0, digits - 1 - math.floor(math.log10(abs(value))))
    text = f"{value:.{places}f}"
    if "." in text:
        text = text.rstrip("0").rstrip(".")
    return "0" if text in ("-0", "0") else text.replace("-", "−")


def fahrenheit(temperature_C, step=5):
    """°F rounded to the nearest 5, as a smith sets it."""
    return round((temperature_C * 9 / 5 + 32) / step) * step


def both_units(temperature_C):
    """"770 °C · 1420 °F"."""
    if not is_number(temperature_C):
        return NOT_COMPUTED
    return f"{number(round(temperature_C))} °C · {number(fahrenheit(temperature_C), 4)} °F"


def seconds(value_s):
    """A time in seconds as a shop says it: long ones in minutes or hours."""
    if not is_number(value_s):
        return NOT_COMPUTED
    if value_s < 120:
        return f"{number(value_s)} s"
    return f"{number(value_s / 60, 2)} min" if value_s < 7200 else f"{number(value_s / 3600, 2)} h"


def span(low, high):
    """"56–59", or one number where both round to the same."""
    if not is_number(low) or not is_number(high):
        return NOT_COMPUTED
    a, b = number(low), number(high)
    if a == b:
        return a
    return f"{a} to {b}" if "−" in a + b else f"{a}–{b}"


def HRC(value):
    """A hardness to half a point."""
    return number(round(value * 2) / 2) if is_number(value) else NOT_COMPUTED


def HRC_range(band):
    """"56–59" from {"low", "mid", "high"}, whole points, outward."""
    hrc = (band or {}).get("HRC") if isinstance(band, dict) else None
    low, high = (hrc or {}).get("low"), (hrc or {}).get("high")
    if not is_number(low) or not is_number(high):
        return NOT_COMPUTED
    return span(math.floor(low + 0.25), math.ceil(high - 0.25))


def HRC_middle(band):
    hrc = (band or {}).get("HRC") if isinstance(band, dict) else None
    middle = (hrc or {}).get("mid")
    return number(round(middle)) if is_number(middle) else NOT_COMPUTED

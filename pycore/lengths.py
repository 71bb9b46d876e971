"""Lengths as people type them: 19, 19mm, 3/4, 1 1/2 in, 0.75"."""

import re

MM_PER_INCH = 25.4  # exact, international inch 1959
_NUMBER = r"(?:\d+(?:[.,]\d+)?|[.,]\d+)"
_SHAPE = re.compile(
    rf"^\s*(?:(?P<whole>\d+)[\s-]+)?(?:(?P<top>\d+)\s*/\s*(?P<bottom>\d+)|(?P<plain>{_NUMBER}))"
    r"\s*(?P<unit>mm|cm|in|inch|inches|\"|″|”)?\s*$",
    re.IGNORECASE,
)
EXPECTED = "a length such as 20, 19mm, 3/4 in or 1 1/2 in"


def parse_length_mm(text, units="mm"):
    """Length in mm from typed text; bare numbers take `units` ("mm" or "in"). ValueError if it is no length."""
    found = _SHAPE.match(text)
    if not found or (found["whole"] and found["plain"]):
        raise ValueError(EXPECTED)
    if found["top"]:
        if int(found["bottom"]) == 0:
            raise ValueError(EXPECTED)
        value = int(found["whole"] or 0) + int(found["top"]) / int(found["bottom"])
    else:
        value = float(found["plain"].replace(",", "."))
    unit = (found["unit"] or units).lower()
    return value * {"mm": 1.0, "cm": 10.0}.get(unit, MM_PER_INCH)


def show_length(value_mm, units="mm"):
    """A length in the shop's unit: 20 mm, or the nearest 1/64 in as a reduced fraction."""
    if units != "in":
        return f"{value_mm:.1f}".rstrip("0").rstrip(".") + " mm"
    sixty_fourths = round(value_mm / MM_PER_INCH * 64)
    if sixty_fourths == 0 or abs(sixty_fourths / 64 * MM_PER_INCH - value_mm) > 0.06:
        return f"{value_mm / MM_PER_INCH:.3f}".rstrip("0").rstrip(".") + " in"
    whole, rest = divmod(sixty_fourths, 64)
    bottom = 64
    while rest and rest % 2 == 0:
        rest, bottom = rest // 2, bottom // 2
    parts = ([str(whole)] if whole or not rest else []) + ([f"{rest}/{bottom}"] if rest else [])
    return " ".join(parts) + " in"

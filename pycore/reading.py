"""Reading fields out of untrusted dictionaries: every fault is remembered with its path, none stops the reading."""

import math

from pycore import words
from pycore.errors import Fault
from pycore.lengths import EXPECTED as LENGTH_EXPECTED
from pycore.lengths import parse_length_mm

LONGEST_TEXT = 200
SMALLEST_MM, LARGEST_MM = 0.3, 1000.0


class Reader:
    """Reads fields of nested dictionaries and remembers every fault on the way."""

    def __init__(self):
        self.faults = []

    def fault(self, path, value, expected):
        self.faults.append(Fault(path, value, expected))

    def section(self, holder, name, path, required=True):
        value = holder.get(name) if isinstance(holder, dict) else None
        if isinstance(value, dict):
            return value
        if value is not None or required:
            self.fault(path, value, "an object with named fields")
        return {}

    def text(self, holder, name, path, default=""):
        value = holder.get(name)
        if value is None:
            return default
        if not isinstance(value, str) or len(value) > LONGEST_TEXT:
            self.fault(path, value, f"text of at most {LONGEST_TEXT} characters")
            return default
        # Control characters and halves of surrogate pairs have no place on paper and cannot be written to a file.
        return " ".join("".join(c if c.isprintable() else " " for c in value).split())

    def word(self, holder, name, path, allowed, default=None):
        value = holder.get(name)
        if value in (None, ""):
            if default is None:
                self.fault(path, None, "one of " + ", ".join(allowed))
            return default
        found = words.find_word(value, allowed) if isinstance(value, str) else None
        if found is None:
            self.fault(path, value, "one of " + ", ".join(allowed))
        return found

    def number(self, holder, name, path, low, high, unit, required=False, whole=False):
        value = holder.get(name)
        if value is None or (isinstance(value, str) and not value.strip()):
            if required:
                self.fault(path, None, _range_text(low, high, unit, whole))
            return None
        parsed = as_number(value)
        if parsed is None or not low <= parsed <= high or (whole and parsed != int(parsed)):
            self.fault(path, value, _range_text(low, high, unit, whole))
            return None
        return int(parsed) if whole else parsed

    def length(self, holder, name, path, units, low=SMALLEST_MM, high=LARGEST_MM, required=False):
        value = holder.get(name)
        expected = f"a length from {low:g} to {high:g} mm, such as 20, 19mm or 3/4 in"
        if value is None or (isinstance(value, str) and not value.strip()):
            if required:
                self.fault(path, None, expected)
            return None
        if isinstance(value, str):
            try:
                parsed = parse_length_mm(value, units)
            except ValueError:
                self.fault(path, value, LENGTH_EXPECTED)
                return None
        else:
            parsed = as_number(value)
        if parsed is None or not low <= parsed <= high:
            self.fault(path, value, expected)
            return None
        return round(parsed, 4)


def as_number(value):
    """A finite number from a number or typed text, else None. True and False are not numbers here."""
    if isinstance(value, bool):
        return None
    if isinstance(value, str):
        try:
            value = float(value.strip().replace(",", "."))
        except ValueError:
            return None
    if isinstance(value, (int, float)):
        try:
            value = float(value)
        except OverflowError:
            return None
        return value if math.isfinite(value) else None
    return None


def _range_text(low, high, unit, whole):
    kind = "a whole number" if whole else "a number"
    return f"{kind} from {low:g} to {high:g}{' ' + unit if unit else ''}"

"""One error type for everything a user can get wrong: it carries every fault at once."""

import math


class Fault:
    """One thing wrong with the input: where, what was given, what would be accepted."""

    __slots__ = ("expected", "path", "value")

    def __init__(self, path, value, expected):
        self.path, self.value, self.expected = writable(path), value, expected

    @property
    def message(self):
        if self.value is None:
            return f"{self.path}: missing; give {self.expected}"
        return f"{self.path}: {show(self.value)} is not accepted; give {self.expected}"

    def to_json(self):
        return {"path": self.path, "value": plain(self.value), "expected": self.expected, "message": self.message}

    def __repr__(self):
        return f"Fault({self.message!r})"


class InputErrors(ValueError):
    """Raised once, with all faults found, so that nobody mends one field only to meet the next."""

    def __init__(self, faults):
        self.faults = tuple(faults)
        super().__init__("; ".join(fault.message for fault in self.faults))

    def to_json(self):
        return [fault.to_json() for fault in self.faults]


def writable(text):
    """Text that any file can take: halves of surrogate pairs, legal in JSON, become a question mark."""
    return text.encode("utf-8", "replace").decode("utf-8")


def show(value, longest=60):
    """A value as it may stand in a message: short, and never markup of its own."""
    text = writable(value if isinstance(value, str) else repr(value))
    text = " ".join(text.split())
    return (
        repr(text if len(text) <= longest else text[: longest - 1] + "…")
        if isinstance(value, str)
        else (text if len(text) <= longest else text[: longest - 1] + "…")
    )


def plain(value):
    """A faulty value made safe for strict JSON (NaN and foreign types become text)."""
    if isinstance(value, float) and not math.isfinite(value):
        return str(value)
    if value is None or isinstance(value, (bool, int, float)):
        return value
    return writable(value[:200]) if isinstance(value, str) else show(value, 200)

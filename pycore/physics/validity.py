"""Ranges of validity a machine can read: each model names its own, the stages mark what lies outside."""

import numpy as np


def outside(values, ranges):
    """Which of `values` lie outside `ranges`.

    Inputs: values {name: number or array, unit of the range}; ranges {name: (low, high)}.
    Returns: a tuple of (name, value, low, high) for each name out of range (the worst value of an array).
    Valid: any finite numbers. Raises: nothing.
    Source: bookkeeping of our own; the ranges come from the models' own publications.
    """
    found = []
    for name, (low, high) in ranges.items():
        value = np.atleast_1d(np.asarray(values.get(name, 0.0), float))
        lowest, highest = float(value.min()), float(value.max())
        if lowest < low - 1e-9:
            found.append((name, lowest, low, high))
        elif highest > high + 1e-9:
            found.append((name, highest, low, high))
    return tuple(found)


def say(found):
    """The ranges left, as one phrase for a mark: "C 1 (0.1 to 0.65)".

    Inputs: found, what `outside` returned. Returns: text. Valid: any. Raises: nothing. Source: wording of our own.
    """
    return ", ".join(f"{name} {value:.3g} ({low:g} to {high:g})" for name, value, low, high in found)

"""Lengths as people type them, and as the sheet tells them."""

import pytest

from pycore.lengths import parse_length_mm, show_length


@pytest.mark.parametrize(
    ("typed", "units", "mm"),
    [
        ("19", "mm", 19), ("19mm", "in", 19), ("19 mm", "mm", 19), ("1.9cm", "mm", 19), ("3/4", "in", 19.05),
        ("3/4", "mm", 0.75), ("3/4 in", "mm", 19.05), ('3/4"', "mm", 19.05), ("1 1/2 in", "mm", 38.1), ("1-1/2in", "mm", 38.1),
        ("0.75", "in", 19.05), ('.75"', "mm", 19.05), ("19,5", "mm", 19.5), ("2 inches", "mm", 50.8), ("  20  ", "mm", 20),
        ("1 INCH", "mm", 25.4), ("5″", "mm", 127),
    ],
)  # fmt: skip
def test_typed_lengths(typed, units, mm):
    assert parse_length_mm(typed, units) == pytest.approx(mm)


@pytest.mark.parametrize(
    "typed", ["", "abc", "1/0", "-3", "1 2", "3//4", "1 1.5", "5 m", "5 ft", "1e3", "nan", "inf", "1/2/3", "<b>5</b>", "5 mm mm"]
)
def test_what_is_no_length(typed):
    with pytest.raises(ValueError, match="a length such as"):
        parse_length_mm(typed)


@pytest.mark.parametrize(
    ("mm", "units", "shown"),
    [
        (20, "mm", "20 mm"), (19.05, "mm", "19.1 mm"), (19.05, "in", "3/4 in"), (38.1, "in", "1 1/2 in"), (25.4, "in", "1 in"),
        (4.7625, "in", "3/16 in"), (228.6, "in", "9 in"), (0.5, "in", "0.02 in"), (20, "in", "0.787 in"),
    ],
)  # fmt: skip
def test_shown_lengths(mm, units, shown):
    assert show_length(mm, units) == shown


@pytest.mark.parametrize("units", ["mm", "in"])
def test_shown_is_readable_again(units):
    for mm in (0.8, 3.175, 6.35, 12.7, 19.05, 25.4, 31.75, 100.0, 254.0):
        assert parse_length_mm(show_length(mm, units), units) == pytest.approx(mm, abs=0.06)

"""The tables of the house. Every row carries its source; nothing is computed here."""

import csv
import functools
import json
import pathlib

FOLDER = pathlib.Path(__file__).parent


@functools.cache
def table(name):
    """Rows of `name`.csv as dictionaries of text, in file order."""
    with open(FOLDER / f"{name}.csv", encoding="utf-8", newline="") as file:
        return tuple(csv.DictReader(file))


@functools.cache
def toml(name):
    """The contents of `name`.toml."""
    import tomllib  # only the cautions need it

    with open(FOLDER / f"{name}.toml", "rb") as file:
        return tomllib.load(file)


def demo_job():
    """The job the page starts with: invented, our own."""
    return json.loads((FOLDER / "demo_job.json").read_text(encoding="utf-8"))


@functools.cache
def columns(name, *wanted):
    """Numeric columns of a table as tuples, rows with a blank in any of them left out."""
    rows = [[row[w] for w in wanted] for row in table(name)]
    rows = [[float(cell) for cell in row] for row in rows if all(cell.strip() for cell in row)]
    return tuple(zip(*rows))


def number(text):
    """A cell as a number, or None where it is blank."""
    return float(text) if text is not None and text.strip() else None

"""Every public function and class of physics says what goes in, what comes out in which unit, where it holds, and whence."""

import importlib
import inspect
import pkgutil
import re

import pytest

import pycore.physics

PARTS = ("Inputs", "Returns", "Valid", "Raises", "Source")
# A unit, a dimensionless sign, or a thing that has none.
UNIT = re.compile(
    r"°C|\bK\b|kelvin|\bmm\b|\bm2\b|mm3|\binches\b|\bin\b|1/16 in|\bs\b|\bmin\b|hours|J/kg|kJ/kg|W/m|\bkg\b|\bL\b|HRC|\bHV\b|MPa|wt %|1/s"
    r"|(^|, )-[.,;]|fraction|factor|text|tuple of|Material|0 to 1"
)


def functions():
    for info in pkgutil.iter_modules(pycore.physics.__path__):
        module = importlib.import_module(f"pycore.physics.{info.name}")
        for name, thing in vars(module).items():
            if name.startswith("_") or getattr(thing, "__module__", None) != module.__name__:
                continue
            if callable(thing) and inspect.isfunction(inspect.unwrap(thing)):
                yield pytest.param(inspect.unwrap(thing), id=f"{info.name}.{name}")


def modules():
    return [importlib.import_module(f"pycore.physics.{info.name}") for info in pkgutil.iter_modules(pycore.physics.__path__)]


@pytest.mark.parametrize("function", list(functions()))
def test_docstring_is_complete(function):
    text = inspect.getdoc(function) or ""
    for part in PARTS:
        assert re.search(rf"\b{part}:\s+\S", text), f"{part}: is missing"
    order = [re.search(rf"\b{part}:\s", text).start() for part in PARTS]
    assert order == sorted(order), "in the order " + ", ".join(PARTS)
    for name in inspect.signature(function).parameters:
        inputs = text[order[0] : order[1]]
        assert re.search(rf"\b{re.escape(name)}\b", inputs) or "as " in inputs, f"input {name} is not told"
    returns = re.search(r"Returns:\s+(.*?)(?=\s+(?:Valid|Raises|Source):)", text, re.DOTALL)[1]
    assert UNIT.search(returns), f"no unit: {returns}"
    source = text[text.index("Source:") :]
    assert len(source) > 20, "a source worth the name"


@pytest.mark.parametrize("module", modules(), ids=lambda m: m.__name__.rpartition(".")[2])
def test_module_says_what_it_is_about(module):
    assert len(inspect.getdoc(module) or "") > 20


def test_the_walk_finds_them():
    assert len(list(functions())) > 40


def test_raised_errors_are_told():
    """A function whose text raises must name the error; one whose text does not must say nothing."""
    for param in functions():
        function = param.values[0]
        raises = re.search(r"\braise (\w+)", inspect.getsource(function))
        told = re.search(r"Raises:\s+(\w+)", inspect.getdoc(function))[1]
        if raises:
            assert told == raises[1], param.id

"""Who may import whom: data under physics under stages under plan; the sheet reads a finished plan and nothing below."""

import ast
import pathlib
import sys

import pytest

import pycore

ROOT = pathlib.Path(pycore.__file__).parent
STDLIB = set(sys.stdlib_module_names)
# Folder or file -> what of the house, and of the outside, it may import.
ALLOWED = {
    "data": (set(), set()),
    "physics": ({"pycore.data", "pycore.physics"}, {"numpy"}),
    "stages": ({"pycore.data", "pycore.physics", "pycore.stages", "pycore.words", "pycore.lengths"}, {"numpy"}),
    "sheet": ({"pycore.sheet", "pycore.errors", "pycore.lengths"}, {"jinja2", "markupsafe"}),
    "errors.py": (set(), set()),
    "lengths.py": (set(), set()),
    "words.py": ({"pycore.data"}, set()),
    "reading.py": ({"pycore.errors", "pycore.lengths", "pycore.words"}, set()),
    "job.py": ({"pycore.data", "pycore.errors", "pycore.lengths", "pycore.words", "pycore.reading"}, set()),
    "plan.py": ({"pycore", "pycore.job", "pycore.stages"}, {"numpy"}),
    "api.py": ({"pycore", "pycore.data", "pycore.errors", "pycore.job", "pycore.plan", "pycore.reading", "pycore.sheet", "pycore.words"}, set()),
    "__main__.py": ({"pycore", "pycore.errors", "pycore.plan", "pycore.sheet"}, set()),
    "__init__.py": (set(), set()),
}
MODULES = sorted(path.relative_to(ROOT) for path in ROOT.rglob("*.py"))


def imported(path):
    """Every module named in an import, at the top or inside a function, as an absolute dotted name."""
    package = ["pycore", *path.parts[:-1]]
    for node in ast.walk(ast.parse((ROOT / path).read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            yield from (name.name for name in node.names)
        elif isinstance(node, ast.ImportFrom):
            base = package[: len(package) - node.level + 1] if node.level else []
            module = ".".join([*base, *([node.module] if node.module else [])])
            for name in node.names:
                inner = f"{module}.{name.name}"
                file = ROOT.parent.joinpath(*inner.split("."))
                yield inner if file.is_dir() or file.with_suffix(".py").exists() else module


@pytest.mark.parametrize("path", MODULES, ids=str)
def test_imports_point_downwards(path):
    house, outside = ALLOWED[path.parts[0]]
    for name in imported(path):
        top = name.split(".")[0]
        if top == "pycore":
            assert any(name == ok or (ok != "pycore" and name.startswith(ok + ".")) for ok in house), f"{path} imports {name}"
        else:
            assert top in STDLIB or top in outside, f"{path} imports {name}"


def test_every_place_of_the_house_has_its_rule():
    """A new file or folder must say here what it may import."""
    assert {path.parts[0] for path in MODULES} <= set(ALLOWED)


def test_no_circles():
    """No module reaches itself through its imports."""
    names = {".".join(["pycore", *path.with_suffix("").parts]).removesuffix(".__init__"): path for path in MODULES}
    graph = {name: {other for other in imported(path) if other in names and other != name} for name, path in names.items()}
    state = {}

    def visit(name, trail):
        assert state.get(name) != "open", " -> ".join([*trail, name])
        if name in state:
            return
        state[name] = "open"
        for other in graph[name]:
            if other not in ("pycore", name.rpartition(".")[0]):  # a package's own __init__ is no circle
                visit(other, [*trail, name])
        state[name] = "done"

    for name in graph:
        visit(name, [])

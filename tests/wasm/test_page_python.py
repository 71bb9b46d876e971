"""The Python that is packed into the page: trimmed, compiled, and still the same core."""

import json
import math
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]
PARTS = ROOT / ".cache" / "work" / "parts"
TREES = ("numpy", "jinja2", "markupsafe", "core")


@pytest.fixture(scope="module")
def in_page(exercise, tmp_path_factory):
    """The exercise on exactly the parts that the page holds."""
    out = tmp_path_factory.mktemp("page") / "exercise.json"
    return exercise(PARTS / "stdlib.zip", [PARTS / f"{name}.tree" for name in TREES], out)


@pytest.fixture(scope="module")
def natively():
    """The same exercise in this Python."""
    sys.path.insert(0, str(ROOT / "web" / "build"))
    from exercise import exercise as run

    return json.loads(run())


def test_the_parts_are_the_ones_in_the_page(embedded):
    from steps import sha256

    for name in TREES:
        assert embedded["parts"][name]["sha256"] == sha256(PARTS / f"{name}.tree")
    assert embedded["parts"]["stdlib"]["sha256"] == sha256(PARTS / "stdlib.zip")


def test_what_was_kept_covers_a_full_run(in_page):
    from parts import unzipped

    kept = {name.removesuffix(".pyc").removesuffix("/__init__") for name in unzipped(PARTS / "stdlib.zip")}
    zipped = {path.split("python312.zip/")[1] for path in in_page["files"] if "python312.zip/" in path}
    used = {name.removesuffix(".pyc").removesuffix("/__init__") for name in zipped}
    assert len(used) > 100
    assert used <= kept


def test_no_way_into_the_core_lacks_a_module(in_page):
    text = json.dumps(in_page["answers"])
    assert "ModuleNotFoundError" not in text
    assert "ImportError" not in text


def test_the_ways_in_answer_as_they_should(in_page):
    answers = in_page["answers"]
    expected = {"no job": False, "bad file": False, "no json": False, "no such request": False, "a bug": False}
    for name, answer in answers.items():
        if name in expected or name.split(" ")[0] in ("demo", "save", "open"):
            assert answer["ok"] is expected.get(name, True), (name, str(answer)[:400])
    assert "ZeroDivisionError" in answers["a bug"]["bug"]["what"]


def test_wasm_and_native_agree(in_page, natively):
    assert in_page["answers"].keys() == natively["answers"].keys()
    for name, answer in natively["answers"].items():
        same(in_page["answers"][name], answer, name)


def same(wasm, native, path):
    """Equal structure and text; numbers equal but for the two C libraries' last digits."""
    if path.endswith((".versions", ".sheet", ".html", ".bug")):
        return  # rounded text of the same numbers; the numbers themselves are compared
    if isinstance(native, dict):
        assert wasm.keys() == native.keys(), path
        for key in native:
            same(wasm[key], native[key], f"{path}.{key}")
    elif isinstance(native, list):
        assert len(wasm) == len(native), path
        for number, (one, other) in enumerate(zip(wasm, native, strict=True)):
            same(one, other, f"{path}[{number}]")
    elif isinstance(native, float) and isinstance(wasm, int | float):
        assert math.isclose(wasm, native, rel_tol=1e-6, abs_tol=1e-6), (path, wasm, native)
    else:
        assert wasm == native, path

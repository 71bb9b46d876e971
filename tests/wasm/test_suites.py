"""The core's own tests, run once more inside Pyodide: the Python that the page runs."""

import json
import re
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]
WORK = ROOT / ".cache" / "work"
# Files that as a whole need more than numpy say so with `pytestmark = pytest.mark.native`.
WHOLLY_NATIVE = re.compile(r"^pytestmark = .*\bnative\b", re.MULTILINE)


@pytest.fixture(scope="module")
def pytest_in_wasm(node):
    """Run pytest inside Pyodide on paths below a folder; return its counts."""
    import fetch
    import steps

    source = fetch.Wheels(steps.Steps(0), node)
    wheels = [*source.listed_for("wasm-tests"), source.runtime()["packaging"]]
    trees = [WORK / f"whole-{name}.tree" for name in ("numpy", "jinja2", "markupsafe")]

    def run(repo: Path, out: Path, *args: str) -> dict:
        command = [node, ROOT / "web" / "build" / "wasm_tests.mjs", fetch.RUNTIME, repo, out,
                   ":".join(map(str, wheels)), ":".join(map(str, trees)), *args]
        done = subprocess.run(command, text=True, capture_output=True, check=False)
        assert done.returncode == 0, (done.stdout + done.stderr)[-4000:]
        return json.loads(out.read_text())

    return run


def numpy_only(folder: str) -> list[str]:
    """The test files of a folder that need only numpy, as pytest arguments."""
    files = sorted((ROOT / "tests" / folder).rglob("test_*.py"))
    return [str(path.relative_to(ROOT)) for path in files if not WHOLLY_NATIVE.search(path.read_text())]


@pytest.mark.parametrize("folder", ["core", "published"])
def test_the_suite_passes_inside_pyodide(folder, pytest_in_wasm, tmp_path):
    files = numpy_only(folder)
    assert files, f"no test file of tests/{folder} can run inside Pyodide"
    counts = pytest_in_wasm(ROOT, tmp_path / "counts.json", *files)
    sys.stdout.write(f"tests/{folder} inside Pyodide: {counts}\n")
    assert not counts["failures"], "\n\n".join(counts["failures"])
    assert counts["code"] == 0
    assert counts["passed"] > 0


def test_a_failing_test_fails_there(pytest_in_wasm, tmp_path):
    (tmp_path / "test_wrong.py").write_text(
        "import numpy\n"
        "def test_right(): assert numpy.arange(3).sum() == 3\n"
        "def test_wrong(): assert numpy.arange(3).sum() == 4\n")
    counts = pytest_in_wasm(tmp_path, tmp_path / "counts.json", "test_wrong.py")
    assert (counts["code"], counts["passed"], counts["failed"]) == (1, 1, 1)
    assert "test_wrong" in counts["failures"][0]

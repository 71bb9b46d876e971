"""What the tests of this folder share: the build's helpers, and what a build has left behind."""

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]
HELPERS = ROOT / "web" / "build"
WORK = ROOT / ".cache" / "work"
sys.path.insert(0, str(HELPERS))


@pytest.fixture(scope="session")
def node():
    """The Node that the build uses."""
    import fetch

    return os.environ.get("QUENCHWRIGHT_NODE") or fetch.find_node().node


@pytest.fixture(scope="session")
def page():
    """The built page's text."""
    return (ROOT / "dist" / "quenchwright.html").read_text()


@pytest.fixture(scope="session")
def embedded(page):
    """The page's index of what is packed into it."""
    block = page.split('<script type="application/json" id="embedded-index">')[1].split("</script>")[0]
    return json.loads(block)


@pytest.fixture(scope="session")
def exercise(node):
    """Run the exercise inside Pyodide on a library and trees; return what it says."""
    import fetch

    def run(stdlib: Path, trees: list[Path], out: Path) -> dict:
        done = subprocess.run([node, HELPERS / "exercise.mjs", fetch.RUNTIME, stdlib, out, *trees],
                              text=True, capture_output=True, check=False)
        assert done.returncode == 0, done.stdout + done.stderr
        return json.loads(out.read_text())

    return run

"""The page's side of the worker, tested under Node without Pyodide."""

import subprocess
from pathlib import Path

import pytest

HERE = Path(__file__).parent


@pytest.mark.parametrize("name", sorted(path.name for path in HERE.glob("*.test.mjs")))
def test_script(name, node):
    done = subprocess.run([node, "--test", HERE / name], text=True, capture_output=True, check=False, timeout=120)
    assert done.returncode == 0, done.stdout + done.stderr

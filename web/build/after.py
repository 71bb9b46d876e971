"""What build.py does after a build: test, bench, truth, picture."""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path

import browser
import fetch
import plain
from steps import CACHE, ROOT, Stop

HERE = Path(__file__).resolve().parent
DEMO_SHEET = ROOT / "dist" / "demo-sheet.html"


def test(build, rest: list[str]) -> int:
    """ruff, then every test in one pytest run; its last line is the total."""
    chromium = browser.find_chromium()
    fetch.Wheels(build.steps, build.node.node, build.given).listed_for("wasm-tests")
    print("\nruff")
    if _python("-m", "ruff", "check", "."):
        return 1
    print("\npicture")
    _picture(chromium, ROOT / "dist" / "demo-sheet.png")
    print("\npytest")
    return _python("-m", "pytest", *rest, env=_environment(build, chromium))


def bench(build, rest: list[str]) -> int:
    """The table of budgets."""
    chromium = browser.find_chromium()
    page = CACHE / "work" / "plain.html"
    plain.make(build, page)
    return _python(HERE / "bench.py", page, chromium)


def truth(build, rest: list[str]) -> int:
    """The models' errors against published figures, one by one."""
    return _python(ROOT / "tests" / "published" / "truth.py", env={**os.environ, "PYTHONPATH": str(ROOT)})


def picture(build, rest: list[str]) -> int:
    """The demo's sheet as the README shows it."""
    _picture(browser.find_chromium(), ROOT / "web" / "demo-sheet.png")
    return 0


def _picture(chromium: str, target: Path) -> None:
    if _python(HERE / "picture.py", DEMO_SHEET, target, chromium):
        raise Stop("The picture of the demo's sheet could not be made.")
    print(f"{target.relative_to(ROOT)}  {target.stat().st_size / 1000:.0f} kB")


def _environment(build, chromium: str) -> dict[str, str]:
    """How the tests find the tools that the build found."""
    return {**os.environ, "CHROMIUM": chromium, "QUENCHWRIGHT_NODE": build.node.node}


def _python(*arguments, env: dict | None = None) -> int:
    sys.stdout.flush()
    return subprocess.run([str(fetch.PYTHON), *map(str, arguments)], cwd=ROOT, env=env, check=False).returncode

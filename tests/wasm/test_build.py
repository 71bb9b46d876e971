"""The built page as a file: its policy, its size, its parts, and that a second build makes the same bytes."""

import base64
import gzip
import hashlib
import os
import re
import shutil
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]
CODE = re.compile(r"<script>(.*?)</script>", re.DOTALL)


def test_size(page):
    assert len(page.encode()) <= 12_000_000


def test_the_policy_allows_the_one_script_and_no_network(page):
    policy = re.search(r'http-equiv="Content-Security-Policy" content="([^"]*)"', page)[1]
    rules = dict(rule.split(" ", 1) for rule in policy.split("; "))
    scripts = CODE.findall(page)
    assert len(scripts) == 1
    digest = base64.b64encode(hashlib.sha256(scripts[0].encode()).digest()).decode()
    assert rules["script-src"] == f"'sha256-{digest}' 'wasm-unsafe-eval'"
    assert rules["default-src"] == rules["base-uri"] == rules["form-action"] == "'none'"
    assert rules["worker-src"] == "blob:"
    assert "connect-src" not in rules
    assert page.index("Content-Security-Policy") < page.index("<script")


def test_the_page_names_nothing_to_load(page):
    assert not re.search(r"""<(?:script|link|img|iframe)\b[^>]*\b(?:src|href)\s*=\s*["']?(?!data:)[^"'>\s]""", page)
    assert "@import" not in page
    assert "<!--@" not in page


def test_every_part_has_its_size_and_hash(page, embedded):
    for name, entry in embedded["parts"].items():
        block = page.split(f'<script type="text/plain" id="embedded-{name}">')[1].split("</script>")[0]
        data = gzip.decompress(base64.b64decode(block))
        assert len(data) == entry["bytes"]
        assert hashlib.sha256(data).hexdigest() == entry["sha256"]


def test_the_frozen_lock_holds_the_four_packages(embedded):
    assert set(embedded["lock"]["packages"]) == {"numpy", "jinja2", "markupsafe", "quenchwright"}


def test_licences_of_what_is_inside(page):
    text = page.split('<script type="text/plain" id="licences">')[1].split("</script>")[0]
    for word in ("Mozilla Public License", "PYTHON SOFTWARE FOUNDATION", "NumPy Developers", "Pallets",
                 "SIL OPEN FONT LICENSE", "Emscripten", "zlib", "libffi"):
        assert word.lower() in text.lower(), word


def test_lock_files_name_no_registry():
    lock = (ROOT / "web" / "package-lock.json").read_text()
    assert '"resolved"' not in lock
    assert '"integrity"' in lock


@pytest.mark.parametrize("broken", ["no marker", "marker twice", "unknown marker"])
def test_a_template_with_wrong_markers_stops_the_build(broken):
    import pack
    from steps import Stop

    template = {"no marker": "<p>", "marker twice": "<!--@csp--><!--@csp-->", "unknown marker": "<!--@csp--><!--@x-->"}
    with pytest.raises(Stop, match=r"web/index\.html"):
        pack.fill(template[broken], {"csp": "policy"})


def test_a_wrong_checksum_stops_the_build(tmp_path):
    import fetch
    from steps import Stop

    path = tmp_path / "numpy.whl"
    path.write_bytes(b"not numpy")
    with pytest.raises(Stop, match=r"expected sha256 0{64}\n.*found    sha256 [0-9a-f]{64}"):
        fetch.check(path, "0" * 64)
    assert not path.exists()


def test_a_second_build_from_scratch_makes_the_same_bytes(page, tmp_path):
    """A copy of the sources, with the downloads but nothing that was made from them."""
    copy = tmp_path / "copy"
    shutil.copytree(ROOT, copy, ignore=shutil.ignore_patterns(
        ".git", ".venv", ".cache", "dist", "node_modules", "__pycache__", ".*_cache", ".hypothesis"))
    (copy / ".cache").mkdir()
    for shared in (".venv", ".cache/wheels", "web/node_modules"):
        (copy / shared).symlink_to(ROOT / shared)
    done = subprocess.run([sys.executable, "build.py"], cwd=copy, text=True, capture_output=True, check=False,
                          env={**os.environ, "PYTHONHASHSEED": "123"})
    assert done.returncode == 0, done.stdout + done.stderr
    assert (copy / "dist" / "quenchwright.html").read_text() == page
    assert (copy / "dist" / "demo-sheet.html").read_bytes() == (ROOT / "dist" / "demo-sheet.html").read_bytes()

"""Collects the licence texts of everything the page holds."""

from __future__ import annotations

from pathlib import Path

import parts
from steps import ROOT

FOLDER = Path(__file__).resolve().parents[1] / "licences"


def texts(build) -> str:
    """One plain text: a heading and the licence for each bundled thing."""
    chapters = [(path.stem, path.read_text("utf-8")) for path in sorted(FOLDER.glob("*.txt"))]
    for wheel in (build.own["numpy"], build.jinja2, build.markupsafe):
        files = parts.unzipped(wheel)
        chapters += [(f"{wheel.name.split('-')[0]}: {Path(name).name}", data.decode())
                     for name, data in sorted(files.items())
                     if ".dist-info/" in name and "LICEN" in Path(name).name.upper()]
    chapters += [(f"font: {path.name}", path.read_text("utf-8"))
                 for path in sorted((ROOT / "pycore" / "sheet" / "fonts").glob("*.txt"))]
    return "\n\n".join(f"===== {title} =====\n\n{text.strip()}" for title, text in chapters) + "\n"

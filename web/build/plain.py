"""Makes the plain page: the runtime as its package ships it, packed the way ours is, nothing of ours in it."""

from __future__ import annotations

import json
from pathlib import Path

import fetch
import pack

FOLDER = Path(__file__).resolve().parent / "plain"


def make(build, target: Path) -> None:
    """Write the page that ``build.py bench`` measures ours against."""
    lock = json.loads((fetch.RUNTIME / "pyodide-lock.json").read_text("utf-8"))
    script = build.bundle(FOLDER / "main.js", "plain-main.js")
    parts = [
        pack.Part("worker", build.worker_source(FOLDER / "worker.js", "plain-worker.js").encode()),
        pack.Part("wasm", (fetch.RUNTIME / "pyodide.asm.wasm").read_bytes()),
        pack.Part("stdlib", (fetch.RUNTIME / "python_stdlib.zip").read_bytes()),
        pack.Part("numpy", build.own["numpy"].read_bytes()),
    ]
    index = pack.data_block("embedded-index", pack.index(parts, ("numpy",), lock, {}))
    target.write_text(pack.fill((FOLDER / "index.html").read_text("utf-8"), {
        "csp": pack.policy(script),
        "script": f"{index}\n<script>{script}</script>",
        "assets": "\n".join(part.block for part in parts),
    }), "utf-8")

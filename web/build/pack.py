"""Packs everything into one HTML file: fills the template, encodes the parts, writes the policy."""

from __future__ import annotations

import base64
import hashlib
import json
import re
import zlib
from dataclasses import dataclass

from steps import Stop, sha256


@dataclass(frozen=True)
class Part:
    """One embedded part: its name and its bytes as the worker wants them."""

    name: str
    data: bytes

    @property
    def block(self) -> str:
        """The inert script block that carries it, as base64 of gzip."""
        return (f'<script type="text/plain" id="embedded-{self.name}">'
                f"{base64.b64encode(gzipped(self.data)).decode()}</script>")


def gzipped(data: bytes) -> bytes:
    """gzip by zlib itself: the gzip module writes another header from one Python to the next."""
    packer = zlib.compressobj(level=9, wbits=31)
    return packer.compress(data) + packer.flush()


def index(parts: list[Part], trees: tuple[str, ...], lock: dict, versions: dict) -> str:
    """What the page must know of the parts: sizes, hashes, the frozen lock, the versions that belong together."""
    table = {part.name: {"bytes": len(part.data), "sha256": sha256(part.data)} for part in parts}
    return json.dumps({"parts": table, "trees": trees, "lock": lock, "versions": versions}, sort_keys=True)


def data_block(name: str, text: str, kind: str = "application/json") -> str:
    """A block of data in the page; a "<" inside can end no script."""
    safe = text.replace("<", "\\u003c") if kind == "application/json" else text.replace("</script", "< /script")
    return f'<script type="{kind}" id="{name}">{safe}</script>'


def policy(script: str) -> str:
    """The page's own strict policy: this script, WebAssembly, one worker from memory; no network at all."""
    allowed = base64.b64encode(hashlib.sha256(script.encode()).digest()).decode()
    rules = ["default-src 'none'", "base-uri 'none'", "form-action 'none'", "style-src 'unsafe-inline'",
             "img-src data: blob:", "font-src data:", "worker-src blob:",
             f"script-src 'sha256-{allowed}' 'wasm-unsafe-eval'"]
    return f'<meta http-equiv="Content-Security-Policy" content="{"; ".join(rules)}">'


def fill(template: str, pieces: dict[str, str]) -> str:
    """Put each piece in the place of its marker; every marker must stand there exactly once, and no other."""
    for name in pieces:
        times = template.count(f"<!--@{name}-->")
        if times != 1:
            raise Stop(f"web/index.html must contain <!--@{name}--> exactly once; it is there {times} times.")
    strange = set(re.findall(r"<!--@([\w-]+)-->", template)) - set(pieces)
    if strange:
        raise Stop(f"web/index.html has markers that the build does not know: {', '.join(sorted(strange))}")
    return re.sub(r"<!--@([\w-]+)-->", lambda match: pieces[match[1]], template)


def sizes(page: str, blocks: dict[str, str]) -> str:
    """The table of sizes, part by part, in kB as they stand in the file."""
    rows = [(name, len(text.encode())) for name, text in blocks.items()]
    total = len(page.encode())
    rows.append(("the rest: page, style, script, data", total - sum(size for _, size in rows)))
    rows.append(("total", total))
    width = max(len(name) for name, _ in rows)
    return "\n".join(f"      {name:<{width}}  {size / 1000:>9.1f} kB" for name, size in rows)

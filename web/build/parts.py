"""Makes the parts that the page embeds: the core's wheel, the trimmed library, the trees of files."""

from __future__ import annotations

import base64
import fnmatch
import hashlib
import io
import json
import struct
import zipfile
from collections.abc import Callable, Iterable
from pathlib import Path

EPOCH = (1980, 1, 1, 0, 0, 0)

# What the exercise may not meet but an unusual day could: text encodings, and what
# Python itself or the core reaches for when something goes wrong.
MARGIN = (
    "encodings/*", "traceback", "linecache", "tokenize", "token", "textwrap", "string", "difflib", "pprint",
    "copy", "copyreg", "datetime", "_strptime", "calendar", "locale", "decimal", "_pydecimal", "fractions",
    "numbers", "statistics", "random", "bisect", "heapq", "hashlib", "base64", "struct", "csv", "html/*",
    "json/*", "re/*", "tomllib/*", "collections/*", "importlib/*", "warnings", "weakref", "contextlib",
    "dataclasses", "inspect", "ast", "dis", "opcode", "enum", "functools", "operator", "typing", "types",
    "threading", "_threading_local", "queue", "signal", "platform", "glob", "fnmatch", "pathlib", "stat",
    "urllib/parse", "unicodedata", "uuid", "zipfile/*", "_compat_pickle", "pickle", "graphlib",
    "pyodide/*", "_pyodide/*", "asyncio/*", "concurrent/futures/*", "concurrent/__init__",
)


def zipped(files: dict[str, bytes]) -> bytes:
    """A stored zip with sorted names and one fixed date: the same files give the same bytes."""
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", zipfile.ZIP_STORED) as archive:
        for name in sorted(files):
            archive.writestr(zipfile.ZipInfo(name, EPOCH), files[name])
    return out.getvalue()


def unzipped(path: Path) -> dict[str, bytes]:
    """Every file of a zip or wheel."""
    with zipfile.ZipFile(path) as archive:
        return {name: archive.read(name) for name in archive.namelist() if not name.endswith("/")}


def names_in(archive: bytes) -> list[str]:
    """The names in a zip held in memory."""
    return zipfile.ZipFile(io.BytesIO(archive)).namelist()


def wheel(folder: Path, extra: dict[str, str], name: str, version: str, requires: Iterable[str]) -> bytes:
    """A pure wheel of one package folder and some files made for it, reproducible."""
    info = f"{name}-{version}.dist-info"
    files = {f"{folder.name}/{path}": text.encode() for path, text in extra.items()}
    files |= {f"{folder.name}/{path.relative_to(folder).as_posix()}": path.read_bytes() for path in sources(folder)}
    lines = ["Metadata-Version: 2.1", f"Name: {name}", f"Version: {version}",
             *(f"Requires-Dist: {need}" for need in requires), ""]
    files[f"{info}/METADATA"] = "\n".join(lines).encode()
    files[f"{info}/WHEEL"] = b"Wheel-Version: 1.0\nGenerator: build.py\nRoot-Is-Purelib: true\nTag: py3-none-any\n"
    record = [f"{path},sha256={_urlsafe(data)},{len(data)}" for path, data in sorted(files.items())]
    files[f"{info}/RECORD"] = "\n".join([*record, f"{info}/RECORD,,", ""]).encode()
    return zipped(files)


def sources(folder: Path) -> list[Path]:
    """The files of a package that belong to it: no caches, no hidden files."""
    return sorted(path for path in folder.rglob("*") if path.is_file() and "__pycache__" not in path.parts
                  and not any(part.startswith(".") for part in path.relative_to(folder).parts))


def pure_markupsafe(path: Path) -> bytes:
    """MarkupSafe without its C speed-up: the same wheel's Python files and licence."""
    files = {name: data for name, data in unzipped(path).items()
             if name in ("markupsafe/__init__.py", "markupsafe/_native.py") or "dist-info/" in name}
    record = next(name for name in files if name.endswith("/RECORD"))
    tag = next(name for name in files if name.endswith("/WHEEL"))
    files[tag] = b"Wheel-Version: 1.0\nGenerator: build.py\nRoot-Is-Purelib: true\nTag: py3-none-any\n"
    files[record] = "".join(f"{name},,\n" for name in sorted(files)).encode()
    return zipped(files)


def trimmed_stdlib(compiled: Path, modules: Iterable[str]) -> bytes:
    """The compiled standard library, only with what was imported and the margin."""
    wanted = set(modules)

    def keep(name: str) -> bool:
        stem = name.removesuffix(".pyc")
        return (stem.removesuffix("/__init__").replace("/", ".") in wanted
                or any(fnmatch.fnmatchcase(stem, pattern) for pattern in MARGIN)
                or any(pattern.startswith(stem.removesuffix("/__init__") + "/") for pattern in MARGIN))

    return zipped({name: data for name, data in unzipped(compiled).items() if name.endswith(".pyc") and keep(name)})


def tree(compiled: Path, keep: Callable[[str], bool] = lambda name: True) -> bytes:
    """The worker's container: a table of contents, then the files (read by lay() in worker.js)."""
    files = sorted((name, data) for name, data in unzipped(compiled).items()
                   if ".dist-info/" not in name and keep(name))
    table = json.dumps([[name, len(data)] for name, data in files], separators=(",", ":")).encode()
    return struct.pack("<I", len(table)) + table + b"".join(data for _, data in files)


def numpy_keeper(modules: Iterable[str]) -> Callable[[str], bool]:
    """Keeps numpy's imported subpackages whole, without tests, headers, stubs and unused machine code."""
    imported = {name for name in modules if name.split(".")[0] == "numpy"}

    def keep(name: str) -> bool:
        parts = name.split("/")
        if parts[0] != "numpy" or "tests" in parts or "include" in parts or "lib" in parts and name.endswith(".a"):
            return False
        if len(parts) > 2 and f"numpy.{parts[1]}" not in imported:
            return False
        if name.endswith(".so"):
            return name.split(".cpython-")[0].replace("/", ".") in imported
        return name.endswith(".pyc") and parts[-1] != "conftest.pyc"

    return keep


def _urlsafe(data: bytes) -> str:
    return base64.urlsafe_b64encode(hashlib.sha256(data).digest()).rstrip(b"=").decode()

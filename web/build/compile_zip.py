"""Compiles the .py files of a zip to .pyc. Runs inside Pyodide, called by compile.mjs.

The .pyc files are hash-based and unchecked: Python never compares them with a
source or a date, and the same source gives the same bytes.
"""

import importlib.util
import zipfile
from importlib._bootstrap_external import _code_to_hash_pyc


def compile_zip(source: str, target: str, optimize: int, at: str) -> None:
    """Write ``target``, stored and sorted, with ``x.pyc`` in place of every ``x.py``; ``at`` names it in tracebacks."""
    with zipfile.ZipFile(source) as old, zipfile.ZipFile(target, "w", zipfile.ZIP_STORED) as new:
        for name in sorted(set(old.namelist())):
            if name.endswith("/"):
                continue
            data = old.read(name)
            if name.endswith(".py"):
                code = compile(data, f"{at}/{name}", "exec", dont_inherit=True, optimize=optimize)
                data = bytes(_code_to_hash_pyc(code, importlib.util.source_hash(data), checked=False))
                name += "c"
            new.writestr(zipfile.ZipInfo(name, (1980, 1, 1, 0, 0, 0)), data)

"""Compiles the .py files of a zip to .pyc. Runs inside Pyodide, called by compile.mjs.

The .pyc files are hash-based and unchecked: Python never compares them with a
source or a date, and the same source gives the same bytes.
"""

import __future__

import importlib.util
import zipfile
from importlib._bootstrap_external import _code_to_hash_pyc


def compile_zip(source: str, target: str, how: dict) -> None:
    """Write ``target``, stored and sorted, with ``x.pyc`` in place of every ``x.py``.

    ``how``: ``optimize`` as for compile(); ``at``, the folder that tracebacks name;
    ``empty``, files to compile as if they were empty; ``lazy_annotations``, whether
    annotations stay unevaluated, which spares their cost at import.
    """
    flags = __future__.annotations.compiler_flag if how["lazy_annotations"] else 0
    with zipfile.ZipFile(source) as old, zipfile.ZipFile(target, "w", zipfile.ZIP_STORED) as new:
        for name in sorted(set(old.namelist())):
            if name.endswith("/"):
                continue
            data = b"" if name in how["empty"] else old.read(name)
            if name.endswith(".py"):
                code = compile(data, f"{how['at']}/{name}", "exec", flags, dont_inherit=True, optimize=how["optimize"])
                data = bytes(_code_to_hash_pyc(code, importlib.util.source_hash(data), checked=False))
                name += "c"
            new.writestr(zipfile.ZipInfo(name, (1980, 1, 1, 0, 0, 0)), data)

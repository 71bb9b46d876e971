"""Steps of the build: say what happens, do it only when its inputs changed, stop in plain words."""

from __future__ import annotations

import hashlib
import shutil
import subprocess
from collections.abc import Callable, Iterable
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
CACHE = ROOT / ".cache"


class Stop(Exception):
    """The build cannot go on; the text says why and what to do."""


class Steps:
    """Numbers the steps as they are printed: ``[3/9] Wheels … unchanged``."""

    def __init__(self, total: int):
        self.total, self.at = total, 0

    def step(self, title: str) -> None:
        self.at += 1
        print(f"[{self.at}/{self.total}] {title}", flush=True)

    @staticmethod
    def note(text: str) -> None:
        print(f"      {text}", flush=True)


def sha256(data: bytes | Path) -> str:
    """SHA-256 of bytes or of a file, in hex."""
    return hashlib.sha256(data.read_bytes() if isinstance(data, Path) else data).hexdigest()


def key_of(*inputs: str | Path | Iterable[Path]) -> str:
    """One hash over texts, files (name and content) and lists of files."""
    digest = hashlib.sha256()
    for item in inputs:
        if isinstance(item, str):
            digest.update(b"t" + item.encode() + b"\0")
            continue
        for path in [item] if isinstance(item, Path) else sorted(item):
            name = path.relative_to(ROOT) if path.is_relative_to(ROOT) else path.name
            digest.update(f"f{name}\0{sha256(path)}\0".encode())
    return digest.hexdigest()


def once(target: Path, key: str, make: Callable[[Path], None]) -> bool:
    """Make ``target`` (a file or a folder) unless it stands there made from the same key.

    It is made beside its place and moved there when complete, so an
    interrupted build leaves nothing half done. Returns whether it was made.
    """
    stamp = target.with_name(target.name + ".key")
    if target.exists() and stamp.exists() and stamp.read_text() == key:
        return False
    fresh = target.with_name(target.name + ".new")
    for old in (fresh, target, stamp):
        remove(old)
    target.parent.mkdir(parents=True, exist_ok=True)
    make(fresh)
    fresh.rename(target)
    stamp.write_text(key)
    return True


def remove(path: Path) -> None:
    """Remove a file or a folder if it is there."""
    if path.is_dir() and not path.is_symlink():
        shutil.rmtree(path)
    else:
        path.unlink(missing_ok=True)


def run(command: list[str | Path], failed: str, **options) -> str:
    """Run a command quietly and return what it printed; on failure stop with ``failed`` and what it said."""
    try:
        done = subprocess.run(
            [str(part) for part in command], cwd=options.pop("cwd", ROOT), encoding="utf-8",
            stdout=subprocess.PIPE, stderr=subprocess.STDOUT, check=False, **options,
        )
    except OSError as error:
        raise Stop(f"{failed}\n{error}") from error
    if done.returncode:
        said = [line[:300] for line in done.stdout.strip().splitlines()]
        if len(said) > 16:
            said[6:-8] = ["…"]
        told = "\n".join("    " + line for line in said)
        raise Stop(f"{failed}\n  The command was: {' '.join(map(str, command))}\n  It said:\n{told}")
    return done.stdout

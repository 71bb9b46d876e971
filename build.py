#!/usr/bin/env python3
"""Builds Quenchwright.

    python3 build.py                  the page and the demo's sheet, in dist/
    python3 build.py test [PYTEST…]   the same, then every test; PYTEST… goes to pytest (-k bath)
    python3 build.py bench            the same, then the table of budgets
    python3 build.py truth            the same, then where the models stand against published figures
    python3 build.py picture          the same, then web/demo-sheet.png, the README's picture

    --wheels DIR   take wheels from this folder before asking the network

Needs Python 3.11 or newer and, the first time, a network. Everything it fetches is
checked by hash and kept in .venv, .cache and web/node_modules; nothing is done twice.
"""

import sys

if sys.version_info < (3, 11):  # noqa: UP036  (said before anything newer fails with less clear words)
    sys.exit(f"Quenchwright needs Python 3.11 or newer to build; this is {sys.version.split()[0]}.")

import argparse
import json
import os
import tomllib
from pathlib import Path

ROOT = Path(__file__).resolve().parent
HELPERS = ROOT / "web" / "build"
sys.path.insert(0, str(HELPERS))
sys.dont_write_bytecode = True

import fetch  # noqa: E402
import licences  # noqa: E402
import pack  # noqa: E402
import parts  # noqa: E402
from steps import CACHE, Steps, Stop, key_of, once, run, sha256  # noqa: E402

CORE = ROOT / "pycore"
DIST = ROOT / "dist"
PAGE = DIST / "quenchwright.html"
DEMO_JOB = CORE / "data" / "demo_job.json"
DEMO_SHEET = DIST / "demo-sheet.html"
DEMO_DATE = "2026-12-01"  # fixed: the same commit gives the same sheet on any day
LIMIT_MB = 12
# Only the texts of help(); leaving them out spares the page a twentieth of numpy's start.
NUMPY_DOCS = ("numpy/_core/_add_newdocs.py", "numpy/_core/_add_newdocs_scalars.py")
FROZEN = {"numpy", "jinja2", "markupsafe", "quenchwright"}
TREES = ("numpy", "jinja2", "markupsafe", "core")  # laid into Python's memory, in this order


class Build:
    """The steps from a fresh clone to dist/quenchwright.html, in order."""

    def __init__(self, wheels: Path | None, group: str):
        self.steps = Steps(9)
        self.given, self.group = wheels, group
        self.work = CACHE / "work"

    def everything(self) -> None:
        """Run all steps."""
        self.tools()
        self.wheels()
        self.core_wheel()
        self.freeze()
        self.compile()
        self.trim()
        self.page()
        self.demo()

    def tools(self) -> None:
        self.steps.step("Python environment")
        fetch.environment(self.steps, self.group)
        self.steps.step("Node and the web packages")
        self.node = fetch.find_node()
        self.steps.note(self.node.origin)
        made = fetch.web_packages(self.node)
        self.steps.note("installed by the lock file" if made else "unchanged")

    def wheels(self) -> None:
        self.steps.step("Wheels for the page, checked by hash")
        source = fetch.Wheels(self.steps, self.node.node, self.given)
        self.own = source.runtime()
        self.jinja2 = source.get("jinja2")
        self.markupsafe = self.work / "markupsafe-3.0.3-py3-none-any.whl"
        original = source.get("markupsafe")
        once(self.markupsafe, key_of(original, HELPERS / "parts.py"),
             lambda out: out.write_bytes(parts.pure_markupsafe(original)))
        self.steps.note(", ".join(path.name for path in [*self.own.values(), self.jinja2, self.markupsafe]))

    def core_wheel(self) -> None:
        self.steps.step("The core's wheel")
        version = core_version()
        self.core = self.work / f"quenchwright-{version}-py3-none-any.whl"
        made_of = key_of(parts.sources(CORE), HELPERS / "parts.py", HELPERS / "compiled_templates.py", version)
        once(self.core, made_of, lambda out: out.write_bytes(self.core_with_templates(version)))
        self.steps.note(f"{self.core.name}, sha256 {sha256(self.core)[:16]}…")

    def core_with_templates(self, version: str) -> bytes:
        """The package as it stands, and its templates as Python, which spares the page their compiling."""
        said = run([fetch.PYTHON, HELPERS / "compiled_templates.py"], "The sheet's templates do not compile.")
        templates = {f"sheet/{name}": source for name, source in json.loads(said).items()}
        return parts.wheel(CORE, templates, "quenchwright", version, declared()["dependencies"])

    def freeze(self) -> None:
        self.steps.step("micropip resolves and freezes what the page needs")
        frozen = self.work / "frozen.json"
        wheels = [self.core, self.jinja2, self.markupsafe]
        once(frozen, key_of(fetch.WEB / "package-lock.json", *wheels, *self.own.values(), HELPERS / "freeze.mjs"),
             lambda out: self.in_node("freeze.mjs", fetch.RUNTIME, CACHE / "wheels", out, *wheels,
                                      failed="micropip could not resolve the core's needs from the wheels at hand."))
        self.lock = closure(json.loads(frozen.read_text()), "quenchwright")
        names = set(self.lock["packages"])
        if names != FROZEN:
            raise Stop(f"The page would need {sorted(names)}, but only {sorted(FROZEN)} are meant to be in it.")
        self.steps.note(", ".join(f"{name} {entry['version']}" for name, entry in self.lock["packages"].items()))

    def compile(self) -> None:
        self.steps.step("Compile to .pyc inside Pyodide")
        stdlib = fetch.RUNTIME / "python_stdlib.zip"
        self.compiled = {
            "stdlib": self.compile_zip(stdlib, optimize=2, at="/lib/python312.zip"),
            "numpy": self.compile_zip(self.own["numpy"], empty=NUMPY_DOCS),
            "jinja2": self.compile_zip(self.jinja2, optimize=2, lazy_annotations=True),
            "markupsafe": self.compile_zip(self.markupsafe, optimize=2, lazy_annotations=True),
            "core": self.compile_zip(self.core),
        }

    def trim(self) -> None:
        self.steps.step("A full run inside Pyodide, to keep only what it imports")
        self.exercised = self.work / "exercise.json"
        once(self.exercised, key_of(*self.compiled.values(), *HELPERS.glob("exercise.*"), fetch.WEB / "src" / "tree.js"),
             self.exercise_whole)
        said = json.loads(self.exercised.read_text("utf-8"))
        if not said["answers"]["demo"]["ok"]:
            raise Stop(f"Inside Pyodide the demo job is not planned: {json.dumps(said['answers']['demo'])[:600]}")
        modules = said["modules"]
        self.library = {
            "stdlib": parts.trimmed_stdlib(self.compiled["stdlib"], modules),
            **{name: parts.tree(self.compiled[name]) for name in TREES},
            "numpy": parts.tree(self.compiled["numpy"], parts.numpy_keeper(modules)),
        }
        kept = len(parts.names_in(self.library["stdlib"]))
        self.steps.note(f"{len(modules)} modules imported; {kept} files of the standard library kept")
        folder = self.work / "parts"  # for the tests that run on exactly what the page holds
        once(folder, key_of(*map(sha256, self.library.values())), self.write_library)

    def write_library(self, folder: Path) -> None:
        folder.mkdir()
        for name, data in self.library.items():
            (folder / (name + (".zip" if name == "stdlib" else ".tree"))).write_bytes(data)

    def compile_zip(self, source: Path, optimize: int = 0, at: str = "/lib/python3.12/site-packages",
                    empty: tuple[str, ...] = (), lazy_annotations: bool = False) -> Path:
        """The compiled twin of a zip or wheel, made by Pyodide's own Python (compile_zip.py says how)."""
        target = self.work / "compiled" / (source.stem + ".zip")
        how = json.dumps({"optimize": optimize, "at": at, "empty": empty, "lazy_annotations": lazy_annotations})
        made_of = key_of(source, fetch.WEB / "package-lock.json", HELPERS / "compile_zip.py", how)
        if once(target, made_of, lambda out: self.in_node(
                "compile.mjs", fetch.RUNTIME, source, out, how, failed=f"{source.name} could not be compiled.")):
            self.steps.note(f"compiled {source.name}")
        return target

    def exercise_whole(self, out: Path) -> None:
        """A full run on everything untrimmed, to see what is imported."""
        trees = []
        for name in TREES:
            trees.append(self.work / f"whole-{name}.tree")
            trees[-1].write_bytes(parts.tree(self.compiled[name]))
        self.in_node("exercise.mjs", fetch.RUNTIME, self.compiled["stdlib"], out, *trees,
                     failed="The core does not run inside Pyodide.")

    def page(self) -> None:
        self.steps.step("The page in one file")
        data_file = self.work / "page.json"
        once(data_file, key_of(parts.sources(CORE), HELPERS / "page_data.py"),
             lambda out: out.write_text(run([fetch.PYTHON, HELPERS / "page_data.py"], "The core does not run."), "utf-8"))
        data = json.loads(data_file.read_text("utf-8"))
        script = self.bundle(fetch.WEB / "src" / "main.js", "page.js")
        embedded = self.embedded()
        blocks = {part.name: part.block for part in embedded}
        versions = {**data["versions"], "numpy": self.lock["packages"]["numpy"]["version"],
                    "pyodide": self.lock["info"]["version"], "python": self.lock["info"]["python"]}
        blocks["licences"] = pack.data_block("licences", licences.texts(self), "text/plain")
        index = pack.data_block("embedded-index", pack.index(embedded, TREES, self.lock, versions))
        style = (fetch.WEB / "style.css").read_text("utf-8") + data["sheet_css"]
        page = pack.fill((fetch.WEB / "index.html").read_text("utf-8"), {
            "csp": pack.policy(script),
            "style": f"<style>{style}</style>",
            "demo-sheet": data["demo_sheet"],
            "catalogue": pack.data_block("catalogue", json.dumps(data["catalogue"], ensure_ascii=False)),
            "script": f"{index}\n<script>{script}</script>",
            "assets": "\n".join(blocks.values()),
        })
        DIST.mkdir(exist_ok=True)
        PAGE.write_text(page, "utf-8")
        print(pack.sizes(page, blocks))
        if PAGE.stat().st_size > LIMIT_MB * 1_000_000:
            raise Stop(f"{PAGE.name} is larger than {LIMIT_MB} MB.")

    def bundle(self, entry: Path, name: str) -> str:
        """A script and what it imports, bundled by esbuild into one classic script."""
        target = self.work / "bundled" / name
        scripts = [entry, *(fetch.WEB / "src").rglob("*.js"), fetch.WEB / "package-lock.json", HELPERS / "bundle.mjs"]
        once(target, key_of(scripts), lambda out: self.in_node(
            "bundle.mjs", entry, out, failed=f"esbuild could not bundle {entry.relative_to(ROOT)}."))
        return target.read_text("utf-8").strip()

    def worker_source(self, entry: Path, name: str) -> str:
        """Pyodide's two scripts and a worker behind them: one script for one Blob."""
        scripts = [drop_source_map((fetch.RUNTIME / file).read_text("utf-8")) for file in ("pyodide.asm.js", "pyodide.js")]
        return "\n".join([*scripts, self.bundle(entry, name)])

    def embedded(self) -> list[pack.Part]:
        """The parts in the order in which a start needs them: the worker comes up while the rest is unpacked."""
        worker = self.worker_source(fetch.WEB / "worker.js", "worker.js")
        return [pack.Part("worker", worker.encode()),
                pack.Part("wasm", (fetch.RUNTIME / "pyodide.asm.wasm").read_bytes()),
                *(pack.Part(name, content) for name, content in self.library.items())]

    def demo(self) -> None:
        self.steps.step("The demo's sheet")
        run([fetch.PYTHON, "-m", "pycore", DEMO_JOB, "--format", "html", "--date", DEMO_DATE, "--output", DEMO_SHEET],
            "The demo job could not be planned.")
        for path in (PAGE, DEMO_SHEET):
            print(f"\n{path.relative_to(ROOT)}  {path.stat().st_size / 1000:,.1f} kB", end="")
        print()

    def in_node(self, script: str, *arguments: str | Path, failed: str) -> str:
        """Run one of the helper scripts under Node."""
        return run([self.node.node, HELPERS / script, *arguments], failed)


def drop_source_map(text: str) -> str:
    """A script without the comment that points to a map which is not there."""
    return "\n".join(line for line in text.split("\n") if not line.startswith("//# sourceMappingURL="))


def core_version() -> str:
    """The version in pycore/__init__.py, which pyproject.toml must agree with."""
    lines = (CORE / "__init__.py").read_text("utf-8").splitlines()
    version = next(line for line in lines if line.startswith("__version__")).split('"')[1]
    if version != declared()["version"]:
        raise Stop(f"pycore/__init__.py says version {version}, pyproject.toml says {declared()['version']}.")
    return version


def declared() -> dict:
    """The project's own table in pyproject.toml."""
    return tomllib.loads((ROOT / "pyproject.toml").read_text("utf-8"))["project"]


def closure(frozen: dict, root: str) -> dict:
    """The frozen lock cut down to one package and everything it needs, however far down."""
    found, waiting = {}, [root]
    while waiting:
        name = waiting.pop().lower()
        if name not in found:
            found[name] = frozen["packages"][name]
            waiting += found[name]["depends"]
    return {"info": frozen["info"], "packages": dict(sorted(found.items()))}


def main() -> int:
    parser = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    parser.add_argument("command", nargs="?", default="build", choices=["build", "test", "bench", "truth", "picture"])
    parser.add_argument("--wheels", type=Path, metavar="DIR")
    options, rest = parser.parse_known_args()
    if rest and options.command != "test":
        parser.error(f"unknown arguments: {' '.join(rest)}")
    # What the helpers make must depend neither on Python's hash seed nor on the machine's language.
    os.environ.update(PYTHONHASHSEED="0", PYTHONUTF8="1")
    try:
        build = Build(options.wheels, "build" if options.command == "build" else "test")
        build.everything()
        if options.command != "build":
            import after

            return getattr(after, options.command)(build, rest)
    except Stop as stop:
        print(f"\nThe build stopped. {stop}", file=sys.stderr)
        return 1
    return 0


if __name__ == "__main__":
    sys.exit(main())

// node wasm_tests.mjs RUNTIME REPO OUT.json WHEELS TREES [PYTEST ARGUMENT...]
// Runs pytest inside Pyodide on a folder of tests. WHEELS and TREES are lists of paths
// joined by ":". The repository is visible at /repo; the core under test is its source.
import { readFileSync, writeFileSync } from "node:fs";
import { lay } from "../src/tree.js";
import { boot, mount } from "./boot.mjs";

const [runtime, repo, out, wheels, trees, ...args] = process.argv.slice(2);
const pyodide = await boot(runtime, {
  // pytest's own capture replaces file descriptors, which ends Pyodide at once: see --capture=sys.
  env: { PYTHONDONTWRITEBYTECODE: "1", HYPOTHESIS_STORAGE_DIRECTORY: "/tmp/hypothesis" },
  fsInit: async (FS) => trees.split(":").forEach((path) => lay(FS, new Uint8Array(readFileSync(path)))),
});
for (const path of wheels.split(":")) pyodide.unpackArchive(new Uint8Array(readFileSync(path)), "wheel");
mount(pyodide, repo, "/repo");
pyodide.runPython(readFileSync(new URL("./wasm_tests.py", import.meta.url), "utf8"));
pyodide.globals.set("args", pyodide.toPy(args));
writeFileSync(out, pyodide.runPython("run(args)"));

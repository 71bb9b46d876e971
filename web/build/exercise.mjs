// node exercise.mjs RUNTIME STDLIB.zip OUT.json TREE...
// Boots Python from the parts the page holds, uses every way into the core, and
// writes which modules that needed and what came out.
import { readFileSync, writeFileSync } from "node:fs";
import { boot } from "./boot.mjs";
import { lay } from "../src/tree.js";

const [runtime, stdlib, out, ...trees] = process.argv.slice(2);
const pyodide = await boot(runtime, {
  stdLibURL: stdlib,
  fsInit: async (FS) => trees.forEach((path) => lay(FS, new Uint8Array(readFileSync(path)))),
});
const code = readFileSync(new URL("./exercise.py", import.meta.url), "utf8");
pyodide.runPython(code);
writeFileSync(out, pyodide.runPython("exercise()"));

// node compile.mjs RUNTIME PLAN.json
// Compiles zips and wheels to .pyc with the very Python that will run them.
// PLAN: [{"from": "a.whl", "to": "b.zip", "optimize": 2, "at": "/lib/python312.zip"}, ...]
import { readFileSync, writeFileSync } from "node:fs";
import { boot } from "./boot.mjs";

const [runtime, plan] = process.argv.slice(2);
const pyodide = await boot(runtime);
pyodide.runPython(readFileSync(new URL("./compile_zip.py", import.meta.url), "utf8"));
const compileZip = pyodide.globals.get("compile_zip");
for (const { from, to, optimize, at } of JSON.parse(readFileSync(plan, "utf8"))) {
  pyodide.FS.writeFile("/from.zip", new Uint8Array(readFileSync(from)));
  compileZip("/from.zip", "/to.zip", optimize, at);
  writeFileSync(to, pyodide.FS.readFile("/to.zip"));
}

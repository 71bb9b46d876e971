// node compile.mjs RUNTIME FROM.zip TO.zip HOW.json
// Compiles a zip or wheel to .pyc with the very Python that will run it.
import { readFileSync, writeFileSync } from "node:fs";
import { boot } from "./boot.mjs";

const [runtime, from, to, how] = process.argv.slice(2);
const pyodide = await boot(runtime);
pyodide.runPython(readFileSync(new URL("./compile_zip.py", import.meta.url), "utf8"));
pyodide.FS.writeFile("/from.zip", new Uint8Array(readFileSync(from)));
pyodide.globals.get("compile_zip")("/from.zip", "/to.zip", pyodide.toPy(JSON.parse(how)));
writeFileSync(to, pyodide.FS.readFile("/to.zip"));

// node freeze.mjs RUNTIME OWN_WHEELS OUT.json WHEEL...
// Lets micropip resolve what the core needs, from wheels in memory only, and freezes it.
// OWN_WHEELS: the folder with Pyodide's own wheels; WHEEL...: the core's and the page's others.
import { readFileSync, writeFileSync } from "node:fs";
import { basename } from "node:path";
import { boot } from "./boot.mjs";

const [runtime, ownWheels, out, ...wheels] = process.argv.slice(2);
const pyodide = await boot(runtime, { packageCacheDir: ownWheels });
await pyodide.loadPackage("micropip", { messageCallback: () => {} });

pyodide.FS.mkdirTree("/wheels");
const urls = wheels.map((path) => {
  pyodide.FS.writeFile(`/wheels/${basename(path)}`, new Uint8Array(readFileSync(path)));
  return `emfs:/wheels/${basename(path)}`;
});
pyodide.globals.set("urls", pyodide.toPy(urls));
const frozen = await pyodide.runPythonAsync(`
import micropip
await micropip.install(urls)
micropip.freeze()`);
writeFileSync(out, frozen);

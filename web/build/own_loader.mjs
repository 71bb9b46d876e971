// node own_loader.mjs RUNTIME FOLDER NAME...
// Lets Pyodide's own loader fetch its packages into a folder, where their source is
// reachable. The only script here that may use the network; the build checks the hashes.
import { pathToFileURL } from "node:url";
import { join } from "node:path";

const [runtime, folder, ...names] = process.argv.slice(2);
const { loadPyodide } = await import(pathToFileURL(join(runtime, "pyodide.mjs")).href);
const pyodide = await loadPyodide({ indexURL: runtime, packageCacheDir: folder });
const loaded = await pyodide.loadPackage(names, { messageCallback: () => {}, errorCallback: console.error });
process.exit(names.every((name) => loaded.some((found) => found.name === name)) ? 0 : 1);

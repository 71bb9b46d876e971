// Boots Pyodide under Node with the network cut off. Shared by the other scripts here.
import { pathToFileURL } from "node:url";
import { join } from "node:path";

// Node would print the whole line where it happened, which in Pyodide is a megabyte long.
process.on("uncaughtException", (error) => {
  console.error(error.message || error);
  process.exit(1);
});

globalThis.fetch = async (name) => {
  throw new Error(`the build asked for ${name}: nothing may be fetched here`);
};

/** @param runtime folder of the pyodide package; @param more options for loadPyodide */
export async function boot(runtime, more = {}) {
  const { loadPyodide } = await import(pathToFileURL(join(runtime, "pyodide.mjs")).href);
  return loadPyodide({ indexURL: runtime, ...more, env: { PYTHONHASHSEED: "0", ...more.env } });
}

/** Makes a folder of this machine visible to Python. */
export function mount(pyodide, folder, at) {
  pyodide.FS.mkdirTree(at);
  pyodide.FS.mount(pyodide.FS.filesystems.NODEFS, { root: folder }, at);
}

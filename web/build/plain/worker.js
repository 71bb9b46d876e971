// The plain page's worker: loadPyodide and loadPackage as their documentation shows them.
import { gunzipTo } from "../../src/unpack.js";

const BASE = "embedded:/";
const parts = {};
const part = (name) => (parts[name] ??= withResolvers());

function withResolvers() {
  const made = {};
  made.promise = new Promise((resolve) => (made.resolve = resolve));
  return made;
}

self.onmessage = ({ data }) => {
  if (data.kind === "part") part(data.name).resolve(data.module || gunzipTo(data.size, data.bytes, data.name));
  else start(data);
};

async function start({ lock }) {
  const file = JSON.parse(lock).packages.numpy.file_name;
  const files = {
    "pyodide.asm.wasm": {},
    "python_stdlib.zip": { arrayBuffer: () => part("stdlib").promise },
    "pyodide-lock.json": { json: async () => JSON.parse(lock) },
    [file]: { arrayBuffer: () => part("numpy").promise },
  };
  self.fetch = async (name) => ({ ok: true, ...files[String(name.url || name).slice(BASE.length)] });
  WebAssembly.instantiateStreaming = async (response, imports) => {
    const module = await part("wasm").promise;
    return { module, instance: await WebAssembly.instantiate(module, imports) };
  };
  const pyodide = await self.loadPyodide({ indexURL: BASE });
  await pyodide.loadPackage("numpy", { messageCallback: () => {} });
  self.postMessage(pyodide.runPython("import numpy; str(numpy.linalg.solve(numpy.eye(3) * 2, numpy.ones(3)))"));
}

/* The worker: Python's side of the page. The build puts it behind Pyodide's own
 * two scripts, so one classic Blob worker holds everything (module workers made
 * from blobs do not start on file:// in Chromium).
 *
 * In:  {kind: "start", lock, trees}                      once: the frozen lock, the names of the trees
 *      {kind: "part", name, module | bytes, size}        as they become ready, in any order
 *      {kind: "call", id, text}                          JSON text for pycore.api.run
 * Out: {kind: "phase", name} · {kind: "ready", versions} · {kind: "answer", id, text}
 *      {kind: "died", what, technical}                   this worker must be thrown away
 *
 * Only strings cross into Python, so nothing needs freeing but one PyProxy.
 */
import { lay } from "./src/tree.js";
import { gunzipTo } from "./src/unpack.js";

// Not an address: every name under it is answered from memory, below.
const BASE = "embedded:/";
// No collecting of garbage while modules load: nothing of theirs is garbage. What they
// made is then set apart, so that later collections need not look at it either.
const BEFORE = "import gc; gc.disable()";
const AFTER = `
import gc, json, platform, numpy, pycore
gc.freeze()
gc.enable()
json.dumps({"python": platform.python_version(), "numpy": numpy.__version__,
            "quenchwright": pycore.__version__, "data": pycore.DATA_EDITION})`;

const waiters = {};
let run = null;

const say = (message) => self.postMessage(message);
const died = (what, error) => say({ kind: "died", what, technical: String((error && error.message) || error).slice(-2000) });

/** The promise of a part, whether it has come already or not. */
function part(name) {
  if (!waiters[name]) {
    const waiter = {};
    waiter.promise = new Promise((resolve, reject) => Object.assign(waiter, { resolve, reject }));
    waiters[name] = waiter;
  }
  return waiters[name];
}

self.addEventListener("unhandledrejection", (event) => died("a promise failed", event.reason));
self.onmessage = ({ data }) => {
  if (data.kind === "part") arrived(data);
  else if (data.kind === "start") start(data).catch((error) => died("Python did not start", error));
  else if (data.kind === "call") answer(data);
};

function arrived({ name, module, bytes, size }) {
  const whole = module || gunzipTo(size, bytes, name);
  part(name).resolve(whole);
}

/* fetch and the streaming compile are the only two ways in which Pyodide asks for
 * a file. Both now know the embedded names and nothing else. */
function embed(lock) {
  const files = {
    "pyodide.asm.wasm": {},
    "python_stdlib.zip": { arrayBuffer: () => part("stdlib").promise },
    "pyodide-lock.json": { json: async () => JSON.parse(lock) },
  };
  self.fetch = async (name) => {
    const wanted = String(name && name.url ? name.url : name);
    const file = wanted.startsWith(BASE) && files[wanted.slice(BASE.length)];
    if (!file) throw new Error(`not embedded, and there is no network here: ${wanted}`);
    return { ok: true, ...file };
  };
  WebAssembly.instantiateStreaming = async (response, imports) => {
    await response;
    const module = await part("wasm").promise;
    say({ kind: "phase", name: "python" });
    return { module, instance: await WebAssembly.instantiate(module, imports) };
  };
}

async function start({ lock, trees }) {
  embed(lock);
  const pyodide = await self.loadPyodide({
    indexURL: BASE,
    env: { HOME: "/home/quenchwright", PYTHONDONTWRITEBYTECODE: "1" },
  });
  for (const name of trees) lay(pyodide.FS, await part(name).promise);
  say({ kind: "phase", name: "core" });
  pyodide.runPython(BEFORE);
  const api = pyodide.pyimport("pycore.api");
  run = api.run.copy(); // a proxy of its own: the module's is let go
  api.destroy();
  const versions = JSON.parse(pyodide.runPython(AFTER));
  say({ kind: "ready", versions: { ...versions, pyodide: pyodide.version } });
}

function answer({ id, text }) {
  try {
    say({ kind: "answer", id, text: run(text) });
  } catch (error) {
    died("the calculation crashed", error);
  }
}

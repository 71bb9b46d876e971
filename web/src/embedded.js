/* Reads what the build packed into this file: base64 of gzip in inert script
 * blocks, and one index with the size each part must have.
 *
 * The page's script stands before those ten megabytes. Taking each block as soon
 * as it is parsed lets the unpacking, the compiling and the worker's start overlap
 * with the parsing of the rest. */
import { fromBase64, gunzip, gunzipTo } from "./unpack.js";

/** Promises of all a worker needs. Kept as they are, they also serve every later worker. */
export function takeEmbedded() {
  const index = JSON.parse(document.getElementById("embedded-index").textContent);
  const { lock, versions, trees, parts } = index;
  const packed = (name) => take(name).then((bytes) => ({ kind: "part", name, bytes, size: parts[name].bytes }));
  return {
    versions,
    url: take("worker").then((bytes) => gunzipTo(parts.worker.bytes, bytes, "worker")).then(workerUrl),
    messages: [
      Promise.resolve({ kind: "start", lock: JSON.stringify(lock), trees }),
      take("wasm").then(compile).then((module) => ({ kind: "part", name: "wasm", module })),
      packed("stdlib"),
      ...trees.map(packed),
    ],
  };
}

/** A block's bytes. The block goes once it is read: nobody needs its text again. */
async function take(name) {
  const block = await whenParsed(`embedded-${name}`);
  const text = block.textContent;
  block.remove();
  return fromBase64(text);
}

/** A block is complete when something stands behind it or the whole file is parsed. */
function whenParsed(id) {
  return new Promise((resolve, reject) => {
    const done = (settle, value) => {
      watch.disconnect();
      document.removeEventListener("DOMContentLoaded", look);
      settle(value);
    };
    const look = () => {
      const block = document.getElementById(id);
      const parsed = document.readyState !== "loading";
      if (block && (parsed || block.nextElementSibling)) done(resolve, block);
      else if (parsed) done(reject, new Error(`${id} is missing: the file is cut short`));
    };
    const watch = new MutationObserver(look);
    watch.observe(document.body, { childList: true });
    document.addEventListener("DOMContentLoaded", look);
    look();
  });
}

/** Compiled while it is being unpacked, and only once: later workers get the same module. */
function compile(bytes) {
  return WebAssembly.compileStreaming(new Response(gunzip(bytes), { headers: { "Content-Type": "application/wasm" } }));
}

// Never revoked: a restart needs it.
function workerUrl(source) {
  return URL.createObjectURL(new Blob([source], { type: "text/javascript" }));
}

// Decoding and laying out of parts, as the page and the worker do it. Run by node --test.
import assert from "node:assert/strict";
import { test } from "node:test";
import { gzipSync } from "node:zlib";
import { lay, SITE } from "../../web/src/tree.js";
import { fromBase64, gunzipTo } from "../../web/src/unpack.js";

const bytes = Uint8Array.from({ length: 5000 }, (_, i) => (i * 7) % 256);

test("base64 is read, with and without the browser's own reader", () => {
  const text = Buffer.from(bytes).toString("base64");
  const own = Uint8Array.fromBase64;
  Uint8Array.fromBase64 = undefined;
  assert.deepEqual(fromBase64(text), bytes);
  Uint8Array.fromBase64 = (asked) => (assert.equal(asked, text), bytes);
  assert.equal(fromBase64(text), bytes);
  if (own) Uint8Array.fromBase64 = own;
  else delete Uint8Array.fromBase64;
});

test("a packed part must have exactly its size", async () => {
  const packed = new Uint8Array(gzipSync(bytes));
  assert.deepEqual(await gunzipTo(5000, packed, "x"), bytes);
  await assert.rejects(gunzipTo(5001, packed, "x"), /x has 5000 of 5001 bytes/);
  await assert.rejects(gunzipTo(4999, packed, "x"), /longer than its 4999/);
  await assert.rejects(gunzipTo(5000, packed.subarray(0, packed.length - 9), "x"));
});

test("a tree is laid into folders", () => {
  const table = new TextEncoder().encode(JSON.stringify([["a/b.pyc", 3], ["a/c/d.so", 2]]));
  const tree = new Uint8Array(4 + table.length + 5);
  new DataView(tree.buffer).setUint32(0, table.length, true);
  tree.set(table, 4);
  tree.set([1, 2, 3, 4, 5], 4 + table.length);
  const made = {};
  const folders = [];
  lay({ mkdirTree: (path) => folders.push(path), writeFile: (path, data) => (made[path] = [...data]) }, tree);
  assert.deepEqual(folders, [`${SITE}/a`, `${SITE}/a/c`]);
  assert.deepEqual(made, { [`${SITE}/a/b.pyc`]: [1, 2, 3], [`${SITE}/a/c/d.so`]: [4, 5] });
});

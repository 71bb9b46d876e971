// The page's side of the worker, against a worker made of plain JavaScript. Run by node --test.
import assert from "node:assert/strict";
import { test } from "node:test";
import { missingFeatures, startRuntime } from "../../web/src/runtime.js";

globalThis.Worker ??= class {};
const VERSIONS = { quenchwright: "0.1.0" };

/** Stands in for a worker: keeps what it is told and says what the test wants. */
class Puppet {
  constructor() {
    this.told = [];
    this.ended = false;
  }
  postMessage(message) { this.told.push(message); }
  terminate() { this.ended = true; }
  say(message) { this.onmessage({ data: message }); }
  calls() { return this.told.filter((message) => message.kind === "call"); }
  answer(number, response) { this.say({ kind: "answer", id: this.calls()[number].id, text: JSON.stringify(response) }); }
}

const turn = () => new Promise((resolve) => setTimeout(resolve, 0));

async function begin({ ready = true, takeParts } = {}) {
  const seen = { phases: [], failures: [], ready: [], workers: [] };
  const runtime = startRuntime({
    onPhase: (name) => seen.phases.push(name),
    onReady: (versions) => seen.ready.push(versions),
    onFailure: (failure) => seen.failures.push(failure),
    takeParts: takeParts || (() => ({ versions: VERSIONS, url: Promise.resolve("blob:x"), messages: [Promise.resolve({ kind: "start" })] })),
    makeWorker: () => (seen.workers.push(new Puppet()), seen.workers.at(-1)),
  });
  await turn();
  const worker = seen.workers[0];
  if (ready && worker) worker.say({ kind: "ready", versions: VERSIONS });
  return { runtime, seen, worker };
}

test("it starts, in phases, and answers a call", async () => {
  const { runtime, seen, worker } = await begin({ ready: false });
  assert.equal(runtime.alive(), false);
  worker.say({ kind: "phase", name: "python" });
  worker.say({ kind: "phase", name: "core" });
  worker.say({ kind: "ready", versions: VERSIONS });
  assert.deepEqual(seen.phases, ["unpack", "python", "core", "ready"]);
  assert.deepEqual(seen.ready, [VERSIONS]);
  assert.equal(runtime.alive(), true);
  const answer = runtime.call({ do: "save" });
  assert.deepEqual(JSON.parse(worker.calls()[0].text), { do: "save" });
  worker.answer(0, { ok: true });
  assert.deepEqual(await answer, { ok: true });
});

test("a call made while Python wakes is kept and sent when it is up", async () => {
  const { runtime, worker } = await begin({ ready: false });
  const answer = runtime.call({ do: "plan", job: 1 });
  assert.equal(worker.calls().length, 0);
  worker.say({ kind: "ready", versions: VERSIONS });
  worker.answer(0, { ok: true, job: 1 });
  assert.deepEqual(await answer, { ok: true, job: 1 });
});

test("a newer plan supersedes the older ones, sent or waiting, and nothing else", async () => {
  const { runtime, worker } = await begin();
  const first = runtime.call({ do: "plan", job: 1 });
  const save = runtime.call({ do: "save" });
  const second = runtime.call({ do: "plan", job: 2 });
  const third = runtime.call({ do: "plan", job: 3 });
  assert.deepEqual(await second, { ok: false, superseded: true });
  worker.answer(0, { ok: true, job: 1 });
  assert.deepEqual(await first, { ok: false, superseded: true });
  worker.answer(1, { ok: true });
  assert.deepEqual(await save, { ok: true });
  worker.answer(2, { ok: true, job: 3 });
  assert.deepEqual(await third, { ok: true, job: 3 });
  assert.equal(worker.calls().length, 3);
});

test("a call over its limit stops the worker, starts another, and the next call goes there", async () => {
  const { runtime, seen, worker } = await begin();
  const slow = runtime.call({ do: "plan" }, { timeout_s: 0.02 });
  const next = runtime.call({ do: "save" });
  const answer = await slow;
  assert.equal(answer.ok, false);
  assert.equal(answer.bug.id, "time-limit");
  assert.equal(worker.ended, true);
  await turn();
  assert.equal(seen.workers.length, 2);
  seen.workers[1].say({ kind: "ready", versions: VERSIONS });
  seen.workers[1].answer(0, { ok: true });
  assert.deepEqual(await next, { ok: true });
  assert.equal(seen.failures.length, 0);
});

test("a worker that dies is reported, its call is answered, and restart() brings a new one", async () => {
  const { runtime, seen, worker } = await begin();
  const call = runtime.call({ do: "plan" });
  worker.say({ kind: "died", what: "the calculation crashed", technical: "RangeError" });
  assert.equal((await call).bug.id, "worker-died");
  assert.equal(seen.failures.length, 1);
  for (const key of ["phase", "what", "why", "hint", "technical"]) assert.equal(typeof seen.failures[0][key], "string");
  assert.equal(runtime.alive(), false);
  assert.equal((await runtime.call({ do: "save" })).bug.id, "worker-stopped");
  const restarted = runtime.restart();
  await turn();
  seen.workers[1].say({ kind: "ready", versions: VERSIONS });
  await restarted;
  assert.equal(runtime.alive(), true);
  worker.onmessage({ data: { kind: "died", what: "too late", technical: "" } });
  assert.equal(runtime.alive(), true, "a stopped worker is not heard any more");
});

test("an error event of the worker counts as its death", async () => {
  const { seen, worker } = await begin();
  worker.onerror({ message: "out of memory" });
  assert.match(seen.failures[0].technical, /out of memory/);
});

test("parts of different versions are refused", async () => {
  const { runtime, seen, worker } = await begin({ ready: false });
  worker.say({ kind: "ready", versions: { quenchwright: "0.2.0" } });
  assert.equal(runtime.alive(), false);
  assert.match(seen.failures[0].technical, /0\.2\.0 instead of 0\.1\.0/);
});

test("a file that is cut short is said in plain words", async () => {
  const cut = Promise.reject(new Error("embedded-wasm is missing: the file is cut short"));
  const { seen } = await begin({ ready: false, takeParts: () => ({ versions: {}, url: Promise.resolve("x"), messages: [cut] }) });
  await turn();
  assert.match(seen.failures[0].what, /could not be unpacked/);
  assert.match(seen.failures[0].technical, /cut short/);
});

test("a browser without what is needed is told what it lacks", () => {
  assert.deepEqual(missingFeatures({ Worker: 1, WebAssembly: 1, ReadableStream: 1 }), ["DecompressionStream"]);
  assert.deepEqual(missingFeatures({ Worker: 1, WebAssembly: 1, ReadableStream: 1, DecompressionStream: 1 }), []);
});

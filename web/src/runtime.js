/* Starts Python in a worker and carries calls to it.
 *
 *   const runtime = startRuntime({onPhase(name, text), onReady(versions),
 *                                 onFailure({phase, what, why, hint, technical})});
 *   const response = await runtime.call({do: "plan", job});   // never rejects
 *   await runtime.restart();                                  // a new worker, kept bytes
 *   runtime.alive();                                          // Python is up and answering
 *
 * A `plan` call makes every earlier one pointless: those resolve as
 * {ok: false, superseded: true} and are to be ignored. A call over its limit
 * stops the worker, starts a new one and resolves as {ok: false, bug: {...}}.
 */
import { takeEmbedded } from "./embedded.js";

const PHASES = {
  unpack: "Unpacking Python",
  python: "Starting Python",
  core: "Loading the steel tables",
  ready: "Ready",
};
// Far beyond what a slow phone needs; a blocked compile would otherwise hang in silence.
const PHASE_LIMIT_S = 45;
const CALL_LIMIT_S = 20;

const NOT_RUNNING = "Python is not running.";

const NEEDS = {
  Worker: "background workers",
  WebAssembly: "WebAssembly",
  DecompressionStream: "DecompressionStream",
  ReadableStream: "ReadableStream",
};

export function missingFeatures(scope = globalThis) {
  return Object.keys(NEEDS).filter((name) => !scope[name]).map((name) => NEEDS[name]);
}

export function startRuntime({ onPhase, onReady, onFailure, takeParts = takeEmbedded, makeWorker = blobWorker }) {
  let parts = null; // what a new worker needs, kept for a fast restart
  let worker = null;
  let ready = false;
  let down = false; // no worker is there and none is coming
  let phase = "check";
  let watchdog = 0;
  let nextId = 1;
  let sent = null; // the one call the worker is busy with
  let waiting = [];
  let turns = 0; // which start this is; an older one must not go on
  let settled = null; // resolves when the current worker is up or given up

  function enter(name) {
    phase = name;
    clearTimeout(watchdog);
    if (name !== "ready") watchdog = setTimeout(tooSlow, PHASE_LIMIT_S * 1000);
    onPhase(name, PHASES[name]);
  }

  function tooSlow() {
    fail({
      what: `${PHASES[phase]} took more than ${PHASE_LIMIT_S} seconds.`,
      why: "This computer may be very busy, or the browser blocks WebAssembly.",
      hint: "Wait a little longer, or try again. If it stays like this, try another browser.",
      technical: "watchdog",
    });
  }

  function cutShort(error) {
    down = true;
    stopWorker();
    answerAll(() => bug("worker-stopped", NOT_RUNNING));
    fail({
      what: "The program file could not be unpacked.",
      why: "It may be cut short or changed on its way here, or memory is short.",
      hint: "Copy the file again from where you got it. Close other tabs and reload.",
      technical: String(error),
    });
  }

  function fail({ what, why, hint, technical }) {
    clearTimeout(watchdog);
    onFailure({ phase, what, why, hint, technical: `${technical} · phase ${phase} · ${userAgent()}` });
  }

  async function begin() {
    const missing = missingFeatures();
    if (missing.length) {
      down = true;
      fail({
        what: "This browser cannot run the calculation.",
        why: `It lacks ${missing.join(", ")}.`,
        hint: "Use Chrome or Edge 112, Firefox 113, Safari 16.4, or newer. Saved sheets still open and print.",
        technical: `missing ${missing.join(", ")}`,
      });
      return;
    }
    try {
      parts = takeParts();
    } catch (error) {
      cutShort(error);
      return;
    }
    await startWorker();
  }

  /* Parts go over as they become ready; a part that fails gives up the worker that waits for it. */
  async function startWorker() {
    down = false;
    enter("unpack");
    const up = new Promise((resolve) => (settled = resolve));
    const turn = ++turns;
    try {
      const url = await parts.url;
      if (turn !== turns) return;
      worker = makeWorker(url);
    } catch (error) {
      if (turn === turns) cutShort(error);
      return;
    }
    const mine = worker;
    const ours = (use) => (value) => mine === worker && use(value);
    worker.onmessage = ours(({ data }) => hear(data));
    worker.onerror = ours((event) => crashed("the worker stopped", event.message || "error event"));
    worker.onmessageerror = ours(() => crashed("a message was unreadable", "messageerror"));
    for (const message of parts.messages) message.then(ours((ready) => mine.postMessage(ready)), ours(cutShort));
    await up;
  }

  function stopWorker() {
    if (worker) worker.terminate();
    worker = null;
    ready = false;
    turns++;
    clearTimeout(watchdog);
    if (settled) settled();
    settled = null;
  }

  function hear(message) {
    if (message.kind === "phase") enter(message.name);
    else if (message.kind === "ready") becameReady(message.versions);
    else if (message.kind === "answer") answered(message);
    else if (message.kind === "died") crashed(message.what, message.technical);
  }

  function becameReady(versions) {
    const wrong = Object.keys(parts.versions).filter((name) => versions[name] !== parts.versions[name]);
    if (wrong.length) {
      const text = wrong.map((name) => `${name} ${versions[name]} instead of ${parts.versions[name]}`).join(", ");
      crashed("the parts of this file do not belong together", text);
      return;
    }
    ready = true;
    enter("ready");
    if (settled) settled();
    settled = null;
    onReady(versions);
    sendNext();
  }

  function crashed(what, technical) {
    down = true;
    stopWorker();
    answerAll(() => bug("worker-died", what));
    fail({
      what: "Python stopped.",
      why: `The browser reported: ${what}.`,
      hint: "Your entries are safe. Start Python again; if it stops again, reload the page.",
      technical,
    });
  }

  function bug(id, what) {
    return { ok: false, bug: { id, what, where: "worker", versions: (parts && parts.versions) || {} } };
  }

  function answerAll(make) {
    const open = sent ? [sent, ...waiting] : waiting;
    sent = null;
    waiting = [];
    for (const entry of open) finish(entry, make());
  }

  function finish(entry, response) {
    clearTimeout(entry.timer);
    entry.resolve(response);
  }

  function call(request, { timeout_s = CALL_LIMIT_S } = {}) {
    return new Promise((resolve) => {
      const entry = { id: nextId++, plan: request.do === "plan", text: JSON.stringify(request), timeout_s, resolve };
      if (down) {
        resolve(bug("worker-stopped", NOT_RUNNING));
        return;
      }
      if (entry.plan) supersedePlans();
      waiting.push(entry);
      sendNext();
    });
  }

  function supersedePlans() {
    if (sent && sent.plan) sent.superseded = true;
    const old = waiting.filter((entry) => entry.plan);
    waiting = waiting.filter((entry) => !entry.plan);
    for (const entry of old) finish(entry, { ok: false, superseded: true });
  }

  function sendNext() {
    if (!ready || sent || !waiting.length) return;
    sent = waiting.shift();
    sent.timer = setTimeout(overLimit, sent.timeout_s * 1000);
    if (sent.plan) mark("plan asked");
    worker.postMessage({ kind: "call", id: sent.id, text: sent.text });
  }

  function answered({ id, text }) {
    if (!sent || sent.id !== id) return;
    const entry = sent;
    sent = null;
    finish(entry, entry.superseded ? { ok: false, superseded: true } : JSON.parse(text));
    sendNext();
  }

  // Python cannot be interrupted without shared memory, which file:// does not give: start afresh.
  function overLimit() {
    const entry = sent;
    sent = null;
    finish(entry, bug("time-limit", `The calculation took more than ${entry.timeout_s} s and was stopped.`));
    stopWorker();
    startWorker();
  }

  async function restart() {
    if (!parts) return;
    stopWorker();
    answerAll(() => bug("restarted", "Python was started again."));
    await startWorker();
  }

  begin();
  return { call, restart, alive: () => ready };
}

function blobWorker(url) {
  return new Worker(url, { name: "python" });
}

/* For whoever measures: when the newest plan went to Python. */
function mark(name) {
  performance.clearMarks(name);
  performance.mark(name);
}

function userAgent() {
  return typeof navigator === "undefined" ? "no browser" : navigator.userAgent;
}

// Asks the core for a plan after the form has changed: a short wait after the last key, one question at a time,
// and an answer that a newer change has overtaken is dropped. How long to wait follows how long the last answer
// took: a fast machine shows the sheet almost with the key, a slow phone is not asked for every letter.

const SHORTEST_WAIT_ms = 20;
const LONGEST_WAIT_ms = 250;

export function makePlanner({ ask, onStale, onAnswer }) {
  let wait_ms = LONGEST_WAIT_ms;
  let awake = false;
  let owing = true;
  let newest = 0;
  let answered = 0;
  let timer = null;
  let busy = false;
  let waiting = [];

  const settled = () => answered === newest;

  function tellWaiting() {
    const told = waiting;
    waiting = [];
    for (const tell of told) tell();
  }

  async function go() {
    timer = null;
    if (busy || !awake || settled()) return;
    busy = true;
    const asked = newest;
    const began_ms = performance.now();
    const answer = await ask();
    busy = false;
    wait_ms = Math.min(LONGEST_WAIT_ms, Math.max(SHORTEST_WAIT_ms, (performance.now() - began_ms) / 3));
    if (asked === newest && !answer.superseded) {
      answered = asked;
      onAnswer(answer);
    }
    if (settled()) tellWaiting();
    else if (timer === null) go();
  }

  return {
    /** The form has changed. */
    changed() {
      newest += 1;
      onStale();
      clearTimeout(timer);
      timer = setTimeout(go, wait_ms);
    },
    /** Python is up (again): answer what has been waiting. A job that made it stop is not asked again by itself. */
    wake() {
      awake = true;
      if (owing && settled()) newest += 1;
      owing = false;
      go();
    },
    /** Python is gone; whatever is shown must be asked for again. */
    sleep() {
      awake = false;
      owing = true;
    },
    /** Ask at once, without waiting for more keys. */
    hurry() {
      if (timer !== null) { clearTimeout(timer); go(); }
    },
    settled,
    /** Resolves when the newest change has its answer. */
    whenSettled: () => (settled() ? Promise.resolve() : new Promise((resolve) => waiting.push(resolve))),
    /** The answer came with something else (a file that was opened): nothing left to ask. */
    accept() { clearTimeout(timer); timer = null; newest += 1; answered = newest; tellWaiting(); },
  };
}

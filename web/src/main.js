// Wiring: form -> planner -> sheet, and the buttons round them.

import { setUpAbout } from "./about.js";
import { readCatalogue } from "./catalogue.js";
import { byId, reveal } from "./dom.js";
import { clearFaults, sayFileFault, showFaults } from "./faults.js";
import { acceptDrops, download, readSheetFile } from "./files.js";
import { makeForm } from "./form.js";
import { emptyTyped, jobFromTyped, mendTyped, typedFromJob } from "./job.js";
import { watchNotes } from "./notes.js";
import { makePlanner } from "./planner.js";
import { startRuntime } from "./runtime.js";
import { makeSheetView } from "./sheet-view.js";
import { makeStatus } from "./status.js";
import { keepDraft, readDraft, storageWorks } from "./store.js";

const PLAN_LIMIT_s = 20;
// While a field is still being typed in, a fault in it waits this long before it is shown.
const FAULT_PATIENCE_ms = 900;
// An answer that comes sooner needs no word about waiting.
const NOTICEABLE_ms = 350;

const VERDICT_WORDS = { reachable: "within reach", borderline: "borderline", "out-of-reach": "out of reach" };

const catalogue = readCatalogue(byId("catalogue").textContent);
const status = makeStatus();
const sheet = makeSheetView(byId("paper"));
const notes = watchNotes(byId("paper"));
const about = setUpAbout(catalogue);
const paperIsExample = JSON.stringify(jobFromTyped(typedFromJob(catalogue.demo_job), catalogue));

let runtime = null;
let storageTold = false;
let faultTimer = null;
let slowTimer = null;

// --- the job in the form --------------------------------------------------------------------------

const draft = readDraft();
const firstJob = draft ? mendTyped(draft) : typedFromJob(catalogue.demo_job);

const form = makeForm(byId("job"), catalogue, firstJob, {
  onChange() {
    status.quiet();
    jobChanged();
  },
  onRemoved(text, before) { status.tell(text, { undo: () => putBack(before) }); },
});

const currentJob = () => jobFromTyped(form.typed(), catalogue);
const isExample = () => JSON.stringify(currentJob()) === paperIsExample;

function nameThePage() {
  const title = form.typed().title.trim();
  document.title = title ? `${title} – Quenchwright` : "Quenchwright";
}

function keep() {
  if (keepDraft(form.typed()) || storageTold) return;
  storageTold = true;
  status.tell("This browser does not let the page keep a draft. Save the sheet before you close or reload the page.", { bad: true });
}

function jobChanged() {
  keep();
  nameThePage();
  reveal(byId("job-hint"), false);
  planner.changed();
}

function putBack(before) {
  const now = structuredClone(form.typed());
  form.fill(before);
  jobChanged();
  status.tell("The job is back as it was.", { undo: () => putBack(now) });
  form.focusCard("steel");
}

function sayExample() {
  const hint = byId("job-hint");
  hint.textContent = "This is an example. Press a card to change it, or start a new job.";
  reveal(hint, true);
}

// --- planning -------------------------------------------------------------------------------------

const today = () => {
  const now = new Date();
  return [now.getFullYear(), String(now.getMonth() + 1).padStart(2, "0"), String(now.getDate()).padStart(2, "0")].join("-");
};

const askCore = (request) => runtime.call({ ...request, date: today() }, { timeout_s: PLAN_LIMIT_s });

const planner = makePlanner({
  ask: () => askCore({ do: "plan", job: currentJob() }),
  onStale() {
    clearTimeout(faultTimer);
    status.setSheet(status.state() === "waking" && isExample() ? "example" : "stale");
    if (status.state() === "ready" || status.state() === "working") {
      status.setState("working");
      clearTimeout(slowTimer);
      slowTimer = setTimeout(() => status.say("Working on it. The sheet below is from before the change.", { aloud: false }), NOTICEABLE_ms);
    }
  },
  onAnswer: showAnswer,
});

function showAnswer(answer) {
  clearTimeout(faultTimer);
  clearTimeout(slowTimer);
  if (status.state() === "failed") return; // the worker died under this question; showFailure has said so
  status.setState("ready");
  status.clearTrouble();
  if (answer.ok) showPlan(answer);
  else if (answer.bug) showBug(answer.bug);
  else showJobFaults(answer.errors ?? []);
}

function showPlan({ plan, sheet: html }) {
  clearFaults(form);
  sheet.show(html);
  notes.refresh();
  about.setPlan(plan);
  status.setSheet("current");
  status.planned();
  const range = plan?.aim?.HRC ? `${plan.aim.HRC[0]}–${plan.aim.HRC[1]}\u00a0HRC ` : "";
  const verdict = VERDICT_WORDS[plan?.verdict];
  status.say(verdict ? `The sheet is up to date: ${range}${range ? "is " : ""}${verdict}.` : "The sheet is up to date.");
}

function showJobFaults(errors) {
  const show = () => {
    const listed = showFaults(form, errors).map((item) => ({ ...item, place: [item.card && form.cardName(item.card), item.field?.label].filter(Boolean).join(", ") }));
    const wrong = listed.filter((item) => !item.wanting);
    const text = wrong.length
      ? `${wrong.length === 1 ? "One thing" : `${wrong.length} things`} to mend. The sheet below is from before the change.`
      : "Fill in what is missing. The sheet below is from before.";
    status.list(text, listed, (field) => form.goTo(field));
  };
  const typingIn = [...form.fields()].find((field) => field.control === document.activeElement && field.control.type === "text" && !field.blank());
  if (!typingIn) { show(); return; }
  status.say("The sheet below is from before the change.", { aloud: false });
  faultTimer = setTimeout(show, FAULT_PATIENCE_ms);
}

// What the runtime says of itself is already in plain words; a fault inside the core is not.
const RUNTIME_REPORTS = new Set(["time-limit", "worker-died", "worker-stopped", "restarted"]);

function showBug({ id, what, where, versions }) {
  const plain = RUNTIME_REPORTS.has(id);
  status.setSheet("stale");
  status.say("No plan for this job. The sheet below is from before the change.");
  status.showTrouble({
    heading: plain ? "The planner gave no answer" : "Something inside the planner broke",
    lines: [plain ? what : "This is a fault of the program, not of your job.", "What you typed is kept. Change something in the job, or try again."],
    technical: [`report ${id}`, what, where, JSON.stringify(versions ?? {}), navigator.userAgent].filter(Boolean).join("\n"),
    again: () => { status.clearTrouble(); planner.changed(); },
  });
}

// --- starting Python ------------------------------------------------------------------------------

function showPhase(name, text) {
  if (name === "ready") return; // showReady follows
  clearTimeout(slowTimer);
  status.setState("waking");
  const what = text || name;
  const below = status.sheet() === "example" ? "The sheet below is an example." : "The sheet below is not yet yours.";
  status.say(`The planner is waking: ${what.replace(/[.…]+$/, "").replace(/^[A-Z](?=[a-z])/, (letter) => letter.toLowerCase())}. ${below}`, { aloud: false });
}

function showReady(versions) {
  about.setVersions(versions);
  status.setState("working");
  status.say("The planner is awake. Working out your sheet.", { aloud: false });
  planner.wake();
  if (!planner.settled()) return;
  // Python was restarted because of this very job: showBug has said so, and asking again would stop it again.
  status.setState("ready");
  status.say("The planner is awake again. The sheet below is from before the change.");
}

function showFailure({ phase, what, why, hint, technical } = {}) {
  clearTimeout(slowTimer);
  planner.sleep();
  status.setState("failed");
  status.say(status.sheet() === "example" ? "The planner is not running. The sheet below is only an example." : "The planner is not running. The sheet below does not match the job.", { aloud: false });
  status.showTrouble({
    heading: phase === "ready" ? "The planner stopped" : "The planner could not start",
    lines: [what, why, hint, "The form still works and what you typed is kept."],
    technical: [phase && `phase: ${phase}`, technical, navigator.userAgent].filter(Boolean).join("\n"),
    again: () => startAgain(phase),
  });
}

const callbacks = { onPhase: showPhase, onReady: showReady, onFailure: showFailure };

function start() {
  try {
    runtime = startRuntime(callbacks);
  } catch (problem) {
    showFailure({ phase: "start", what: "The start stopped before Python was reached.", technical: String(problem?.stack ?? problem) });
  }
}

// The parts packed in this file can be unpacked only once; if that failed, only the whole page can start anew.
const BEFORE_UNPACKED = new Set(["start", "check", "unpack"]);

async function startAgain(failedPhase) {
  if (!runtime || BEFORE_UNPACKED.has(failedPhase)) {
    location.reload();
    return;
  }
  status.clearTrouble();
  showPhase("again", "starting once more");
  byId("result").focus({ preventScroll: true });
  await runtime.restart();
}

// --- buttons --------------------------------------------------------------------------------------

/** True once the newest change has its sheet; otherwise says why not. */
async function sheetIsCurrent(doing) {
  if (status.state() === "failed") {
    status.tell(`Cannot ${doing} yet: the planner is not running.`, { bad: true });
    return false;
  }
  if (status.state() === "waking") status.tell(`The planner is still waking. Then it will ${doing}.`);
  planner.hurry();
  await planner.whenSettled();
  if (status.sheet() === "current") { return true; }
  status.tell(`Cannot ${doing} yet: the sheet does not match the job. Mend what is listed above first.`, { bad: true });
  return false;
}

byId("print-sheet").addEventListener("click", async () => {
  if (!(await sheetIsCurrent("print"))) return;
  status.hush();
  window.print();
});

async function save() {
  if (!(await sheetIsCurrent("save"))) return;
  const answer = await askCore({ do: "save", job: currentJob() });
  if (answer.ok) {
    download(answer.filename, answer.html);
    status.tell(`Saved as a new copy in your downloads: ${answer.filename}`);
  } else if (answer.bug) {
    showBug(answer.bug);
  } else {
    showJobFaults(answer.errors ?? []);
  }
}
byId("save-sheet").addEventListener("click", save);
// The browser's own save would keep the whole program instead of the sheet.
addEventListener("keydown", (event) => {
  if ((event.ctrlKey || event.metaKey) && !event.shiftKey && !event.altKey && event.key.toLowerCase() === "s") {
    event.preventDefault();
    save();
  }
});

byId("new-job").addEventListener("click", () => {
  const before = structuredClone(form.typed());
  form.fill({ ...emptyTyped(), units: before.units });
  form.foldAll();
  form.open("steel");
  jobChanged();
  status.tell("The form is empty for a new job.", { undo: () => putBack(before), untilPlanned: true });
  form.fieldAt("steel.grade")?.focus();
});

async function openFile(file) {
  const refuse = (why) => status.tell(`${why} The job in the form is unchanged.`, { bad: true });
  let text;
  try {
    text = await readSheetFile(file);
  } catch (problem) {
    refuse(problem.message);
    return;
  }
  if (status.state() === "failed") { refuse("Cannot open a sheet yet: the planner is not running."); return; }
  if (status.state() === "waking") status.tell(`${file.name} will open once the planner is awake.`);
  await planner.whenSettled();
  const answer = await askCore({ do: "open", text });
  if (!answer.ok) {
    const why = answer.bug ? `The planner stumbled over it (report ${answer.bug.id}).` : (answer.errors ?? []).slice(0, 4).map(sayFileFault).join(" ");
    refuse(`${file.name} was not opened. ${why}`);
    return;
  }
  const before = structuredClone(form.typed());
  form.fill(typedFromJob(answer.job));
  form.foldAll();
  keep();
  nameThePage();
  reveal(byId("job-hint"), false);
  planner.accept();
  showAnswer(answer);
  status.tell(`Opened ${file.name}.`, { undo: () => putBack(before) });
}

byId("open-sheet").addEventListener("click", () => byId("file").click());
byId("file").addEventListener("change", (event) => {
  const [file] = event.target.files;
  event.target.value = "";
  if (file) openFile(file);
});
acceptDrops(byId("drop"), openFile);

// Only where no draft can be kept would leaving lose the job.
addEventListener("beforeunload", (event) => { if (storageTold && !isExample()) event.preventDefault(); });

// --- go -------------------------------------------------------------------------------------------

nameThePage();
status.setSheet(isExample() ? "example" : "stale");
if (isExample()) sayExample();
if (!storageWorks()) keep();
start();

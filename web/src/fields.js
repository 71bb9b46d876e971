// One field: label, control, hint, a reading of what was typed, and the fault if there is one.
// Every field knows its path in the job, so that a fault the core reports finds its place.

import { make, reveal } from "./dom.js";

const idFor = (path) => `f-${path.replace(/[^A-Za-z0-9]+/g, "-")}`;

function describe(control, ...notes) {
  const ids = notes.filter((note) => note && !note.hidden).map((note) => note.id);
  if (ids.length) control.setAttribute("aria-describedby", ids.join(" "));
  else control.removeAttribute("aria-describedby");
}

function finish({ path, label, control, hint, reading, width, optional }) {
  const id = control.id;
  const hintNote = hint ? make("p", { class: "hint", id: `${id}-hint` }, hint) : null;
  const readingNote = reading ? make("p", { class: "reading", id: `${id}-reading`, hidden: true }) : null;
  const faultNote = make("p", { class: "fault", id: `${id}-fault`, hidden: true });
  const name = make("label", { for: id }, label, optional ? make("span", { class: "optional" }, " optional") : null);
  const root = make("div", { class: `field ${width ?? ""}`.trim() }, name, control.parentElement ?? control, make("div", { class: "field-notes" }, hintNote, readingNote, faultNote));
  const refresh = () => {
    if (readingNote) {
      const words = reading(control.value);
      readingNote.textContent = words ?? "";
      reveal(readingNote, Boolean(words));
    }
    describe(control, hintNote, readingNote, faultNote);
  };
  const field = {
    path, root, control, label,
    touched: false,
    blank: () => control.type !== "checkbox" && control.value.trim() === "",
    refresh,
    setHint(text) { if (hintNote) hintNote.textContent = text; },
    setFault(text) {
      faultNote.textContent = text ?? "";
      reveal(faultNote, Boolean(text));
      if (text) control.setAttribute("aria-invalid", "true");
      else control.removeAttribute("aria-invalid");
      refresh();
    },
    focus: () => control.focus(),
  };
  control.addEventListener("input", refresh);
  control.addEventListener("blur", () => { field.touched = true; });
  refresh();
  return field;
}

/** A line of text. Numbers are text too: what was typed is kept. */
export function textField({ path, label, hint, value, change, decimal = true, reading, width, optional, spellcheck = false }) {
  const control = make("input", { type: "text", id: idFor(path), inputmode: decimal ? "decimal" : null, spellcheck: String(spellcheck), autocapitalize: "off" });
  control.value = value;
  control.addEventListener("input", () => change(control.value));
  return finish({ path, label, control, hint, reading, width, optional });
}

/** A choice from a short list. `blank` is what stands there before anything is chosen. */
export function selectField({ path, label, hint, options, value, change, blank, width, optional }) {
  const control = make("select", { id: idFor(path) });
  if (blank !== undefined) control.append(make("option", { value: "" }, blank));
  for (const { id, name } of options) control.append(make("option", { value: id }, name));
  if (value && !options.some((option) => option.id === value)) control.append(make("option", { value }, value));
  control.value = value;
  if (control.selectedIndex < 0) control.selectedIndex = 0;
  control.addEventListener("change", () => change(control.value));
  return finish({ path, label, control, hint, width, optional });
}

/** A field built round a control that brings its own parts (the grade box). */
export const wrapField = (parts) => finish(parts);

export function checkBox({ path, label, checked, change }) {
  const control = make("input", { type: "checkbox", id: idFor(path) });
  control.checked = checked;
  control.addEventListener("change", () => change(control.checked));
  const root = make("div", { class: "choice" }, control, make("label", { for: control.id }, label));
  return { path, root, control, label, touched: true, blank: () => false, refresh() {}, setFault() {}, focus: () => control.focus() };
}

/** A few choices of which one holds. */
export function radioGroup({ path, legend, options, value, change }) {
  const name = idFor(path);
  const fault = make("p", { class: "fault", id: `${name}-fault`, hidden: true });
  const inputs = options.map(({ id }) => {
    const input = make("input", { type: "radio", name, id: `${name}-${id}`, value: id });
    input.checked = id === value;
    input.addEventListener("change", () => { if (input.checked) change(id); });
    return input;
  });
  const root = make("fieldset", { class: "group radios" }, make("legend", {}, legend),
    make("div", { class: "choices" }, options.map((option, index) => make("div", { class: "choice" }, inputs[index], make("label", { for: inputs[index].id }, option.name)))), fault);
  return groupFault({ path, root, fault, label: legend, control: inputs.find((input) => input.checked) ?? inputs[0] });
}

/** A fieldset which can carry a fault of its own (no bath at all, an odd mix of dimensions). */
export function group({ path, legend, hint, bare }, ...children) {
  const id = idFor(path);
  const fault = make("p", { class: "fault", id: `${id}-fault`, hidden: true });
  const hintNote = hint ? make("p", { class: "hint", id: `${id}-hint` }, hint) : null;
  const root = make("fieldset", { class: bare ? "group bare" : "group", id, "aria-describedby": hintNote ? hintNote.id : null, tabindex: "-1" },
    make("legend", {}, legend), hintNote, ...children, fault);
  return groupFault({ path, root, fault, hintNote, label: legend, control: root });
}

function groupFault({ path, root, fault, hintNote, label, control }) {
  return {
    path, root, control, label,
    touched: true,
    blank: () => false,
    refresh() {},
    setFault(text) {
      fault.textContent = text ?? "";
      reveal(fault, Boolean(text));
      root.classList.toggle("faulty", Boolean(text));
      describe(root, hintNote, fault);
    },
    focus: () => control.focus(),
  };
}

// Faults from the core, brought to the field they are about.

/** "shop.baths[0].medium" and "shop.baths.0.medium" are the same place. */
const tidyPath = (path) => String(path ?? "").replace(/\[(\w+)\]/g, ".$1").replace(/^job\./, "");

// A fault about a whole group goes to the field a person would fill in first.
const SAME_PLACE = { "steel": ["steel.grade", "steel.chemistry.C"], "part.dimensions": ["part.dimensions_mm"], "shop.units": ["units"], "aim": ["aim.use"], "shop": ["shop.heat.kind"], "part": ["part.shape"] };

function fieldFor(form, path) {
  for (let place = tidyPath(path); place; place = place.split(".").slice(0, -1).join(".")) {
    for (const candidate of [place, ...(SAME_PLACE[place] ?? [])]) {
      const field = form.fieldAt(candidate);
      if (field) return field;
    }
  }
  return null;
}

const shown = (value) => (typeof value === "string" ? `“${value.length > 40 ? `${value.slice(0, 40)}…` : value}”` : Array.isArray(value) ? value.map((part) => part ?? "?").join(" to ") : String(value));

const missing = (value) => value === null || value === undefined || value === "";

/** One plain sentence for a fault at its field: the field's name stands there already, its path helps nobody. */
function sayAtField({ path, value, expected, message }) {
  if (!expected) return message;
  if (path === "steel.grade" && !missing(value)) return `${shown(value)} is not a steel known here. Choose one from the list, or fill in a certificate.`;
  const wanted = expected.replace(/[.]$/, "");
  return missing(value) ? `Give ${wanted}.` : `${shown(value)} does not fit: give ${wanted}.`;
}

/** A fault where there is no field to put it at. */
export const sayFault = ({ expected, message }) => message ?? `Expected ${expected}.`;

/** Why a file was refused: in the file itself, or in the job it holds. */
export function sayFileFault(error) {
  if (error.path !== "file" || !error.expected) return sayFault(error);
  return missing(error.value) ? `It should be ${error.expected}.` : `Found ${shown(error.value)}; expected ${error.expected}.`;
}

/**
 * Show each fault at its field, and answer what the summary should list: [{text, field, wanting}].
 * A blank field that nobody has been in yet is only wanted, not wrong: it is listed, not marked.
 */
export function showFaults(form, errors) {
  clearFaults(form);
  const said = new Map();
  const listed = [];
  const counts = {};
  for (const error of errors) {
    const field = fieldFor(form, error.path);
    if (!field) { listed.push({ text: sayFault(error), field: null, wanting: false }); continue; }
    const text = sayAtField(error);
    const wanting = field.blank() && !field.touched;
    const card = form.cardOf(field);
    listed.push({ text, field, wanting, card });
    if (wanting) continue;
    said.set(field, said.has(field) ? `${said.get(field)} ${text}` : text);
    counts[card] = (counts[card] ?? 0) + 1;
  }
  for (const [field, text] of said) field.setFault(text);
  form.countFaults(counts);
  return listed;
}

export function clearFaults(form) {
  for (const field of form.fields()) field.setFault(null);
  form.countFaults({});
}

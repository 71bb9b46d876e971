// The About panel: versions, edition of the data, licences of what is packed inside.

import { byId, make } from "./dom.js";

const NAMES = { python: "Python", numpy: "NumPy", pyodide: "Pyodide", jinja2: "Jinja2", markupsafe: "MarkupSafe" };

const row = (name, value) => [make("dt", {}, name), make("dd", {}, value)];

function licences() {
  const block = byId("licences");
  if (!block) return [];
  return [make("details", {}, make("summary", {}, "Licences of what is packed inside"), make("pre", { tabindex: "0", "aria-label": "Licences" }, block.textContent.trim()))];
}

export function setUpAbout(catalogue) {
  const panel = byId("about");
  let versions = {};
  let plan = {};

  byId("about-open").addEventListener("click", () => {
    const inside = Object.entries(versions).filter(([, value]) => typeof value === "string" || typeof value === "number");
    byId("about-body").replaceChildren(
      make("p", {}, "Quenchwright plans the hardening and tempering of steel parts. It is one file, works without a network and sends nothing anywhere. Its figures are computed ranges, not promises: try one part before the rest."),
      make("dl", {},
        ...row("Program", plan.version ?? catalogue.version ?? "0.1.0"),
        ...row("Data edition", plan.data_edition ?? catalogue.data_edition ?? "not known"),
        ...row("Steels known", String(catalogue.grades.length)),
        ...inside.filter(([name]) => name in NAMES).flatMap(([name, value]) => row(NAMES[name], String(value)))),
      make("p", {}, "The job in the form is kept in this browser so that a reload loses nothing. Other pages opened from this machine may be able to read it. The saved sheet is the lasting copy."),
      ...licences());
    panel.showModal();
  });

  byId("about-close").addEventListener("click", () => panel.close());

  return {
    setVersions(found) { versions = found ?? {}; },
    setPlan(found) { plan = found ?? {}; },
  };
}

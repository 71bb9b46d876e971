// "Where does this number come from?": the sheet carries its notes; pressing a number shows its note beside the sheet.

import { byId, reveal } from "./dom.js";

export function watchNotes(paper) {
  const note = byId("note");
  const body = byId("note-body");
  const heading = byId("note-heading");
  let shown = null;

  const sourceOf = (id) => (id ? [...paper.querySelectorAll("[id]")].find((element) => element.id === id) ?? null : null);

  function fill(target) {
    const copy = target.cloneNode(true);
    copy.removeAttribute("id");
    copy.querySelectorAll("[id]").forEach((element) => element.removeAttribute("id"));
    const title = copy.querySelector("h3, h4, h5, dt, strong, b, summary");
    heading.textContent = title?.textContent.trim() || "Where this comes from";
    if (title && title.textContent.trim()) title.remove();
    // A cloned list item or definition needs a plain box around it, not a list.
    const box = document.createElement("div");
    box.append(...copy.childNodes);
    body.replaceChildren(box);
  }

  function close() {
    if (note.hidden) return;
    reveal(note, false);
    const back = shown && [...paper.querySelectorAll("a.why")].find((link) => link.getAttribute("href") === `#${shown}`);
    if (note.contains(document.activeElement) || document.activeElement === document.body) back?.focus({ preventScroll: true });
    shown = null;
  }

  paper.addEventListener("click", (event) => {
    const link = event.target.closest?.("a.why");
    if (!link) return;
    const id = decodeURIComponent(link.getAttribute("href")?.replace(/^[^#]*#/, "") ?? "");
    const target = sourceOf(id);
    if (!target) return;
    event.preventDefault();
    fill(target);
    shown = id;
    reveal(note, true);
    note.focus({ preventScroll: true });
  });
  byId("note-close").addEventListener("click", close);
  note.addEventListener("keydown", (event) => { if (event.key === "Escape") { event.stopPropagation(); close(); } });

  return {
    /** After a new sheet: keep the open note true to it. */
    refresh() {
      if (!shown) return;
      const target = sourceOf(shown);
      if (target) fill(target);
      else close();
    },
  };
}

// The live sheet. This is the only place where markup is put into the page, and it comes from our own core,
// which escapes everything a person typed.

import { make } from "./dom.js";

/** On the page the long notes stand folded: each number already shows its own note when it is pressed. */
function foldNotes(paper) {
  const notes = paper.querySelector(".sheet > section.notes");
  if (!notes) return;
  const fold = make("details", { class: "all-notes" }, make("summary", {}, "All notes: where the numbers come from"));
  notes.replaceWith(fold);
  fold.append(notes);
}

export function makeSheetView(paper) {
  foldNotes(paper);
  const detailsOf = () => [...paper.querySelectorAll("details")];

  function focusedPlace() {
    const focused = document.activeElement;
    if (!focused || !paper.contains(focused)) return null;
    return { id: focused.id, href: focused.getAttribute("href") };
  }

  function focusAgain(place) {
    if (!place) return;
    const candidates = [...paper.querySelectorAll("a, button, summary, [tabindex]")];
    const same = candidates.find((element) => (place.id && element.id === place.id) || (place.href && element.getAttribute("href") === place.href));
    same?.focus({ preventScroll: true });
  }

  return {
    /** Replace the sheet; reading place, open notes and focus stay. */
    show(html) {
      const focused = focusedPlace();
      const open = detailsOf().map((details) => details.open);
      const { scrollX, scrollY } = window;
      paper.innerHTML = html;
      foldNotes(paper);
      detailsOf().forEach((details, index) => { if (open[index] !== undefined) details.open = open[index]; });
      focusAgain(focused);
      if (window.scrollX !== scrollX || window.scrollY !== scrollY) window.scrollTo(scrollX, scrollY);
    },
  };
}

// What the page says about itself: the strip above the sheet, messages with an undo, and trouble with a way out.

import { byId, make, reveal } from "./dom.js";

const ANNOUNCE_AFTER_ms = 700;

export function makeStatus() {
  const page = document.documentElement;
  const strip = byId("strip-text");
  const more = byId("strip-more");
  const message = byId("message");
  const trouble = byId("trouble");
  const live = byId("live");
  let announcement = null;

  /** Tell a screen reader, politely and only once things have calmed down. */
  function announce(text) {
    clearTimeout(announcement);
    announcement = setTimeout(() => { live.textContent = text; }, ANNOUNCE_AFTER_ms);
  }

  const technicalNote = (text) => {
    const pre = make("pre", { tabindex: "0", "aria-label": "Technical details" }, text);
    const copy = make("button", { type: "button", class: "plain", onclick: async () => {
      try {
        await navigator.clipboard.writeText(text);
        copy.textContent = "Copied";
      } catch {
        getSelection().selectAllChildren(pre);
        copy.textContent = "Marked: press Ctrl+C";
      }
    } }, "Copy");
    return make("details", {}, make("summary", {}, "For whoever mends it"), pre, copy);
  };

  return {
    announce,
    setState(state) { page.dataset.state = state; },
    state: () => page.dataset.state,
    setSheet(state) { page.dataset.sheet = state; },
    sheet: () => page.dataset.sheet,

    say(text, { aloud = true } = {}) {
      strip.textContent = text;
      reveal(more, false);
      more.replaceChildren();
      if (aloud) announce(text);
    },

    /** The summary of faults: each line leads to its field. */
    list(text, items, goTo) {
      strip.textContent = text;
      more.replaceChildren(make("ul", {}, items.map(({ text: said, field, place }) => make("li", {}, field
        ? make("button", { type: "button", class: "link", onclick: () => goTo(field) }, place ? `${place}: ${said}` : said)
        : said))));
      reveal(more, items.length > 0);
      announce(`${text} ${items.map((item) => item.text).join(" ")}`);
    },

    /** A line that stays until the next one; `undo` brings the job back as it was. */
    tell(text, { undo, bad = false, untilPlanned = false } = {}) {
      message.toggleAttribute("data-until-planned", untilPlanned);
      message.classList.toggle("bad", bad);
      message.replaceChildren(make("p", {}, text), make("div", { class: "message-buttons" },
        undo ? make("button", { type: "button", id: "undo", onclick: undo }, "Undo") : null,
        make("button", { type: "button", class: "plain", id: "message-close", onclick: () => reveal(message, false) }, "Dismiss")));
      reveal(message, true);
      announce(text);
    },
    /** The job has moved on: a plain message goes, an offer to undo stays. */
    quiet() { if (!message.querySelector("#undo")) reveal(message, false); },
    hush() { reveal(message, false); },
    planned() { if (message.hasAttribute("data-until-planned")) reveal(message, false); },

    /** Something of ours broke. Says what, what still works, what to try. */
    showTrouble({ heading, lines, technical, again, againLabel = "Try again" }) {
      const retry = again ? make("button", { type: "button", class: "strong", id: "try-again", onclick: again }, againLabel) : null;
      trouble.replaceChildren(make("h3", {}, heading), ...lines.filter(Boolean).map((line) => make("p", {}, line)), ...(retry ? [retry] : []), ...(technical ? [technicalNote(technical)] : []));
      reveal(trouble, true);
      announce(`${heading}. ${lines.filter(Boolean).join(" ")}`);
    },
    clearTrouble() { reveal(trouble, false); trouble.replaceChildren(); },
  };
}

// A text box with suggestions below it (the ARIA combobox pattern). Anything may be typed; suggestions only help.

import { make, reveal } from "./dom.js";

/**
 * suggest(text) -> [{value, parts: [bold text, rest]}]
 * Arrow keys move, Enter takes, Escape closes, Tab goes on without taking anything.
 */
export function combobox({ id, label, value, suggest, change }) {
  const listId = `${id}-list`;
  const input = make("input", {
    type: "text", id, role: "combobox", "aria-autocomplete": "list", "aria-expanded": "false", "aria-controls": listId,
    autocomplete: "off", autocapitalize: "off", spellcheck: "false",
  });
  input.value = value;
  const list = make("ul", { id: listId, role: "listbox", "aria-label": label, class: "suggestions", hidden: true });
  const frame = make("div", { class: "combo" }, input, list);
  let active = -1;
  let taking = false;

  const options = () => [...list.children];

  function close() {
    reveal(list, false);
    input.setAttribute("aria-expanded", "false");
    input.removeAttribute("aria-activedescendant");
    active = -1;
  }

  function mark(index) {
    active = index;
    options().forEach((option, position) => option.setAttribute("aria-selected", String(position === index)));
    const option = options()[index];
    if (!option) { input.removeAttribute("aria-activedescendant"); return; }
    input.setAttribute("aria-activedescendant", option.id);
    option.scrollIntoView({ block: "nearest" });
  }

  function take(option) {
    input.value = option.dataset.value;
    taking = true;
    input.dispatchEvent(new Event("input", { bubbles: true }));
    taking = false;
    close();
  }

  function open() {
    const found = suggest(input.value);
    list.replaceChildren(...found.map(({ value: taken, parts: [strong, rest] }, index) =>
      make("li", { role: "option", id: `${listId}-${index}`, "aria-selected": "false", "data-value": taken }, make("b", {}, strong), rest ? ` ${rest}` : "")));
    if (!found.length) { close(); return; }
    reveal(list, true);
    input.setAttribute("aria-expanded", "true");
    mark(-1);
  }

  input.addEventListener("input", () => { change(input.value); if (!taking) open(); });
  input.addEventListener("blur", close);
  input.addEventListener("click", () => { if (list.hidden) open(); });
  input.addEventListener("keydown", (event) => {
    const count = list.hidden ? 0 : options().length;
    if (event.key === "ArrowDown" || event.key === "ArrowUp") {
      event.preventDefault();
      if (!count) { open(); if (!list.hidden) mark(event.key === "ArrowDown" ? 0 : options().length - 1); return; }
      mark((active + (event.key === "ArrowDown" ? 1 : -1) + count + (active < 0 && event.key === "ArrowUp" ? 1 : 0)) % count);
    } else if (event.key === "Enter") {
      event.preventDefault();
      if (count && active >= 0) take(options()[active]);
      else close();
    } else if (event.key === "Escape" && count) {
      event.preventDefault();
      event.stopPropagation();
      close();
    }
  });
  // Pressing on the list must not take the focus out of the box before the choice is made.
  list.addEventListener("pointerdown", (event) => event.preventDefault());
  list.addEventListener("mousedown", (event) => event.preventDefault());
  list.addEventListener("click", (event) => {
    const option = event.target.closest("[role=option]");
    if (option) take(option);
  });
  return { input, frame };
}

// Small helpers to make elements. Text always goes in as text, never as markup.

/** Make an element: make("p", {class: "hint", id}, "text", otherNode). Null and false attributes are left out. */
export function make(tag, attributes = {}, ...children) {
  const element = document.createElement(tag);
  for (const [name, value] of Object.entries(attributes)) {
    if (value === null || value === undefined || value === false) continue;
    if (name.startsWith("on")) element.addEventListener(name.slice(2), value);
    else element.setAttribute(name, value === true ? "" : String(value));
  }
  element.append(...children.flat().filter((child) => child !== null && child !== undefined && child !== false));
  return element;
}

export const byId = (id) => document.getElementById(id);

/** Show or hide without disturbing what is inside. */
export function reveal(element, visible) {
  element.hidden = !visible;
}

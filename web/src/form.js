// The job's four cards. The form owns `typed` (what stands in it) and tells `onChange` after every change.

import { find, gradeFor, gradesLike } from "./catalogue.js";
import { byId, make, reveal } from "./dom.js";
import { combobox } from "./combobox.js";
import { checkBox, group, radioGroup, selectField, textField, wrapField } from "./fields.js";
import { emptyBath, shapeOf } from "./job.js";
import { keepMeaning } from "./lengths.js";
import { readDifference_C, readNumber, readTemperature_C, readVolume_L } from "./quantities.js";
import { aimSentence, partSentence, shopSentence, steelSentence } from "./sentences.js";

const CARDS = [
  { id: "steel", name: "Steel", sentence: steelSentence },
  { id: "part", name: "Part", sentence: partSentence },
  { id: "aim", name: "Aim", sentence: aimSentence },
  { id: "shop", name: "Shop", sentence: shopSentence },
];
const MOST_BATHS = 12;
// Carbon to copper; what few certificates name stands folded below.
const USUAL_ELEMENTS = 9;

/** Echo a converted figure ("500 F" is 260 °C); say nothing when the bare number was typed. */
const converted = (read, unit) => (text) => {
  const value = readNumber(text) === null ? read(text) : null;
  return typeof value === "number" ? `= ${value} ${unit}` : null;
};
const inCelsius = converted(readTemperature_C, "°C");
const inCelsiusApart = converted(readDifference_C, "°C either way");
const inLitres = converted(readVolume_L, "L");

export function makeForm(root, catalogue, typedAtStart, { onChange, onRemoved }) {
  let typed = typedAtStart;
  const fields = new Map();
  const cards = new Map();

  // --- fields and their paths -------------------------------------------------------------------

  function keep(field) {
    fields.set(field.path, field);
    return field.root;
  }

  const forget = (prefix) => { for (const path of [...fields.keys()]) if (path === prefix || path.startsWith(`${prefix}.`)) fields.delete(path); };

  function changed() {
    describeCards();
    onChange();
  }

  const text = (path, target, key, rest) => keep(textField({
    path, value: target[key] ?? "", change: (value) => { target[key] = value; changed(); }, ...rest,
  }));

  const select = (path, target, key, rest, then) => keep(selectField({
    path, value: target[key] ?? "", change: (value) => { target[key] = value; then?.(value); changed(); }, ...rest,
  }));

  // --- Steel ------------------------------------------------------------------------------------

  function gradeField() {
    const suggest = (value) => gradesLike(catalogue, value).map(({ grade, alias }) => ({
      value: grade.id,
      parts: [grade.id, [grade.name.startsWith(`${grade.id} `) ? grade.name.slice(grade.id.length + 1) : grade.name === grade.id ? "" : grade.name, alias ? `(also ${alias})` : ""].filter(Boolean).join(" ")],
    }));
    const box = combobox({ id: "f-steel-grade", label: "Known steels", value: typed.grade, suggest, change: (value) => { typed.grade = value; changed(); } });
    const reading = (value) => {
      const grade = gradeFor(catalogue, value);
      return grade && grade.name !== value.trim() ? grade.name : null;
    };
    return keep(wrapField({ path: "steel.grade", label: "Grade", control: box.input, hint: "A name or number as your supplier writes it: W1, 5160, 1.2842.", reading }));
  }

  function chemistryFields() {
    const cell = (element) => text(`steel.chemistry.${element}`, typed.chemistry, element, { label: `${element} %` });
    const usual = catalogue.elements.slice(0, USUAL_ELEMENTS);
    const rare = catalogue.elements.slice(USUAL_ELEMENTS);
    const more = rare.length ? make("details", { class: "extra" }, make("summary", {}, "More elements"), make("div", { class: "row elements" }, rare.map(cell))) : null;
    if (more) more.open = rare.some((element) => typed.chemistry[element]);
    return keep(group({ path: "steel.chemistry", legend: "From the certificate", hint: "Per cent by weight. Leave blank what the certificate leaves out." },
      make("div", { class: "row elements" }, usual.map(cell)), more,
      text("steel.grain_size", typed, "grain_size", { label: "Grain size (ASTM number)", optional: true, width: "narrow" })));
  }

  function steelPanel(panel) {
    forget("steel");
    const draw = () => {
      forget("steel");
      const kind = keep(radioGroup({
        path: "steel.by", legend: "How do you know the steel?", value: typed.steelBy,
        options: [{ id: "grade", name: "By its grade" }, { id: "chemistry", name: "By a certificate" }],
        change: (value) => { typed.steelBy = value; draw(); panel.querySelector("input:checked")?.focus(); changed(); },
      }));
      panel.replaceChildren(kind, typed.steelBy === "chemistry" ? chemistryFields() : gradeField(), nextButton("steel"));
    };
    draw();
  }

  // --- Part -------------------------------------------------------------------------------------

  const lengthHint = () => (typed.units === "in" ? "A bare number is inches. 3/4, 1 1/2 and 19 mm work too." : "A bare number is millimetres. 3/4 in and 1 1/2\" work too.");

  function changeUnits(units, panel) {
    const from = typed.units;
    typed.units = units;
    for (const id of Object.keys(typed.dimensions)) typed.dimensions[id] = keepMeaning(typed.dimensions[id], from, units);
    typed.thinnest = keepMeaning(typed.thinnest, from, units);
    typed.zone_reach = keepMeaning(typed.zone_reach, from, units);
    partPanel(panel);
    panel.querySelector("input[type=radio]:checked")?.focus();
    changed();
  }

  function dimensionFields() {
    forget("part.dimensions_mm");
    const shape = shapeOf(catalogue, typed);
    if (!shape) return make("p", { class: "hint" }, "Choose the shape, then its sizes can be filled in.");
    const cells = shape.dimensions.map((dimension) => text(`part.dimensions_mm.${dimension.id}`, typed.dimensions, dimension.id, {
      label: capital(dimension.name), optional: !dimension.required, width: "half",
    }));
    return keep(group({ path: "part.dimensions_mm", legend: "Sizes at the place that gets hard", hint: lengthHint() }, make("div", { class: "row" }, cells)));
  }

  function zoneReach() {
    forget("part.zone_mm");
    if (!typed.zone || typed.zone === "all") return make("div", {});
    return text("part.zone_mm", typed, "zone_reach", { label: "How far in", hint: "blank: the usual", width: "half" });
  }

  function partPanel(panel) {
    forget("part"); forget("title"); forget("quantity"); forget("units");
    const sizes = make("div", {}, dimensionFields());
    const reach = make("div", { class: "slot" }, zoneReach());
    panel.replaceChildren(
      make("div", { class: "row name-row" },
        text("title", typed, "title", { label: "Name of the part", decimal: false, spellcheck: true }),
        text("quantity", typed, "quantity", { label: "How many" })),
      select("part.shape", typed, "shape", { label: "Shape", options: catalogue.shapes, blank: "Choose a shape" }, () => sizes.replaceChildren(dimensionFields())),
      sizes,
      keep(radioGroup({
        path: "units", legend: "A bare number means", value: typed.units, options: [{ id: "mm", name: "millimetres" }, { id: "in", name: "inches" }],
        change: (units) => changeUnits(units, panel),
      })),
      text("part.thinnest_mm", typed, "thinnest", { label: "Thinnest place", hint: "Only if some place is thinner than the sizes above.", optional: true, width: "half" }),
      keep(group({ path: "part.features", legend: "It has" }, make("div", { class: "choices" }, catalogue.features.map((feature) => checkBox({
        path: `part.features.${feature.id}`, label: feature.name, checked: typed.features.includes(feature.id),
        change: (on) => { typed.features = on ? [...typed.features, feature.id] : typed.features.filter((id) => id !== feature.id); changed(); },
      }).root)))),
      make("div", { class: "row" },
        select("part.zone", typed, "zone", { label: "It should be", options: catalogue.zones, blank: "Choose", width: "half" }, () => reach.replaceChildren(zoneReach())),
        reach),
      select("part.condition", typed, "condition", { label: "State before hardening", options: catalogue.conditions, blank: "Choose" }),
      nextButton("part"));
  }

  // --- Aim --------------------------------------------------------------------------------------

  const rangeHint = () => {
    const use = find(catalogue.uses, typed.use);
    return use?.hardness_HRC ? `Leave blank for ${use.hardness_HRC[0]}–${use.hardness_HRC[1]} HRC, usual for this use.` : "Say what you want after tempering.";
  };

  function aimPanel(panel) {
    forget("aim"); forget("decided");
    const uses = catalogue.uses.map((use) => ({ id: use.id, name: use.hardness_HRC ? `${use.name}, ${use.hardness_HRC[0]}–${use.hardness_HRC[1]} HRC` : use.name }));
    const own = group({ path: "aim.hardness_HRC", legend: "Your own hardness", hint: rangeHint() }, make("div", { class: "row" },
      text("aim.hardness_HRC.0", typed, "low", { label: "From (HRC)", width: "half" }),
      text("aim.hardness_HRC.1", typed, "high", { label: "To (HRC)", width: "half" })));
    const decided = make("details", { class: "extra" }, make("summary", {}, "Set a step yourself"),
      make("p", { class: "hint" }, "What is left blank, the plan chooses."),
      make("div", { class: "row" },
        text("decided.austenitize_C", typed.decided, "austenitize", { label: "Hardening heat (°C)", reading: inCelsius, width: "half" }),
        select("decided.medium", typed.decided, "medium", { label: "Quench in", options: catalogue.media, blank: "the plan chooses", width: "half" }),
        text("decided.temper_C", typed.decided, "temper", { label: "Temper at (°C)", reading: inCelsius, width: "half" }),
        text("decided.temper_hold_min", typed.decided, "hold", { label: "Hold each temper (min)", width: "half" }),
        text("decided.temper_cycles", typed.decided, "cycles", { label: "How many tempers", width: "half" })));
    decided.open = Object.values(typed.decided).some((value) => value !== "");
    panel.replaceChildren(
      select("aim.use", typed, "use", { label: "What it is for", options: uses, blank: "Something else" }, () => { own.root.querySelector(".hint").textContent = rangeHint(); }),
      keep(own), decided, nextButton("aim"));
  }

  // --- Shop -------------------------------------------------------------------------------------

  function bathRow(bath, index, redraw) {
    const at = `shop.baths.${index}`;
    const medium = find(catalogue.media, bath.medium);
    const liquid = medium?.liquid ?? true;
    const usual = medium?.default_C ?? null;
    return keep(group({ path: at, legend: `Bath ${index + 1}` },
      make("div", { class: "row" },
        select(`${at}.medium`, bath, "medium", { label: "What is in it", options: catalogue.media, blank: "Choose", width: "wide" }, () => redraw(`${at}.medium`)),
        liquid ? text(`${at}.volume_L`, bath, "volume", { label: "Litres", hint: "or 3 gal", reading: inLitres, width: "half" }) : null,
        text(`${at}.temperature_C`, bath, "temperature", { label: "Temperature (°C)", hint: usual === null ? "or 120 F" : `blank: ${usual} °C`, reading: inCelsius, width: "half" }),
        select(`${at}.agitation`, bath, "agitation", { label: "Movement", hint: "of part or bath", options: catalogue.agitations, blank: "Not said", width: "half" })),
      make("button", { type: "button", class: "plain", "data-remove": index, onclick: () => removeBath(index, redraw) }, `Remove bath ${index + 1}`)));
  }

  function removeBath(index, redraw) {
    const before = structuredClone(typed);
    typed.baths.splice(index, 1);
    redraw();
    byId("add-bath")?.focus();
    changed();
    onRemoved(`Bath ${index + 1} removed.`, before);
  }

  function bathRows(holder) {
    const redraw = (focusPath) => { bathRows(holder); if (focusPath) fields.get(focusPath)?.focus(); };
    for (const path of [...fields.keys()]) if (path.startsWith("shop.baths.")) fields.delete(path);
    const add = make("button", { type: "button", id: "add-bath", class: "plain", onclick: () => {
      typed.baths.push(emptyBath());
      redraw(`shop.baths.${typed.baths.length - 1}.medium`);
      changed();
    } }, "Add a bath");
    holder.replaceChildren(...typed.baths.map((bath, index) => bathRow(bath, index, redraw)), ...(typed.baths.length < MOST_BATHS ? [add] : []));
  }

  function shopPanel(panel) {
    forget("shop");
    const baths = make("div", { class: "baths" });
    bathRows(baths);
    const pyrometer = checkBox({ path: "shop.heat.pyrometer", label: "A pyrometer or thermocouple reads it", checked: typed.heat.pyrometer, change: (on) => { typed.heat.pyrometer = on; changed(); } });
    // A kiln and a salt bath come with one, a forge and a torch do not.
    const usualPyrometer = (kind) => { typed.heat.pyrometer = pyrometer.control.checked = kind === "kiln" || kind === "salt"; };
    panel.replaceChildren(
      keep(group({ path: "shop.heat", legend: "Heat" }, make("div", { class: "row" },
        select("shop.heat.kind", typed.heat, "kind", { label: "You heat with", options: catalogue.heats, blank: "Choose", width: "half" }, usualPyrometer),
        select("shop.heat.atmosphere", typed.heat, "atmosphere", { label: "Around the part", options: catalogue.atmospheres, blank: "Not said", width: "half" }),
        text("shop.heat.max_C", typed.heat, "max", { label: "Hottest it gets (°C)", hint: "or 2000 F", reading: inCelsius, width: "half" }),
        text("shop.heat.accuracy_C", typed.heat, "accuracy", { label: "Off by up to (°C)", hint: "either way", reading: inCelsiusApart, width: "half" })),
        keep(pyrometer))),
      keep(group({ path: "shop.baths", legend: "Quench", hint: "List all you have; the plan picks one.", bare: true }, baths)),
      keep(group({ path: "shop.temper", legend: "Temper" }, make("div", { class: "row" },
        select("shop.temper.kind", typed.temper, "kind", { label: "You temper in", options: catalogue.tempers, blank: "Choose", width: "wide" }),
        text("shop.temper.max_C", typed.temper, "max", { label: "Hottest it gets (°C)", hint: "or 500 F", reading: inCelsius, width: "half" }),
        text("shop.temper.accuracy_C", typed.temper, "accuracy", { label: "Off by up to (°C)", hint: "either way", reading: inCelsiusApart, width: "half" })))),
      select("shop.cold", typed, "cold", { label: "Cold below zero", options: catalogue.colds }),
      nextButton("shop"));
  }

  // --- the cards themselves ---------------------------------------------------------------------

  const PANELS = { steel: steelPanel, part: partPanel, aim: aimPanel, shop: shopPanel };

  function nextButton(id) {
    const position = CARDS.findIndex((card) => card.id === id);
    const next = CARDS[position + 1];
    return make("p", { class: "next" }, make("button", { type: "button", onclick: () => {
      toggle(id, false);
      if (next) toggle(next.id, true);
      cards.get((next ?? CARDS[position]).id).button.focus();
    } }, next ? `Next: ${next.name}` : "Done"));
  }

  function toggle(id, open) {
    const { button, panel, root: card } = cards.get(id);
    button.setAttribute("aria-expanded", String(open));
    reveal(panel, open);
    card.classList.toggle("open", open);
  }

  function describeCards() {
    for (const { id, sentence } of CARDS) {
      const card = cards.get(id);
      const told = sentence(typed, catalogue);
      card.missing = told.missing;
      const needs = told.missing.length ? `needs ${listed(told.missing)}` : "";
      card.line.textContent = told.sentence || capital(needs);
      card.state.textContent = card.faults ? (card.faults === 1 ? "one thing to mend" : `${card.faults} things to mend`) : told.sentence ? needs : "";
      card.root.classList.toggle("faulty", card.faults > 0);
      card.root.classList.toggle("wanting", told.missing.length > 0);
    }
  }

  for (const { id, name } of CARDS) {
    const line = make("span", { class: "card-line" });
    const state = make("span", { class: "card-state" });
    const panel = make("div", { class: "panel", id: `panel-${id}`, role: "group", "aria-label": name, hidden: true });
    const button = make("button", { type: "button", id: `card-${id}`, "aria-expanded": "false", "aria-controls": panel.id },
      make("span", { class: "card-name" }, name), " ", line, " ", state, make("span", { class: "card-mark", "aria-hidden": "true" }));
    button.addEventListener("click", () => toggle(id, button.getAttribute("aria-expanded") !== "true"));
    const card = make("section", { class: "card", id: `${id}-card`, "aria-labelledby": button.id }, make("h3", {}, button), panel);
    cards.set(id, { root: card, button, panel, line, state, faults: 0, missing: [] });
    root.append(card);
  }
  // Enter in a one-line field must not send the form anywhere.
  root.addEventListener("submit", (event) => event.preventDefault());

  function draw() {
    for (const { id } of CARDS) PANELS[id](cards.get(id).panel);
    describeCards();
  }
  draw();

  return {
    typed: () => typed,
    /** Put another job into the form. */
    fill(next) {
      typed = next;
      for (const card of cards.values()) card.faults = 0;
      draw();
    },
    open(id) { toggle(id, true); },
    foldAll() { for (const { id } of CARDS) toggle(id, false); },
    focusCard(id) { cards.get(id).button.focus(); },
    missing: () => CARDS.flatMap(({ id }) => cards.get(id).missing),
    fieldAt: (path) => fields.get(path) ?? null,
    fields: () => fields.values(),
    cardOf(field) { return CARDS.find(({ id }) => cards.get(id).panel.contains(field.root))?.id ?? null; },
    cardName: (id) => CARDS.find((card) => card.id === id)?.name ?? "",
    /** How many faults each card holds, by id. */
    countFaults(counts) {
      for (const { id } of CARDS) cards.get(id).faults = counts[id] ?? 0;
      describeCards();
    },
    /** Open the card a field lies in and put the cursor there. */
    goTo(field) {
      const id = this.cardOf(field);
      if (id) toggle(id, true);
      field.root.closest("details")?.setAttribute("open", "");
      field.focus();
      field.root.scrollIntoView({ block: "nearest" });
    },
  };
}

const capital = (name) => name.charAt(0).toUpperCase() + name.slice(1);
const listed = (names) => (names.length < 2 ? names.join("") : `${names.slice(0, -1).join(", ")} and ${names.at(-1)}`);

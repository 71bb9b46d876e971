// One plain sentence for each card, from what stands in the form.

import { find, gradeFor, nameOf } from "./catalogue.js";
import { shapeOf } from "./job.js";
import { lengthInWords } from "./lengths.js";
import { readTemperature_C, readVolume_L } from "./quantities.js";

const filled = (text) => (text ?? "").trim() !== "";
const list = (...parts) => parts.filter(Boolean).join(", ");
const capital = (text) => text.charAt(0).toUpperCase() + text.slice(1);
// A number and its unit stay on one line.
const hold = (sentence) => sentence.replace(/(\d) (?=(?:mm|in|L|°C|% C|HRC)\b|°C|%)/g, "$1\u00a0").replace(/(%|°) (?=C\b)/g, "$1\u00a0");
const lower = (name) => (/^[A-Z][a-z]/.test(name) ? name.charAt(0).toLowerCase() + name.slice(1) : name);

function degrees(text) {
  const value = readTemperature_C(text);
  return typeof value === "number" ? `${Math.round(value)} °C` : text.trim();
}

function litres(text) {
  const value = readVolume_L(text);
  return typeof value === "number" ? `${value} L` : text.trim();
}

/** Each answers {sentence, missing}: missing names what is still needed, in words. */
export function steelSentence(typed, catalogue) {
  if (typed.steelBy === "chemistry") {
    const parts = catalogue.elements.filter((element) => filled(typed.chemistry[element])).map((element) => `${element} ${typed.chemistry[element].trim()}`);
    return { sentence: hold(parts.length ? `By certificate: ${parts.join(", ")} %` : ""), missing: filled(typed.chemistry.C) ? [] : ["carbon"] };
  }
  const grade = gradeFor(catalogue, typed.grade);
  const name = grade ? (grade.name.startsWith(grade.id) ? grade.name : `${grade.id}, ${grade.name}`) : typed.grade.trim();
  return { sentence: hold(name), missing: filled(typed.grade) ? [] : ["the steel"] };
}

const SHAPE_WORDS = {
  round: (d) => `${d("diameter")} round`,
  square: (d) => `${d("width")} square`,
  flat: (d) => `${d("thickness")} × ${d("width")} flat`,
  tube: (d) => `${d("diameter")} tube with a ${d("bore")} bore`,
  ball: (d) => `${d("diameter")} ball`,
  wedge: (d) => `wedge, ${d("edge")} edge to ${d("spine")} spine, ${d("width")} wide`,
  taper: (d) => `taper, ${d("edge")} to ${d("diameter")}`,
};

export function partSentence(typed, catalogue) {
  const shape = shapeOf(catalogue, typed);
  const missing = [];
  if (!shape) missing.push("the shape");
  for (const dimension of shape?.dimensions ?? []) {
    if (dimension.required && !filled(typed.dimensions[dimension.id])) missing.push(`the ${lower(dimension.name)}`);
  }
  const length = (id) => (filled(typed.dimensions[id]) ? lengthInWords(typed.dimensions[id], typed.units) : "?");
  const body = shape ? (SHAPE_WORDS[shape.id]?.(length) ?? shape.name) : "";
  const many = filled(typed.quantity) && typed.quantity.trim() !== "1" ? `${typed.quantity.trim()} off` : "";
  const reach = typed.zone && typed.zone !== "all" && filled(typed.zone_reach) ? ` for ${lengthInWords(typed.zone_reach, typed.units)}` : "";
  const zone = typed.zone ? (typed.zone === "all" ? "hardened all over" : `${typed.zone} hardened${reach}`) : "";
  const condition = typed.condition && typed.condition !== "unknown" ? lower(nameOf(catalogue.conditions, typed.condition)) : "";
  const facts = list(many, body, shape && filled(typed.dimensions.length) && `${length("length")} long`, ...typed.features.map((id) => lower(nameOf(catalogue.features, id))), zone, condition);
  return { sentence: hold(filled(typed.title) && facts ? `${typed.title.trim()}: ${facts}` : capital(list(typed.title.trim(), facts))), missing };
}

export function aimSentence(typed, catalogue) {
  const use = find(catalogue.uses, typed.use);
  const own = filled(typed.low) || filled(typed.high);
  const [low, high] = own ? [typed.low.trim() || "?", typed.high.trim() || "?"] : use?.hardness_HRC ?? [];
  const range = low === undefined ? "" : `${low}–${high} HRC`;
  const set = [
    filled(typed.decided.austenitize) && `heat set to ${degrees(typed.decided.austenitize)}`,
    filled(typed.decided.medium) && `quench set to ${lower(nameOf(catalogue.media, typed.decided.medium))}`,
    filled(typed.decided.temper) && `temper set to ${degrees(typed.decided.temper)}`,
    filled(typed.decided.hold) && `hold set to ${typed.decided.hold.trim()} min`,
    filled(typed.decided.cycles) && `tempers set to ${typed.decided.cycles.trim()}`,
  ];
  return {
    sentence: hold(list(range, use && lower(use.name), ...set)),
    missing: use || (filled(typed.low) && filled(typed.high)) ? [] : ["the use or a hardness"],
  };
}

export function shopSentence(typed, catalogue) {
  const missing = [];
  if (!typed.heat.kind) missing.push("the fire or kiln");
  if (!typed.baths.some((bath) => bath.medium)) missing.push("a bath");
  if (!typed.temper.kind) missing.push("what you temper in");
  const heat = typed.heat.kind && `${lower(nameOf(catalogue.heats, typed.heat.kind))}${filled(typed.heat.max) ? ` to ${degrees(typed.heat.max)}` : ""}${typed.heat.pyrometer ? " with a pyrometer" : ""}`;
  const baths = typed.baths.filter((bath) => bath.medium).map((bath) => {
    const medium = find(catalogue.media, bath.medium);
    return `${lower(medium?.name ?? bath.medium)}${(medium?.liquid ?? true) && filled(bath.volume) ? ` ${litres(bath.volume)}` : ""}`;
  });
  const temper = typed.temper.kind && `${lower(nameOf(catalogue.tempers, typed.temper.kind))}${filled(typed.temper.max) ? ` to ${degrees(typed.temper.max)}` : ""}`;
  const cold = typed.cold && typed.cold !== "none" ? lower(nameOf(catalogue.colds, typed.cold)) : "";
  return { sentence: hold(capital([heat, ...baths, temper, cold].filter(Boolean).join("; "))), missing };
}

// Between the form and the job. `typed` holds what stands in the form, every number as text exactly as typed;
// a job is what the core reads. typedFromJob(jobFromTyped(x)) keeps the meaning.

import { gradeFor } from "./catalogue.js";
import { showLength } from "./lengths.js";
import { readDifference_C, readPlain, readTemperature_C, readVolume_L, showNumber } from "./quantities.js";

export const JOB_SCHEMA = "quenchwright.job/1";

export const emptyBath = () => ({ medium: "", volume: "", temperature: "", agitation: "" });

export function emptyTyped() {
  return {
    title: "", quantity: "", units: "mm",
    steelBy: "grade", grade: "", chemistry: {}, grain_size: "",
    shape: "", dimensions: {}, thinnest: "", features: [], zone: "", zone_reach: "", condition: "",
    use: "", low: "", high: "",
    heat: { kind: "", max: "", accuracy: "", atmosphere: "", pyrometer: false },
    baths: [emptyBath()],
    temper: { kind: "", max: "", accuracy: "" },
    cold: "none",
    decided: { austenitize: "", medium: "", temper: "", hold: "", cycles: "" },
  };
}

const filled = (text) => text !== null && text !== undefined && String(text).trim() !== "";

/** Leave out what was left blank: the core then takes its usual value. What it cannot do without is sent even if blank. */
const withoutBlanks = (fields) => Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== null && value !== undefined && value !== ""));

const when = (text, read) => (filled(text) ? read(text) : undefined);

export const shapeOf = (catalogue, typed) => catalogue.shapes.find((shape) => shape.id === typed.shape) ?? null;

function steelFrom(typed, catalogue) {
  if (typed.steelBy === "chemistry") {
    const chemistry = {};
    for (const [element, text] of Object.entries(typed.chemistry)) if (filled(text)) chemistry[element] = readPlain(text);
    return { chemistry, ...withoutBlanks({ grain_size: when(typed.grain_size, readPlain) }) };
  }
  return { grade: gradeFor(catalogue, typed.grade)?.id ?? typed.grade.trim() };
}

function partFrom(typed, catalogue) {
  const dimensions_mm = {};
  for (const { id } of shapeOf(catalogue, typed)?.dimensions ?? []) {
    if (filled(typed.dimensions[id])) dimensions_mm[id] = typed.dimensions[id].trim();
  }
  const partial = typed.zone !== "" && typed.zone !== "all";
  return {
    shape: typed.shape,
    ...withoutBlanks({
      thinnest_mm: when(typed.thinnest, (text) => text.trim()),
      zone: typed.zone,
      zone_mm: partial ? when(typed.zone_reach, (text) => text.trim()) : undefined,
      condition: typed.condition,
    }),
    dimensions_mm,
    features: [...typed.features],
  };
}

function aimFrom(typed) {
  const range = [typed.low, typed.high].some(filled) ? [when(typed.low, readPlain) ?? null, when(typed.high, readPlain) ?? null] : undefined;
  return withoutBlanks({ use: typed.use, hardness_HRC: range });
}

function bathFrom(bath, catalogue) {
  const liquid = catalogue.media.find((medium) => medium.id === bath.medium)?.liquid ?? true;
  return {
    medium: bath.medium,
    ...withoutBlanks({
      volume_L: liquid ? when(bath.volume, readVolume_L) : undefined,
      temperature_C: when(bath.temperature, readTemperature_C),
      agitation: bath.agitation,
    }),
  };
}

function shopFrom(typed, catalogue) {
  return withoutBlanks({
    heat: { kind: typed.heat.kind, ...withoutBlanks({
      max_C: when(typed.heat.max, readTemperature_C),
      accuracy_C: when(typed.heat.accuracy, readDifference_C),
      atmosphere: typed.heat.atmosphere,
      pyrometer: typed.heat.pyrometer,
    }) },
    baths: typed.baths.map((bath) => bathFrom(bath, catalogue)),
    temper: { kind: typed.temper.kind, ...withoutBlanks({
      max_C: when(typed.temper.max, readTemperature_C),
      accuracy_C: when(typed.temper.accuracy, readDifference_C),
    }) },
    cold: typed.cold,
  });
}

/** The job the core is asked to plan. */
export function jobFromTyped(typed, catalogue) {
  const decided = withoutBlanks({
    austenitize_C: when(typed.decided.austenitize, readTemperature_C),
    medium: typed.decided.medium,
    temper_C: when(typed.decided.temper, readTemperature_C),
    temper_hold_min: when(typed.decided.hold, readPlain),
    temper_cycles: when(typed.decided.cycles, readPlain),
  });
  return withoutBlanks({
    schema: JOB_SCHEMA,
    title: typed.title.trim(),
    quantity: when(typed.quantity, readPlain),
    steel: steelFrom(typed, catalogue),
    part: partFrom(typed, catalogue),
    aim: aimFrom(typed),
    shop: shopFrom(typed, catalogue),
    units: typed.units,
    decided: Object.keys(decided).length ? decided : undefined,
  });
}

const texts = (numbers) => Object.fromEntries(Object.entries(numbers ?? {}).map(([key, value]) => [key, showNumber(value)]));

/** What the form should hold for a job that came from a file or from the build. */
export function typedFromJob(job) {
  const typed = emptyTyped();
  const { steel = {}, part = {}, aim = {}, shop = {}, decided = {} } = job;
  const units = (job.units ?? shop.units) === "in" ? "in" : "mm";
  const length = (value) => showLength(value, units);
  const [low, high] = aim.hardness_HRC ?? [];
  const { heat = {}, temper = {} } = shop;
  return {
    ...typed,
    title: job.title ?? "",
    quantity: showNumber(job.quantity),
    units,
    steelBy: steel.chemistry && !steel.grade ? "chemistry" : "grade",
    grade: steel.grade ?? "",
    chemistry: texts(steel.chemistry),
    grain_size: showNumber(steel.grain_size),
    shape: part.shape ?? "",
    dimensions: Object.fromEntries(Object.entries(part.dimensions_mm ?? part.dimensions ?? {})
      .filter(([, value]) => value !== null).map(([key, value]) => [key, length(value)])),
    thinnest: length(part.thinnest_mm),
    features: [...(part.features ?? [])],
    zone: part.zone ?? "",
    zone_reach: length(part.zone_mm),
    condition: part.condition ?? "",
    use: aim.use ?? "",
    low: showNumber(low),
    high: showNumber(high),
    heat: {
      kind: heat.kind ?? "", max: showNumber(heat.max_C), accuracy: showNumber(heat.accuracy_C),
      atmosphere: heat.atmosphere ?? "", pyrometer: Boolean(heat.pyrometer),
    },
    baths: (shop.baths ?? []).map((bath) => ({
      medium: bath.medium ?? "", volume: showNumber(bath.volume_L),
      temperature: showNumber(bath.temperature_C), agitation: bath.agitation ?? "",
    })),
    temper: { kind: temper.kind ?? "", max: showNumber(temper.max_C), accuracy: showNumber(temper.accuracy_C) },
    cold: shop.cold ?? "none",
    decided: {
      austenitize: showNumber(decided?.austenitize_C), medium: decided?.medium ?? "", temper: showNumber(decided?.temper_C),
      hold: showNumber(decided?.temper_hold_min), cycles: showNumber(decided?.temper_cycles),
    },
  };
}

/** A draft read back from storage: keep only what has the right shape, so that a damaged draft cannot break the form. */
export function mendTyped(draft) {
  const like = (pattern, value) => {
    if (Array.isArray(pattern)) return null;
    if (typeof pattern === "object") {
      const source = value && typeof value === "object" && !Array.isArray(value) ? value : {};
      return Object.fromEntries(Object.keys(pattern).map((key) => [key, like(pattern[key], source[key])]));
    }
    return typeof value === typeof pattern ? value : pattern;
  };
  const textMap = (value) => Object.fromEntries(Object.entries(value && typeof value === "object" ? value : {}).filter(([, text]) => typeof text === "string"));
  const empty = emptyTyped();
  return {
    ...like(empty, draft),
    chemistry: textMap(draft.chemistry),
    dimensions: textMap(draft.dimensions),
    features: Array.isArray(draft.features) ? draft.features.filter((id) => typeof id === "string") : [],
    baths: (Array.isArray(draft.baths) ? draft.baths : []).slice(0, 20).map((bath) => like(emptyBath(), bath)),
  };
}

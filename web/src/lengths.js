// Lengths are kept as typed and read by the core. Only a length that comes back from a saved job
// (millimetres) has to be put into words again, so that typing it anew gives the same length.

const MM_PER_INCH = 25.4;
const SAME_MM = 1e-6;
const BARE = /^\s*[\d.,/\s]+$/;

function tidyMillimetres(value_mm) {
  const rounded = Number(value_mm.toFixed(4));
  return String(Math.abs(rounded - value_mm) < 1e-9 ? rounded : value_mm);
}

function asFraction(value_mm) {
  const inches = value_mm / MM_PER_INCH;
  for (const denominator of [1, 2, 4, 8, 16, 32, 64]) {
    const parts = Math.round(inches * denominator);
    if (parts === 0 || Math.abs((parts / denominator) * MM_PER_INCH - value_mm) > SAME_MM) continue;
    const whole = Math.floor(parts / denominator);
    const rest = parts % denominator;
    return [whole ? String(whole) : "", rest ? `${rest}/${denominator}` : ""].filter(Boolean).join(" ");
  }
  return null;
}

function asDecimalInches(value_mm) {
  for (let digits = 1; digits <= 5; digits += 1) {
    const text = (value_mm / MM_PER_INCH).toFixed(digits);
    if (Number(text) > 0 && Math.abs(Number(text) * MM_PER_INCH - value_mm) <= SAME_MM) return text;
  }
  return null;
}

/** A length from a job, as a smith using `units` would type it. */
export function showLength(length, units) {
  if (length === null || length === undefined) return "";
  if (typeof length === "string") return length;
  if (units !== "in") return tidyMillimetres(length);
  return asFraction(length) ?? asDecimalInches(length) ?? `${tidyMillimetres(length)} mm`;
}

const isBare = (text) => text.trim() !== "" && BARE.test(text);

/** For sentences: a bare number gets the unit it stands for. */
export const lengthInWords = (text, units) => (isBare(text) ? `${text.trim()} ${units}` : text.trim());

/** When the units change, a bare number keeps its meaning: "20" in millimetres becomes "20 mm". */
export function keepMeaning(text, from, to) {
  if (from === to) return text;
  if (isBare(text)) return `${text.trim()} ${from}`;
  const named = text.trim().match(/^([\d.,/\s]+?)\s*(mm|in)$/);
  return named && named[2] === to ? named[1] : text;
}

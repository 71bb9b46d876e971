// Numbers as people type them. What cannot be read is handed on as typed, so that the core can say what it expected.

const NUMBER = /^[-+\u2212]?\d+(?:[.,]\d+)?$/;

/** "19,5" and "19.5" are numbers; "1,500" could mean two things and stays text. */
export function readNumber(text) {
  const typed = text.trim();
  if (!NUMBER.test(typed) || /,\d{3}$/.test(typed)) return null;
  return Number(typed.replace(",", ".").replace("\u2212", "-"));
}

const round = (value, digits) => Number(value.toFixed(digits));

function withUnit(text, units) {
  const bare = readNumber(text);
  if (bare !== null) return bare;
  for (const [ending, convert] of units) {
    const match = text.trim().match(ending);
    const number = match ? readNumber(match[1]) : null;
    if (number !== null) return convert(number);
  }
  return text;
}

/** A temperature in °C; "500 F" is turned into °C. */
export const readTemperature_C = (text) => withUnit(text, [
  [/^(.+?)\s*°?\s*C$/i, (value) => value],
  [/^(.+?)\s*°?\s*F$/i, (value) => round((value - 32) / 1.8, 1)],
]);

/** A difference of temperatures in °C (how far a reading may be off); 50 F apart is 27.8 °C apart. */
export const readDifference_C = (text) => withUnit(text.trim().replace(/^(?:±|\+\/-)\s*/, ""), [
  [/^(.+?)\s*°?\s*C$/i, (value) => value],
  [/^(.+?)\s*°?\s*F$/i, (value) => round(value / 1.8, 1)],
]);

/** A volume in litres; "3 gal" is three US gallons. */
export const readVolume_L = (text) => withUnit(text, [
  [/^(.+?)\s*(?:l|litres?|liters?)$/i, (value) => value],
  [/^(.+?)\s*(?:us\s*)?gal(?:lons?)?$/i, (value) => round(value * 3.785412, 2)],
]);

export const readPlain = (text) => readNumber(text) ?? text;

/** A number shown so that reading it back gives the same number. */
export const showNumber = (value) => (value === null || value === undefined ? "" : String(value));

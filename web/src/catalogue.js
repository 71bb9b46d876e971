// What the core knows by name: grades, uses, baths, shapes. Written into the page when it is built,
// so that the form works before Python is awake.

const plain = (text) => String(text).toLowerCase().replace(/[\s\-_/]+/g, "");

/** A list of names may come as [{id, name}], as plain ids, or as {id: name}. */
function named(list) {
  if (!list) return [];
  if (!Array.isArray(list)) return Object.entries(list).map(([id, name]) => ({ id, name: typeof name === "string" ? name : name.name ?? id }));
  return list.map((entry) => (typeof entry === "string" ? { id: entry, name: entry.replace(/-/g, " ") } : entry));
}

const LISTS = ["grades", "uses", "media", "shapes", "features", "zones", "conditions", "heats", "atmospheres", "tempers", "colds", "agitations"];

export function readCatalogue(text) {
  const raw = JSON.parse(text);
  const catalogue = { ...raw, elements: raw.elements ?? ["C", "Mn", "Si", "Cr", "Ni", "Mo", "V", "W", "Cu"] };
  for (const list of LISTS) catalogue[list] = named(raw[list]);
  if (!catalogue.agitations.length) catalogue.agitations = named(["still", "moderate", "strong"]);
  return catalogue;
}

export const find = (list, id) => list.find((entry) => entry.id === id) ?? null;

export const nameOf = (list, id) => find(list, id)?.name ?? id ?? "";

/** The grade a smith means by what was typed: its id, its name or one of its other names. */
export function gradeFor(catalogue, typed) {
  const wanted = plain(typed);
  if (!wanted) return null;
  const called = (grade) => [grade.id, grade.name, ...(grade.aliases ?? [])];
  return catalogue.grades.find((grade) => plain(grade.id) === wanted)
    ?? catalogue.grades.find((grade) => called(grade).some((name) => plain(name) === wanted))
    ?? null;
}

/** Grades that could be meant, best first; each with the other name that matched, if it was one. */
export function gradesLike(catalogue, typed) {
  const wanted = plain(typed);
  const found = [];
  for (const grade of catalogue.grades) {
    const alias = (grade.aliases ?? []).find((name) => plain(name).startsWith(wanted)) ?? null;
    const rank = !wanted ? 1
      : plain(grade.id) === wanted ? 0
      : plain(grade.id).startsWith(wanted) ? 1
      : alias ? 2
      : plain(grade.name).includes(wanted) ? 3
      : null;
    if (rank !== null) found.push({ grade, rank, alias: rank === 2 ? alias : null });
  }
  return found.sort((a, b) => a.rank - b.rank);
}

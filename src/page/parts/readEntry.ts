// What people type into a field of numbers: with a comma or a point, thousands set apart by a blank, and with a unit behind it.

/** Units of length people write, mm; the inch and the foot are 25.4 and 304.8 mm exactly (NIST SP 811, appendix B). */
const LENGTHS = new Map([
  ["mm", 1],
  ["cm", 10],
  ["m", 1000],
  ["in", 25.4],
  ["ft", 304.8],
]);

/** Reads a number as people write it, with a comma or a point; undefined for nothing, null for what is no number. */
export function readNumber(text: string): number | undefined | null {
  const plain = text.trim().replace(",", ".").replace("−", "-");
  if (plain === "") return undefined;
  const value = Number(plain);
  return Number.isFinite(value) ? value : null;
}

/**
 * Reads an entry of a field that takes its numbers in `unit`: one with a length's unit behind it is turned into the field's.
 * @returns the number in the field's unit; undefined for nothing, null for what is none
 */
export function readEntry(text: string, unit: string): number | undefined | null {
  const [, digits = text, own = unit] = /^(.*[\d.,])\s*([^\d\s.,+−-]+)$/.exec(text.trim()) ?? [];
  const value = readNumber(digits.replace(/(\d)[ \u00a0\u202f](?=\d{3}(?!\d))/g, "$1"));
  if (own === unit || value === undefined || value === null) return value;
  const [from, to] = [LENGTHS.get(own), LENGTHS.get(unit)];
  return from === undefined || to === undefined ? null : Number(((value * from) / to).toPrecision(12));
}

/** Why an entry was not taken, and how it can be given. */
export function refuseEntry(text: string, unit: string): string {
  if (!LENGTHS.has(unit)) return `“${text}” is no number: type it alone${unit === "" ? "" : `, in ${unit}`}`;
  return `“${text}” is no length: give it in ${unit}, or with its unit behind it (${[...LENGTHS.keys()].join(", ")})`;
}

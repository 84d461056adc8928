// What people type into a field of numbers: with a comma or a point, thousands set apart by a blank, and with a unit behind it.

/** Units of one kind: how large each is, in the first. */
type Units = ReadonlyMap<string, number>;

/** Units of length people write, mm; the inch and the foot are 25.4 and 304.8 mm exactly (NIST SP 811, appendix B). */
const LENGTHS: Units = new Map([
  ["mm", 1],
  ["cm", 10],
  ["m", 1000],
  ["in", 25.4],
  ["ft", 304.8],
]);

/** Units of force gauges show, N; kgf is 9.80665 N and lbf 4.4482216152605 N exactly (NIST SP 811, appendix B). */
const FORCES: Units = new Map([
  ["N", 1],
  ["daN", 10],
  ["kN", 1000],
  ["kgf", 9.80665],
  ["lbf", 4.4482216152605],
]);

/** Units whose thousandth nobody types: "3,000" is as likely three thousand of them as three. */
const SMALL = new Set(["mm", "N"]);

const unitsFor = (unit: string) => [LENGTHS, FORCES].find((units) => units.has(unit));

/** A unit as it was typed, with large letters where a tablet puts them; its own writing where it is one of these. */
function spell(own: string, units: Units | undefined): string {
  return [...(units?.keys() ?? [])].find((u) => u.toLowerCase() === own.toLowerCase()) ?? own;
}

/** The digits of an entry and its unit, as typed or the field's. */
function partEntry(text: string, unit: string): { digits: string; own: string } {
  const [, digits = text, own = unit] = /^(.*[\d.,])\s*([^\d\s.,+−-]+)$/.exec(text.trim()) ?? [];
  const plain = digits.trim().replace(/(\d)[ \u00a0\u202f](?=\d{3}(?!\d))/g, "$1");
  // "% of its capacity" is a per cent
  return { digits: plain.replace("−", "-"), own: own === unit.split(" ", 1)[0] ? unit : spell(own, unitsFor(unit)) };
}

/** Whether digits can be meant as thousands or as a fraction. */
const twoWays = (digits: string, own: string) => SMALL.has(own) && /^[+-]?[1-9]\d{0,2}[.,]\d{3}$/.test(digits);

/**
 * Reads an entry of a field that takes its numbers in `unit`: one with another unit of length or of force behind it is turned into the field's.
 * @returns the number in the field's unit; undefined for nothing, null for what is none or can be read two ways
 */
export function readEntry(text: string, unit: string): number | undefined | null {
  const { digits, own } = partEntry(text, unit);
  if (digits === "") return undefined;
  if (!/^[+-]?(\d+([.,]\d*)?|[.,]\d+)(e[+-]?\d+)?$/i.test(digits) || twoWays(digits, own)) return null;
  const value = Number(digits.replace(",", "."));
  if (!Number.isFinite(value)) return null;
  if (own === unit) return value;
  const units = unitsFor(unit);
  const [from, to] = [units?.get(own), units?.get(unit)];
  return from === undefined || to === undefined ? null : Number(((value * from) / to).toPrecision(12));
}

/** Why an entry was not taken, and how it can be given. */
export function refuseEntry(text: string, unit: string): string {
  const { digits, own } = partEntry(text, unit);
  if (twoWays(digits, own)) {
    const [whole, rest] = digits.split(/[.,]/);
    return `“${text}” can mean ${whole}${rest} or ${whole}.${rest} ${own}: leave the mark out, or give one or two digits behind it`;
  }
  const units = unitsFor(unit);
  if (units === undefined)
    return `“${text}” is no number${unit === "" ? ": type it alone" : ` in ${unit}: type the number alone`}`;
  const kind = units === LENGTHS ? "length" : "force";
  return `“${text}” is no ${kind}: give it in ${unit}, or with its unit behind it (${[...units.keys()].join(", ")})`;
}

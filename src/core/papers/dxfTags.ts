// What both dialects of DXF share: tags with fixed decimals, text in ASCII, colours of the layers.
// Source: published DXF reference, group codes and text; Unicode as \\U+XXXX.
import { decimal } from "./decimal.ts";
import { type Drawing, extents, type Layer } from "./drawing.ts";

const DECIMALS = 3;
/** R12 readers take 255 characters a line. */
const LONGEST_TEXT = 250;
/** Colour numbers of the standard index: 8 grey, 5 blue, 3 green, 1 red. */
export const COLOURS: Readonly<Record<Layer, number>> = { bed: 8, mark: 5, text: 3, cut: 1 };

export type Tags = string[];

/** A length as it stands in the file. */
export function tagNumber(value: number): string {
  return decimal(value, DECIMALS);
}

/** Code and value, in pairs. */
export function tagInPlace(tags: Tags, ...pairs: (string | number)[]): void {
  for (let i = 0; i < pairs.length; i += 2) tags.push(String(pairs[i]), String(pairs[i + 1]));
}

/** A point on the plane z = 0. */
export function tagPointInPlace(tags: Tags, code: number, x: number, y: number): void {
  tagInPlace(tags, code, tagNumber(x), code + 10, tagNumber(y), code + 20, tagNumber(0));
}

/** Extents of the drawing as header variables. */
export function tagExtentsInPlace(tags: Tags, drawing: Drawing): void {
  const { min, max } = extents(drawing);
  tagInPlace(tags, 9, "$EXTMIN");
  tagPointInPlace(tags, 10, min[0], min[1]);
  tagInPlace(tags, 9, "$EXTMAX");
  tagPointInPlace(tags, 10, max[0], max[1]);
}

/** The tags as a file. */
export function joinTags(tags: Tags): string {
  return `${tags.join("\r\n")}\r\n`;
}

/**
 * Text for a TEXT entity: beyond ASCII as \\U+XXXX, beyond the basic plane as "?"; the two sequences that readers take for
 * commands (%% and ^) broken up.
 */
export function dxfText(text: string): string {
  let out = "";
  for (const c of text.replace(/%%/g, "% %").replace(/\^/g, "^ ")) {
    const code = c.codePointAt(0) ?? 0;
    const ascii = code >= 0x20 && code < 0x7f;
    const next = ascii ? c : code > 0xffff ? "?" : `\\U+${code.toString(16).toUpperCase().padStart(4, "0")}`;
    if (out.length + next.length > LONGEST_TEXT) break;
    out += next;
  }
  return out;
}

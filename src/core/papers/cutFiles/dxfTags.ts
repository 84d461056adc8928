// What both dialects of DXF share: tags with fixed decimals, text in ASCII, the layers and their colours, the header, the order of
// the entities. Source: published DXF reference, group codes and text; Unicode as \\U+XXXX.

import { type Drawing, extents, LAYER_NAMES, LAYERS, type Label, type Layer, type Stroke } from "../drawing/drawing.ts";
import { decimal } from "../words/decimal.ts";

const DECIMALS = 3;
/** R12 readers take 255 characters a line. */
const LONGEST_TEXT = 250;
/** Colour numbers of the standard index: 8 grey, 5 blue, 3 green, 1 red. */
const COLOURS: Readonly<Record<Layer, number>> = { bed: 8, mark: 5, text: 3, cut: 1 };

export type Tags = string[];

/** A length as it stands in the file. */
export function tagNumber(value: number): string {
  return decimal(value, DECIMALS);
}

/** The bulge of an arc as it stands in the file: a length times it must hold to the thousandth. */
export function tagBulge(value: number): string {
  return decimal(value, 9);
}

/** Code and value, in pairs. */
export function tagInPlace(tags: Tags, ...pairs: (string | number)[]): void {
  for (let i = 0; i < pairs.length; i += 2) tags.push(String(pairs[i]), String(pairs[i + 1]));
}

/** A point on the plane z = 0. */
export function tagPointInPlace(tags: Tags, code: number, x: number, y: number): void {
  tagInPlace(tags, code, tagNumber(x), code + 10, tagNumber(y), code + 20, tagNumber(0));
}

/** The header: version, code page, what else the dialect says, extents of the drawing. */
export function tagHeaderInPlace(
  tags: Tags,
  version: "AC1009" | "AC1015",
  drawing: Drawing,
  ...more: (string | number)[]
): void {
  const { min, max } = extents(drawing);
  tagInPlace(tags, 0, "SECTION", 2, "HEADER", 9, "$ACADVER", 1, version, 9, "$DWGCODEPAGE", 3, "ANSI_1252", ...more);
  tagInPlace(tags, 9, "$EXTMIN");
  tagPointInPlace(tags, 10, min[0], min[1]);
  tagInPlace(tags, 9, "$EXTMAX");
  tagPointInPlace(tags, 10, max[0], max[1]);
  tagInPlace(tags, 0, "ENDSEC");
}

/** Layers to declare, with the colours they have: the standard's own, then those of the drawing. */
export const LAYER_ENTRIES: readonly { name: string; colour: number }[] = [
  { name: "0", colour: 7 },
  ...LAYERS.map((l) => ({ name: LAYER_NAMES[l], colour: COLOURS[l] })),
];

/** Fields of the one text style, after its name. */
export const STYLE_FIELDS: readonly (string | number)[] = `70 0 40 0.0 41 1.0 50 0.0 71 0 42 10.0 3 txt 4`
  .split(" ")
  .concat("");

/** The section of entities, layer by layer in the order of work. */
export function tagEntitiesInPlace(
  tags: Tags,
  drawing: Drawing,
  write: { stroke: (stroke: Stroke, layer: string) => void; label: (label: Label, layer: string) => void },
): void {
  tagInPlace(tags, 0, "SECTION", 2, "ENTITIES");
  for (const layer of LAYERS) {
    for (const s of drawing.strokes) if (s.layer === layer) write.stroke(s, LAYER_NAMES[layer]);
    for (const l of drawing.labels) if (l.layer === layer) write.label(l, LAYER_NAMES[layer]);
  }
  tagInPlace(tags, 0, "ENDSEC");
}

/** What a TEXT says and how: place, height, words, turn, style, and where along it the place is. */
export function tagTextInPlace(tags: Tags, label: Label, style: string): void {
  tagPointInPlace(tags, 10, label.at[0], label.at[1]);
  tagInPlace(tags, 40, tagNumber(label.height), 1, dxfText(label.text), 50, tagNumber(label.rotation), 7, style);
  tagInPlace(tags, 72, { start: 0, middle: 1, end: 2 }[label.anchor]);
  tagPointInPlace(tags, 11, label.at[0], label.at[1]);
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

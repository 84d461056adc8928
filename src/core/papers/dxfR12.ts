// Cut files as DXF R12: the oldest dialect in use, read by every table. Closed POLYLINE with the flag instead of a repeated
// point, TEXT, four layers; no handles, no unit field (R12 has none: hence the bar in the drawing). ASCII only.
// Source: published DXF reference, HEADER, TABLES, POLYLINE, VERTEX, TEXT pages; what R12 allows: check-values 8.1.
import { type Drawing, LAYER_NAMES, LAYERS, type Label, type Stroke } from "./drawing.ts";
import {
  COLOURS,
  dxfText,
  joinTags,
  type Tags,
  tagInPlace as tag,
  tagExtentsInPlace,
  tagNumber,
  tagPointInPlace as tagPoint,
} from "./dxfTags.ts";

const STYLE = "STANDARD";

function tagHeader(tags: Tags, drawing: Drawing): void {
  tag(tags, 0, "SECTION", 2, "HEADER", 9, "$ACADVER", 1, "AC1009", 9, "$DWGCODEPAGE", 3, "ANSI_1252");
  tagExtentsInPlace(tags, drawing);
  tag(tags, 0, "ENDSEC");
}

function tagTables(tags: Tags): void {
  tag(tags, 0, "SECTION", 2, "TABLES");
  tag(tags, 0, "TABLE", 2, "LTYPE", 70, 1);
  tag(tags, 0, "LTYPE", 2, "CONTINUOUS", 70, 0, 3, "Solid line", 72, 65, 73, 0, 40, "0.0");
  tag(tags, 0, "ENDTAB", 0, "TABLE", 2, "LAYER", 70, LAYERS.length + 1);
  tag(tags, 0, "LAYER", 2, "0", 70, 0, 62, 7, 6, "CONTINUOUS");
  for (const layer of LAYERS) {
    tag(tags, 0, "LAYER", 2, LAYER_NAMES[layer], 70, 0, 62, COLOURS[layer], 6, "CONTINUOUS");
  }
  tag(tags, 0, "ENDTAB", 0, "TABLE", 2, "STYLE", 70, 1);
  tag(tags, 0, "STYLE", 2, STYLE, 70, 0, 40, "0.0", 41, "1.0", 50, "0.0", 71, 0, 42, "10.0", 3, "txt", 4, "");
  tag(tags, 0, "ENDTAB", 0, "ENDSEC", 0, "SECTION", 2, "BLOCKS", 0, "ENDSEC");
}

function tagStroke(tags: Tags, stroke: Stroke): void {
  const layer = LAYER_NAMES[stroke.layer];
  tag(tags, 0, "POLYLINE", 8, layer, 66, 1);
  tagPoint(tags, 10, 0, 0);
  tag(tags, 70, stroke.closed ? 1 : 0);
  for (const [x, y] of stroke.points) {
    tag(tags, 0, "VERTEX", 8, layer);
    tagPoint(tags, 10, x, y);
  }
  tag(tags, 0, "SEQEND", 8, layer);
}

function tagLabel(tags: Tags, label: Label): void {
  tag(tags, 0, "TEXT", 8, LAYER_NAMES[label.layer]);
  tagPoint(tags, 10, label.at[0], label.at[1]);
  tag(tags, 40, tagNumber(label.height), 1, dxfText(label.text), 50, tagNumber(label.rotation));
  tag(tags, 7, STYLE, 72, { start: 0, middle: 1, end: 2 }[label.anchor]);
  // 73 = 2: the second point is at half the height, whatever reader sets the text.
  tagPoint(tags, 11, label.at[0], label.at[1]);
  tag(tags, 73, 2);
}

/** The drawing as a DXF R12 file, layer by layer in the order of work. */
export function writeDxfR12(drawing: Drawing): string {
  const tags: Tags = [];
  tagHeader(tags, drawing);
  tagTables(tags);
  tag(tags, 0, "SECTION", 2, "ENTITIES");
  for (const layer of LAYERS) {
    for (const s of drawing.strokes) if (s.layer === layer) tagStroke(tags, s);
    for (const l of drawing.labels) if (l.layer === layer) tagLabel(tags, l);
  }
  tag(tags, 0, "ENDSEC", 0, "EOF");
  return joinTags(tags);
}

// Cut files as DXF R12: the oldest dialect in use, read by every table. Closed POLYLINE with the flag instead of a repeated
// point, TEXT, four layers; no handles, no unit field (R12 has none: hence the bar in the drawing). ASCII only.
// Source: published DXF reference, HEADER, TABLES, POLYLINE, VERTEX, TEXT pages; what R12 allows: check-values 8.1.
import type { Drawing, Label, Stroke } from "../drawing/drawing.ts";
import * as dxf from "./dxfTags.ts";

const { tagInPlace: tag, tagPointInPlace: tagPoint } = dxf;

const STYLE = "STANDARD";

function tagTables(tags: dxf.Tags): void {
  tag(tags, 0, "SECTION", 2, "TABLES");
  tag(tags, 0, "TABLE", 2, "LTYPE", 70, 1);
  tag(tags, 0, "LTYPE", 2, "CONTINUOUS", 70, 0, 3, "Solid line", 72, 65, 73, 0, 40, "0.0");
  tag(tags, 0, "ENDTAB", 0, "TABLE", 2, "LAYER", 70, dxf.LAYER_ENTRIES.length);
  for (const { name, colour } of dxf.LAYER_ENTRIES) {
    tag(tags, 0, "LAYER", 2, name, 70, 0, 62, colour, 6, "CONTINUOUS");
  }
  tag(tags, 0, "ENDTAB", 0, "TABLE", 2, "STYLE", 70, 1);
  tag(tags, 0, "STYLE", 2, STYLE, ...dxf.STYLE_FIELDS);
  tag(tags, 0, "ENDTAB", 0, "ENDSEC", 0, "SECTION", 2, "BLOCKS", 0, "ENDSEC");
}

function tagStroke(tags: dxf.Tags, stroke: Stroke, layer: string): void {
  tag(tags, 0, "POLYLINE", 8, layer, 66, 1);
  tagPoint(tags, 10, 0, 0);
  tag(tags, 70, stroke.closed ? 1 : 0);
  stroke.points.forEach(([x, y], i) => {
    tag(tags, 0, "VERTEX", 8, layer);
    tagPoint(tags, 10, x, y);
    if (stroke.bulges?.[i]) tag(tags, 42, dxf.tagBulge(stroke.bulges[i]));
  });
  tag(tags, 0, "SEQEND", 8, layer);
}

function tagLabel(tags: dxf.Tags, label: Label, layer: string): void {
  tag(tags, 0, "TEXT", 8, layer);
  dxf.tagTextInPlace(tags, label, STYLE);
  // 73 = 2: the second point is at half the height, whatever reader sets the text.
  tag(tags, 73, 2);
}

/** The drawing as a DXF R12 file, layer by layer in the order of work. */
export function writeDxfR12(drawing: Drawing): string {
  const tags: dxf.Tags = [];
  dxf.tagHeaderInPlace(tags, "AC1009", drawing);
  tagTables(tags);
  dxf.tagEntitiesInPlace(tags, drawing, {
    stroke: (s, layer) => tagStroke(tags, s, layer),
    label: (l, layer) => tagLabel(tags, l, layer),
  });
  tag(tags, 0, "EOF");
  return dxf.joinTags(tags);
}

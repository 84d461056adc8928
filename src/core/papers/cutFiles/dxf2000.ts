// Cut files as DXF 2000 (AC1015), beside R12 for readers that want handles and a unit: closed LWPOLYLINE, TEXT, $INSUNITS 4 (mm),
// the four layers declared, handles and owners throughout. No layouts beyond the two empty spaces every reader expects.
// Source: published DXF reference for this release, HEADER to OBJECTS; least set of tables after it, from memory.
import type { Drawing, Label, Stroke } from "../drawing/drawing.ts";
import * as dxf from "./dxfTags.ts";

const { tagInPlace: tag, tagNumber, tagPointInPlace: tagPoint } = dxf;

const STYLE = "Standard";

/** Tags with the next free handle, 1 and upwards, in hexadecimal. */
interface File {
  tags: dxf.Tags;
  next: number;
}

function takeHandle(file: File): string {
  return (file.next++).toString(16).toUpperCase();
}

interface Entry {
  subclass: string;
  name: string;
  pairs: readonly (string | number)[];
}

/** A table of the given kind with its entries; returns their handles. */
function tagTable(file: File, kind: string, entries: readonly Entry[], extra: (string | number)[] = []): string[] {
  const { tags } = file;
  const owner = takeHandle(file);
  tag(tags, 0, "TABLE", 2, kind, 5, owner, 330, 0, 100, "AcDbSymbolTable", 70, entries.length, ...extra);
  const handles = entries.map((entry) => {
    const handle = takeHandle(file);
    // A dimension style alone carries its handle under 105.
    tag(tags, 0, kind, kind === "DIMSTYLE" ? 105 : 5, handle, 330, owner, 100, "AcDbSymbolTableRecord");
    tag(tags, 100, entry.subclass, 2, entry.name, ...entry.pairs);
    return handle;
  });
  tag(tags, 0, "ENDTAB");
  return handles;
}

const VIEW: (string | number)[] = [70, 0, 10, "0.0", 20, "0.0", 11, "1.0", 21, "1.0"];

function tagTables(file: File): { model: string; paper: string } {
  const line = (name: string): Entry => ({
    subclass: "AcDbLinetypeTableRecord",
    name,
    pairs: [70, 0, 3, "", 72, 65, 73, 0, 40, "0.0"],
  });
  const layer = ({ name, colour }: { name: string; colour: number }): Entry => ({
    subclass: "AcDbLayerTableRecord",
    name,
    pairs: [70, 0, 62, colour, 6, "Continuous"],
  });
  tag(file.tags, 0, "SECTION", 2, "TABLES");
  tagTable(file, "VPORT", [{ subclass: "AcDbViewportTableRecord", name: "*Active", pairs: VIEW }]);
  tagTable(file, "LTYPE", ["ByBlock", "ByLayer", "Continuous"].map(line));
  tagTable(file, "LAYER", dxf.LAYER_ENTRIES.map(layer));
  tagTable(file, "STYLE", [{ subclass: "AcDbTextStyleTableRecord", name: STYLE, pairs: dxf.STYLE_FIELDS }]);
  tagTable(file, "VIEW", []);
  tagTable(file, "UCS", []);
  tagTable(file, "APPID", [{ subclass: "AcDbRegAppTableRecord", name: "ACAD", pairs: [70, 0] }]);
  const dimension = { subclass: "AcDbDimStyleTableRecord", name: STYLE, pairs: [70, 0] };
  tagTable(file, "DIMSTYLE", [dimension], [100, "AcDbDimStyleTable"]);
  const space = (name: string): Entry => ({ subclass: "AcDbBlockTableRecord", name, pairs: [340, 0] });
  const [model, paper] = tagTable(file, "BLOCK_RECORD", [space("*Model_Space"), space("*Paper_Space")]);
  tag(file.tags, 0, "ENDSEC");
  return { model, paper };
}

function tagBlocks(file: File, spaces: { model: string; paper: string }): void {
  const { tags } = file;
  tag(tags, 0, "SECTION", 2, "BLOCKS");
  for (const [name, owner] of [
    ["*Model_Space", spaces.model],
    ["*Paper_Space", spaces.paper],
  ]) {
    const where = [8, "0", 100];
    tag(tags, 0, "BLOCK", 5, takeHandle(file), 330, owner, 100, "AcDbEntity", ...where, "AcDbBlockBegin");
    tag(tags, 2, name, 70, 0);
    tagPoint(tags, 10, 0, 0);
    tag(tags, 3, name, 1, "");
    tag(tags, 0, "ENDBLK", 5, takeHandle(file), 330, owner, 100, "AcDbEntity", ...where, "AcDbBlockEnd");
  }
  tag(tags, 0, "ENDSEC");
}

function tagEntity(file: File, kind: string, owner: string, layer: string, subclass: string): void {
  tag(file.tags, 0, kind, 5, takeHandle(file), 330, owner, 100, "AcDbEntity", 8, layer, 100, subclass);
}

function tagStroke(file: File, owner: string, stroke: Stroke, layer: string): void {
  tagEntity(file, "LWPOLYLINE", owner, layer, "AcDbPolyline");
  tag(file.tags, 90, stroke.points.length, 70, stroke.closed ? 1 : 0, 43, "0.0");
  stroke.points.forEach(([x, y], i) => {
    tag(file.tags, 10, tagNumber(x), 20, tagNumber(y));
    if (stroke.bulges?.[i]) tag(file.tags, 42, dxf.tagBulge(stroke.bulges[i]));
  });
}

function tagLabel(file: File, owner: string, label: Label, layer: string): void {
  tagEntity(file, "TEXT", owner, layer, "AcDbText");
  dxf.tagTextInPlace(file.tags, label, STYLE);
  // 73 = 2, as in R12, here in a part of its own.
  tag(file.tags, 100, "AcDbText", 73, 2);
}

/** The drawing as a DXF 2000 file, layer by layer in the order of work. */
export function writeDxf2000(drawing: Drawing): string {
  const file: File = { tags: [], next: 1 };
  const body = file.tags;
  const spaces = tagTables(file);
  tagBlocks(file, spaces);
  dxf.tagEntitiesInPlace(body, drawing, {
    stroke: (s, layer) => tagStroke(file, spaces.model, s, layer),
    label: (l, layer) => tagLabel(file, spaces.model, l, layer),
  });
  tag(body, 0, "SECTION", 2, "OBJECTS");
  const [root, group] = [takeHandle(file), takeHandle(file)];
  tag(body, 0, "DICTIONARY", 5, root, 330, 0, 100, "AcDbDictionary", 281, 1, 3, "ACAD_GROUP", 350, group);
  tag(body, 0, "DICTIONARY", 5, group, 330, root, 100, "AcDbDictionary", 281, 1);
  tag(body, 0, "ENDSEC", 0, "EOF");
  // The header names the first free handle, so it is written last and put first.
  const head: dxf.Tags = [];
  const units = [9, "$INSUNITS", 70, 4, 9, "$MEASUREMENT", 70, 1, 9, "$HANDSEED", 5, takeHandle(file)];
  dxf.tagHeaderInPlace(head, "AC1015", drawing, ...units);
  tag(head, 0, "SECTION", 2, "CLASSES", 0, "ENDSEC");
  return dxf.joinTags([...head, ...body]);
}

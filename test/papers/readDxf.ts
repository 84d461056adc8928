// A DXF reader of its own for what dxf-parser leaves out: raw tags, so that order, doubled points and number shapes can be seen.

export interface Tag {
  code: number;
  value: string;
}

export function readTags(text: string): Tag[] {
  const lines = text.split("\r\n");
  if (lines.at(-1) !== "") throw new Error("the last line is not ended");
  lines.pop();
  if (lines.length % 2 !== 0) throw new Error("a tag without its value");
  const tags: Tag[] = [];
  for (let i = 0; i < lines.length; i += 2) {
    if (!/^ *-?\d+$/.test(lines[i]!)) throw new Error(`line ${i + 1} is no group code: ${lines[i]}`);
    tags.push({ code: Number(lines[i]), value: lines[i + 1]! });
  }
  return tags;
}

/** Runs of tags that start with code 0. */
export function entitiesOf(tags: Tag[]): Tag[][] {
  const start = tags.findIndex((t) => t.code === 2 && t.value === "ENTITIES");
  const out: Tag[][] = [];
  for (const t of tags.slice(start + 1)) {
    if (t.code === 0) out.push([t]);
    else out.at(-1)?.push(t);
  }
  return out;
}

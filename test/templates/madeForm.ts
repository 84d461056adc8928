// A starter's mesh as its generator makes it, and as OBJ.

/** A mesh with named border runs, ready to be written as OBJ. */
export interface MadeForm {
  xyz: Float64Array<ArrayBuffer>;
  tri: Uint32Array<ArrayBuffer>;
  lines: { name: string; vertices: number[] }[];
  /** Lines that are cables, by name, with their force over the stress of the cloth, m. */
  pull: Record<string, number>;
  /** Held vertices. */
  fixed: number[];
  /** Held vertices with names of their own. */
  corners: { name: string; vertex: number }[];
}

/** OBJ text: metres, z up, border runs as named lines, held vertices as points. Nine decimals: a thousandth of a micron. */
export function writeObj(form: MadeForm, head: string): string {
  const out = [`# ${head}`, "# metres, z up"];
  for (let v = 0; v < form.xyz.length; v += 3) {
    out.push(`v ${Array.from(form.xyz.subarray(v, v + 3), (c) => c.toFixed(9).replace(/^-(0\.0+)$/, "$1")).join(" ")}`);
  }
  out.push("g membrane");
  for (let t = 0; t < form.tri.length; t += 3) {
    out.push(`f ${Array.from(form.tri.subarray(t, t + 3), (v) => v + 1).join(" ")}`);
  }
  for (const line of form.lines) out.push(`g ${line.name}`, `l ${line.vertices.map((v) => v + 1).join(" ")}`);
  for (const corner of form.corners) out.push(`g ${corner.name}`, `p ${corner.vertex + 1}`);
  const others = form.fixed.filter((v) => !form.corners.some((c) => c.vertex === v));
  if (others.length > 0) out.push("g held", `p ${others.map((v) => v + 1).join(" ")}`);
  return `${out.join("\n")}\n`;
}

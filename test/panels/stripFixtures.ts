// Strips for the flattening's tests: grids cut along grid lines, and OBJ strips read from outside the project.
import { readFileSync } from "node:fs";
import type { Strip, StripLayout } from "../../src/core/records/stripLayout.ts";
import type { Surface } from "../../src/core/surface/surface.ts";

/** Vertex (i, j) of a grid with ni columns of cells is j·(ni + 1) + i. */
export function gridSurface(ni: number, nj: number, place: (i: number, j: number) => number[]): Surface {
  const xyz: number[] = [];
  const tri: number[] = [];
  for (let j = 0; j <= nj; j++) for (let i = 0; i <= ni; i++) xyz.push(...place(i, j));
  const at = (i: number, j: number) => j * (ni + 1) + i;
  for (let j = 0; j < nj; j++)
    for (let i = 0; i < ni; i++) {
      const [a, b, c, d] = [at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j + 1)];
      if ((i + j) % 2 === 0) tri.push(a, b, c, a, c, d);
      else tri.push(a, b, d, b, c, d);
    }
  return { xyz: Float64Array.from(xyz), tri: Uint32Array.from(tri) };
}

/** Strips along j between the columns of `cuts` (first 0, last ni); rim sides of the given kind. */
export function cutGrid(
  surface: Surface,
  ni: number,
  nj: number,
  cuts: number[],
  kind: "clamped" | "cable" | "free" = "clamped",
): StripLayout {
  const at = (i: number, j: number) => j * (ni + 1) + i;
  const column = (i: number) => Array.from({ length: nj + 1 }, (_, j) => at(i, j));
  const row = (j: number, i0: number, i1: number) => Array.from({ length: i1 - i0 + 1 }, (_, i) => at(i0 + i, j));
  const strips: Strip[] = [];
  for (let s = 1; s < cuts.length; s++) {
    const [i0, i1] = [cuts[s - 1], cuts[s]];
    const inside = (v: number) => v % (ni + 1) >= i0 && v % (ni + 1) <= i1;
    const triangles: number[] = [];
    for (let t = 0; 3 * t < surface.tri.length; t++)
      if ([0, 1, 2].every((k) => inside(surface.tri[3 * t + k]))) triangles.push(t);
    const long = (i: number, k: number, rim: number) =>
      i === rim ? { kind, id: rim === 0 ? "west" : "east" } : { kind: "seam" as const, id: `S${k}` };
    strips.push({
      id: `P${s}`,
      triangles,
      sides: [
        { kind, id: "south", vertices: row(0, i0, i1) },
        { ...long(i1, s, ni), vertices: column(i1) },
        { kind, id: "north", vertices: row(nj, i0, i1).reverse() },
        { ...long(i0, s - 1, 0), vertices: column(i0).reverse() },
      ],
      from: row(0, i0, i1),
      to: row(nj, i0, i1),
    });
  }
  const seams = cuts.slice(1, -1).map((i, k) => ({
    id: `S${k + 1}`,
    weld: `S${k + 1}`,
    cable: null,
    vertices: column(i),
    strips: [`P${k + 1}`, `P${k + 2}`] as [string, string],
    upper: `P${k + 1}`,
    length: measurePath(surface.xyz, column(i)),
  }));
  return { surface, seams, strips, choices: [], estimates: [] };
}

export function measurePath(xyz: ArrayLike<number>, path: number[], size = 3): number {
  let sum = 0;
  for (let k = 1; k < path.length; k++) {
    let d = 0;
    for (let c = 0; c < size; c++) d += (xyz[size * path[k] + c] - xyz[size * path[k - 1] + c]) ** 2;
    sum += Math.sqrt(d);
  }
  return sum;
}

/** v and triangle f lines of an OBJ. */
export function readTriangles(file: string): Surface {
  const xyz: number[] = [];
  const tri: number[] = [];
  for (const line of readFileSync(file, "utf8").split("\n")) {
    const word = line.trim().split(/\s+/);
    if (word[0] === "v") xyz.push(...word.slice(1, 4).map(Number));
    if (word[0] === "f") tri.push(...word.slice(1, 4).map((w) => Number.parseInt(w, 10) - 1));
  }
  return { xyz: Float64Array.from(xyz), tri: Uint32Array.from(tri) };
}

/** The cloth of the tests, a light coated polyester. */
export const CLOTH = { id: "job", Ew: 600, Ef: 500, nuWf: 0.25, G: 20 };

export const PLAIN = {
  fabric: CLOTH,
  prestress: { warp: 2, weft: 2 },
  panels: {},
  compensation: {},
  decompensation: { clamped: null, ring: null, cable: null },
  rings: [],
};

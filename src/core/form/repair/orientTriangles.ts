// One winding for every piece of a triangle surface, and the outer face as the job wants it. Moves and drops nothing.

import { PlanError } from "../../problem.ts";
import type { MeshSource } from "../../records/job.ts";
import { nextHalfedge } from "../../surface/adjacency.ts";
import { measureVectorAreas } from "../../surface/measures.ts";
import { describePlace, describeVertex } from "../formFinding.ts";
import { findMates } from "./bucketByVertex.ts";

/** What the winding pass found. Pieces are joined by whole sides. */
export interface Orientation {
  /** Piece of each triangle, pieces in the order of their first triangle. @shape nT */
  piece: Int32Array<ArrayBuffer>;
  nPieces: number;
  /** Triangles that were wound against the rest of their piece. */
  turned: number[];
  /** Pieces turned over as a whole to bring the outer face up or down. */
  turnedPieces: number[];
  /** Pieces for which neither face is the upper one; the mesh's own winding stands. */
  undecided: number[];
}

/** Plan share of the vector area below which no face is the upper one: a vertical tube has 0, a level sheet 1. */
const LEAST_PLAN_SHARE = 0.02;

/**
 * Refuses sides of three or more triangles.
 * @throws PlanError mesh-three-way-edge
 */
function checkSides(x: Float64Array<ArrayBuffer>, tri: Uint32Array<ArrayBuffer>, mate: Int32Array<ArrayBuffer>): void {
  const seen = new Map<string, [number, number]>();
  for (let h = 0; h < mate.length; h++) {
    if (mate[h] !== -2) continue;
    const a = tri[h];
    const b = tri[nextHalfedge(h)];
    seen.set(`${Math.min(a, b)}-${Math.max(a, b)}`, [Math.min(a, b), Math.max(a, b)]);
  }
  if (seen.size === 0) return;
  const sides = [...seen.values()];
  const named = sides.slice(0, 5).map(([a, b]) => `vertices ${a}–${b} at ${describePlace(x, a)}`);
  throw new PlanError(
    "mesh-three-way-edge",
    `${sides.length} side${sides.length > 1 ? "s are" : " is"} shared by three or more triangles (${named.join("; ")}${sides.length > 5 ? "; …" : ""}): cloth cannot branch; delete the extra faces, or plan the branch as a form of its own`,
    sides.slice(0, 5).map(([a, b]) => `vertices ${a}–${b}`),
    { sides: sides.length },
  );
}

function turnInPlace(tri: Uint32Array<ArrayBuffer>, t: number): void {
  const b = tri[3 * t + 1];
  tri[3 * t + 1] = tri[3 * t + 2];
  tri[3 * t + 2] = b;
}

/** Walks each piece from its first triangle; returns 1 where a triangle is wound against that first one. */
function findTurned(
  x: Float64Array<ArrayBuffer>,
  tri: Uint32Array<ArrayBuffer>,
  mate: Int32Array<ArrayBuffer>,
): { piece: Int32Array<ArrayBuffer>; against: Uint8Array<ArrayBuffer>; nPieces: number } {
  const nT = tri.length / 3;
  const piece = new Int32Array(nT).fill(-1);
  const against = new Uint8Array(nT);
  const queue = new Uint32Array(nT);
  let nPieces = 0;
  for (let root = 0; root < nT; root++) {
    if (piece[root] >= 0) continue;
    let last = 0;
    queue[last++] = root;
    piece[root] = nPieces;
    for (let first = 0; first < last; first++) {
      const t = queue[first];
      for (let h = 3 * t; h < 3 * t + 3; h++) {
        const g = mate[h];
        if (g < 0) continue;
        const other = Math.floor(g / 3);
        // two triangles wound alike run along their side in opposite directions
        const flip = against[t] ^ (tri[g] === tri[h] ? 1 : 0);
        if (piece[other] < 0) {
          piece[other] = nPieces;
          against[other] = flip;
          queue[last++] = other;
        } else if (against[other] !== flip)
          throw new PlanError(
            "mesh-one-sided",
            `the surface has only one face: it closes on itself with a twist, met along the side at ${describeVertex(x, tri[h])}; cloth has an outer and an inner face, part the surface there`,
            `vertex ${tri[h]}`,
            { vertex: tri[h] },
          );
      }
    }
    nPieces++;
  }
  return { piece, against, nPieces };
}

/**
 * Winds every piece one way, as most of its triangles are wound, then turns whole pieces so that their outer face lies
 * as asked: "up" and "down" by the sum of the vector areas, "normals" as the mesh has it.
 * @throws PlanError mesh-three-way-edge, mesh-one-sided
 */
export function orientTrianglesInPlace(
  x: Float64Array<ArrayBuffer>,
  tri: Uint32Array<ArrayBuffer>,
  outside: MeshSource["outside"],
): Orientation {
  const mate = findMates(tri, x.length / 3);
  checkSides(x, tri, mate);
  const { piece, against, nPieces } = findTurned(x, tri, mate);
  const nT = tri.length / 3;
  const count = new Int32Array(nPieces);
  for (let t = 0; t < nT; t++) count[piece[t]] += against[t] ? -1 : 1;
  const turned: number[] = [];
  for (let t = 0; t < nT; t++) {
    if ((against[t] === 1) !== count[piece[t]] >= 0) continue;
    turnInPlace(tri, t);
    turned.push(t);
  }
  const n = measureVectorAreas({ xyz: x, tri });
  const up = new Float64Array(nPieces);
  const all = new Float64Array(nPieces);
  for (let t = 0; t < nT; t++) {
    up[piece[t]] += n[3 * t + 2];
    all[piece[t]] += Math.sqrt(n[3 * t] ** 2 + n[3 * t + 1] ** 2 + n[3 * t + 2] ** 2);
  }
  const pieces = Array.from({ length: nPieces }, (_, p) => p);
  const undecided = outside === "normals" ? [] : pieces.filter((p) => Math.abs(up[p]) < LEAST_PLAN_SHARE * all[p]);
  const sign = outside === "down" ? -1 : 1;
  const turnedPieces = outside === "normals" ? [] : pieces.filter((p) => !undecided.includes(p) && sign * up[p] < 0);
  const over = new Uint8Array(nPieces);
  for (const p of turnedPieces) over[p] = 1;
  for (let t = 0; t < nT; t++) if (over[piece[t]]) turnInPlace(tri, t);
  return { piece, nPieces, turned, turnedPieces, undecided };
}

// Boundary loops in the form's own order and direction, and the loops that are tears rather than openings.
import { type Finding, PlanError } from "../../problem.ts";
import type { Adjacency } from "../../surface/adjacency.ts";
import { findBoundaryLoops } from "../../surface/adjacency.ts";
import type { Surface } from "../../surface/surface.ts";
import { buildFormFinding, describePlace } from "../formFinding.ts";
import type { SoundSurface } from "../repair/soundSurface.ts";

/** Lengths within this share count as equal, so that two rings of one size keep their order from mesh to mesh. */
const EQUAL = 1e-6;

/** Signed plan area over the squared length below which a loop has no plan area. A circle has 1/(4π) = 0.08. */
const LEAST_PLAN = 1e-4;

/** A loop that nothing in mesh or job speaks of is a tear below these shares of the longest loop of its piece. */
const TEAR = { wordsElsewhere: 0.25, noWords: 0.04, fewSides: 8 };

/** Length of a closed ring of vertices, m. */
export function measureLoopLength(xyz: Float64Array<ArrayBuffer>, loop: readonly number[]): number {
  let sum = 0;
  loop.forEach((a, i) => {
    const b = loop[(i + 1) % loop.length];
    sum += Math.sqrt(
      (xyz[3 * a] - xyz[3 * b]) ** 2 + (xyz[3 * a + 1] - xyz[3 * b + 1]) ** 2 + (xyz[3 * a + 2] - xyz[3 * b + 2]) ** 2,
    );
  });
  return sum;
}

function measurePlanArea(xyz: Float64Array<ArrayBuffer>, loop: readonly number[]): number {
  const o = 3 * loop[0];
  let sum = 0;
  loop.forEach((a, i) => {
    const b = loop[(i + 1) % loop.length];
    sum +=
      (xyz[3 * a] - xyz[o]) * (xyz[3 * b + 1] - xyz[o + 1]) - (xyz[3 * b] - xyz[o]) * (xyz[3 * a + 1] - xyz[o + 1]);
  });
  return sum / 2;
}

/**
 * Loops counter-clockwise seen from above (with the mesh where a loop has no plan area), longest first; equal ones by
 * the height of their centre, then its x and y.
 * @throws PlanError mesh-closed: no boundary at all
 */
export function buildLoops(surface: Surface, adjacency: Adjacency): number[][] {
  const { xyz } = surface;
  const raw = findBoundaryLoops(surface, adjacency);
  if (raw.length === 0)
    throw new PlanError(
      "mesh-closed",
      "the surface has no boundary: cloth must end at cables or clamps; cut the mesh open or delete its inner faces",
      "mesh",
    );
  const keyed = raw.map((loop) => {
    const length = measureLoopLength(xyz, loop);
    const area = measurePlanArea(xyz, loop);
    const turn = area < -LEAST_PLAN * length * length;
    const centre = [2, 0, 1].map((k) => loop.reduce((s, v) => s + xyz[3 * v + k], 0) / loop.length);
    return { loop: turn ? loop.toReversed() : loop, length, centre };
  });
  keyed.sort((p, q) => {
    if (Math.abs(p.length - q.length) > EQUAL * Math.max(p.length, q.length)) return q.length - p.length;
    for (let k = 0; k < 3; k++) {
      const d = p.centre[k] - q.centre[k];
      if (Math.abs(d) > EQUAL * p.length) return d;
    }
    return p.loop[0] - q.loop[0];
  });
  return keyed.map((k) => k.loop);
}

/**
 * Loops that are tears: short beside the longest loop of their piece, and neither fixed points nor lines on them.
 * @shape spoken nV: 1 where a fixed point, a line or an anchor of the job lies
 */
export function findTears(sound: SoundSurface, loops: readonly number[][], spoken: Uint8Array<ArrayBuffer>): number[] {
  const { xyz } = sound.surface;
  const words = spoken.includes(1);
  const length = loops.map((loop) => measureLoopLength(xyz, loop));
  const longest = new Float64Array(sound.nPieces);
  loops.forEach((loop, i) => {
    longest[sound.piece[loop[0]]] = Math.max(longest[sound.piece[loop[0]]], length[i]);
  });
  return Array.from(loops.keys()).filter((i) => {
    const loop = loops[i];
    const share = length[i] / longest[sound.piece[loop[0]]];
    if (share >= TEAR.wordsElsewhere || loop.some((v) => spoken[v])) return false;
    return words || share < TEAR.noWords || loop.length <= TEAR.fewSides;
  });
}

/** Tears that are told one by one; the rest are counted. */
const TOLD = 8;

/** A stop for each tear, longest first; beyond the first few one for all the rest. */
export function buildTearFindings(
  sound: SoundSurface,
  tears: readonly { id: string; loop: readonly number[] }[],
): Finding[] {
  const { xyz } = sound.surface;
  const words = tears.map(({ id, loop }) => {
    const first = loop.reduce((a, b) => Math.min(a, b));
    const vertex = `vertex ${sound.toSource[first]}`;
    const size = `${loop.length} sides, ${measureLoopLength(xyz, loop).toFixed(3)} m round, at ${describePlace(xyz, first)} (${vertex} of the mesh)`;
    return { id, vertex, size, sides: loop.length };
  });
  const told = words.slice(0, TOLD).map((w) =>
    buildFormFinding("stop", {
      code: "mesh-hole",
      where: [w.id, w.vertex],
      value: w.sides,
      limit: 0,
      text: `a hole is torn in the surface: ${w.size}; nothing holds its rim`,
      remedy: `close it in the mesh; if it is an opening, fix its points or name its cable in the mesh, or give edges.${w.id}.kind in the job`,
    }),
  );
  const rest = words.slice(TOLD);
  if (rest.length === 0) return told;
  return [
    ...told,
    buildFormFinding("stop", {
      code: "mesh-hole",
      where: rest.map((w) => w.id),
      value: rest.length,
      limit: 0,
      text: `${rest.length} more holes are torn in the surface, the longest ${rest[0].size}`,
      remedy: "close them in the mesh, or export it anew",
    }),
  ];
}

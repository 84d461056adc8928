// The vertices of a cable on the cut surface: an edge of the form with the seam ends that were inserted in it.
import { PlanError } from "../../problem.ts";
import type { FormEdge } from "../../records/foundForm.ts";
import type { StripLayout } from "../../records/stripLayout.ts";

/**
 * Vertices of the cut surface along an edge of the form, from its first vertex; a closed edge repeats its first.
 * @throws PlanError rig-cable: the strips' sides do not make one run of the edge
 */
export function traceCable(layout: StripLayout, edge: FormEdge): number[] {
  const near = new Map<number, number[]>();
  let pieces = 0;
  const join = (a: number, b: number) => {
    near.set(a, [...(near.get(a) ?? []), b]);
    near.set(b, [...(near.get(b) ?? []), a]);
    pieces++;
  };
  const run = (vertices: number[]) => {
    for (let i = 1; i < vertices.length; i++) join(vertices[i - 1], vertices[i]);
  };
  for (const seam of layout.seams) if (seam.cable === edge.id) run(seam.vertices);
  for (const strip of layout.strips)
    for (const side of strip.sides) if (side.kind !== "seam" && side.id === edge.id) run(side.vertices);
  const first = edge.vertices[0];
  const closed = edge.vertices.length > 2 && edge.vertices[edge.vertices.length - 1] === first;
  const path = [first];
  let before = -1;
  // a closed edge is begun towards its own second vertex: of the two ways the one that meets it first
  let at = first;
  const ways = near.get(first) ?? [];
  let next = closed && ways.length === 2 ? firstToward(near, first, ways, edge.vertices) : ways[0];
  while (next !== undefined && path.length <= pieces + 1) {
    path.push(next);
    before = at;
    at = next;
    if (at === first) break;
    const onward: number[] = (near.get(at) ?? []).filter((v) => v !== before);
    next = onward[0];
  }
  if (path.length !== pieces + 1) {
    throw new PlanError(
      "rig-cable",
      `the strips along edge ${edge.id} give ${pieces} pieces, but only ${path.length - 1} of them follow on each other; the cutting of that edge is broken`,
      edge.id,
      { pieces },
    );
  }
  return path;
}

/** Which of two neighbours of the first vertex leads to the edge's second vertex before its last but one. */
function firstToward(near: Map<number, number[]>, first: number, ways: number[], vertices: number[]): number {
  const second = vertices[1];
  const last = vertices[vertices.length - 2];
  let before = first;
  let at = ways[0];
  for (let i = 0; i < near.size; i++) {
    if (at === second) return ways[0];
    if (at === last) return ways[1];
    const onward = (near.get(at) ?? []).filter((v) => v !== before);
    before = at;
    at = onward[0];
  }
  return ways[0];
}

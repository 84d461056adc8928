import { expect, test } from "vitest";
import { PlanError } from "../../src/core/problem.ts";
import type { FormEdge } from "../../src/core/records/foundForm.ts";
import type { StripLayout } from "../../src/core/records/stripLayout.ts";
import { traceCable } from "../../src/core/rig/cables/traceCable.ts";

const edge = (vertices: number[], kind: FormEdge["kind"] = "cable"): FormEdge => ({
  id: "E1",
  kind,
  vertices,
  loop: kind === "cable" ? 0 : -1,
  force: 10,
  forceFrom: "job",
  reaction: null,
});

/** A layout with nothing but the sides of strips along E1, and seams on it. */
function layout(sides: number[][], seams: number[][] = []): StripLayout {
  return {
    strips: sides.map((vertices) => ({ sides: [{ kind: "cable", id: "E1", vertices }] })),
    seams: seams.map((vertices) => ({ cable: "E1", vertices })),
  } as unknown as StripLayout;
}

test("an open edge: seam ends stand where they were inserted, whichever way the strips run", () => {
  // 20 and 21 are seam ends between the form's vertices 1 and 2
  const cut = layout([
    [21, 2, 3],
    [20, 1, 0],
    [21, 20],
  ]);
  expect(traceCable(cut, edge([0, 1, 2, 3]))).toEqual([0, 1, 20, 21, 2, 3]);
  expect(traceCable(cut, edge([3, 2, 1, 0]))).toEqual([3, 2, 21, 20, 1, 0]);
});

test("a closed edge goes its own way round and ends where it began", () => {
  const ring = layout([
    [0, 1, 20],
    [20, 2, 3],
    [3, 21, 0],
  ]);
  expect(traceCable(ring, edge([0, 1, 2, 3, 0]))).toEqual([0, 1, 20, 2, 3, 21, 0]);
  expect(traceCable(ring, edge([0, 3, 2, 1, 0]))).toEqual([0, 21, 3, 2, 20, 1, 0]);
});

test("a belt is followed along the seams that lie on it", () => {
  expect(
    traceCable(
      layout(
        [],
        [
          [5, 6],
          [7, 6],
        ],
      ),
      edge([5, 6, 7], "belt"),
    ),
  ).toEqual([5, 6, 7]);
});

test("sides that do not follow on each other are an error with the edge's name", () => {
  const broken = layout([
    [0, 1],
    [2, 3],
  ]);
  expect(() => traceCable(broken, edge([0, 1, 2, 3]))).toThrow(PlanError);
  expect(() => traceCable(broken, edge([0, 1, 2, 3]))).toThrow(/E1/);
});

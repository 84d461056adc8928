// Regions between inner cables: outlines, corners, order, and what cannot be parted.
import { expect, test } from "vitest";
import { buildRegions, measureCornerAngle } from "../../src/core/seams/region.ts";
import { buildAdjacency } from "../../src/core/surface/adjacency.ts";
import { measureArea } from "../../src/core/surface/measures.ts";
import { makeForm, makeGrid, makeRing, makeTent } from "./madeForms.ts";

const regionsOf = (form: ReturnType<typeof makeForm>) => buildRegions(form, buildAdjacency(form.surface));

test("a square is one region with four corners of 90°", () => {
  const form = makeForm(makeGrid(6, 6, (u, v) => [u, v, 0]));
  const { regions } = regionsOf(form);
  expect(regions.length).toBe(1);
  const [o] = regions[0].outlines;
  expect(o.turns.length).toBe(4);
  expect(o.arc[o.vertices.length]).toBeCloseTo(4, 12);
  for (const i of o.turns)
    expect(measureCornerAngle(regions[0].surface, regions[0].adjacency, o.vertices[i])).toBeCloseTo(Math.PI / 2, 12);
});

test("eight belts make eight regions, counter-clockwise from the first anchor or -x, together the whole area", () => {
  const form = makeTent(48, 6, 6, 4, 8);
  const { regions } = regionsOf(form);
  expect(regions.map((r) => r.id)).toEqual(Array.from({ length: 8 }, (_, i) => `region ${i + 1}`));
  expect(regions.reduce((sum, r) => sum + measureArea(r.surface), 0)).toBeCloseTo(measureArea(form.surface), 9);
  const angle = regions.map((r) => {
    const n = r.surface.xyz.length / 3;
    let x = 0;
    let y = 0;
    for (let v = 0; v < n; v++) {
      x += r.surface.xyz[3 * v];
      y += r.surface.xyz[3 * v + 1];
    }
    return Math.atan2(y, x);
  });
  for (let i = 1; i < 8; i++) {
    const step = (angle[i] - angle[i - 1] + 4 * Math.PI) % (2 * Math.PI);
    expect(step).toBeCloseTo(Math.PI / 4, 6);
  }
  for (const r of regions) expect(r.outlines[0].turns.length).toBe(4);
});

test("one belt slits a ring: one region, one outline that runs along the belt twice", () => {
  const form = makeTent(24, 5, 6, 4, 1);
  const { regions } = regionsOf(form);
  expect(regions.length).toBe(1);
  expect(regions[0].outlines.length).toBe(1);
  const belt = form.edges.findIndex((e) => e.id === "belt 1");
  expect([...regions[0].outlines[0].edge].filter((e) => e === belt).length).toBe(10);
});

test("a cable off the mesh, a boundary without an edge and a closed surface are refused by name", () => {
  const form = makeForm(
    makeGrid(6, 6, (u, v) => [u, v, 0]),
    [{ id: "jump", kind: "belt", vertices: [0, 8, 24] }],
  );
  expect(() => regionsOf(form)).toThrow(/edge jump leaves the mesh between vertices 8 and 24/);
  const ring = makeForm(makeRing(12, 2, (turn, row) => [(1 + row) * Math.cos(turn), (1 + row) * Math.sin(turn), 0]));
  expect(() => regionsOf({ ...ring, edges: ring.edges.slice(1) })).toThrow(/belongs to no edge/);
  const tetra = {
    xyz: Float64Array.of(0, 0, 0, 1, 0, 0, 0, 1, 0, 0, 0, 1),
    tri: Uint32Array.of(0, 2, 1, 0, 1, 3, 1, 2, 3, 2, 0, 3),
  };
  expect(() => regionsOf({ ...ring, surface: tetra, loops: [], edges: [] })).toThrow(/no boundary/);
});

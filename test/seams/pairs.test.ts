// Seams given one by one: legs, welds, ends of strips that no layout names, and what is refused.
import { describe, expect, test } from "vitest";
import type { EdgePlace } from "../../src/core/records/job.ts";
import { openSeams } from "../../src/core/seams/moveSeam.ts";
import { noteSeamEnds } from "../../src/core/seams/noteEnds.ts";
import { findEdge } from "../../src/core/seams/pairs.ts";
import { buildRegions } from "../../src/core/seams/region.ts";
import { runSeams } from "../../src/core/seams/runSeams.ts";
import { traceSeam } from "../../src/core/seams/seamLine.ts";
import { buildAdjacency } from "../../src/core/surface/adjacency.ts";
import { expectSoundLayout } from "./judgeLayout.ts";
import { makeForm, makeGrid, makeJob, makeRing } from "./madeForms.ts";

const options = { usableWidth: 5, maxLength: null };
const flat = () => makeGrid(12, 12, (u, v) => [6 * u, 6 * v, 0]);
// counter-clockwise from (0,0): E1 … E4 as makeForm meets them
const square = () => makeForm(flat());
const pairs = (list: EdgePlace[][]) => makeJob({ layout: "pairs", pairs: list });
const [a, b, c, d] = ["E1", "E2", "E3", "E4"];

test("one seam across a square: two panels with two seam-free ends each, length by Pythagoras", () => {
  const form = square();
  const { output, findings } = runSeams(
    form,
    pairs([
      [
        { edge: a, at: 0.25 },
        { edge: c, at: 0.5 },
      ],
    ]),
    options,
  );
  expectSoundLayout(form, output);
  expect(output.strips.length).toBe(2);
  expect(output.seams.length).toBe(1);
  expect(output.seams[0].length).toBeCloseTo(Math.hypot(6, 6 * 0.25), 6);
  for (const strip of output.strips) {
    const ends = new Set([...strip.from, ...strip.to]);
    const on = strip.sides.filter((s) => s.vertices.every((v) => ends.has(v))).map((s) => s.id);
    expect(on.sort()).toEqual([a, c]);
  }
  expect(findings.filter((f) => f.level !== "note")).toEqual([]);
});

test("a seam that cuts off a corner leaves a triangle: its two edge sides are the ends", () => {
  const form = square();
  const { output } = runSeams(
    form,
    pairs([
      [
        { edge: a, at: 0.7 },
        { edge: b, at: 0.3 },
      ],
    ]),
    options,
  );
  expectSoundLayout(form, output);
  expect(output.strips.map((s) => s.sides.length).sort()).toEqual([3, 5]);
});

test("a seam between two places on one edge of a disc: pointed ends or a parted edge", () => {
  const n = 64;
  const ring = makeRing(n, 6, (turn, row) => [(1 + 4 * row) * Math.cos(turn), (1 + 4 * row) * Math.sin(turn), 0]);
  const hub = ring.xyz.length / 3;
  const xyz = Float64Array.from([...ring.xyz, 0, 0, 0]);
  const tri = [...ring.tri];
  for (let i = 0; i < n; i++) tri.push(hub, i, (i + 1) % n);
  const form = makeForm({ xyz, tri: Uint32Array.from(tri) });
  const rim = form.edges[0].id;
  for (const [from, to] of [
    [0.1, 0.25],
    [0.1, 0.5],
    [0.2, 0.7],
  ]) {
    const { output } = runSeams(
      form,
      pairs([
        [
          { edge: rim, at: from },
          { edge: rim, at: to },
        ],
      ]),
      options,
    );
    expectSoundLayout(form, output);
    expect(output.strips.length).toBe(2);
  }
});

test("a T: a seam that ends where another ends, and three seams round one panel", () => {
  const form = square();
  const { output } = runSeams(
    form,
    pairs([
      [
        { edge: a, at: 0.5 },
        { edge: b, at: 0.5 },
      ],
      [
        { edge: b, at: 0.5 },
        { edge: c, at: 0.5 },
      ],
      [
        { edge: c, at: 0.5 },
        { edge: a, at: 0.5 },
      ],
    ]),
    options,
  );
  expectSoundLayout(form, output);
  expect(output.strips.length).toBe(4);
});

test("through a belt: two legs, one weld; a belt between the ends without a place on it is refused", () => {
  const surface = flat();
  const belt = Array.from({ length: 13 }, (_, i) => 6 * 13 + i);
  const form = makeForm(surface, [{ id: "belt", kind: "belt", vertices: belt }]);
  const low = form.edges.find((e) => e.loop === 0 && e.vertices.every((v) => v < 13))?.id ?? "";
  const high = form.edges.find((e) => e.loop === 0 && e.vertices.every((v) => v >= 12 * 13))?.id ?? "";
  const through = pairs([
    [
      { edge: low, at: 0.4 },
      { edge: "belt", at: 0.55 },
      { edge: high, at: 0.5 },
    ],
  ]);
  const { output } = runSeams(form, through, options);
  expectSoundLayout(form, output);
  expect(output.strips.length).toBe(4);
  const legs = output.seams.filter((s) => s.cable === null);
  expect(legs.length).toBe(2);
  expect(new Set(legs.map((s) => s.weld)).size).toBe(1);
  expect(new Set(output.seams.filter((s) => s.cable === "belt").map((s) => s.weld)).size).toBe(1);
  const apart = runSeams(
    form,
    pairs([
      [
        { edge: low, at: 0.4 },
        { edge: high, at: 0.5 },
      ],
    ]),
    options,
  );
  expect(apart.findings.filter((f) => f.level === "stop").map((f) => f.code)).toEqual(["seam-leaves"]);
  expectSoundLayout(form, apart.output);
});

describe("refused", () => {
  test("seams that cross: the later one is left out with the place", () => {
    const form = square();
    const { output, findings } = runSeams(
      form,
      pairs([
        [
          { edge: a, at: 0.5 },
          { edge: c, at: 0.5 },
        ],
        [
          { edge: b, at: 0.4 },
          { edge: d, at: 0.6 },
        ],
      ]),
      options,
    );
    expectSoundLayout(form, output);
    expect(output.strips.length).toBe(2);
    const [stop] = findings.filter((f) => f.level === "stop");
    expect(stop).toMatchObject({ code: "seam-crosses", where: "seams.pairs[1]" });
    expect(stop.text).toMatch(/3\.000, 2\.400|3\.000, 3\.600|2\.400, 3\.000|3\.600, 3\.000/);
  });

  test("a seam along a hollow edge, one of no length, a panel round a ring, an unknown edge", () => {
    const hollow = makeForm(
      makeGrid(16, 16, (u, v) => [6 * u, 6 * v + 1.5 * Math.sin(Math.PI * u) * (1 - v), 0]),
      [{ id: "hollow", kind: "cable", vertices: Array.from({ length: 17 }, (_, i) => i) }],
    );
    const along = runSeams(
      hollow,
      pairs([
        [
          { edge: "hollow", at: 0.1 },
          { edge: "hollow", at: 0.9 },
        ],
      ]),
      options,
    );
    expect(along.findings.map((f) => f.code)).toContain("seam-hugs-edge");
    expectSoundLayout(hollow, along.output);
    const nothing = runSeams(
      square(),
      pairs([
        [
          { edge: a, at: 0.3 },
          { edge: a, at: 0.3 },
        ],
      ]),
      options,
    );
    expect(nothing.findings.map((f) => f.code)).toContain("seam-point");
    const ring = makeForm(makeRing(32, 4, (turn, row) => [(1 + row) * Math.cos(turn), (1 + row) * Math.sin(turn), 0]));
    expect(() => runSeams(ring, pairs([]), options)).toThrow(/joins itself/);
    const [outer, inner] = ring.edges.map((e) => e.id);
    const one: EdgePlace[] = [
      { edge: inner, at: 0 },
      { edge: outer, at: 0 },
    ];
    expect(() => runSeams(ring, pairs([one]), options)).toThrow(/joins itself/);
    expect(() => findEdge(ring, "nowhere", "seams.from")).toThrow(/seams.from names edge "nowhere"/);
  });
});

describe("flagged", () => {
  const codesOf = (form: ReturnType<typeof square>, list: EdgePlace[][]) =>
    runSeams(form, pairs(list), options)
      .findings.filter((f) => f.level !== "note")
      .map((f) => f.code);

  test("an end that leaves its edge at 4 degrees, but not one at 6", () => {
    // from the corner of a square of 6 m: the slope is 6 tan(angle) on the side across
    const at = (degrees: number) => Math.tan((degrees * Math.PI) / 180);
    const seam = (degrees: number): EdgePlace[][] => [
      [
        { edge: a, at: 0 },
        { edge: b, at: at(degrees) },
      ],
    ];
    expect(codesOf(square(), seam(4))).toContain("seam-shallow");
    expect(codesOf(square(), seam(6))).not.toContain("seam-shallow");
    const told = runSeams(square(), pairs(seam(4)), options).findings.find((f) => f.code === "seam-shallow");
    expect(Number(told?.value)).toBeCloseTo(4, 6);
  });

  test("a seam 100 mm beside an edge, but not one 200 mm beside it", () => {
    const beside = (metres: number): EdgePlace[][] => [
      [
        { edge: d, at: 1 - metres / 6 },
        { edge: b, at: metres / 6 },
      ],
    ];
    expect(codesOf(square(), beside(0.1))).toEqual(["seam-near-edge"]);
    expect(codesOf(square(), beside(0.2))).toEqual([]);
  });

  test("a seam from one rim of a tube to the other, half a turn on, may go either way round; a quarter turn on it may not", () => {
    const form = makeForm(makeRing(32, 8, (turn, row) => [2 * Math.cos(turn), 2 * Math.sin(turn), 6 * row]));
    const adjacency = buildAdjacency(form.surface);
    const { regions } = buildRegions(form, adjacency);
    const codes = (steps: number) => {
      const line = traceSeam(regions[0], { a: 0, b: 0, t: 0 }, { a: 8 * 32 + steps, b: 8 * 32 + steps, t: 0 });
      const path = { region: 0, line, weld: "seams.pairs[0]", left: -1, right: -1 };
      return noteSeamEnds(regions, [path], true).map((f) => f.code);
    };
    expect(codes(16)).toEqual(["seam-two-ways"]);
    expect(codes(8)).toEqual([]);
  });
});

test("round a ring given seams leave the panels the names that laid out gores have", () => {
  // bug: one gore's seam slid made a list of pairs, whose panels were then named from one side of the roof to the other
  const form = makeForm(
    makeRing(48, 10, (turn, row) => {
      const r = 1 + 4 * row;
      // a rim of four corners, the gores between them of several lengths
      const square = 1 + row * (0.25 / Math.max(Math.abs(Math.cos(turn)), Math.abs(Math.sin(turn))) - 0.25);
      return [r * square * Math.cos(turn), r * square * Math.sin(turn), 2 * (1 - row)];
    }),
  );
  for (const count of [5, 8, 11]) {
    const options = { usableWidth: 5, maxLength: null };
    const asked = makeJob({ layout: "gores", count });
    const laid = runSeams(form, asked, options).output;
    const pairs = [...openSeams(form, asked, options).ends.values()].reverse();
    expect(pairs.length).toBe(count);
    const given = runSeams(form, makeJob({ layout: "pairs", pairs }), options).output;
    const middles = (of: typeof laid) =>
      of.strips.map(({ triangles }) => {
        const corners = triangles.flatMap((t) => [...of.surface.tri.slice(3 * t, 3 * t + 3)]);
        return [0, 1].map((c) => corners.reduce((sum, v) => sum + of.surface.xyz[3 * v + c], 0) / corners.length);
      });
    const theirs = middles(laid);
    middles(given).forEach((p, i) => {
      expect(Math.hypot(p[0] - theirs[i][0], p[1] - theirs[i][1])).toBeLessThan(1e-6);
    });
  }
});

// The seams station on made forms and, where they lie beside the project, on the found forms of ../shared/meshes.
import { existsSync, readFileSync } from "node:fs";
import fc from "fast-check";
import { describe, expect, test } from "vitest";
import type { StripLayout } from "../../src/core/records/stripLayout.ts";
import { openSeams } from "../../src/core/seams/moveSeam.ts";
import { runSeams } from "../../src/core/seams/runSeams.ts";
import type { Vec3 } from "../../src/core/surface/surface.ts";
import { expectSoundLayout, listLengths } from "./judgeLayout.ts";
import { makeForm, makeGrid, makeJob, makeRing, makeSurface, makeTent, readForm, renumber } from "./madeForms.ts";

const hypar = (u: number, v: number): Vec3 => {
  const x = 16 * u - 8;
  const y = 16 * v - 8;
  return [x, y, (2.5 * x * y) / 64];
};
const square = (side: number) => makeForm(makeGrid(12, 12, (u, v) => [side * u, side * v, 0]));
const options = (usableWidth: number) => ({ usableWidth, maxLength: null });

function fan(n: number, rows: number, corner: (i: number) => Vec3, middle: Vec3) {
  // polygon of n sides, `rows` rings of triangles about its middle
  const places: Vec3[] = [middle];
  const at: number[][] = [[0]];
  for (let r = 1; r <= rows; r++) {
    at.push([]);
    for (let i = 0; i < n; i++)
      for (let k = 0; k < r; k++) {
        const p = corner(i);
        const q = corner((i + 1) % n);
        const s = k / r;
        at[r].push(places.length);
        places.push([0, 1, 2].map((c) => middle[c] + (r / rows) * (p[c] + s * (q[c] - p[c]) - middle[c])) as Vec3);
      }
  }
  const faces: number[][] = [];
  for (let r = 1; r <= rows; r++)
    for (let i = 0; i < n; i++)
      for (let k = 0; k < r; k++) {
        const out = (j: number) => at[r][(i * r + j) % (n * r)];
        const inner = (j: number) => (r === 1 ? 0 : at[r - 1][(i * (r - 1) + j) % (n * (r - 1))]);
        faces.push([inner(k), out(k), out(k + 1)]);
        if (k < r - 1) faces.push([inner(k), out(k + 1), inner(k + 1)]);
      }
  return makeSurface(places, faces);
}

describe("bands", () => {
  test("a plane square of 7 m on 2.4 m cloth has 3 strips of one width, seams straight and parallel", () => {
    const form = square(7);
    const { output, findings } = runSeams(form, makeJob(), options(2.4));
    expectSoundLayout(form, output);
    expect(output.strips.map((s) => s.id)).toEqual(["P1", "P2", "P3"]);
    expect(output.seams.map((s) => s.id)).toEqual(["S1", "S2"]);
    for (const seam of output.seams) expect(seam.length).toBeCloseTo(7, 5);
    for (const w of output.choices[0].widths) expect(w).toBeCloseTo(7 / 3, 2);
    expect(findings.filter((f) => f.level !== "note")).toEqual([]);
  });

  test("a form that fits one roll has no seam, and its one panel has two whole ends", () => {
    const form = square(2);
    const { output } = runSeams(form, makeJob(), options(2.4));
    expectSoundLayout(form, output);
    expect(output.strips.length).toBe(1);
    expect(output.seams).toEqual([]);
    expect(output.choices[0].layout).toBe("whole");
  });

  test("strips run from the edge asked for to the other, seams end on both, in the number asked for", () => {
    const form = makeForm(makeGrid(20, 20, hypar));
    const [a, , c] = form.edges.map((e) => e.id);
    const { output } = runSeams(form, makeJob({ layout: "bands", from: a, to: c, count: 5 }), options(4));
    expectSoundLayout(form, output);
    expect(output.strips.length).toBe(5);
    for (const strip of output.strips) {
      const ends = strip.sides.filter((s) => s.id === a || s.id === c);
      expect(new Set(ends.flatMap((s) => s.vertices))).toEqual(new Set([...strip.from, ...strip.to]));
    }
    expect(output.choices[0]).toMatchObject({ layout: "bands", from: a, to: c, count: 5 });
  });

  test("a saddle of straight edges is laid along its rulings: seams of a hypar are straight lines (check-values 4.2)", () => {
    const form = makeForm(makeGrid(20, 20, hypar));
    const { output } = runSeams(form, makeJob(), options(2.4));
    expectSoundLayout(form, output);
    expect(output.strips.length).toBe(7);
    // by symmetry the strips mirror each other about the middle; the ruling at x has length 16·sqrt(1 + (2.5 x / 64)²)
    for (const seam of output.seams) {
      const x = output.surface.xyz[3 * seam.vertices[0]];
      const y = output.surface.xyz[3 * seam.vertices[0] + 1];
      const at = Math.abs(Math.abs(y) - 8) < 1e-9 ? x : y;
      expect(seam.length).toBeCloseTo(16 * Math.sqrt(1 + ((2.5 * at) / 64) ** 2), 2); // facets of 0.8 m
    }
  });

  test("panels are read from one side to the other", () => {
    const form = makeForm(makeGrid(20, 20, hypar));
    const { output } = runSeams(form, makeJob(), options(2.4));
    const middle = output.strips.map((s) => {
      const v = s.sides.flatMap((q) => q.vertices);
      return [0, 1].map((k) => v.reduce((sum, i) => sum + output.surface.xyz[3 * i + k] / v.length, 0));
    });
    const k = Math.abs(middle[6][0] - middle[0][0]) > Math.abs(middle[6][1] - middle[0][1]) ? 0 : 1;
    for (let i = 1; i < middle.length; i++) expect(middle[i][k]).toBeGreaterThan(middle[i - 1][k]);
  });

  test("what cannot be laid as asked is laid automatically, and said", () => {
    const gores = runSeams(square(7), makeJob({ layout: "gores" }), options(2.4));
    expectSoundLayout(square(7), gores.output);
    expect(gores.findings.map((f) => f.code)).toContain("seam-layout-fallback");
    const one = runSeams(square(7), makeJob({ layout: "bands", from: "E2" }), options(2.4));
    expect(one.output.choices[0].from === "E2" || one.output.choices[0].to === "E2").toBe(true);
    const near = runSeams(square(7), makeJob({ layout: "bands", from: "E1", to: "E2" }), options(2.4));
    expectSoundLayout(square(7), near.output);
    const [told] = near.findings.filter((f) => f.code === "seam-layout-fallback");
    expect(told).toMatchObject({ level: "caution", where: ["region 1", "seams.layout"] });
    expect(told.text).toMatch(/from E1 to E2/);
  });

  test("a number of strips for one way, and widths measured by the flattening, change the layout", () => {
    const form = square(7);
    const first = runSeams(form, makeJob(), options(2.4)).output;
    const way = first.estimates?.[0].way ?? "";
    const four = runSeams(form, makeJob(), { ...options(2.4), counts: { "region 1": { way, count: 4 } } }).output;
    expect([first.strips.length, four.strips.length]).toEqual([3, 4]);
    expect(four.estimates?.[0].way).toBe(way);
    const factors = (factor: number[]) => ({ widthFactors: { [way]: { at: [1 / 6, 1 / 2, 5 / 6], factor } } });
    const [from, to] = way.replace("region 1: ", "").split(" to ");
    const job = makeJob({ layout: "bands", from, to });
    const shifted = runSeams(form, job, { ...options(2.45), ...factors([1.02, 1, 1]) }).output;
    expect(shifted.estimates?.[0].way).toBe(way);
    expect(shifted.strips.length).toBe(3);
    const at = shifted.seams.map(({ vertices: [v] }) => {
      const [x, y] = [shifted.surface.xyz[3 * v], shifted.surface.xyz[3 * v + 1]];
      return Math.min(x, y) < 1e-9 || Math.max(x, y) > 7 - 1e-9 ? Math.min(Math.max(x, 7 - x), Math.max(y, 7 - y)) : x;
    });
    // the strip that counts as wider is made narrower: its seam moves off the even third, 7/3 from its rim
    expect(at.some((s) => Math.abs(s - 14 / 3) > 0.01)).toBe(true);
    // where every way counts as too wide for three, there are four
    const all = Object.fromEntries(
      ["E1 to E3", "E2 to E4", "E3 to E1", "E4 to E2"].map((w) => [`region 1: ${w}`, { at: [0.5], factor: [1.1] }]),
    );
    const wider = runSeams(form, makeJob(), { ...options(2.4), widthFactors: all }).output;
    expectSoundLayout(form, wider);
    expect(wider.strips.length).toBe(4);
    // the estimate itself is told without the correction
    expect(wider.estimates?.[0].strips.map((s) => s.width.toFixed(2))).toEqual(Array(4).fill("1.75"));
  });
});

describe("other outlines", () => {
  const polygon = (n: number, r: number, up = 0) =>
    makeForm(
      fan(n, 10, (i) => [r * Math.cos((2 * Math.PI * i) / n), r * Math.sin((2 * Math.PI * i) / n), i % 2 ? up : 0], [
        0,
        0,
        up / 2,
      ]),
    );
  test.each([3, 4, 5, 6, 7, 8])("a polygon of %i sides", (n) => {
    for (const w of [0.9, 1.7, 3.1]) {
      const form = polygon(n, 4);
      const { output, findings } = runSeams(form, makeJob(), options(w));
      expectSoundLayout(form, output);
      expect(findings.filter((f) => f.level === "stop")).toEqual([]);
      const across = 4 * Math.cos(Math.PI / n) + (n % 2 ? 4 : 4 * Math.cos(Math.PI / n));
      expect(output.strips.length).toBeLessThanOrEqual(Math.ceil((across + 4) / w));
    }
  });

  test("a disc with one closed edge: its edge is parted where the ends of the tip strips meet", () => {
    const form = polygon(96, 4);
    expect(form.edges.length).toBe(1);
    for (const w of [1, 2.4, 9]) {
      const { output } = runSeams(form, makeJob(), options(w));
      expectSoundLayout(form, output);
    }
  });

  test("a lens of two arcs, and a drop with one corner", () => {
    const lens = makeForm(
      makeGrid(20, 20, (u, v) => {
        const half = 0.2 + 3 * Math.sin(Math.PI * u) ** 1;
        return [8 * u, (2 * v - 1) * half, 0];
      }),
    );
    for (const w of [1, 2.4]) expectSoundLayout(lens, runSeams(lens, makeJob(), options(w)).output);
    const drop = makeForm(
      fan(
        48,
        8,
        (i) => {
          const a = (2 * Math.PI * i) / 48;
          const r = i === 0 ? 6 : 3;
          return [r * Math.cos(a), r * Math.sin(a), 0];
        },
        [0, 0, 0],
      ),
    );
    for (const w of [1, 2.4]) expectSoundLayout(drop, runSeams(drop, makeJob(), options(w)).output);
  });
});

describe("rings and belts", () => {
  test("a ring has gores from the inner loop to the outer one, at equal turns", () => {
    const form = makeForm(
      makeRing(64, 10, (turn, row) => [(1 + 4 * row) * Math.cos(turn), (1 + 4 * row) * Math.sin(turn), 2 * (1 - row)]),
    );
    const { output } = runSeams(form, makeJob(), options(2.4));
    expectSoundLayout(form, output);
    expect(output.choices[0].layout).toBe("gores");
    // a cone of slant 4.47 m: a generator is the geodesic (check-values 4.2)
    for (const seam of output.seams) expect(seam.length).toBeCloseTo(Math.hypot(4, 2), 2);
    expect(output.seams.length).toBe(output.strips.length);
  });

  test("a ring asked for in one strip gets two, and says so", () => {
    const form = makeForm(makeRing(32, 4, (turn, row) => [(1 + row) * Math.cos(turn), (1 + row) * Math.sin(turn), 0]));
    const { output, findings } = runSeams(form, makeJob({ count: 1 }), options(9));
    expectSoundLayout(form, output);
    expect(output.strips.length).toBe(2);
    expect(findings.map((f) => f.code)).toContain("seam-ring-count");
  });

  test.each([1, 2, 3, 8])("a tent with %i radial belts: belts are seams with their cable, water runs off", (belts) => {
    const form = makeTent(48, 10, 6, 4, belts);
    const { output, findings } = runSeams(form, makeJob(), options(2.4));
    expectSoundLayout(form, output);
    expect(findings.filter((f) => f.level === "stop")).toEqual([]);
    const cables = new Set(output.seams.map((s) => s.cable).filter((c) => c !== null));
    expect(cables.size).toBe(belts);
  });

  test("hoop belts: the upper panel laps over the lower one, welds of a hoop share one name", () => {
    const surface = makeRing(48, 12, (turn, row) => [
      (1 + 5 * row) * Math.cos(turn),
      (1 + 5 * row) * Math.sin(turn),
      4 * (1 - row),
    ]);
    const hoop = Array.from({ length: 49 }, (_, i) => 6 * 48 + (i % 48));
    const form = makeForm(surface, [{ id: "hoop", kind: "belt", vertices: hoop }]);
    const { output } = runSeams(form, makeJob(), options(2.4));
    expectSoundLayout(form, output);
    const height = (id: string) => {
      const strip = output.strips.find((s) => s.id === id);
      return Math.max(...(strip?.sides ?? []).flatMap((s) => s.vertices.map((v) => output.surface.xyz[3 * v + 2])));
    };
    const on = output.seams.filter((s) => s.cable === "hoop");
    expect(on.length).toBeGreaterThan(3);
    for (const seam of on) {
      const other = seam.strips.find((id) => id !== seam.upper) ?? "";
      expect(height(seam.upper)).toBeGreaterThan(height(other) + 1);
    }
    expect(new Set(on.map((s) => s.weld)).size).toBe(1);
  });

  test("a ridge cable across a saddle divides it; seams of both sides meet on it within 0.1 m or well apart", () => {
    const surface = makeGrid(20, 20, hypar);
    const ridge = Array.from({ length: 21 }, (_, i) => 10 * 21 + i);
    const form = makeForm(surface, [{ id: "ridge", kind: "ridge", vertices: ridge }]);
    for (const w of [1.4, 2.4, 4.9]) {
      const { output } = runSeams(form, makeJob(), options(w));
      expectSoundLayout(form, output);
      for (const seam of output.seams.filter((s) => s.cable === "ridge")) expect(seam.length).toBeGreaterThan(0.05);
    }
  });

  test("a cable that ends inside the cloth is a caution and no border", () => {
    const surface = makeGrid(12, 12, hypar);
    const form = makeForm(surface, [{ id: "stub", kind: "valley", vertices: [6, 19, 32, 45] }]);
    const { output, findings } = runSeams(form, makeJob(), options(9));
    expectSoundLayout(form, output);
    expect(findings.filter((f) => f.code === "seam-cable-open").map((f) => f.where)).toEqual(["stub"]);
    expect(output.seams.every((s) => s.cable === null)).toBe(true);
  });
});

describe("several openings", () => {
  const pierced = (nx: number, ny: number, holes: number[][], place: (u: number, v: number) => Vec3) => {
    const grid = makeGrid(nx, ny, place);
    const gone = new Set(holes.map(([i, j]) => nx * j + i));
    const kept: number[] = [];
    for (let t = 0; t < grid.tri.length / 3; t++)
      if (!gone.has(Math.floor(t / 2))) kept.push(...grid.tri.slice(3 * t, 3 * t + 3));
    const used = [...new Set(kept)].sort((a, b) => a - b);
    const number = new Map(used.map((v, i) => [v, i]));
    const places = used.map((v): Vec3 => [grid.xyz[3 * v], grid.xyz[3 * v + 1], grid.xyz[3 * v + 2]]);
    const faces = Array.from({ length: kept.length / 3 }, (_, t) =>
      [0, 1, 2].map((k) => number.get(kept[3 * t + k]) ?? -1),
    );
    return makeForm(makeSurface(places, faces));
  };
  test("two and four openings in one sheet: seams from opening to opening, then strips to the rim", () => {
    const block = (i: number, j: number) => [0, 1].flatMap((a) => [0, 1].map((b) => [i + a, j + b]));
    const two = pierced(24, 12, [...block(5, 5), ...block(16, 5)], (u, v) => [24 * u, 12 * v, 2 * u * v]);
    const four = pierced(24, 24, [...block(5, 5), ...block(16, 6), ...block(6, 16), ...block(17, 17)], (u, v) => [
      12 * u,
      12 * v,
      0,
    ]);
    for (const form of [two, four])
      for (const w of [1.4, 2.4]) {
        const { output, findings } = runSeams(form, makeJob(), options(w));
        expectSoundLayout(form, output);
        expect(output.seams.every((s) => s.cable === null)).toBe(true);
        expect(findings.filter((f) => f.level === "stop")).toEqual([]);
      }
  });
});

describe("invariants", () => {
  test("renumbered, moved and scaled copies get the same seams", () => {
    for (const form of [makeForm(makeGrid(16, 16, (u, v) => [9 * u, 7 * v, u * v * 3])), makeTent(48, 8, 6, 4, 3)]) {
      const lengths = listLengths(runSeams(form, makeJob(), options(2)).output);
      const other = listLengths(runSeams(renumber(form), makeJob(), options(2)).output);
      expect(other.length).toBe(lengths.length);
      other.forEach((l, i) => {
        expect(Math.abs(l - lengths[i])).toBeLessThan(1e-6 * lengths[i]);
      });
      const moved = makeMoved(form, 1, [100, -50, 7]);
      listLengths(runSeams(moved, makeJob(), options(2)).output).forEach((l, i) => {
        expect(Math.abs(l - lengths[i])).toBeLessThan(1e-6 * lengths[i]);
      });
      const grown = makeMoved(form, 3, [0, 0, 0]);
      const big = listLengths(runSeams(grown, makeJob(), options(6)).output);
      expect(big.length).toBe(lengths.length);
    }
  });

  test("a form with its outer face down is laid out alike", () => {
    for (const form of [makeForm(makeGrid(14, 12, hypar)), makeTent(48, 8, 6, 4, 3), makeTent(40, 8, 6, 4, 0)]) {
      const tri = form.surface.tri.map((_, i, all) => all[3 * Math.floor(i / 3) + ((3 - (i % 3)) % 3)]);
      const down = { ...form, surface: { xyz: form.surface.xyz, tri } };
      const up = runSeams(form, makeJob(), options(2)).output;
      const { output } = runSeams(down, makeJob(), options(2));
      expectSoundLayout(down, output);
      listLengths(output).forEach((l, i) => {
        expect(Math.abs(l / listLengths(up)[i] - 1)).toBeLessThan(1e-3);
      });
    }
  });

  test("same input, same bytes out", () => {
    const form = makeTent(40, 8, 6, 4, 4);
    const a = JSON.stringify(runSeams(form, makeJob(), options(1.9)).output);
    expect(JSON.stringify(runSeams(form, makeJob(), options(1.9)).output)).toBe(a);
  });

  test("any bumpy sheet on any cloth comes out whole", () => {
    fc.assert(
      fc.property(
        fc.record({
          length: fc.double({ min: 3, max: 14, noNaN: true }),
          width: fc.double({ min: 3, max: 14, noNaN: true }),
          rise: fc.double({ min: -2, max: 2, noNaN: true }),
          sag: fc.double({ min: 0, max: 0.12, noNaN: true }),
          lean: fc.double({ min: -0.4, max: 0.4, noNaN: true }),
          usable: fc.double({ min: 1, max: 5, noNaN: true }),
          nx: fc.integer({ min: 6, max: 15 }),
        }),
        (p) => {
          const surface = makeGrid(p.nx, 11, (u, v) => {
            const inX = 1 - 4 * p.sag * v * (1 - v) * 2 * Math.abs(u - 0.5);
            const inY = 1 - 4 * p.sag * u * (1 - u) * 2 * Math.abs(v - 0.5);
            const x = p.length * (u - 0.5) * inX;
            const y = p.width * (v - 0.5) * inY;
            return [x + p.lean * y, y, p.rise * (2 * u - 1) * (2 * v - 1)];
          });
          const form = makeForm(surface);
          const { output, findings } = runSeams(form, makeJob(), options(p.usable));
          expectSoundLayout(form, output);
          expect(findings.filter((f) => f.level === "stop")).toEqual([]);
          for (const w of output.choices[0].widths) expect(w).toBeLessThanOrEqual(p.usable * 1.0005);
        },
      ),
      { seed: 20260511, numRuns: 40 },
    );
  });

  test("names already taken by edges are not given twice", () => {
    const surface = makeGrid(8, 8, hypar);
    const form = makeForm(surface, [
      { id: "P1", kind: "cable", vertices: [0, 1, 2, 3, 4, 5, 6, 7, 8] },
      { id: "S2", kind: "cable", vertices: [72, 73, 74, 75, 76, 77, 78, 79, 80] },
    ]);
    const { output } = runSeams(form, makeJob(), options(4.9));
    expectSoundLayout(form, output);
    expect(output.strips[0].id).toBe("Panel-1");
    expect(output.seams[0].id).toBe("Seam-1");
  });
});

describe("seams across", () => {
  test.each([
    [5, 2],
    [3, 3],
    [2.2, 4],
  ])("strips of 7 m on cloth of %f m are %i pieces each, staggered between neighbours", (maxLength, n) => {
    const form = square(7);
    const { output, findings } = runSeams(form, makeJob(), { usableWidth: 2.4, maxLength });
    expectSoundLayout(form, output);
    expect(output.strips.length).toBe(3 * n);
    expect(findings.filter((f) => f.level !== "note")).toEqual([]);
    expect(output.choices[0].count).toBe(3);
    expect(output.estimates?.[0].strips.map((s) => s.panels.length)).toEqual([n, n, n]);
    // panels read along the first strip, then the next; pieces of one strip follow each other by whole seams
    const [first] = output.estimates?.[0].strips ?? [];
    expect(first.panels).toEqual(Array.from({ length: n }, (_, i) => `P${i + 1}`));
    for (let i = 1; i < n; i++) {
      const [a, b] = [first.panels[i - 1], first.panels[i]].map((id) => output.strips.find((s) => s.id === id));
      const joint = output.seams.filter((s) => s.strips.includes(a?.id ?? "") && s.strips.includes(b?.id ?? ""));
      expect(joint.length).toBe(1);
      expect(new Set(joint[0].vertices)).toEqual(new Set(a?.to));
      expect(new Set(b?.from)).toEqual(new Set(a?.to));
    }
    // T-joints: records of one seam along share its weld; seams across of neighbours end 0.15 m apart or in one point
    const welds = new Set(output.seams.map((s) => s.weld));
    expect(welds.size).toBe(2 + 3 * (n - 1));
    for (const seam of output.seams) expect(seam.length).toBeGreaterThan(0.14);
    for (const strip of output.strips) {
      const places = strip.sides
        .flatMap((s) => s.vertices)
        .map((v) => [0, 1].map((k) => output.surface.xyz[3 * v + k]));
      const extent = (k: number) => Math.max(...places.map((p) => p[k])) - Math.min(...places.map((p) => p[k]));
      expect(Math.max(extent(0), extent(1))).toBeLessThan(maxLength + 0.3);
    }
  });

  test("gores, bands beside hollow edges and a domed sheet are cut across", () => {
    const ring = makeForm(
      makeRing(64, 20, (turn, row) => [(1 + 8 * row) * Math.cos(turn), (1 + 8 * row) * Math.sin(turn), 3 * (1 - row)]),
    );
    const hollow = makeForm(
      makeGrid(28, 28, (u, v) => {
        const x = 12 * (u - 0.5) * (1 - 0.5 * v * (1 - v));
        const y = 9 * (v - 0.5) * (1 - 0.5 * u * (1 - u));
        return [x, y, 0.06 * x * y];
      }),
    );
    const dome = makeForm(makeGrid(24, 24, (u, v) => [12 * u, 12 * v, 12 * u * (1 - u) * v * (1 - v)]));
    for (const form of [ring, hollow, dome])
      for (const maxLength of [6, 4, 2.6]) {
        const { output, findings } = runSeams(form, makeJob(), { usableWidth: 2, maxLength });
        expectSoundLayout(form, output);
        expect(findings.filter((f) => f.level === "stop")).toEqual([]);
        expect(output.strips.length).toBeGreaterThan(output.choices[0].count);
      }
  });
});

test("between seams given one by one, strips too long for the cloth are cut across as those laid out are", () => {
  const hollow = makeForm(
    makeGrid(28, 28, (u, v) => {
      const x = 12 * (u - 0.5) * (1 - 0.5 * v * (1 - v));
      const y = 9 * (v - 0.5) * (1 - 0.5 * u * (1 - u));
      return [x, y, 0.06 * x * y];
    }),
  );
  const ring = makeForm(
    makeRing(64, 20, (turn, row) => [(1 + 8 * row) * Math.cos(turn), (1 + 8 * row) * Math.sin(turn), 3 * (1 - row)]),
  );
  const saddle = makeForm(makeGrid(24, 18, (u, v) => [12 * (u - 0.5), 9 * (v - 0.5), 7 * (u - 0.5) * (v - 0.5)]));
  for (const form of [square(7), hollow, ring, saddle]) {
    const whole = { usableWidth: 2, maxLength: null };
    const pairs = [...openSeams(form, makeJob(), whole).ends.values()];
    const job = makeJob({ layout: "pairs", pairs });
    const strips = runSeams(form, job, whole).output.strips.length;
    expect(strips).toBeGreaterThan(2);
    for (const maxLength of [5, 2.6]) {
      const { output, findings } = runSeams(form, job, { ...whole, maxLength });
      expectSoundLayout(form, output);
      expect(findings.filter((f) => f.level === "stop")).toEqual([]);
      const laid = runSeams(form, makeJob(), { ...whole, maxLength }).output;
      expect(Math.abs(output.strips.length - laid.strips.length)).toBeLessThanOrEqual(strips);
      expect(output.strips.length).toBeGreaterThan(strips);
      for (const seam of output.seams) expect(seam.length).toBeGreaterThan(0.1);
      // the given seams stand where they were: all of their cloth's borders are still there
      const metres = (of: StripLayout) => of.seams.reduce((sum, s) => sum + s.length, 0);
      expect(metres(output)).toBeGreaterThan(metres(runSeams(form, job, whole).output));
    }
  }
});

describe("refusals", () => {
  test("unknown edges and no width", () => {
    const form = square(7);
    expect(() => runSeams(form, makeJob({ layout: "bands", from: "nowhere", to: "E1" }), options(2))).toThrow(
      /nowhere/,
    );
    expect(() => runSeams(form, makeJob({ layout: "bands", from: "E1", to: "E1" }), options(2))).toThrow(/itself/);
    expect(() => runSeams(form, makeJob(), options(0))).toThrow(/usable width/);
  });

  test("a plan that is stopped says so", () => {
    expect(() => runSeams(square(7), makeJob(), options(2), { cancelled: () => true })).toThrow(/stopped/);
  });
});

const meshes = "../shared/meshes";
describe.skipIf(!existsSync(meshes))("found forms beside the project (skipped where ../shared is absent)", () => {
  for (const name of ["hypar_16x16", "sail4_cables", "conic_belts", "catenoid_090"])
    test.each([1.4, 2.4, 4.9])(`${name} on %f m`, (w) => {
      const form = readForm(readFileSync(`${meshes}/${name}.obj`, "utf8"));
      const { output, findings, checks } = runSeams(form, makeJob(), { usableWidth: w, maxLength: 50 });
      expectSoundLayout(form, output);
      expect(findings.filter((f) => f.level !== "note")).toEqual([]);
      expect(checks.filter((c) => !c.holds)).toEqual([]);
      for (const { widths } of output.choices) {
        expect(Math.max(...widths)).toBeLessThanOrEqual(w);
        // the strips beside a hollow edge are held wide by it
        const inner = widths.length > 2 ? widths.slice(1, -1) : widths;
        expect(Math.min(...inner)).toBeGreaterThan(0.97 * Math.max(...inner));
      }
    });
});

function makeMoved(form: ReturnType<typeof makeForm>, scale: number, by: number[]) {
  const xyz = form.surface.xyz.map((x, i) => scale * x + by[i % 3]);
  return { ...form, surface: { xyz, tri: form.surface.tri } };
}

import { existsSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { flattenPanels, reflattenPanels } from "../../../src/core/panels/flatten/flattenPanels.ts";
import type { FlattenOptions } from "../../../src/core/panels/flatten/panelTarget.ts";
import { buildRelaxedFlat, measurePatternedStress } from "../../../src/core/panels/proof/stressFigures.ts";
import type { FlatPanel } from "../../../src/core/records/flatPanel.ts";
import type { StripLayout } from "../../../src/core/records/stripLayout.ts";
import {
  buildErectedMetric,
  buildStiffness,
  measureEngineeringStrain,
  measureTargetStrain,
  measureTriangleStrain,
} from "../../../src/core/structure/cloth.ts";
import { measureArea, measureAreas } from "../../../src/core/surface/measures.ts";
import type { Surface } from "../../../src/core/surface/surface.ts";
import { CLOTH, cutGrid, gridSurface, measurePath, PLAIN, readTriangles } from "../stripFixtures.ts";

const SLACK: FlattenOptions = { ...PLAIN, prestress: { warp: 0, weft: 0 } };
const D = buildStiffness(CLOTH);
const MESHES = new URL("../../../../shared/meshes/", import.meta.url).pathname;

/** Greatest strain component of a panel pulled onto the form. */
function greatestStrain(panel: FlatPanel): number {
  const metric = buildErectedMetric(panel.erected, panel.tri);
  const xy = buildRelaxedFlat(panel.flat, panel.permanent);
  const e = new Float64Array(7);
  let worst = 0;
  for (let t = 0; 3 * t < panel.tri.length; t++) {
    measureTriangleStrain(metric, xy, panel.tri, t, e);
    worst = Math.max(worst, Math.abs(e[0]), Math.abs(e[1]), Math.abs(e[2]));
  }
  return worst;
}

function flatArea(panel: FlatPanel): number {
  const { flat, tri } = panel;
  let twice = 0;
  for (let t = 0; t < tri.length; t += 3) {
    const [a, b, c] = [2 * tri[t], 2 * tri[t + 1], 2 * tri[t + 2]];
    twice += (flat[b] - flat[a]) * (flat[c + 1] - flat[a + 1]) - (flat[b + 1] - flat[a + 1]) * (flat[c] - flat[a]);
  }
  return twice / 2;
}

/** Half a cylinder of radius 3: run along the arc, chords of equal angle. */
function cylinder(ni: number, nj: number): Surface {
  return gridSurface(ni, nj, (i, j) => {
    const a = Math.PI * (1 - j / nj);
    return [-3 * Math.cos(Math.PI - a), 1.5 * (1 - i / ni), 3 * Math.sin(a)];
  });
}

/** Part of a cone with its apex at the origin, from slant 2 to slant 12. */
function cone(ni: number, nj: number): Surface {
  return gridSurface(ni, nj, (i, j) => {
    const s = 2 + (10 * j) / nj;
    const a = (0.9 * i) / ni;
    return [s * Math.sin(0.6) * Math.cos(a), s * Math.sin(0.6) * Math.sin(a), -s * Math.cos(0.6)];
  });
}

/** A sheet of a torus' outer or inner side (both curvatures), in two strips. */
function saddleLayout(move: (p: number[]) => number[] = (p) => p): StripLayout {
  const surface = gridSurface(8, 20, (i, j) => {
    const x = -1.6 + 0.4 * i;
    const y = -4 + 0.4 * j;
    return move([x, y, 0.07 * x * y + 0.02 * (x * x - y * y)]);
  });
  return cutGrid(surface, 8, 20, [0, 4, 8]);
}

describe("developable strips without stress come out exact", () => {
  const cases: [string, Surface, number, number][] = [
    ["cylinder", cylinder(6, 40), 6, 40],
    ["cone", cone(6, 30), 6, 30],
  ];
  test.each(cases)("%s, in one panel and in two", (_, surface, ni, nj) => {
    for (const cuts of [
      [0, ni],
      [0, ni / 2, ni],
    ]) {
      const { output, checks } = flattenPanels(cutGrid(surface, ni, nj, cuts), SLACK, {});
      expect(checks.every((c) => c.holds)).toBe(true);
      let area = 0;
      for (const p of output) {
        expect(greatestStrain(p), p.id).toBeLessThan(1e-9);
        for (const s of p.sides) expect(Math.abs(s.lengthFlat / 1000 - s.lengthErected)).toBeLessThan(1e-9);
        area += flatArea(p) / 1e6;
      }
      expect(Math.abs(area - measureArea(surface))).toBeLessThan(1e-8);
    }
  });

  // Closed form of the polyhedral cylinder: nj chords 2R·sin(π/2nj) long, 1.5 m wide.
  test("the half cylinder is its rectangle", () => {
    const [p] = flattenPanels(cutGrid(cylinder(6, 40), 6, 40, [0, 6]), SLACK, {}).output;
    const length = 40 * 2 * 3 * Math.sin(Math.PI / 80) * 1000;
    let reach = [0, 0];
    for (let v = 0; v < p.flat.length; v += 2)
      reach = [Math.max(reach[0], p.flat[v]), Math.max(reach[1], p.flat[v + 1])];
    expect(Math.abs(reach[0] - length)).toBeLessThan(1e-6);
    expect(Math.abs(reach[1] - 1500)).toBeLessThan(1e-6);
  });

  // Facts beside the meshes: cylinder 1.6 m wide and 9.598901379410043 m long, cone sector from 2 to 12 m.
  test.skipIf(!existsSync(`${MESHES}cylinder_strip.obj`))(
    "strips from outside the project (skipped where absent)",
    () => {
      for (const name of ["cylinder_strip", "cone_strip"]) {
        const layout = wholeStrip(readTriangles(`${MESHES}${name}.obj`));
        const [p] = flattenPanels(layout, SLACK, {}).output;
        expect(greatestStrain(p), name).toBeLessThan(1e-9);
        const area = { cylinder_strip: 15.358242207056069, cone_strip: 18.84269624170171 }[name] ?? 0;
        expect(Math.abs(flatArea(p) / 1e6 - area)).toBeLessThan(1e-7);
      }
    },
  );
});

/** An OBJ strip of rows of 9 vertices as one panel. */
function wholeStrip(surface: Surface): StripLayout {
  const ni = 8;
  return cutGrid(surface, ni, surface.xyz.length / 3 / (ni + 1) - 1, [0, ni], "free");
}

describe("intended stress", () => {
  test("a flat sheet is cut smaller by 1/(1 + e), to the last digit that counts", () => {
    const sheet = cutGrid(
      gridSurface(6, 20, (i, j) => [0.4 * i, 0.5 * j, 0]),
      6,
      20,
      [0, 3, 6],
    );
    const { output, findings } = flattenPanels(sheet, { ...PLAIN, prestress: { warp: 3, weft: 1.5 } }, {});
    const green = measureTargetStrain(D, { warp: 3, weft: 1.5 });
    for (const p of output) {
      expect(p.compensation.warp).toBeCloseTo(measureEngineeringStrain(green.warp), 14);
      const [width, length] = [1.2, 10];
      const reach = [0, 1].map((c) => Math.max(...p.flat.filter((_, i) => i % 2 === c)));
      expect(Math.abs(reach[0] - (1000 * length) / (1 + p.compensation.warp))).toBeLessThan(1e-6);
      expect(Math.abs(reach[1] - (1000 * width) / (1 + p.compensation.weft))).toBeLessThan(1e-6);
      expect(p.stress.warp.rmsError).toBeLessThan(1e-8);
      expect(p.stress.weft.mean).toBeCloseTo(1.5, 8);
      expect(p.stress.warpDeviation).toBeLessThan(1e-6);
    }
    expect(findings).toEqual([]);
  });

  test("compensation from a test: what is not elastic is permanent, the stress is that with it put back", () => {
    const sheet = cutGrid(
      gridSurface(4, 10, (i, j) => [0.4 * i, 0.5 * j, 0]),
      4,
      10,
      [0, 2, 4],
    );
    const options: FlattenOptions = {
      ...PLAIN,
      compensation: { default: { warp: 0.004, weft: 0.012 }, B2: { warp: 0.001, weft: 0.03 } },
      panels: { P2: { batch: "B2" } },
    };
    const { output, findings } = flattenPanels(sheet, { ...options, panels: {} }, {});
    for (const p of output) {
      // (1 + e_test) = (1 + permanent)(1 + e_elastic): facts.md "panels"; the cut cloth is erected/(1 + e_test).
      expect(Math.abs(p.sides[1].lengthFlat - 5000 / 1.004)).toBeLessThan(1e-6);
      expect(Math.abs(p.sides[0].lengthFlat - 800 / 1.012)).toBeLessThan(1e-6);
      expect(p.stress.warp.rmsError).toBeLessThan(1e-8);
      expect(
        (1 + p.permanent.weft) * (1 + measureEngineeringStrain(measureTargetStrain(D, p.target).weft)),
      ).toBeCloseTo(1.012, 14);
    }
    expect(findings).toEqual([]);
    // Another batch beside it: the shared seam is still cut equally long, the difference is said.
    const mixed = flattenPanels(sheet, options, {});
    expect(mixed.output[1].batch).toBe("B2");
    expect(mixed.checks.every((c) => c.holds)).toBe(true);
    expect(Math.abs(mixed.output[0].sides[1].lengthFlat - mixed.output[1].sides[3].lengthFlat)).toBeLessThan(1e-4);
    // 0.1 % warp is less than the 0.25 % that the stiffness alone gives.
    expect(mixed.findings.filter((f) => f.code === "panel-compensation").map((f) => f.where)).toEqual(["P2"]);
  });

  test("a compensation that can only be a slip of the point is refused", () => {
    const options = { ...PLAIN, compensation: { default: { warp: 0.4, weft: 1.2 } } };
    expect(() => flattenPanels(saddleLayout(), options, {})).toThrow(/compensation of default, warp, is 0.4/);
  });

  test("a panel turned against its strip lies at its turn, also with a permanent part", () => {
    const options: FlattenOptions = {
      ...PLAIN,
      panels: { P1: { warp: 30 }, P2: { warp: -20 } },
      compensation: { default: { warp: 0.004, weft: 0.03 } },
    };
    const { output, checks } = flattenPanels(saddleLayout(), options, {});
    expect(checks.every((c) => c.holds)).toBe(true);
    expect(output.map((p) => p.axis.turn)).toEqual([30, -20]);
    for (const p of output) expect(p.stress.warpDeviation).toBeLessThan(5);
  });
});

describe("two panels of a doubly curved sheet", () => {
  test("sides of the seam are equal to 1e-4 mm, piece by piece; the stress is near the intended one", () => {
    const layout = saddleLayout();
    const { output, checks } = flattenPanels(layout, PLAIN, {});
    expect(checks.every((c) => c.holds)).toBe(true);
    const [a, b] = output;
    const left = a.sides[1].vertices;
    const right = b.sides[3].vertices.slice().reverse();
    for (let k = 1; k < left.length; k++) {
      const one = measurePath(a.flat, [left[k - 1], left[k]], 2);
      const two = measurePath(b.flat, [right[k - 1], right[k]], 2);
      expect(Math.abs(one - two)).toBeLessThan(1e-4);
    }
    for (const p of output) {
      expect(p.stress.warp.mean).toBeGreaterThan(1.9);
      expect(p.stress.warp.mean).toBeLessThan(2.1);
    }
  });

  test("no small move of a flat point that keeps the seams lowers the energy", () => {
    const layout = saddleLayout();
    const { output } = flattenPanels(layout, PLAIN, {});
    // Inner points bear no tie: their own gradient must vanish, by differences of an energy of the test's own.
    for (const p of output) {
      const rim = new Set(p.sides.flatMap((s) => s.vertices));
      const base = energyOf(p, p.flat);
      for (let v = 0; v < p.surfaceVertex.length; v++) {
        if (rim.has(v)) continue;
        for (let c = 0; c < 2; c++)
          for (const h of [0.2, -0.2]) {
            const moved = p.flat.slice();
            moved[2 * v + c] += h;
            expect(energyOf(p, moved)).toBeGreaterThan(base);
          }
      }
    }
  });

  test("moved, turned, scaled and renumbered forms give the same cloth", () => {
    const plain = flattenPanels(saddleLayout(), PLAIN, {}).output;
    const turned = flattenPanels(
      saddleLayout(([x, y, z]) => [
        300 + 0.36 * x - 0.48 * y + 0.8 * z,
        -50 + 0.8 * x + 0.6 * y,
        20 - 0.48 * x + 0.64 * y + 0.6 * z,
      ]),
      PLAIN,
      {},
    ).output;
    plain.forEach((p, i) => {
      expect(distance(p.flat, turned[i].flat)).toBeLessThan(1e-3);
    });
    const tenfold = flattenPanels(
      saddleLayout((p) => p.map((v) => 10 * v)),
      PLAIN,
      {},
    ).output;
    plain.forEach((p, i) => {
      expect(
        distance(
          p.flat.map((v) => 10 * v),
          tenfold[i].flat,
        ),
      ).toBeLessThan(1e-2);
      expect(tenfold[i].stress.warp.rmsError).toBeCloseTo(p.stress.warp.rmsError, 6);
    });
    const layout = saddleLayout();
    const renumbered = flattenPanels(renumber(layout), PLAIN, {}).output;
    const n = layout.surface.xyz.length / 3;
    plain.forEach((p, i) => {
      const q = renumbered[i];
      const at = new Map([...q.surfaceVertex].map((v, k) => [n - 1 - v, k]));
      p.surfaceVertex.forEach((v, k) => {
        const o = at.get(v) ?? -1;
        expect(Math.abs(p.flat[2 * k] - q.flat[2 * o])).toBeLessThan(1e-3);
        expect(Math.abs(p.flat[2 * k + 1] - q.flat[2 * o + 1])).toBeLessThan(1e-3);
      });
    });
  });

  test("same input, same bytes; the input is not changed", () => {
    const layout = saddleLayout();
    const copy = structuredClone(layout);
    const a = flattenPanels(layout, PLAIN, {});
    expect(flattenPanels(layout, PLAIN, {})).toEqual(a);
    expect(layout).toEqual(copy);
  });

  test("one panel anew, its seam held to the other's length", () => {
    const layout = saddleLayout();
    const all = flattenPanels(layout, PLAIN, {}).output;
    const [again] = reflattenPanels(layout, PLAIN, [all[0]], new Map());
    expect(again.id).toBe("P2");
    // The tied answer is also the best for one panel when the other does not move.
    expect(distance(again.flat, all[1].flat)).toBeLessThan(0.05);
    const seam = again.sides[3];
    expect(Math.abs(seam.lengthFlat - all[0].sides[1].lengthFlat)).toBeLessThan(1e-4);
  });
});

/** Energy of E − E0 in the stiffness, from the public stress: ½ area·(S − S0)ᵀ D⁻¹ (S − S0), kNm. */
function energyOf(p: FlatPanel, flat: FlatPanel["flat"]): number {
  const s = measurePatternedStress({ ...p, flat }, D);
  const area = measureAreas({ xyz: p.erected, tri: p.tri });
  const det = D.ww * D.ff - D.wf * D.wf;
  let sum = 0;
  for (let t = 0; t < area.length; t++) {
    const a = s[3 * t] - p.target.warp;
    const b = s[3 * t + 1] - p.target.weft;
    sum += 0.5 * area[t] * ((D.ff * a * a - 2 * D.wf * a * b + D.ww * b * b) / det + s[3 * t + 2] ** 2 / D.g);
  }
  return sum;
}

function distance(a: Float64Array<ArrayBuffer>, b: Float64Array<ArrayBuffer>): number {
  let worst = a.length === b.length ? 0 : Number.POSITIVE_INFINITY;
  for (let i = 0; i < a.length; i++) worst = Math.max(worst, Math.abs(a[i] - b[i]));
  return worst;
}

/** The same layout with vertex v named n − 1 − v and the triangles in backward order, each begun at another corner. */
function renumber(layout: StripLayout): StripLayout {
  const { xyz, tri } = layout.surface;
  const n = xyz.length / 3;
  const nT = tri.length / 3;
  const name = (v: number) => n - 1 - v;
  const moved = new Float64Array(xyz.length);
  for (let v = 0; v < n; v++) moved.set(xyz.subarray(3 * v, 3 * v + 3), 3 * name(v));
  const own = new Uint32Array(tri.length);
  for (let t = 0; t < nT; t++) for (let k = 0; k < 3; k++) own[3 * (nT - 1 - t) + k] = name(tri[3 * t + ((k + 1) % 3)]);
  return {
    ...layout,
    surface: { xyz: moved, tri: own },
    seams: layout.seams.map((s) => ({ ...s, vertices: s.vertices.map(name) })),
    strips: layout.strips.map((s) => ({
      ...s,
      triangles: s.triangles.map((t) => nT - 1 - t),
      sides: s.sides.map((q) => ({ ...q, vertices: q.vertices.map(name) })),
      from: s.from.map(name),
      to: s.to.map(name),
    })),
  };
}

describe("compensation taken back", () => {
  test("along a clamped side the cloth is cut as long as it is erected; beyond the fade it carries what is intended", () => {
    const sheet = cutGrid(
      gridSurface(12, 40, (i, j) => [0.2 * i, 0.2 * j, 0]),
      12,
      40,
      [0, 6, 12],
    );
    const { output, checks } = flattenPanels(
      sheet,
      { ...PLAIN, decompensation: { clamped: 0.5, ring: null, cable: null } },
      {},
    );
    expect(checks.every((c) => c.holds)).toBe(true);
    const [p] = output;
    expect(p.decompensated).toEqual([0, 2, 3].map((side) => ({ side, fade: 0.5 })));
    for (const { side } of p.decompensated)
      expect(Math.abs(p.sides[side].lengthFlat - 1000 * p.sides[side].lengthErected)).toBeLessThan(1e-4);
    // Its seam side is compensated but near the two ends: 5 m or so of 8 m carry the whole warp strain of 0.25 %.
    expect(p.sides[1].lengthFlat).toBeLessThan(1000 * p.sides[1].lengthErected * (1 - 0.8 * 0.0025));
    const s = measurePatternedStress(p, D);
    let area = 0;
    const sum = [0, 0];
    for (let t = 0; 3 * t < p.tri.length; t++) {
      const mid = [0, 1].map((c) => [0, 1, 2].reduce((a, k) => a + p.erected[3 * p.tri[3 * t + k] + c], 0) / 3);
      if (mid[0] < 0.6 || mid[1] < 0.6 || mid[1] > 7.4) continue;
      area++;
      for (let k = 0; k < 2; k++) sum[k] += s[3 * t + k];
    }
    for (let k = 0; k < 2; k++) expect(Math.abs(sum[k] / area - 2)).toBeLessThan(0.1);
  });

  test("with a permanent part the side is still cut as long as it is erected", () => {
    const options: FlattenOptions = {
      ...PLAIN,
      compensation: { default: { warp: 0.005, weft: 0.02 } },
      decompensation: { clamped: null, ring: 0.4, cable: null },
      rings: ["south"],
    };
    const [p] = flattenPanels(saddleLayout(), options, {}).output;
    expect(p.decompensated).toEqual([{ side: 0, fade: 0.4 }]);
    expect(Math.abs(p.sides[0].lengthFlat - 1000 * p.sides[0].lengthErected)).toBeLessThan(1e-4);
  });
});

describe("what cannot be flattened is refused by name, what is poor is said", () => {
  test("a strip whose sides are not its outline", () => {
    const layout = saddleLayout();
    layout.strips[0].sides.reverse();
    expect(() => flattenPanels(layout, PLAIN, {})).toThrow(/strip P1 cannot be flattened: its sides do not run once/);
  });

  test("a strip round a ring", () => {
    const nj = 24;
    const round = gridSurface(2, nj, (i, j) => [
      (2 + i) * Math.cos((2 * Math.PI * j) / nj),
      (2 + i) * Math.sin((2 * Math.PI * j) / nj),
      0,
    ]);
    const layout = cutGrid(round, 2, nj, [0, 2]);
    // Join the last row to the first.
    const join = (v: number) => v % (3 * nj);
    layout.surface = { xyz: round.xyz.slice(0, 9 * nj), tri: round.tri.map(join) };
    for (const s of layout.strips[0].sides) s.vertices = s.vertices.map(join);
    layout.strips[0].from = layout.strips[0].from.map(join);
    layout.strips[0].to = layout.strips[0].to.map(join);
    expect(() => flattenPanels(layout, PLAIN, {})).toThrow(/strip P1 cannot be flattened: it has 2 outlines/);
  });

  test("ends that are no ends", () => {
    const layout = saddleLayout();
    const { from, sides } = layout.strips[1];
    const round = sides.flatMap((s) => s.vertices.slice(0, -1));
    for (const [a, b] of [
      [from, from],
      [[], from],
      [round, from],
      [from, round],
      [from, [layout.surface.xyz.length / 3 - 12]],
    ]) {
      layout.strips[1].from = a;
      layout.strips[1].to = b;
      expect(() => flattenPanels(layout, PLAIN, {})).toThrow(/strip P2 has no two ends/);
    }
  });

  test("a seam that leaves its strip", () => {
    const layout = saddleLayout();
    layout.seams[0].vertices[3] = 0;
    expect(() => flattenPanels(layout, PLAIN, {})).toThrow(/seam S1 runs through vertex 0/);
  });

  test("a strip far too wide for its curvature carries cautions under its own name, with a remedy", () => {
    const bowl = gridSurface(10, 10, (i, j) => {
      const [x, y] = [0.4 * (i - 5), 0.4 * (j - 5)];
      return [x, y, 0.2 * x * x + 0.2 * y * y];
    });
    const { output, findings } = flattenPanels(cutGrid(bowl, 10, 10, [0, 10]), PLAIN, {});
    expect(output[0].stress.compressedShare).toBeGreaterThan(0.02);
    expect(findings.map((f) => [f.code, f.where, f.level])).toEqual([
      ["panel-stress", "P1", "caution"],
      ["panel-stress", "P1", "caution"],
      ["panel-compressed", "P1", "caution"],
    ]);
    for (const f of findings) expect(f.remedy.length).toBeGreaterThan(10);
  });

  test("work can be stopped, and tells how far it is", () => {
    const shares: number[] = [];
    flattenPanels(saddleLayout(), PLAIN, { onProgress: (share) => shares.push(share) });
    expect(shares.length).toBeGreaterThan(1);
    expect(shares.every((s, i) => s > 0 && s < 1 && (i === 0 || s > shares[i - 1]))).toBe(true);
    expect(() => flattenPanels(saddleLayout(), PLAIN, { cancelled: () => true })).toThrow(/stopped on request/);
  });
});

// Reach the project set itself: strips of 2 m at 2.0 kN/m, warp rms 0.12 kN/m, 99 % of the area within 0.30; here 1.92 m wide or less.
test.skipIf(!existsSync(`${MESHES}hypar_16x16.obj`))(
  "the minimal saddle meets its figures (skipped where the mesh is absent)",
  () => {
    const surface = readTriangles(`${MESHES}hypar_16x16.obj`);
    const layout = cutGrid(surface, 50, 50, [0, 6, 11, 17, 22, 28, 33, 39, 44, 50]);
    const { output, findings, checks } = flattenPanels(layout, PLAIN, {});
    expect(findings).toEqual([]);
    expect(checks.every((c) => c.holds)).toBe(true);
    const off: [number, number][] = [];
    for (const p of output) {
      const s = measurePatternedStress(p, D);
      measureAreas({ xyz: p.erected, tri: p.tri }).forEach((a, t) => {
        off.push([Math.abs(s[3 * t] - 2), a]);
      });
    }
    const total = off.reduce((sum, [, a]) => sum + a, 0);
    expect(Math.sqrt(off.reduce((sum, [o, a]) => sum + a * o * o, 0) / total)).toBeLessThan(0.12);
    expect(off.filter(([o]) => o > 0.3).reduce((sum, [, a]) => sum + a, 0) / total).toBeLessThan(0.01);
  },
);

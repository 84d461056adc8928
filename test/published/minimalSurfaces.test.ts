// Minimal surfaces with known area, settled from rough starts. Values: check-values.md 5.1 and 10 (T7, T8, T9, T13); status C
// means recomputed there from the closed form. A mesh inscribed in a smooth surface is smaller by about (side/radius)²/8.
import { existsSync, readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { readObj } from "../../src/core/form/reading/readObj.ts";
import { runForm } from "../../src/core/form/runForm.ts";
import { type Settled, settleDefaults, settleForm } from "../../src/core/form/settle/settleForm.ts";
import { measureArea } from "../../src/core/surface/measures.ts";
import type { Surface } from "../../src/core/surface/surface.ts";
import { buildJob, placeMesh } from "../form/formJob.ts";
import { buildGrid, listSides } from "../form/formMeshes.ts";

const even = { warp: 1, weft: 1, direction: null };
const bump = (v: number) => Math.sin(1 + 12.9898 * v);

/** Settles the patch n × n whose rim is where `place` puts it; inside, its heights are disturbed by up to `rough` sides. */
function settlePatch(n: number, place: (u: number, v: number) => [number, number, number], rough: number): Settled {
  const { xyz, faceVertex } = buildGrid(n, n, place);
  const fixed = new Uint8Array(xyz.length / 3);
  for (const side of listSides(n, n)) for (const v of side) fixed[v] = 1;
  fixed.forEach((held, v) => {
    if (!held) xyz[3 * v + 2] += (rough / n) * bump(v);
  });
  const settled = settleForm({ surface: { xyz, tri: faceVertex }, fixed, cables: [], field: even }, settleDefaults, {});
  expect(settled.end).toBe("settled");
  expect(settled.residual).toBeLessThanOrEqual(settled.limit);
  return settled;
}

/** Two rings of radius 1 at distance h, started from the cylinder between them. */
function buildRings(nu: number, nv: number, h: number) {
  return buildGrid(nu, nv, (u, v) => [Math.cos(2 * Math.PI * u), Math.sin(2 * Math.PI * u), h * (v - 0.5)], true);
}

function measureThroat({ xyz }: Surface): number {
  let least = Infinity;
  for (let v = 0; v < xyz.length; v += 3) least = Math.min(least, Math.hypot(xyz[v], xyz[v + 1]));
  return least;
}

describe("catenoid between equal rings (5.1, C; T7): throat, area and axial pull 2πa·s within 0.2 %, 96 × 48", () => {
  test.each([
    [0.5, 0.967521, 3.108112],
    [0.8, 0.910738, 4.883793],
    [1.0, 0.848338, 5.991797],
    [1.2, 0.745071, 6.999643],
    [1.3, 0.641608, 7.439781],
  ])("h/R = %d", (h, throat, area) => {
    const { output: form, findings } = runForm(placeMesh(buildRings(96, 48, h)), buildJob({ settle: true }), {});
    expect(findings.filter((f) => f.level !== "note")).toEqual([]);
    expect(Math.abs(measureThroat(form.surface) / throat - 1)).toBeLessThan(0.002);
    expect(Math.abs(form.area / area - 1)).toBeLessThan(0.002);
    const pull = form.edges.map((e) => e.reaction?.resultant[2] ?? 0).sort((a, b) => a - b);
    expect(Math.abs(pull[1] / (2 * Math.PI * throat * 2) - 1)).toBeLessThan(0.002);
    expect(Math.abs(pull[0] + pull[1])).toBeLessThan(1e-6);
    expect(form.residual.normalMax).toBeLessThan(1e-6);
  });
});

describe("Schwarz D patch over the skew quad of the unit cube (5.1, C, finite elements n × n; T9)", () => {
  test.each([
    [8, 1.286119],
    [16, 1.280978],
    [32, 1.279691],
    [64, 1.279369],
  ])("n = %d", (n, area) => {
    const { surface } = settlePatch(n, (x, y) => [x, y, x + y - 2 * x * y], 0.4);
    // where vertices lie within the surface is free. Least areas found by L-BFGS (scipy, sharing no code): heights alone
    // 1.286417 and 1.281057 at n = 8 and 16, all three coordinates 1.284848 and 1.280609. So that freedom is 0.23 and 0.26 of what
    // the mesh itself is off; nothing on this mesh lies below the second pair
    const found = measureArea(surface);
    expect(Math.abs(found - area)).toBeLessThan(0.15 * (area - 1.279262));
    if (n <= 16) expect(found).toBeGreaterThan(n === 8 ? 1.2848 : 1.2806);
  });

  test("areas tend to the limit 1.279262 with the square of the side", () => {
    const gap = [16, 32].map(
      (n) => measureArea(settlePatch(n, (x, y) => [x, y, x + y - 2 * x * y], 0).surface) - 1.279262,
    );
    expect(gap[0] / gap[1]).toBeGreaterThan(3.5);
    expect(gap[0] / gap[1]).toBeLessThan(4.5);
  });
});

test("Schwarz P patch on four edges of an octahedron of side 1 (5.1, C): 0.781701 within 2e-5, extrapolated from sides 1/24 and 1/48", () => {
  const s = Math.SQRT1_2;
  // +x, +y, -x, and back over -z to +x: four sides that close, no two opposite ones in a plane
  const corner: [number, number, number][] = [
    [s, 0, 0],
    [0, s, 0],
    [-s, 0, 0],
    [0, 0, s],
  ];
  const place = (u: number, v: number) =>
    [0, 1, 2].map(
      (k) =>
        (1 - u) * (1 - v) * corner[0][k] +
        u * (1 - v) * corner[1][k] +
        u * v * corner[2][k] +
        (1 - u) * v * corner[3][k],
    ) as [number, number, number];
  const [coarse, fine] = [24, 48].map((n) => measureArea(settlePatch(n, place, 0.3).surface));
  expect(Math.abs((4 * fine - coarse) / 3 - 0.781701)).toBeLessThan(2e-5);
});

describe("Scherk z = ln(cos y / cos x) on |x|, |y| <= c, started flat (5.1, C; T13): area within 0.5 %, heights", () => {
  test.each([
    [0.5, 1.087246],
    [0.8, 3.185307],
    [1.0, 5.697512],
    [1.2, 9.949825],
  ])("c = %d", (c, area) => {
    const n = 48;
    const height = (x: number, y: number) => Math.log(Math.cos(y) / Math.cos(x));
    const inside = (t: number) => t > 1e-9 && t < 1 - 1e-9;
    const { surface } = settlePatch(
      n,
      (u, v) => {
        const [x, y] = [c * (2 * u - 1), c * (2 * v - 1)];
        return [x, y, inside(u) && inside(v) ? 0 : height(x, y)];
      },
      0,
    );
    expect(Math.abs(measureArea(surface) / area - 1)).toBeLessThan(0.005);
    const { xyz } = surface;
    let off = 0;
    for (let v = 0; v < xyz.length; v += 3) off = Math.max(off, Math.abs(xyz[v + 2] - height(xyz[v], xyz[v + 1])));
    expect(off).toBeLessThan(0.01 * c);
  });
});

test("helicoid, R = 1, pitch 1, one turn (5.1, C): area 3.383045 within 0.2 %", () => {
  const inside = (t: number) => t > 1e-9 && t < 1 - 1e-9;
  const { surface } = settlePatch(
    64,
    (u, v) => {
      const a = 2 * Math.PI * v;
      // the axis is held too; inside the start sags towards it
      const r = inside(u) && inside(v) ? u * (1 - 0.3 * Math.sin(Math.PI * u)) : u;
      return [r * Math.cos(a), r * Math.sin(a), v];
    },
    0.2,
  );
  expect(Math.abs(measureArea(surface) / 3.383045 - 1)).toBeLessThan(0.002);
});

describe("surfaces that do not exist end in a stop that names the neck, within 200 passes (5.1: limit 1.3254868; T8)", () => {
  const passes = (text: string) => Number(/after (\d+) passes/.exec(text)?.[1]);

  test.each([1.327, 1.33, 1.4, 1.5])("two rings at %d R", (h) => {
    const parts = buildRings(48, 24, h);
    const { output: form, findings } = runForm(placeMesh(parts), buildJob({ settle: true }), {});
    const stops = findings.filter((f) => f.level === "stop");
    expect(stops.map((f) => f.code)).toEqual(["settle-neck"]);
    const [stop] = stops;
    expect(stop.text).toMatch(/^no such surface.*neck at \(-?0\.000, -?0\.000, -?0\.\d{3}\) m/);
    expect(stop.value).toBeLessThan(0.1);
    expect(stop.limit).toBeGreaterThan(0.99);
    expect(stop.remedy).toMatch(/larger ring.*belts.*more stress/);
    expect(passes(stop.text)).toBeLessThanOrEqual(200);
    // the form is left as it is
    expect([...form.surface.xyz]).toEqual([...parts.xyz]);
  });

  test("a ring of 0.8 m at 5 m over a 14 m square, clamped or on edge cables; at 2 m it exists", () => {
    const n = 96;
    const cone = (h: number) =>
      buildGrid(
        n,
        32,
        (u, v) => {
          const [c, s] = [Math.cos(2 * Math.PI * u), Math.sin(2 * Math.PI * u)];
          const rim = 7 / Math.max(Math.abs(c), Math.abs(s));
          const r = (1 - v) * rim + 0.8 * v;
          return [r * c, r * s, h * v];
        },
        true,
      );
    const corners = [12, 36, 60, 84];
    const hung = cone(5);
    hung.lines = corners.map((s, i) => ({
      name: `side_${i}`,
      vertices: Array.from({ length: 25 }, (_, k) => (s + k) % n),
    }));
    hung.points = [
      { name: "corner", vertices: corners },
      { name: "ring", vertices: Array.from({ length: n }, (_, i) => 32 * n + i) },
    ];
    const even = { warp: 2, weft: 2 };
    for (const [parts, edges, prestress, warp] of [
      [cone(5), {}, even, null],
      [hung, { default: { force: 60 } }, even, null],
      // even more stress up the cloth holds only a little less than 5 m; along one side it holds less
      [cone(5), {}, { warp: 4, weft: 2 }, [0, 0, 1]],
      [hung, { default: { force: 90 } }, { warp: 4, weft: 2 }, [0, 0, 1]],
      [hung, { default: { force: 90 } }, { warp: 4, weft: 2 }, [1, 0, 0]],
    ] as const) {
      const job = buildJob({ settle: true, edges, prestress, warp: warp && [...warp] });
      const { findings } = runForm(placeMesh(parts), job, {});
      const [stop, ...more] = findings.filter((f) => f.level === "stop");
      expect([stop.code, more.length]).toEqual(["settle-neck", 0]);
      expect(passes(stop.text)).toBeLessThanOrEqual(200);
      expect(stop.value).toBeLessThan(0.5);
      // on the axis, between square and ring
      const place = /neck at \((.*), (.*), (.*)\) m, radius/.exec(stop.text)?.slice(1).map(Number) ?? [];
      expect(Math.hypot(place[0], place[1])).toBeLessThan(0.05);
      expect(place[2]).toBeGreaterThan(1);
      expect(place[2]).toBeLessThan(5);
    }
    const low = runForm(placeMesh(cone(2)), buildJob({ settle: true }), {});
    expect(low.findings.filter((f) => f.level !== "note")).toEqual([]);
  });
});

// Stress 4 up the cloth and 2 round it: across a surface of revolution r·r'' = ½(1 + r'²), so 1 + r'² = r/c and the height from the
// neck c to r is 2√(c(r - c)). Between rings of 0.8 and 7 m the greatest height is the maximum over c of
// 2(√(c(7 - c)) + √(c(0.8 - c))) = 4.73 m (own, closed form).
describe("a cone with twice the stress up as round, ring 0.8 m in a ring of 7 m: it exists up to 4.73 m", () => {
  const settleCone = (h: number) => {
    const parts = buildGrid(
      64,
      48,
      (u, v) => {
        const r = 7 * (1 - v) + 0.8 * v;
        return [r * Math.cos(2 * Math.PI * u), r * Math.sin(2 * Math.PI * u), h * v];
      },
      true,
    );
    return runForm(placeMesh(parts), buildJob({ settle: true, prestress: { warp: 4, weft: 2 }, warp: [0, 0, 1] }), {});
  };

  test("3 m: heights within 5 mm of the closed form", () => {
    const { output: form, findings } = settleCone(3);
    expect(findings.filter((f) => f.level === "stop" || f.code === "settle-slow")).toEqual([]);
    const height = (c: number, r: number) => 2 * Math.sqrt(c * (r - c));
    // √(c(7 - c)) - √(c(0.8 - c)) = 1.5 by halving
    let [low, high] = [1e-3, 0.8];
    for (let i = 0; i < 60; i++) {
      const c = (low + high) / 2;
      if (height(c, 7) - height(c, 0.8) < 3) low = c;
      else high = c;
    }
    const { xyz } = form.surface;
    let off = 0;
    for (let v = 0; v < xyz.length; v += 3)
      off = Math.max(off, Math.abs(height(low, 7) - height(low, Math.hypot(xyz[v], xyz[v + 1])) - xyz[v + 2]));
    expect(off).toBeLessThan(0.005);
  });

  test("4.6 m settles, 4.8 m ends in the neck within 200 passes", () => {
    expect(settleCone(4.6).findings.filter((f) => f.level === "stop" || f.code === "settle-slow")).toEqual([]);
    const [stop] = settleCone(4.8).findings.filter((f) => f.level === "stop");
    expect(stop.code).toBe("settle-neck");
    expect(Number(/after (\d+) passes/.exec(stop.text)?.[1])).toBeLessThanOrEqual(200);
  });
});

// Areas and forces: ../shared/meshes/*.facts.json, made by other programs.
describe("found forms of other programs, from rough starts on their own mesh (skips without ../shared)", () => {
  const shared = new URL("../../../shared/meshes/", import.meta.url);
  const read = (name: string) => readFileSync(new URL(name, shared), "utf8");

  test.skipIf(!existsSync(shared))("hypar_16x16: bilinear start, area within 1e-5", () => {
    const parts = readObj(read("hypar_16x16.obj"));
    const facts = JSON.parse(read("hypar_16x16.facts.json")) as { area: number };
    for (let v = 0; v < parts.xyz.length / 3; v++) {
      const [x, y] = [((v % 51) * 16) / 50 - 8, (Math.floor(v / 51) * 16) / 50 - 8];
      parts.xyz.set([x, y, (2.5 * x * y) / 64], 3 * v);
    }
    const { output: form } = runForm(placeMesh(parts), buildJob({ settle: true }), {});
    expect(Math.abs(form.area / facts.area - 1)).toBeLessThan(1e-5);
    expect(form.residual.max).toBeLessThan(1e-5);
  });

  test.skipIf(!existsSync(shared))(
    "sail4_cables: flat and straight starts, cable forces given, area within 1e-4",
    () => {
      const parts = readObj(read("sail4_cables.obj"));
      const facts = JSON.parse(read("sail4_cables.facts.json")) as {
        area: number;
        cables: { group: string; force: number }[];
      };
      const edges = Object.fromEntries(facts.cables.map((c) => [c.group, { force: c.force }]));
      const n = 52;
      const corner = [0, n, n * (n + 1), n * (n + 2)].map((v) => [...parts.xyz.subarray(3 * v, 3 * v + 3)]);
      const starts = [
        (v: number) => [parts.xyz[3 * v], parts.xyz[3 * v + 1], 3.25],
        (v: number) => [0, 1, 2].map((k) => parts.xyz[3 * v + k] * (k === 2 ? 0.9 : 1)),
        (v: number) => {
          const [a, b] = [(v % (n + 1)) / n, Math.floor(v / (n + 1)) / n];
          return [0, 1, 2].map(
            (k) =>
              (1 - b) * ((1 - a) * corner[0][k] + a * corner[1][k]) + b * ((1 - a) * corner[2][k] + a * corner[3][k]),
          );
        },
      ];
      for (const start of starts) {
        const held = new Set(parts.points.flatMap((p) => p.vertices));
        const xyz = parts.xyz.slice();
        for (let v = 0; v < xyz.length / 3; v++) if (!held.has(v)) xyz.set(start(v), 3 * v);
        const { output: form, findings } = runForm(placeMesh({ ...parts, xyz }), buildJob({ settle: true, edges }), {});
        expect(findings.filter((f) => f.level !== "note")).toEqual([]);
        expect(Math.abs(form.area / facts.area - 1)).toBeLessThan(1e-4);
        expect(form.residual.max).toBeLessThan(1e-5);
      }
    },
  );
});

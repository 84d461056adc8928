import fc from "fast-check";
import { expect, test } from "vitest";
import type { SettleCable } from "../../../src/core/form/settle/settleBalance.ts";
import { settleDefaults, settleForm } from "../../../src/core/form/settle/settleForm.ts";
import type { SettleInput } from "../../../src/core/form/settle/settleState.ts";
import { buildRandom } from "../../../src/core/numeric/random.ts";
import { measureArea } from "../../../src/core/surface/measures.ts";
import { buildArcSail, buildGrid, listSides, mapPlaces, renumber } from "../formMeshes.ts";

const even = (stress: number) => ({ warp: stress, weft: stress, direction: null });
const settle = (input: SettleInput, own = {}) => settleForm(input, { ...settleDefaults, ...own }, {});

/** A grid held all round, inside at the height `inner`. */
function buildHeld(n: number, place: (u: number, v: number) => [number, number, number], inner: number): SettleInput {
  const { xyz, faceVertex } = buildGrid(n, n, place);
  const fixed = new Uint8Array(xyz.length / 3);
  for (const side of listSides(n, n)) for (const v of side) fixed[v] = 1;
  fixed.forEach((held, v) => {
    if (!held) xyz[3 * v + 2] = inner;
  });
  return { surface: { xyz, tri: faceVertex }, fixed, cables: [], field: even(1) };
}

const saddle = (u: number, v: number): [number, number, number] => [8 * u, 8 * v, 1.5 * (2 * u - 1) * (2 * v - 1)];

/** A four-point sail, straight from corner to corner. */
function buildSail(n: number, force: number, stress: number): SettleInput {
  const { xyz, faceVertex } = buildGrid(n, n, saddle);
  const fixed = new Uint8Array(xyz.length / 3);
  const sides = listSides(n, n);
  for (const side of sides) fixed[side[0]] = 1;
  const cables = sides.map((vertices, k): SettleCable => ({ id: `c${k}`, vertices, force }));
  return { surface: { xyz, tri: faceVertex }, fixed, cables, field: even(stress) };
}

test("a settled form settles again without a pass, and inputs never change", () => {
  for (const input of [buildHeld(16, saddle, 0.3), buildSail(16, 20, 2)]) {
    const before = input.surface.xyz.slice();
    const once = settle(input);
    expect(once.end).toBe("settled");
    expect(once.passes).toBeGreaterThan(1);
    expect([...input.surface.xyz]).toEqual([...before]);
    const again = settle({ ...input, surface: once.surface });
    expect([again.end, again.passes]).toEqual(["settled", 0]);
    expect([...again.surface.xyz]).toEqual([...once.surface.xyz]);
  }
});

test("held vertices stay where they are", () => {
  const input = buildSail(12, 20, 2);
  const { surface } = settle(input);
  input.fixed.forEach((held, v) => {
    if (held)
      expect([...surface.xyz.subarray(3 * v, 3 * v + 3)]).toEqual([...input.surface.xyz.subarray(3 * v, 3 * v + 3)]);
  });
});

// A level sheet of stress s pulls its cable into a polygon on a circle of radius R = T/s.
test("a level sheet from straight sides: its cables settle on circles of radius T/s", () => {
  const [n, force, stress] = [40, 24, 2];
  const input = buildSail(n, force, stress);
  for (let v = 2; v < input.surface.xyz.length; v += 3) input.surface.xyz[v] = 0;
  const { surface, end } = settle(input);
  expect(end).toBe("settled");
  const radius = force / stress;
  const centre = 4 - 4 - Math.sqrt(radius ** 2 - 16);
  for (const v of listSides(n, n)[0]) {
    const [x, y] = surface.xyz.subarray(3 * v, 3 * v + 2);
    expect(Math.abs(Math.hypot(x - 4, y - centre) / radius - 1)).toBeLessThan(2e-4);
  }
  // the area between the four arcs
  const half = Math.asin(4 / radius);
  const cap = radius ** 2 * (half - Math.sin(half) * Math.cos(half));
  expect(Math.abs(measureArea(surface) / (64 - 4 * cap) - 1)).toBeLessThan(1e-3);
});

// A shallow surface balances where warp·z_xx + weft·z_yy = 0: z = c·(x²/warp - y²/weft).
test("unequal stress, shallow: the curvatures stand as weft to warp", () => {
  const [warp, weft, c] = [4, 1, 0.02];
  const height = (x: number, y: number) => c * (x ** 2 / warp - y ** 2 / weft);
  const place = (u: number, v: number): [number, number, number] => {
    const [x, y] = [4 * u - 2, 4 * v - 2];
    return [x, y, height(x, y)];
  };
  const input = { ...buildHeld(24, place, 0), field: { warp, weft, direction: [1, 0, 0] as [number, number, number] } };
  const { surface, end, whole } = settle(input);
  expect(end).toBe("settled");
  const { xyz } = surface;
  let off = 0;
  for (let v = 0; v < xyz.length; v += 3) off = Math.max(off, Math.abs(xyz[v + 2] - height(xyz[v], xyz[v + 1])));
  // 0.08 m high; the slope of 0.08 leaves terms of its square
  expect(off).toBeLessThan(0.01 * 0.08);
  expect(whole).toBeLessThan(0.01);
  // the same stress both ways gives another surface
  expect(Math.abs(measureArea(settle({ ...input, field: even(2.5) }).surface) - measureArea(surface))).toBeGreaterThan(
    1e-5,
  );
});

test("turned, moved, scaled, renumbered: the same form (fast-check seed 41)", () => {
  const parts = buildGrid(10, 10, (u, v) => saddle(u, v));
  const rim = new Set(listSides(10, 10).flat());
  const settleParts = (p: typeof parts, held: Set<number>) => {
    const fixed = Uint8Array.from({ length: p.xyz.length / 3 }, (_, v) => (held.has(v) ? 1 : 0));
    return settle({ surface: { xyz: p.xyz, tri: p.faceVertex }, fixed, cables: [], field: even(2) });
  };
  const area = measureArea(settleParts(parts, rim).surface);
  fc.assert(
    fc.property(fc.integer({ min: 0, max: 1e6 }), (seed) => {
      const random = buildRandom(seed);
      const [a, size, shift] = [7 * random(), 10 ** (6 * random() - 3), 100 * random()];
      const moved = mapPlaces(parts, (x, y, z) => [
        size * (x * Math.cos(a) - z * Math.sin(a) + shift),
        size * y,
        size * (x * Math.sin(a) + z * Math.cos(a)),
      ]);
      const marked = { ...moved, lines: [{ name: null, vertices: [...rim] }] };
      const mixed = renumber(marked, seed);
      const settled = settleParts(mixed, new Set(mixed.lines[0].vertices));
      expect(settled.end).toBe("settled");
      expect(Math.abs(measureArea(settled.surface) / size ** 2 / area - 1)).toBeLessThan(1e-7);
    }),
    { seed: 41, numRuns: 20 },
  );
});

test("quads split the other way: areas within the error of the mesh", () => {
  const input = buildHeld(24, saddle, 0);
  const turned = Uint32Array.from(input.surface.tri);
  // the two triangles of a quad stand together as a b d, a d c
  for (let t = 0; t < turned.length; t += 6) {
    const [a, b, d, c] = [turned[t], turned[t + 1], turned[t + 2], turned[t + 5]];
    turned.set([a, b, c, b, d, c], t);
  }
  const other = settle({ ...input, surface: { ...input.surface, tri: turned } });
  expect(Math.abs(measureArea(other.surface) / measureArea(settle(input).surface) - 1)).toBeLessThan(2e-4);
});

test("arc sail drawn in balance: settling leaves the cables on their arcs", () => {
  const parts = buildArcSail(24, 8, 30);
  const force = 2 * 30 * Math.cos(Math.asin(8 / 30) / 24);
  const fixed = new Uint8Array(parts.xyz.length / 3);
  for (const { vertices } of parts.points) fixed[vertices[0]] = 1;
  const cables = parts.lines.map((l): SettleCable => ({ id: l.name ?? "", vertices: l.vertices, force }));
  const { end, passes } = settle({
    surface: { xyz: parts.xyz, tri: parts.faceVertex },
    fixed,
    cables,
    field: even(2),
  });
  expect([end, passes]).toEqual(["settled", 0]);
});

test("nothing held: said at once; too weak a cable: a collapse", () => {
  const loose = buildSail(8, 20, 2);
  loose.fixed.fill(0);
  expect(settle(loose).end).not.toBe("settled");
  expect(settle(buildSail(8, 5, 2)).end).toBe("collapsed");
});

test("all held: nothing to settle", () => {
  const input = buildHeld(6, saddle, 0.5);
  input.fixed.fill(1);
  const { end, passes, residual } = settle(input);
  expect([end, passes, residual]).toEqual(["settled", 0, 0]);
});

test("progress rises, a stop is heard, and a limit of passes is kept", () => {
  const input = buildHeld(16, saddle, 0.8);
  const shares: number[] = [];
  settleForm(input, settleDefaults, { onProgress: (share) => shares.push(share) });
  expect(shares.length).toBeGreaterThan(1);
  expect(shares).toEqual(shares.toSorted((a, b) => a - b));
  let calls = 0;
  expect(() => settleForm(input, settleDefaults, { cancelled: () => ++calls > 2 })).toThrow("settling was stopped");
  expect(settle(input, { maxPasses: 1 })).toMatchObject({ passes: 1 });
});

// A cone of 5 m on a ring of 0.8 m: no surface of equal stress spans it; with five times the stress up the cloth one does.
test("unequal stress from flat sails and on a cone that equal stress cannot hold", () => {
  const n = 48;
  const { xyz, faceVertex } = buildGrid(
    n,
    24,
    (u, v) => {
      const [c, s] = [Math.cos(2 * Math.PI * u), Math.sin(2 * Math.PI * u)];
      const r = 7 - 6.2 * v;
      return [r * c, r * s, 5 * v];
    },
    true,
  );
  const fixed = Uint8Array.from({ length: xyz.length / 3 }, (_, v) => (v < n || v >= 24 * n ? 1 : 0));
  const cone = { surface: { xyz, tri: faceVertex }, fixed, cables: [] };
  expect(settle({ ...cone, field: even(3) }).end).toBe("collapsed");
  const up: [number, number, number] = [0, 0, 1];
  expect(settle({ ...cone, field: { warp: 5, weft: 1, direction: up } }).end).toBe("settled");
  for (const direction of [
    [1, 0, 0],
    [1, 1, 0],
    [1, -0.4, 0],
  ] as [number, number, number][]) {
    const sail = settle({ ...buildSail(16, 40, 2), field: { warp: 5, weft: 1, direction } });
    expect([sail.end, sail.passes < 40]).toEqual(["settled", true]);
    // what is left lies within the surface and is told
    expect(sail.whole).toBeGreaterThan(sail.residual);
    expect(sail.whole).toBeLessThan(0.05);
  }
});

import { expect, test } from "vitest";
import { findNeck } from "../../../src/core/form/settle/findNeck.ts";
import type { Surface } from "../../../src/core/surface/surface.ts";
import { buildCatenoid, buildGrid } from "../formMeshes.ts";

const toSurface = (p: { xyz: Float64Array<ArrayBuffer>; faceVertex: Uint32Array<ArrayBuffer> }): Surface => ({
  xyz: p.xyz,
  tri: p.faceVertex,
});

// The throat of a catenoid of parameter c is a circle of radius c; a polygon of n sides in it is shorter by sinc(π/n).
test("throat of a catenoid: radius and place, from the cylinder it came from", () => {
  const [nu, nv] = [40, 20];
  const now = toSurface(buildCatenoid(nu, nv, 0.5, 0.6));
  const rim = 0.5 * Math.cosh(1.2);
  const start = toSurface(
    buildGrid(
      nu,
      nv,
      (u, v) => [rim * Math.cos(2 * Math.PI * u), rim * Math.sin(2 * Math.PI * u), 1.2 * v - 0.6],
      true,
    ),
  );
  const fixed = new Uint8Array(now.xyz.length / 3);
  const upper = Array.from({ length: nu }, (_, i) => nv * nu + i);
  for (let i = 0; i < nu; i++) fixed[i] = fixed[nv * nu + i] = 1;
  const neck = findNeck(now, start, fixed, [upper], (nv / 2) * nu);
  if (neck === null) throw new Error("no neck");
  const polygon = Math.sin(Math.PI / nu) / (Math.PI / nu);
  // a ring lies half-way between two rows of vertices, one of them the throat
  expect(neck.radius / polygon).toBeGreaterThan(0.4999);
  expect(neck.radius / polygon).toBeLessThan(0.25 * (1 + Math.cosh(0.12)) + 1e-6);
  expect(neck.startRadius / polygon).toBeCloseTo(rim, 6);
  expect(Math.hypot(neck.centre[0], neck.centre[1])).toBeLessThan(1e-3);
  expect(Math.abs(neck.centre[2])).toBeLessThan(0.06);
  expect(neck.group).toBe(upper);
});

test("of two masts the one nearest the place counts; held by one group alone there is no neck", () => {
  const n = 30;
  const sheet = toSurface(buildGrid(n, n, (u, v) => [u, v, 0]));
  const fixed = new Uint8Array(sheet.xyz.length / 3);
  for (let i = 0; i <= n; i++) for (const v of [i, n * (n + 1) + i, i * (n + 1), i * (n + 1) + n]) fixed[v] = 1;
  const masts = [10 * (n + 1) + 10, 20 * (n + 1) + 20].map((v) => [v]);
  for (const [v] of masts) fixed[v] = 1;
  const near = findNeck(sheet, sheet, fixed, masts, 18 * (n + 1) + 19);
  expect(near?.group).toBe(masts[1]);
  for (const k of [0, 1]) expect(Math.abs((near?.centre[k] as number) - 20 / n)).toBeLessThan(0.02);
  const alone = new Uint8Array(fixed.length);
  alone[masts[0][0]] = 1;
  expect(findNeck(sheet, sheet, alone, [masts[0]], 0)).toBeNull();
});

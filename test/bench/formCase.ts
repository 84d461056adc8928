// Bench case "form N": natural force densities on an N × N saddle over the unit square, the case of the C++ peer in
// ../shared/peers/nfdm.cpp: same mesh, same start, stopped when the area changes by less than 1e-9.
import {
  buildForceDensitySystem,
  measureIsotropicDensities,
  stepForceDensity,
} from "../../src/core/form/settle/naturalForceDensity.ts";
import type { Surface } from "../../src/core/surface/surface.ts";

/** The saddle mesh of the peer; every quad split along the same diagonal, bumped up from the bilinear patch. */
export function buildSaddle(
  n: number,
  height = 0.25,
  bump = 0.2,
): { surface: Surface; fixed: Uint8Array<ArrayBuffer> } {
  const xyz = new Float64Array(3 * (n + 1) ** 2);
  const fixed = new Uint8Array((n + 1) ** 2);
  const tri = new Uint32Array(6 * n * n);
  for (let j = 0; j <= n; j++)
    for (let i = 0; i <= n; i++) {
      const v = j * (n + 1) + i;
      const [x, y] = [i / n, j / n];
      fixed[v] = i === 0 || j === 0 || i === n || j === n ? 1 : 0;
      const z =
        height * (2 * x - 1) * (2 * y - 1) + (fixed[v] ? 0 : bump * Math.sin(Math.PI * x) * Math.sin(Math.PI * y));
      xyz.set([x, y, z], 3 * v);
    }
  for (let j = 0, t = 0; j < n; j++)
    for (let i = 0; i < n; i++, t += 6) {
      const v = j * (n + 1) + i;
      tri.set([v, v + 1, v + n + 2, v, v + n + 2, v + n + 1], t);
    }
  return { surface: { xyz, tri }, fixed };
}

/** Area in one sweep without storing normals, as the peer does it. */
function sumAreas({ xyz: x, tri }: Surface): number {
  let sum = 0;
  for (let t = 0; t < tri.length; t += 3) {
    const a = 3 * tri[t];
    const b = 3 * tri[t + 1];
    const c = 3 * tri[t + 2];
    const ux = x[b] - x[a];
    const uy = x[b + 1] - x[a + 1];
    const uz = x[b + 2] - x[a + 2];
    const vx = x[c] - x[a];
    const vy = x[c + 1] - x[a + 1];
    const vz = x[c + 2] - x[a + 2];
    const nx = uy * vz - uz * vy;
    const ny = uz * vx - ux * vz;
    const nz = ux * vy - uy * vx;
    sum += Math.sqrt(nx * nx + ny * ny + nz * nz);
  }
  return sum / 2;
}

/** What one case took; medians over the repeats, after warm-up. */
export interface FormTimes {
  n: number;
  passes: number;
  msPerPass: number;
  symbolicMs: number;
  totalMs: number;
  area: number;
}

function runOnce(n: number) {
  const { surface, fixed } = buildSaddle(n);
  const begin = performance.now();
  const system = buildForceDensitySystem(surface, fixed, new Uint32Array(0));
  const symbolicMs = performance.now() - begin;
  const densities = { side: new Float64Array(surface.tri.length), line: new Float64Array(0) };
  const times: number[] = [];
  let current = surface;
  let area = sumAreas(surface);
  for (let pass = 1; pass <= 2000; pass++) {
    const from = performance.now();
    measureIsotropicDensities(current, 1, densities.side);
    current = { xyz: stepForceDensity(system, current, densities), tri: surface.tri };
    const before = area;
    area = sumAreas(current);
    times.push(performance.now() - from);
    if (Math.abs(area - before) / area < 1e-9) break;
  }
  return { times, symbolicMs, totalMs: performance.now() - begin, area };
}

function median(values: number[]): number {
  const sorted = values.toSorted((a, b) => a - b);
  const half = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
}

/** Times the saddle of n × n quads. */
export function benchForm(n: number, repeats = 5): FormTimes {
  const warm = performance.now();
  for (let k = 0; k < 2 || (performance.now() - warm < 600 && k < 60); k++) runOnce(n);
  const runs = Array.from({ length: repeats }, () => runOnce(n));
  return {
    n,
    passes: runs[0].times.length,
    msPerPass: median(runs.map((run) => median(run.times))),
    symbolicMs: median(runs.map((run) => run.symbolicMs)),
    totalMs: median(runs.map((run) => run.totalMs)),
    area: runs[0].area,
  };
}

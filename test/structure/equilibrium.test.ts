import { expect, test } from "vitest";
import { buildStiffness } from "../../src/core/structure/cloth.ts";
import { measureForces, measureLink } from "../../src/core/structure/elements.ts";
import {
  assembleTangentInPlace,
  createEquilibriumSolver,
  solveEquilibrium,
} from "../../src/core/structure/equilibrium.ts";
import { measureInfluence } from "../../src/core/structure/influence.ts";
import { buildStructure, type ClothElements } from "../../src/core/structure/structure.ts";

const noCloth: ClothElements = {
  tri: new Uint32Array(0),
  flat: new Float64Array(0),
  law: new Uint16Array(0),
  laws: [],
};

/** A square cloth of n × n quads, side 4 m, slightly shrunk flat, corners held out of plane, two cables along its sides. */
function buildSail(n: number) {
  const xyz = new Float64Array(3 * (n + 1) ** 2);
  const id = (i: number, j: number) => j * (n + 1) + i;
  for (let j = 0; j <= n; j++)
    for (let i = 0; i <= n; i++)
      xyz.set([(4 * i) / n, (4 * j) / n, 0.4 * (2 * (i / n) - 1) * (2 * (j / n) - 1)], 3 * id(i, j));
  const held = new Uint8Array(xyz.length);
  for (const v of [id(0, 0), id(n, 0), id(0, n), id(n, n)]) held.fill(1, 3 * v, 3 * v + 3);
  const tri: number[] = [];
  const flat: number[] = [];
  for (let j = 0; j < n; j++)
    for (let i = 0; i < n; i++)
      for (const t of [
        [id(i, j), id(i + 1, j), id(i + 1, j + 1)],
        [id(i, j), id(i + 1, j + 1), id(i, j + 1)],
      ]) {
        tri.push(...t);
        for (const v of t) flat.push(0.996 * xyz[3 * v], 0.996 * xyz[3 * v + 1]);
      }
  const link: number[] = [];
  for (let i = 0; i < n; i++)
    link.push(id(i, 0), id(i + 1, 0), id(i, n), id(i + 1, n), id(0, i), id(0, i + 1), id(n, i), id(n, i + 1));
  const k = link.length / 2;
  const cloth = {
    tri: new Uint32Array(tri),
    flat: new Float64Array(flat),
    law: new Uint16Array(tri.length / 3),
    laws: [buildStiffness({ Ew: 600, Ef: 500, nuWf: 0.25, G: 20 })],
  };
  const structure = buildStructure({ xyz, held }, cloth, {
    link: new Uint32Array(link),
    EA: new Float64Array(k).fill(8000),
    strut: new Uint8Array(k),
  });
  return { structure, L0: new Float64Array(k).fill((4 / n) * 0.99), n };
}

test("a sail comes to rest: out-of-balance below 1e-10 of its largest force, and the reactions add to nothing", () => {
  const { structure, L0 } = buildSail(10);
  const state = solveEquilibrium(createEquilibriumSolver(structure), structure.xyz, L0);
  expect(state.converged).toBe(true);
  const { force } = measureForces(structure, state.x, L0);
  for (let i = 0; i < 3; i++) {
    let sum = 0;
    for (let c = i; c < force.length; c += 3) sum += force[c];
    expect(Math.abs(sum)).toBeLessThan(1e-8 * state.scale);
  }
});

test("the tangent is the derivative of the forces, wrinkled cloth included (central differences)", () => {
  const { structure, L0 } = buildSail(3);
  const x = structure.xyz.map((q, c) => q + 0.02 * Math.sin(7 * c + 1));
  const solver = createEquilibriumSolver(structure);
  assembleTangentInPlace(solver, x, L0);
  const { pattern } = solver.elements;
  const dense = new Float64Array(solver.n ** 2);
  for (let j = 0; j < solver.n; j++)
    for (let p = pattern.colStart[j]; p < pattern.colStart[j + 1]; p++) {
      dense[pattern.rowIndex[p] * solver.n + j] = solver.values[p];
      dense[j * solver.n + pattern.rowIndex[p]] = solver.values[p];
    }
  const h = 1e-7;
  let worst = 0;
  for (let c = 0; c < x.length; c++) {
    if (solver.unknown[c] < 0) continue;
    const up = x.slice();
    const down = x.slice();
    up[c] += h;
    down[c] -= h;
    const fu = measureForces(structure, up, L0).force;
    const fd = measureForces(structure, down, L0).force;
    for (let r = 0; r < x.length; r++)
      if (solver.unknown[r] >= 0)
        worst = Math.max(
          worst,
          Math.abs((fu[r] - fd[r]) / (2 * h) - dense[solver.unknown[r] * solver.n + solver.unknown[c]]),
        );
  }
  expect(worst).toBeLessThan(0.05);
});

test("the influence matrix is what small turns do (second method: solve again)", () => {
  const { structure, L0 } = buildSail(6);
  const solver = createEquilibriumSolver(structure);
  const state = solveEquilibrium(solver, structure.xyz, L0);
  const links = [0, 5, 9];
  const a = measureInfluence(solver, state.x, L0, links, links);
  const h = 1e-6;
  links.forEach((turned, c) => {
    const longer = L0.slice();
    longer[turned] += h;
    const next = solveEquilibrium(solver, state.x, longer, { tolerance: 1e-13 });
    links.forEach((read, r) => {
      const slope =
        (measureLink(structure, next.x, longer, read).force - measureLink(structure, state.x, L0, read).force) / h;
      expect(Math.abs(slope - a[r * 3 + c])).toBeLessThan(1e-3 * Math.abs(a[c * 3 + c]));
    });
  });
});

test("slack chain under one load hangs as a straight pair of links (tension-only)", () => {
  const xyz = new Float64Array([0, 0, 0, 1, 0, 0, 2, 0, 0]);
  const held = new Uint8Array([1, 1, 1, 0, 0, 0, 1, 1, 1]);
  const load = new Float64Array([0, 0, 0, 0, 0, -1, 0, 0, 0]);
  const structure = buildStructure({ xyz, held, load }, noCloth, {
    link: new Uint32Array([0, 1, 1, 2]),
    EA: new Float64Array([1e4, 1e4]),
    strut: new Uint8Array(2),
  });
  const L0 = new Float64Array([1.25, 1.25]);
  const state = solveEquilibrium(createEquilibriumSolver(structure), xyz, L0);
  expect(state.converged).toBe(true);
  // 3-4-5: depth 0.75 m, force 0.5·1.25/0.75 kN, up to the links' own stretch
  expect(state.x[5]).toBeCloseTo(-0.75, 3);
  expect(measureLink(structure, state.x, L0, 0).force).toBeCloseTo(0.8333, 3);
});

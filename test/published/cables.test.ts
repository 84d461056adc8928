// Published and closed-form cases of cable mechanics, each with its source.
import { expect, test } from "vitest";
import { loadCatalogues } from "../../src/cli/packageFiles.ts";
import { runPlan } from "../../src/core/plan/runPlan.ts";
import { measureLink } from "../../src/core/structure/elements.ts";
import { createEquilibriumSolver, solveEquilibrium } from "../../src/core/structure/equilibrium.ts";
import { buildStructure } from "../../src/core/structure/structure.ts";
import { buildGrid, listSides } from "../form/formMeshes.ts";
import { makeJob } from "../madeJob.ts";
import { hangChain, noCloth } from "./hangChain.ts";

test("T2, single cable with a point load: −5.626 m and −0.859 m (Michalos & Birnstiel 1962; O'Brien & Francis 1964; values from memory, recomputed with the exact elastic catenary L0 = 312.702 m)", () => {
  const EA = 131e6 * 548.4e-6;
  const w = 46.12e-3;
  const whole = 312.702;
  const even = hangChain(new Array(200).fill(whole / 200), 304.8, w, EA);
  expect(even.converged).toBe(true);
  // the loaded point lies 121.92 m from the left end under self-weight: its unstrained place along the cable
  let i = 0;
  while (even.x[3 * (i + 1)] < 121.92) i++;
  const place = ((i + (121.92 - even.x[3 * i]) / (even.x[3 * i + 3] - even.x[3 * i])) * whole) / 200;
  const lengths = [...new Array(80).fill(place / 80), ...new Array(120).fill((whole - place) / 120)];
  const free = hangChain(lengths, 304.8, w, EA);
  const loaded = hangChain(lengths, 304.8, w, EA, { at: 80, kN: 35.586 });
  expect(loaded.converged).toBe(true);
  // horizontal force and left vertical reaction, self-weight and loaded (recomputed with the exact elastic catenary)
  const pull = (s: typeof free) => {
    const { force, u } = measureLink(s.structure, s.x, new Float64Array(lengths), 0);
    return { H: force * u[0], V: -force * u[2] + (w * lengths[0]) / 2 };
  };
  expect(Math.abs(pull(free).H - 17.797)).toBeLessThan(5e-3);
  expect(Math.abs(pull(free).V - 7.211)).toBeLessThan(1e-3);
  expect(Math.abs(pull(loaded).H - 89.443)).toBeLessThan(2e-2);
  expect(Math.abs(pull(loaded).V - 28.697)).toBeLessThan(5e-3);
  expect(free.x[240]).toBeCloseTo(121.92, 2);
  expect(free.x[242]).toBeCloseTo(-29.276, 2);
  expect(Math.abs(loaded.x[242] - free.x[242] + 5.626)).toBeLessThan(2e-3);
  expect(Math.abs(loaded.x[240] - free.x[240] + 0.859)).toBeLessThan(2e-3);
});

test("stay, stainless 1x19 d 16: 37.755 mm at 50 kN over 15 m, 6.357 kN for 20 K restrained (closed form, A = 0.76 π/4 d², E 130 kN/mm², α 16e-6)", () => {
  const EA = 130 * 0.76 * (Math.PI / 4) * 256;
  expect(EA).toBeCloseTo(130 * 152.81, 0);
  const xyz = new Float64Array([0, 0, 0, 15, 0, 0]);
  const load = new Float64Array([0, 0, 0, 50, 0, 0]);
  const links = { link: new Uint32Array([0, 1]), EA: new Float64Array([EA]), strut: new Uint8Array(1) };
  const pulled = buildStructure({ xyz, held: new Uint8Array([1, 1, 1, 0, 1, 1]), load }, noCloth, links);
  const L0 = new Float64Array([15]);
  const state = solveEquilibrium(createEquilibriumSolver(pulled), xyz, L0);
  expect(1000 * (state.x[3] - 15)).toBeCloseTo(37.755, 3);
  const fixed = buildStructure({ xyz, held: new Uint8Array(6).fill(1) }, noCloth, links);
  const before = measureLink(fixed, xyz, new Float64Array([15 / (1 + 50 / EA)]), 0).force;
  const warm = measureLink(fixed, xyz, new Float64Array([(15 / (1 + 50 / EA)) * (1 + 16e-6 * 20)]), 0).force;
  // EA·α·ΔT on the unstrained length; the strained stay differs by its own 0.25 %
  expect(Math.abs(before - warm - 6.357)).toBeLessThan(0.03);
});

test("T1, M20 turnbuckle with right- and left-hand ends: 7.551 turns are 37.755 mm (two pitches of 2.5 mm a turn, ISO 724)", () => {
  const { perTurn } = loadCatalogues().turnbuckles["open-body-m20"];
  expect(Math.abs(7.551 * perTurn - 37.755)).toBeLessThan(1e-3);
  expect(37.755 / perTurn).toBeCloseTo(7.551, 9);
});

// Edge cable over a chord of 10 m in cloth of 2 kN/m, closed form, recomputed: sag over chord, radius, arc, force T = s·R, the naive
// w·L²/(8f), half angle at the end in degrees, horizontal part of the force; n: sides of the finer mesh, and how near it must come
const edgeCables = [
  {
    name: "1/8",
    sag: 1 / 8,
    radius: 10.625,
    arc: 10.41159,
    force: 21.25,
    naive: 20,
    half: 28.072,
    level: 18.75,
    n: 64,
    within: 1e-4,
  },
  {
    name: "1/10",
    sag: 1 / 10,
    radius: 13,
    arc: 10.26457,
    force: 26,
    naive: 25,
    half: 22.62,
    level: 24,
    n: 128,
    within: 1e-5,
  },
  {
    name: "1/12",
    sag: 1 / 12,
    radius: 15.4167,
    arc: 10.18417,
    force: 30.833,
    naive: 30,
    half: 18.925,
    level: 29.167,
    n: 64,
    within: 4e-4,
  },
  {
    name: "1/15",
    sag: 1 / 15,
    radius: 19.0833,
    arc: 10.1181,
    force: 38.167,
    naive: 37.5,
    half: 15.189,
    level: 36.833,
    n: 64,
    within: 4e-4,
  },
];

test.each(edgeCables)(
  "T3, edge cable of 10 m chord and a sag of $name in cloth of 2 kN/m: T = s·R = $force kN, arc $arc m (closed form)",
  (given) => {
    const half = 2 * Math.atan(2 * given.sag);
    const radius = 5 / Math.sin(half);
    expect(radius).toBeCloseTo(given.radius, 4);
    expect((half * 180) / Math.PI).toBeCloseTo(given.half, 3);
    expect(2 * radius * Math.cos(half)).toBeCloseTo(given.level, 3);
    expect((2 * 100) / (8 * 10 * given.sag)).toBeCloseTo(given.naive, 9);
    // cloth between the arc and three straight clamped edges; the chain finds force and length of the cable by itself.
    // a polygon falls short of its arc with the square of its sides: two meshes give the limit (Richardson)
    const plan = (n: number) => {
      const mesh = buildGrid(n, Math.round(n / 8), (u, v) => {
        const a = half * (2 * u - 1);
        const arc = radius * Math.cos(a) - radius * Math.cos(half);
        const x = (1 - v) * (5 + radius * Math.sin(a)) + v * 10 * u;
        return [x, (1 - v) * arc + v * 4, 3];
      });
      const [south, east, north, west] = listSides(n, Math.round(n / 8));
      mesh.lines = [
        { name: "arc", vertices: south },
        { name: "frame", vertices: [...east, ...north.slice(1), ...west.slice(1)] },
      ];
      mesh.points = [{ name: "held", vertices: [...new Set([...east, ...north, ...west])] }];
      const job = makeJob({ edges: { arc: { kind: "cable", force: null }, frame: { kind: "clamped" } } });
      const facts = runPlan(job, { ...mesh, unit: "m", up: "z", outside: "up" }, { revision: "test" }, {});
      const line = facts.cables?.find((c) => c.id === "arc");
      if (!line) throw new Error("no cable along the arc");
      return line;
    };
    const [coarse, fine] = [plan(given.n / 2), plan(given.n)];
    const limit = (q: "force" | "erectedLength") => fine[q] + (fine[q] - coarse[q]) / 3;
    expect(Math.abs(limit("force") - 2 * radius)).toBeLessThan(given.within);
    expect(Math.abs(2 * radius - given.force)).toBeLessThan(5e-4);
    expect(Math.abs(limit("erectedLength") - given.arc)).toBeLessThan(Math.max(1e-5, given.within / 10));
    // slack length by N = EA·(L − L0)/L0
    expect(fine.slackLength).toBeCloseTo(fine.erectedLength / (1 + fine.force / fine.EA), 12);
  },
);

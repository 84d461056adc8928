import { expect, test } from "vitest";
import type { readObj } from "../../../src/core/form/reading/readObj.ts";
import { type FormJob, runForm } from "../../../src/core/form/runForm.ts";
import { takeUsualForce } from "../../../src/core/form/settle/settleForces.ts";
import { buildJob, listCodes, placeMesh } from "../formJob.ts";
import { buildArcSail, buildCatenoid, buildGrid, listSides, readFixture } from "../formMeshes.ts";

const run = (parts: ReturnType<typeof readObj>, own: Partial<FormJob> = {}) =>
  runForm(placeMesh(parts), buildJob({ settle: true, ...own }), {});

/** A four-point sail with straight sides, its corners fixed and its sides named. */
function buildStraightSail(n: number) {
  const parts = buildGrid(n, n, (u, v) => [10 * u - 5, 10 * v - 5, 2 * (2 * u - 1) * (2 * v - 1)]);
  parts.lines = listSides(n, n).map((vertices, k) => ({ name: `side_${k}`, vertices }));
  parts.points = listSides(n, n).map((s) => ({ name: "corner", vertices: [s[0]] }));
  return parts;
}

test("given forces settle straight sides; the form that goes on is the settled one and in balance", () => {
  const parts = buildStraightSail(20);
  const { output: form, findings, checks } = run(parts, { edges: { default: { force: 30 } } });
  expect(listCodes(findings)).toEqual(["settle-moved"]);
  expect(form.residual.max).toBeLessThan(1e-3);
  expect(form.edges.map((e) => [e.force, e.forceFrom])).toEqual(Array.from({ length: 4 }, () => [30, "job"]));
  expect(checks.every((c) => c.holds)).toBe(true);
  const moved = findings[0].value as number;
  const far = Math.max(
    ...Array.from({ length: form.surface.xyz.length / 3 }, (_, v) =>
      Math.hypot(...[0, 1, 2].map((k) => form.surface.xyz[3 * v + k] - parts.xyz[3 * v + k])),
    ),
  );
  expect(moved).toBeCloseTo(far, 9);
  expect(findings[0].text).toMatch(
    /settled under 2 kN\/m both ways in \d+ passes: vertices moved by up to \d\.\d{3} m/,
  );
});

test("no force anywhere and straight sides: the usual sag, said as a default; 12 m chord gives 1.3·s·L", () => {
  const { output: form, findings } = run(buildStraightSail(20));
  const chord = Math.hypot(10, 4);
  expect(takeUsualForce(chord, 2)).toBeCloseTo(1.3 * 2 * chord, 12);
  for (const e of form.edges) {
    expect(e.forceFrom).toBe("sag");
    expect(e.force).toBeCloseTo(1.3 * 2 * chord, 9);
  }
  expect(listCodes(findings, "caution")).toEqual(["settle-force-default"]);
  // sag of the settled cable from its chord
  const [a, m, b] = [0, 10, 20].map((i) => [0, 1, 2].map((k) => form.surface.xyz[3 * form.edges[0].vertices[i] + k]));
  const sag = Math.hypot(...[0, 1, 2].map((k) => m[k] - (a[k] + b[k]) / 2));
  expect(sag / chord).toBeGreaterThan(0.09);
  expect(sag / chord).toBeLessThan(0.11);
});

test("no force but curved sides: the force that the drawn curve says, from the best balance of the start", () => {
  const parts = buildArcSail(24, 8, 30);
  // lifted inside: out of balance, but the rim is as drawn
  for (let v = 0; v < parts.xyz.length / 3; v++) {
    const [x, y] = parts.xyz.subarray(3 * v, 3 * v + 2);
    parts.xyz[3 * v + 2] += 0.02 * Math.max(0, 6 - Math.hypot(x, y));
  }
  const { output: form } = run(parts);
  for (const e of form.edges) {
    expect(e.forceFrom).toBe("balance");
    expect(Math.abs((e.force as number) / 60 - 1)).toBeLessThan(0.01);
  }
  for (let v = 2; v < form.surface.xyz.length; v += 3) expect(Math.abs(form.surface.xyz[v] - 3)).toBeLessThan(1e-5);
});

test("a form in balance is not moved, and that is said", () => {
  const { output: form, findings } = run(buildArcSail(16, 5, 12));
  const [note] = findings.filter((f) => f.code === "settle-moved");
  expect(note.text).toMatch(/settling moved nothing/);
  expect([...form.surface.xyz]).toEqual([...buildArcSail(16, 5, 12).xyz]);
  // not settled: the codes of settling are silent
  const { findings: plain } = runForm(placeMesh(buildArcSail(16, 5, 12)), buildJob(), {});
  expect(listCodes(plain).filter((c) => c.startsWith("settle"))).toEqual([]);
});

test("a cable too weak for its chord: a stop with the force it takes; the form is left as it is", () => {
  const parts = buildStraightSail(20);
  const { output: form, findings } = run(parts, { edges: { side_1: { force: 8 }, default: { force: 40 } } });
  const [stop] = findings.filter((f) => f.level === "stop");
  expect([stop.code, stop.where, stop.value]).toEqual(["settle-cable-weak", ["side_1"], 8]);
  expect(stop.limit).toBeCloseTo(Math.hypot(10, 4), 9);
  expect(stop.text).toMatch(/^no such surface.*side_1 with 8\.00 kN.*more than 10\.77 kN/);
  expect([...form.surface.xyz]).toEqual([...parts.xyz]);
});

test("a free edge or a torn hole: not settled, said why", () => {
  const { findings } = run(buildStraightSail(10), { edges: { default: { force: 30 }, side_2: { kind: "free" } } });
  const [stop] = findings.filter((f) => f.level === "stop");
  expect([stop.code, stop.where]).toEqual(["settle-free-edge", ["side_2"]]);
  const torn = run(readFixture("hole"));
  expect(listCodes(torn.findings, "stop")).toEqual(["mesh-hole"]);
  expect(listCodes(torn.findings).filter((c) => c.startsWith("settle"))).toEqual([]);
});

test("a peak held at a point alone: no such surface, the point is named", () => {
  const n = 20;
  const parts = buildGrid(n, n, (u, v) => [
    10 * u - 5,
    10 * v - 5,
    3 * (1 - Math.max(Math.abs(2 * u - 1), Math.abs(2 * v - 1))),
  ]);
  const peak = (n / 2) * (n + 1) + n / 2;
  parts.points = [
    { name: "rim", vertices: [...new Set(listSides(n, n).flat())] },
    { name: "peak", vertices: [peak] },
  ];
  const [stop] = run(parts).findings.filter((f) => f.level === "stop");
  expect([stop.code, stop.where]).toEqual(["settle-neck", `vertex ${peak}`]);
  expect(stop.remedy).toMatch(/ring or a loop of cable/);
});

test("a ring of cable that nothing holds has no stable size: said so", () => {
  const n = 24;
  const parts = buildGrid(
    n,
    6,
    (u, v) => {
      const [r, a] = [9 - 7 * v, 2 * Math.PI * u];
      return [r * Math.cos(a), r * Math.sin(a), 2];
    },
    true,
  );
  parts.lines = [{ name: "eye", vertices: [...Array.from({ length: n }, (_, i) => 6 * n + i), 6 * n] }];
  for (const force of [3, 5]) {
    const [stop] = run(parts, { edges: { eye: { force } } }).findings.filter((f) => f.level === "stop");
    expect([stop.code, stop.where]).toEqual(["settle-no-surface", "eye"]);
    expect(stop.remedy).toMatch(/no stable size/);
  }
});

test("unequal stress along a warp direction: balanced across the cloth, what is left within it is told", () => {
  const { output: form, findings } = run(buildStraightSail(20), {
    edges: { default: { force: 30 } },
    prestress: { warp: 3, weft: 1.5 },
    warp: [1, 1, 0],
  });
  expect(form.residual.normalMax).toBeLessThan(1e-5);
  expect(form.residual.max).toBeGreaterThan(1e-4);
  expect(form.residual.max).toBeLessThan(0.02);
  expect(findings.find((f) => f.code === "settle-moved")?.text).toContain("3 kN/m in warp and 1.5 kN/m in weft");
});

test("progress goes on rising through the station, a stop is heard while settling", () => {
  const shares: number[] = [];
  const words: string[] = [];
  const source = placeMesh(buildCatenoid(24, 12, 1, 0.6));
  for (let v = 2; v < source.xyz.length; v += 3) source.xyz[v] *= 1.05;
  runForm(source, buildJob({ settle: true }), {
    onProgress: (share, text) => {
      shares.push(share);
      words.push(text);
    },
  });
  expect(shares).toEqual(shares.toSorted((a, b) => a - b));
  expect(words.filter((w) => w.startsWith("settling, pass")).length).toBeGreaterThan(1);
  let seen = 0;
  const stop = () =>
    runForm(source, buildJob({ settle: true }), {
      onProgress: (_, text) => {
        if (text.startsWith("settling, pass")) seen++;
      },
      cancelled: () => seen > 0,
    });
  expect(stop).toThrow("settling was stopped");
});

import { existsSync, readFileSync } from "node:fs";
import fc from "fast-check";
import { expect, test } from "vitest";
import { readObj } from "../../src/core/form/reading/readObj.ts";
import { type FormJob, runForm } from "../../src/core/form/runForm.ts";
import type { FoundForm } from "../../src/core/records/foundForm.ts";
import type { MeshSource } from "../../src/core/records/job.ts";
import { buildJob, listCodes, placeMesh } from "./formJob.ts";
import { buildArcSail, buildCatenoid, buildGrid, listSides, mapPlaces, readFixture, renumber } from "./formMeshes.ts";

const shared = new URL("../../../shared/meshes/", import.meta.url);
const run = (source: MeshSource, own: Partial<FormJob> = {}) => runForm(source, buildJob(own), {});
const length = (v: ArrayLike<number>) => Math.hypot(v[0], v[1], v[2]);
const edgeOf = (form: FoundForm, id: string) => {
  const e = form.edges.find((x) => x.id === id);
  if (!e) throw new Error(`no edge ${id}, there are ${form.edges.map((x) => x.id)}`);
  return e;
};
const round = (x: number) => Math.round(1000 * x) / 1000;

interface SharedFacts {
  area: number;
  cables?: { group: string; force: number }[];
  support_reactions_kN?: { vertex: number; pull_of_structure_on_support: number[] }[];
  equilibrium: { max_relative: number; rms_relative: number };
}

// Areas, forces, reactions and residuals: ../shared/meshes/*.facts.json, by programs that share no code with this one.
for (const name of ["hypar_16x16", "sail4_cables", "conic_belts", "catenoid_090"]) {
  const file = new URL(`${name}.obj`, shared);
  test.skipIf(!existsSync(file))(`${name}: the facts of its maker (skips without ../shared)`, () => {
    const facts = JSON.parse(readFileSync(new URL(`${name}.facts.json`, shared), "utf8")) as SharedFacts;
    const parts = readObj(readFileSync(file, "utf8"));
    const { output: form, checks } = run(placeMesh(parts));
    expect(Math.abs(form.area / facts.area - 1)).toBeLessThan(1e-9);
    const bound = name === "conic_belts" ? 0.01 : 0.005;
    for (const c of facts.cables ?? [])
      expect(Math.abs((edgeOf(form, c.group).force as number) / c.force - 1)).toBeLessThan(bound);
    // the maker's scale differs (each vertex its own forces, cables included): same size, not the same number
    expect(form.residual.max).toBeLessThan(10 * facts.equilibrium.max_relative);
    expect(form.residual.rms).toBeLessThan(10 * facts.equilibrium.rms_relative);
    expect(checks.filter((c) => !c.holds)).toEqual([]);
    for (const r of facts.support_reactions_kN ?? []) {
      const anchor = form.anchors.find((a) => a.vertex === r.vertex);
      const force = form.reactions.find((x) => x.anchor === anchor?.id)?.force as number[];
      // opposite sign: the file gives the support's force on the structure
      r.pull_of_structure_on_support.forEach((p, k) => {
        expect(Math.abs(force[k] + p)).toBeLessThan(1e-3 * length(force));
      });
    }
    const rough = run(placeMesh(mapPlaces(parts, (...p) => p.map(round)))).output;
    for (const c of facts.cables ?? [])
      expect(Math.abs((edgeOf(rough, c.group).force as number) / c.force - 1)).toBeLessThan(0.02);
  });
}

test("hypar_16x16, sail4, conic: edges and anchors by the rules (skips without ../shared)", ({ skip }) => {
  if (!existsSync(shared)) return skip();
  const read = (name: string) => run(placeMesh(readObj(readFileSync(new URL(`${name}.obj`, shared), "utf8")))).output;
  const hypar = read("hypar_16x16");
  expect(hypar.edges.map((e) => [e.id, e.kind, e.vertices[0], e.vertices.length])).toEqual([
    ["E1", "clamped", 0, 51],
    ["E2", "clamped", 50, 51],
    ["E3", "clamped", 2600, 51],
    ["E4", "clamped", 2550, 51],
  ]);
  expect(hypar.anchors.map((a) => [a.id, a.vertex, a.isolated])).toEqual([
    ["A1", 0, false],
    ["A2", 50, false],
    ["A3", 2600, false],
    ["A4", 2550, false],
  ]);
  const conic = read("conic_belts");
  expect(conic.loops.map((l) => l.length)).toEqual([96, 96]);
  expect(conic.edges.map((e) => `${e.id} ${e.kind} ${e.loop}`)).toEqual([
    ...[1, 2, 3, 4].map((k) => `edge_cable_${k} cable 0`),
    "E1 clamped 1",
    ...[1, 2, 3, 4, 5, 6, 7, 8].map((k) => `radial_belt_0${k} belt -1`),
  ]);
  expect(conic.anchors.map((a) => a.isolated)).toEqual([true, true, true, true]);
});

// A level sheet of stress s held by a polygon inscribed in a circle of radius R, half link angle a: the cloth pulls each vertex
// by s·½·|x(next) - x(previous)| = s·R·sin 2a, the cable holds it by 2T·sin a, so T = s·R·cos a exactly.
test("arc sail: cable force s·R·cos(a) to rounding, force and coordinates coarse or fine", () => {
  for (const [n, half, radius] of [
    [8, 5, 12],
    [24, 8, 30],
  ]) {
    const {
      output: form,
      findings,
      checks,
    } = run(placeMesh(buildArcSail(n, half, radius)), { prestress: { warp: 3, weft: 3 } });
    const force = 3 * radius * Math.cos(Math.asin(half / radius) / n);
    for (let k = 1; k <= 4; k++) {
      const e = edgeOf(form, `arc_${k}`);
      expect([e.kind, e.forceFrom]).toEqual(["cable", "balance"]);
      expect(e.force).toBeCloseTo(force, 8);
    }
    expect(form.residual.max).toBeLessThan(1e-12);
    expect(listCodes(findings)).toEqual(["cable-force-balance", "form-flat"]);
    // level as it is, it does not drain; all else holds
    expect(checks.filter((c) => !c.holds).map((c) => c.value)).toEqual([1]);
    const sum = form.reactions.reduce((s, r) => s.map((x, k) => x + r.force[k]), [0, 0, 0]);
    expect(length(sum)).toBeLessThan(1e-10);
    // the pull is inwards: at the corner (-half, -half) towards +x and +y
    expect(form.reactions[0].force[0]).toBeGreaterThan(force / 2);
    expect(form.reactions[0].force[1]).toBeGreaterThan(force / 2);
  }
});

// Cloth round an eye pulls its rim away from the eye: T = s·r·cos(a), a half the link's angle, as for the arc sail.
test("a closed cable round an eye: force s·r·cos(a)", () => {
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
  const { output: form } = run(placeMesh(parts));
  expect(form.edges.map((e) => [e.id, e.kind, e.loop, e.vertices.length])).toEqual([
    ["E1", "clamped", 0, n + 1],
    ["eye", "cable", 1, n + 1],
  ]);
  expect(edgeOf(form, "eye").force).toBeCloseTo(2 * 2 * Math.cos(Math.PI / n), 9);
  expect(form.residual.max).toBeLessThan(1e-12);
});

test("arc sail: a given force stands, a wrong one shows in the residual", () => {
  const source = placeMesh(buildArcSail(16, 5, 12));
  const { output: form, findings } = run(source, { edges: { default: { force: 24 }, arc_2: { force: 40 } } });
  expect(form.edges.map((e) => [e.force, e.forceFrom])).toEqual([24, 40, 24, 24].map((f) => [f, "job"]));
  const [f] = findings.filter((x) => x.code === "form-balance");
  expect(f.level).toBe("caution");
  expect(form.residual.max).toBeGreaterThan(0.1);
});

test("arc sail rounded to a millimetre: forces within 0.5 %, the residual is put down to the rounding", () => {
  const { output: form, findings } = run(placeMesh(mapPlaces(buildArcSail(40, 8, 30), (...p) => p.map(round))));
  for (const e of form.edges)
    expect(Math.abs((e.force as number) / (60 * Math.cos(Math.asin(8 / 30) / 40)) - 1)).toBeLessThan(0.005);
  expect(form.residual.max).toBeGreaterThan(0.01);
  expect(listCodes(findings, "caution")).toEqual(["form-flat"]);
  expect(findings.find((f) => f.code === "form-balance-rounding")?.text).toContain("rounded to 1 mm");
});

test("a sheet bent to a cylinder is out of balance, rounded to a millimetre or not", () => {
  const parts = buildGrid(8, 60, (u, v) => [1.6 * u, 5 * Math.sin(1.9 * (v - 0.5)), 5 * Math.cos(1.9 * (v - 0.5))]);
  for (const source of [parts, mapPlaces(parts, (...p) => p.map(round))])
    expect(listCodes(run(placeMesh(source)).findings, "caution")).toEqual(["form-balance"]);
});

// Catenoid of neck radius c: area πc(2h + c·sinh(2h/c)), axial pull of every level ring 2πcs (closed forms).
test("catenoid: area and axial pull converge to the closed forms with the square of the mesh size", () => {
  const [c, h, s] = [5, 2.5, 2];
  const area = Math.PI * c * (2 * h + c * Math.sinh((2 * h) / c));
  const errors = [1, 2].map((k) => {
    const parts = buildCatenoid(48 * k, 16 * k, c, h);
    const { output: form, findings } = run(placeMesh(parts));
    expect(form.edges.map((e) => [e.id, e.kind, e.loop])).toEqual([
      ["E1", "clamped", 0],
      ["E2", "clamped", 1],
    ]);
    expect(form.anchors).toEqual([]);
    // the lower ring comes first, is pulled up, and both run counter-clockwise from above
    const [low, high] = form.edges.map((e) => e.reaction as { resultant: number[]; greatest: number });
    expect(low.resultant[2]).toBeGreaterThan(0);
    expect(high.resultant[2]).toBeCloseTo(-low.resultant[2], 9);
    expect(low.greatest).toBeCloseTo(s, 12);
    expect(listCodes(findings)).toContain("edge-kind-default");
    return [1 - form.area / area, low.resultant[2] / (2 * Math.PI * c * s) - 1];
  });
  expect(Math.abs(errors[1][0])).toBeLessThan(1e-3);
  expect(Math.abs(errors[1][1])).toBeLessThan(2e-3);
  for (const k of [0, 1]) {
    expect(errors[0][k] / errors[1][k]).toBeGreaterThan(3);
    expect(errors[0][k] / errors[1][k]).toBeLessThan(5);
  }
});

test("warp and weft apart: a level rectangle pulls its clamps by each", () => {
  const parts = buildGrid(10, 6, (u, v) => [10 * u, 6 * v, 4]);
  const { output: form, findings } = run(placeMesh(parts), { prestress: { warp: 3, weft: 1 }, warp: [1, 0, 0.5] });
  expect(form.residual.max).toBeLessThan(1e-13);
  expect(form.edges.map((e) => e.reaction?.greatest)).toEqual([1, 3, 1, 3].map((x) => expect.closeTo(x, 12)));
  expect(listCodes(findings)).toEqual(["edge-kind-default", "form-flat"]);
  const mean = run(placeMesh(parts), { prestress: { warp: 3, weft: 1 } });
  expect(mean.output.edges.map((e) => e.reaction?.greatest)).toEqual([2, 2, 2, 2].map((x) => expect.closeTo(x, 12)));
  expect(listCodes(mean.findings)).toContain("form-mean-stress");
});

// Saddle z = (x² - y²)/(2r): balance σw/rx = σf/ry holds near the middle only when warp = weft; with radii r and 2r when warp = 2 weft.
test("warp and weft apart: a shallow saddle with radii as the stresses is in balance", () => {
  const saddle = (ratio: number) =>
    placeMesh(
      buildGrid(40, 40, (u, v) => {
        const [x, y] = [2 * u - 1, 2 * v - 1];
        return [x, y, (x * x * ratio - y * y) / 400];
      }),
    );
  const even = run(saddle(0.5), { prestress: { warp: 2, weft: 2 } }).output.residual.normalMax;
  const apart = run(saddle(0.5), { prestress: { warp: 4, weft: 2 }, warp: [1, 0, 0] }).output.residual.normalMax;
  expect(apart).toBeLessThan(1e-3 * even);
});

test("an untold hole is a stop with its place; a word of the job makes it an opening", () => {
  const source = placeMesh(readFixture("hole"));
  const torn = run(source);
  const [f] = torn.findings.filter((x) => x.level === "stop");
  expect([f.code, f.where]).toEqual(["mesh-hole", ["E5", "vertex 40"]]);
  expect(f.text).toContain("(0.000, 0.000, 0.000) m");
  expect(torn.output.edges[4].kind).toBe("free");
  expect(torn.output.anchors.length).toBe(4);
  const meant = run(source, { edges: { E5: { kind: "free" } } });
  expect(meant.findings.filter((x) => x.level === "stop")).toEqual([]);
});

test("many holes: the first told one by one, the rest counted", () => {
  const parts = buildGrid(40, 40, (u, v) => [20 * u, 20 * v, u * v]);
  const faces = Array.from({ length: 3200 }, (_, f) => f).filter(
    (f) => !(f % 2 === 0 && f % 80 > 4 && f % 80 < 74 && (f / 2) % 7 === 3 && Math.floor(f / 80) % 5 === 2),
  );
  const faceVertex = Uint32Array.from(faces.flatMap((f) => [...parts.faceVertex.subarray(3 * f, 3 * f + 3)]));
  const faceStart = Uint32Array.from({ length: faces.length + 1 }, (_, f) => 3 * f);
  const stops = run(placeMesh({ ...parts, faceStart, faceVertex })).findings.filter((f) => f.code === "mesh-hole");
  expect(stops.length).toBe(9);
  expect(8 + Number(stops[8].value)).toBe(3200 - faces.length);
});

test("nothing fixed and nothing named still plans, every default said", () => {
  const { output: form, findings } = run(placeMesh(readFixture("bare")));
  expect(form.edges.map((e) => e.kind)).toEqual(["clamped", "clamped", "clamped", "clamped"]);
  expect(form.anchors.length).toBe(4);
  expect(listCodes(findings, "note")).toEqual(["edge-kind-default"]);
  expect(listCodes(findings, "stop")).toEqual([]);
});

test.each(["flipped", "untidy", "polygons", "soup", "pieces", "pinch", "millimetres"])(
  "%s goes through to a form",
  (name) => {
    const unit = name === "millimetres" ? "mm" : "m";
    const { output: form, checks } = run(placeMesh(readFixture(name), { unit }));
    expect(
      checks.filter((c) => c.text.startsWith("boundary") || c.text.startsWith("results")).every((c) => c.holds),
    ).toBe(true);
    expect(form.area).toBeGreaterThan(30);
  },
);

test.each([
  ["closed", "mesh-closed"],
  ["threeWay", "mesh-three-way-edge"],
])("%s is refused with %s", (name, code) => {
  expect(() => run(placeMesh(readFixture(name)))).toThrow(expect.objectContaining({ code }));
});

test.each([
  ["indexRange", "obj-index-range", "index 82 is out of range"],
  ["notANumber", "obj-number", '"nan"'],
  ["empty", "mesh-empty", "no vertices"],
])("%s is refused on reading with %s", (name, code, words) => {
  expect(() => readFixture(name)).toThrow(expect.objectContaining({ code, message: expect.stringContaining(words) }));
});

test("names the job gives must exist; those that do are listed", () => {
  const source = placeMesh(buildArcSail(8, 5, 12));
  const refuse = (own: Partial<FormJob>, code: string, words: string) =>
    expect(() => run(source, own)).toThrow(expect.objectContaining({ code, message: expect.stringContaining(words) }));
  refuse({ edges: { arc_9: { force: 3 } } }, "edge-unknown", "arc_1, arc_2, arc_3, arc_4");
  refuse({ edges: { arc_1: { kind: "ridge" } } }, "edge-kind", "cable, clamped, free");
  refuse({ anchors: [{ name: "M1" }] }, "anchor-unknown", "A1, A2, A3, A4");
  refuse({ anchors: [{ name: "M1", vertex: 81 }] }, "anchor-unknown", "no vertex 81");
  refuse({ anchors: [{ name: "M1", at: [-5, -5, 9] }] }, "anchor-unknown", "6.000 m away");
  refuse({ anchors: [{ name: "arc_1", vertex: 0 }] }, "anchor-double", "arc_1");
  refuse(
    {
      anchors: [
        { name: "M1", vertex: 0 },
        { name: "M2", vertex: 0 },
      ],
    },
    "anchor-double",
    "M2",
  );
  refuse({ prestress: { warp: 2, weft: 0 } }, "form-prestress", "weft 0");
});

test("anchors: the job's names and order first, by vertex or place; a lone point of the mesh keeps its name", () => {
  const parts = buildArcSail(8, 5, 12);
  parts.points = [
    { name: "corners", vertices: [0, 8] },
    { name: "mast_north", vertices: [80] },
    { name: "corners", vertices: [72] },
  ];
  expect(run(placeMesh(parts)).output.anchors.map((a) => [a.id, a.vertex])).toEqual([
    ["A1", 0],
    ["A2", 8],
    ["mast_north", 80],
    ["A3", 72],
  ]);
  const { output: form } = run(placeMesh(parts), {
    anchors: [
      { name: "west", at: [-5.01, 5.02, 3] },
      { name: "A1", support: [9, 9, 0] },
    ],
  });
  expect(form.anchors.map((a) => [a.id, a.vertex])).toEqual([
    ["west", 72],
    ["A1", 0],
    ["A2", 8],
    ["mast_north", 80],
  ]);
  expect(form.edges.map((e) => e.id)).toEqual(["arc_4", "arc_1", "arc_2", "arc_3"]);
});

test("anchors: the job may name a point of the mesh by its name alone (was refused as unknown)", () => {
  const parts = buildArcSail(8, 5, 12);
  parts.points = [
    { name: "quay", vertices: [0] },
    { name: "pier", vertices: [8] },
    { name: "mast_north", vertices: [80] },
    { name: "shed", vertices: [72] },
  ];
  const { output: form } = run(placeMesh(parts), {
    anchors: [
      { name: "mast_north", support: [6, 6, 4] },
      { name: "pier", at: [-5, 5, 3] },
    ],
  });
  // the job's order first; a name the job moves leaves the mesh's point of that name
  expect(form.anchors.map((a) => [a.id, a.vertex])).toEqual([
    ["mast_north", 80],
    ["pier", 72],
    ["quay", 0],
    ["A1", 8],
  ]);
});

test("lines: given link by link, with gaps, off the mesh, and inside the surface", () => {
  const n = 8;
  const parts = buildArcSail(n, 5, 12);
  const [south, east, north, west] = listSides(n, n);
  parts.lines = [
    ...south.slice(1).map((b, i) => ({ name: "south", vertices: [south[i], b] })),
    { name: "east", vertices: [east[0], east[4], east[8]] },
    { name: null, vertices: north },
    { name: "ridge_line", vertices: Array.from({ length: n + 1 }, (_, i) => 4 * (n + 1) + i) },
    { name: "astray", vertices: [46, 22] },
    { name: "stay", vertices: [0, 81] },
    { name: "missed", vertices: [10, 82] },
  ];
  parts.xyz = Float64Array.from([...parts.xyz, -12, -12, 0, ...parts.xyz.slice(33, 35), 3.3]);
  const { output: form, findings } = run(placeMesh(parts));
  expect(form.edges.map((e) => [e.id, e.kind, e.vertices.length])).toEqual([
    ["south", "cable", 9],
    ["east", "cable", 9],
    ["E1", "cable", 9],
    ["E2", "cable", 9],
    ["ridge_line", "ridge", 9],
  ]);
  expect(edgeOf(form, "E2").vertices).toEqual(west);
  const off = findings.filter((f) => f.code === "mesh-line-off");
  expect(off.map((f) => [f.level, (f.where as string[])[0]])).toEqual([
    ["stop", "astray"],
    ["stop", "missed"],
  ]);
  expect(findings.find((f) => f.code === "mesh-line-elsewhere")?.where).toEqual(["stay", "vertex 81"]);
  // the arcs it ends on are in balance without it: slack, and said
  expect(edgeOf(form, "ridge_line").force).toBe(0);
  expect(findings.filter((f) => f.code === "cable-slack").map((f) => f.where)).toEqual([["ridge_line"]]);
});

test("a straight cable between clamps can carry any force: said, not guessed", () => {
  const parts = buildGrid(8, 8, (u, v) => [10 * u, 6 * v, 4]);
  parts.lines = [{ name: "valley", vertices: Array.from({ length: 9 }, (_, i) => 36 + i) }];
  const { output: form, findings } = run(placeMesh(parts));
  expect(edgeOf(form, "valley")).toMatchObject({ kind: "valley", loop: -1, force: null, forceFrom: "none" });
  expect(findings.filter((f) => f.code === "cable-force-open").map((f) => f.where)).toEqual([["valley"]]);
});

test("one name for all four cables: parted at the corners, numbered, and the job may speak to all at once", () => {
  const parts = buildArcSail(8, 5, 12);
  parts.lines = parts.lines.map((l) => ({ ...l, name: "rim" }));
  const { output: form } = run(placeMesh(parts), { edges: { rim: { force: 20 }, "rim-2": { force: 21 } } });
  expect(form.edges.map((e) => [e.id, e.kind, e.force])).toEqual([
    ["rim-1", "cable", 20],
    ["rim-2", "cable", 21],
    ["rim-3", "cable", 20],
    ["rim-4", "cable", 20],
  ]);
});

test("the job outranks the mesh: a fixed run told to be a cable is let go between its ends", () => {
  const { output: form } = run(placeMesh(readFixture("sound")), { edges: { E1: { kind: "cable", force: 10 } } });
  const [first] = form.edges;
  expect([first.kind, first.force, first.forceFrom]).toEqual(["cable", 10, "job"]);
  expect(first.vertices.map((v) => form.fixed[v])).toEqual([1, 0, 0, 0, 0, 0, 0, 0, 1]);
  expect(form.anchors.map((a) => a.isolated)).toEqual([false, false, false, false]);
});

test("without a word in the mesh a hole of a few sides is still torn, a ring is not", () => {
  const bare = { ...readFixture("hole"), points: [] };
  expect(listCodes(run(placeMesh(bare)).findings, "stop")).toEqual(["mesh-hole"]);
  const tent = buildGrid(
    24,
    10,
    (u, v) => {
      const [r, a] = [10 - 9 * v, 2 * Math.PI * u];
      return [r * Math.cos(a), r * Math.sin(a), 5 * v * v];
    },
    true,
  );
  const { output: form, findings } = run(placeMesh(tent));
  expect(listCodes(findings, "stop")).toEqual([]);
  expect(form.edges.map((e) => e.kind)).toEqual(["clamped", "clamped"]);
});

test("a run of fixed points is a clamped edge between cables; where it ends an anchor stands that takes no adjuster", () => {
  const n = 12;
  const parts = buildArcSail(n, 6, 14);
  const [south] = listSides(n, n);
  parts.lines = [];
  parts.points = [
    { name: "fixed", vertices: south },
    { name: "M", vertices: [(n + 1) ** 2 - 1] },
  ];
  const { output: form, findings } = run(placeMesh(parts));
  expect(form.edges.map((e) => [e.id, e.kind])).toEqual([
    ["E1", "clamped"],
    ["E2", "cable"],
    ["E3", "cable"],
    ["E4", "cable"],
  ]);
  expect(form.anchors.map((a) => [a.id, a.isolated])).toEqual([
    ["A1", false],
    ["A2", false],
    ["M", true],
    ["A3", true],
  ]);
  expect(south.every((v) => form.fixed[v] === 1)).toBe(true);
  expect(findings.find((f) => f.code === "anchor-default")?.where).toEqual(["A3"]);
  expect(findings.find((f) => f.code === "edge-kind-default")?.where).toEqual(["E2", "E3", "E4"]);
});

test("a curved edge that bulges outwards is no cable", () => {
  const disc = buildGrid(16, 16, (u, v) => {
    const [x, y] = [2 * u - 1, 2 * v - 1];
    return [10 * x * (1 + 0.1 * (1 - y * y)), 10 * y, 2];
  });
  expect(run(placeMesh(disc)).output.edges.map((e) => e.kind)).toEqual(["clamped", "clamped", "clamped", "clamped"]);
});

test("a fixed point inside the surface is an anchor", () => {
  const parts = readFixture("sound");
  parts.points.push({ name: "mast", vertices: [40] });
  const { output: form } = run(placeMesh(parts));
  expect(form.anchors[4]).toEqual({ id: "mast", vertex: 40, isolated: true });
  expect(form.fixed[40]).toBe(1);
});

test("renumbered, turned about z, moved, and in millimetres: the same form", () => {
  const base = run(placeMesh(buildArcSail(10, 5, 12))).output;
  fc.assert(
    fc.property(
      fc.integer({ min: 1, max: 1e6 }),
      fc.double({ min: 0, max: 6.28, noNaN: true }),
      fc.boolean(),
      (seed, angle, mm) => {
        const [c, s] = [Math.cos(angle), Math.sin(angle)];
        const k = mm ? 1000 : 1;
        const parts = mapPlaces(renumber(buildArcSail(10, 5, 12), seed), (x, y, z) => [
          k * (c * x - s * y + 3),
          k * (s * x + c * y - 7),
          k * z,
        ]);
        const { output: form, findings } = run(placeMesh(parts, { unit: mm ? "mm" : "m" }));
        expect(form.area).toBeCloseTo(base.area, 9);
        expect(listCodes(findings)).toEqual(["cable-force-balance", "form-flat"]);
        for (const e of base.edges) {
          const other = edgeOf(form, e.id);
          expect(other.force).toBeCloseTo(e.force as number, 7);
          expect(other.vertices.length).toBe(e.vertices.length);
          // same start and end in space, so same direction
          const at = (v: number, o: FoundForm) => [...o.surface.xyz.slice(3 * v, 3 * v + 3)];
          const [x, y, z] = at(e.vertices[0], base);
          expect(at(other.vertices[0], form)).toEqual(
            [c * x - s * y + 3, s * x + c * y - 7, z].map((w) => expect.closeTo(w, 9)),
          );
        }
        const sizes = (o: FoundForm) => o.reactions.map((r) => length(r.force)).sort((a, b) => a - b);
        sizes(form).forEach((r, i) => {
          expect(r).toBeCloseTo(sizes(base)[i], 7);
        });
      },
    ),
    { seed: 3, numRuns: 40 },
  );
});

test("the same input gives the same output, byte for byte, and a stop is heard", () => {
  const source = placeMesh(buildArcSail(10, 5, 12));
  expect(JSON.stringify(run(source))).toBe(JSON.stringify(run(source)));
  expect(() => runForm(source, buildJob(), { cancelled: () => true })).toThrow(
    expect.objectContaining({ code: "cancelled" }),
  );
});

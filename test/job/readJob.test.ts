import { existsSync, readFileSync } from "node:fs";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { leastJob } from "../../src/core/job/leastJob.ts";
import { readJob } from "../../src/core/job/readJob.ts";
import { PlanError } from "../../src/core/problem.ts";
import { catalogues } from "./catalogueFiles.ts";
import { buildFullJob } from "./fullJob.ts";

// biome-ignore lint/suspicious/noExplicitAny: a test bends jobs of any shape
type Loose = any;

function failureOf(value: unknown): PlanError {
  try {
    readJob(value, catalogues);
  } catch (error) {
    if (error instanceof PlanError) return error;
    throw error;
  }
  throw new Error("accepted");
}

function failure(bend: (job: Loose) => void): PlanError {
  const job = structuredClone(buildFullJob());
  bend(job);
  return failureOf(job);
}

const GONE = Symbol("key taken out");

/** Nested deeper than any job. */
let deep: unknown = {};
for (let i = 0; i < 300; i++) deep = { deep };

function setAt(job: Loose, path: string[], value: unknown): void {
  const here = path.slice(0, -1).reduce((at, step) => at[step], job);
  const last = path[path.length - 1];
  if (value === GONE) delete here[last];
  else here[last] = value;
}

const contract = new URL("../../../shared/job.md", import.meta.url);

describe("the full job", () => {
  const read = readJob(buildFullJob(), catalogues);

  it("takes no default and keeps every value in its unit", () => {
    expect(read.findings.filter((f) => f.code === "job-default")).toEqual([]);
    const { job } = read;
    expect(job.prestress).toEqual({ warp: 2.5, weft: 2 });
    expect(job.fabric).toMatchObject({ id: "cloth-7", Ew: 800, rollWidth: 2500, strength: { warp: 88, weft: 79 } });
    expect(new Set(Object.values(job.fabric.status))).toEqual(new Set(["job"]));
    expect(job.edges.north).toMatchObject({ kind: "cable", force: 24.5, cable: { id: "1x19-stainless-16" } });
    expect(job.edges.south.cable).toEqual({
      id: "job",
      EA: 19860,
      minBreakingForce: 184,
      diameter: 16,
      mass: 1.3,
      alpha: 16e-6,
    });
    expect(job.seams.pairs).toEqual(buildFullJob().seams.pairs);
    expect(job.allowances).toEqual(buildFullJob().allowances);
    expect(job.rolls).toEqual(buildFullJob().rolls);
    expect(job.nest).toEqual(buildFullJob().nest);
    expect(job.decompensation).toEqual({ clamped: 0.6, ring: 0.5, cable: null });
    expect(job.compensation).toEqual(buildFullJob().compensation);
    expect(job.proof).toEqual(buildFullJob().proof);
    expect(job.panels).toEqual(buildFullJob().panels);
    expect(job.anchors).toEqual(buildFullJob().anchors);
    expect(job.papers).toEqual({
      date: "2031-04-02",
      drawnBy: "K. L.",
      checkedBy: "M. N.",
      sheet: "A3",
      units: "imperial",
      site: { windMean: 6, windGust: 9, temperatureLeast: 5, setBy: "the engineer" },
    });
    expect(read).toMatchObject({ mesh: { file: "form.obj" }, unit: "m", up: "z", outside: "up" });
  });

  it("resolves the rig: catalogue entries looked up, ends by number or anchor, nothing taken for granted", () => {
    const { rig } = read.job;
    expect(rig.defaults).toEqual([]);
    expect(rig.adjusters).toMatchObject([
      {
        name: "T1",
        anchor: "A1",
        edge: null,
        end: null,
        turnbuckle: { id: "open-body-m20", perTurn: 5, capacity: null },
      },
      {
        name: "T2",
        anchor: null,
        edge: "north",
        end: "A2",
        turnbuckle: { id: "job", shortest: 400, longest: 620, capacity: 60 },
      },
    ]);
    expect(rig).toMatchObject({ stages: [0.1, 0.3, 0.6, 0.85, 1], temperature: 15, limit: 0.5, readingError: 0.05 });
    expect(rig.stays).toEqual(buildFullJob().rig.stays);
    const byNumber = structuredClone(buildFullJob()) as Loose;
    byNumber.rig.adjusters[1].end = 1;
    expect(readJob(byNumber, catalogues).job.rig.adjusters?.[1].end).toBe("last");
  });

  it("says once of each key without effect that it has none", () => {
    const notes = read.findings.filter((f) => f.code === "job-key-without-effect");
    expect(notes.every((f) => f.level === "note")).toBe(true);
    const where = notes.flatMap((f) => f.where);
    expect(where.filter((w) => w === "rig.struts[0].pinned")).toEqual(["rig.struts[0].pinned"]);
    expect(where).not.toContain("survey");
    expect(read.job.survey).toEqual([{ anchor: "A1", at: [0.01, 0, 0] }]);
  });

  it.skipIf(!existsSync(contract))("gives every key the contract names (skipped where the contract is absent)", () => {
    const text = readFileSync(contract, "utf8").split("```")[1];
    const keys = [...text.matchAll(/"([A-Za-z][A-Za-z0-9]*)"/g)].map((m) => m[1]);
    const given = JSON.stringify(buildFullJob());
    const inline = ["vertices", "triangles", "faces", "lines", "points"];
    const missing = [...new Set(keys)].filter((k) => !given.includes(`"${k}"`) && !inline.includes(k));
    // Values of the contract, not keys, that another value of the same key stands for.
    const values = [
      "mm",
      "cm",
      "ft",
      "in",
      "y",
      "down",
      "normals",
      "auto",
      "bands",
      "gores",
      "both",
      "A4",
      "Letter",
      "Tabloid",
      "A",
      "metric",
    ];
    expect(missing.filter((k) => !values.includes(k))).toEqual([]);
    expect(keys.length).toBeGreaterThan(80);
  });
});

describe("the least job", () => {
  const read = readJob(leastJob("form.obj", "Bay 2"), catalogues);

  it("reads, with the defaults of common practice", () => {
    expect(read.job).toMatchObject({
      title: "Bay 2",
      issue: "A",
      meshName: "form.obj",
      prestress: { warp: 2, weft: 2 },
      warp: null,
      settle: false,
      fabric: { id: "pes-pvc-2" },
      seams: { layout: "auto", count: "auto", maxWidth: null, maxLength: null, doubleCloth: false, pairs: [] },
      decompensation: { clamped: null, ring: null, cable: null },
      allowances: { seam: 40, seamOn: "both", pocket: 100, pocketStrip: false, cover: 0, clamp: 0, hem: 40 },
      rolls: null,
      nest: { steps: 200, seconds: null, seed: 1, gap: 10, turn: true, bite: null, pins: [] },
      papers: { date: "", drawnBy: "", checkedBy: "", sheet: "A4", units: "metric", site: null },
    });
    expect(read).toMatchObject({ mesh: { file: "form.obj" }, unit: "m", up: "z", outside: "up" });
  });

  it("lists each default once, with its value and what it stands on", () => {
    const notes = read.findings.filter((f) => f.code === "job-default");
    const where = notes.map((f) => f.where);
    expect(new Set(where).size).toBe(where.length);
    expect(where).toEqual(
      expect.arrayContaining([
        "mesh.unit",
        "mesh.up",
        "mesh.outside",
        "issue",
        "prestress.warp",
        "prestress.weft",
        "warp",
        "settle",
        "fabric",
        "seams.layout",
        "seams.count",
        "compensation",
        "decompensation",
        "allowances.seam",
        "allowances.seamOn",
        "allowances.pocket",
        "allowances.clamp",
        "allowances.hem",
        "rolls",
        "nest.gap",
        "nest.steps",
        "nest.seed",
        "nest.turn",
        "papers.sheet",
        "papers.units",
        "rig.limit",
        "rig.stages",
        "rig.temperature",
        "rig.reading.error",
      ]),
    );
    for (const note of notes) {
      expect(note).toMatchObject({ level: "note", station: "job" });
      expect(["verified", "from memory", "common practice"]).toContain(note.basis);
    }
    expect(notes.find((f) => f.where === "prestress.warp")).toMatchObject({ value: 2 });
    expect(notes.find((f) => f.where === "allowances.seam")?.text).toContain("40 mm");
  });

  it("names the values of the default cloth that are not verified", () => {
    const note = read.findings.find((f) => f.code === "job-fabric-status");
    expect(note?.text).toContain("Ew from memory");
  });

  it("has no note of a key without effect", () => {
    expect(read.findings.filter((f) => f.code === "job-key-without-effect")).toEqual([]);
  });
});

describe("other ways to say it", () => {
  const least = leastJob("form.obj", "Bay 2") as object;

  it("takes the mesh from the job itself", () => {
    const mesh = { vertices: [[0, 0, 0]], faces: [], lines: [], points: [], unit: "mm" };
    const read = readJob({ ...least, mesh }, catalogues);
    expect(read.mesh).toEqual({ inline: mesh });
    expect(read).toMatchObject({ unit: "mm", job: { meshName: "inline" } });
  });

  it("takes pairs for the layout where pairs are all that is given", () => {
    const pairs = [
      [
        { edge: "north", at: 0.5 },
        { edge: "south", at: 0.5 },
      ],
    ];
    expect(readJob({ ...least, seams: { pairs } }, catalogues).job.seams.layout).toBe("pairs");
  });

  it("lets an inline cloth with a catalogue id take the rest from there, each noted with its status", () => {
    const { job, findings } = readJob({ ...least, fabric: { id: "pes-pvc-1050", G: 12 } }, catalogues);
    expect(job.fabric).toMatchObject({ id: "pes-pvc-1050", Ew: 1246, G: 12, status: { G: "job", Ew: "verified" } });
    expect(findings.find((f) => f.where === "fabric.Ew")).toMatchObject({ code: "job-default", basis: "verified" });
  });

  it("gives a cloth of its own no strength from elsewhere, and the id job", () => {
    const { job } = readJob({ ...least, fabric: { Ew: 700, Ef: 600, nuWf: 0.3, G: 20 } }, catalogues);
    expect(job.fabric).toMatchObject({ id: "job", strength: null, rollWidth: 3000 });
  });

  it("fills rolls from the cloth and numbers them", () => {
    const { job, findings } = readJob({ ...least, rolls: [{ length: 9000 }, { batch: "B" }] }, catalogues);
    expect(job.rolls?.map((r) => [r.id, r.width, r.selvedge, r.length, r.batch])).toEqual([
      ["R1", 3000, 25, 9000, null],
      ["R2", 3000, 25, 50000, "B"],
    ]);
    expect(findings.map((f) => f.where)).toContain("rolls[1].length");
  });

  it("measures flaws from either end, and turns them over with a roll that shows its inner face", () => {
    const flaw = { x: 800, y: 100, length: 50, width: 200 };
    const roll = { width: 2500, selvedge: 20, length: 30_000 };
    const flaws = (more: object, from?: string) =>
      readJob(
        { ...(leastJob("form.obj", "Bay") as object), rolls: [{ ...roll, ...more, flaws: [{ ...flaw, from }] }] },
        catalogues,
      ).job.rolls?.[0].flaws;
    expect(flaws({})).toEqual([flaw]);
    expect(flaws({}, "end")).toEqual([{ ...flaw, x: 29_150 }]);
    // 2460 mm usable, 100 from one edge and 200 wide: 2160 from the other.
    expect(flaws({ outerFace: "down" }, "end")).toEqual([{ ...flaw, x: 29_150, y: 2160 }]);
  });

  it("refuses a flaw off its roll, from either end, and a trim that leaves nothing", () => {
    const read = (roll: object) =>
      readJob({ ...(leastJob("form.obj", "Bay") as object), rolls: [{ length: 40_000, ...roll }] }, catalogues);
    const flaw = { y: 0, length: 300, width: 200 };
    for (const from of ["start", "end"]) {
      expect(() => read({ flaws: [{ ...flaw, x: 40_000, from }] })).toThrow(/^rolls\[0\]\.flaws\[0\]: lies from/);
      expect(read({ flaws: [{ ...flaw, x: 39_900, from }] }).job.rolls?.[0].flaws).toHaveLength(1);
    }
    expect(() => read({ start: 40_000 })).toThrow(/^rolls\[0\]\.start: a trim of 40000 mm leaves nothing/);
  });

  it("leaves no cut without a gap unless edges may be shared", () => {
    const gap = (nest: object) => readJob({ ...(leastJob("form.obj", "Bay") as object), nest }, catalogues);
    expect(gap({}).job.nest.gap).toBe(10);
    expect(gap({ gap: 0 }).job.nest.gap).toBe(1);
    expect(gap({ gap: 0 }).findings.find((f) => f.where === "nest.gap")?.text).toMatch(/not shared/);
    expect(gap({ sharedEdges: true }).job.nest.gap).toBe(0);
    expect(gap({ gap: 4, sharedEdges: true }).job.nest.gap).toBe(4);
  });

  it("keeps names that objects carry by nature as plain names", () => {
    const { job } = readJob({ ...least, edges: { constructor: { kind: "free" } } }, catalogues);
    expect(job.edges.constructor).toEqual({ kind: "free" });
    expect(job.edges.toString).toBeUndefined();
    expect(job.panels.valueOf).toBeUndefined();
  });

  it("does not change what it reads", () => {
    const before = buildFullJob();
    readJob(before, catalogues);
    expect(before).toEqual(buildFullJob());
  });
});

describe("what is refused", () => {
  it.each<[string, string, string, string, unknown]>([
    ["job-format", "format", "seamstay-job", "format", "seamstay-facts"],
    ["job-format", "format", "missing", "format", GONE],
    ["job-version", "version", "missing", "version", GONE],
    ["job-version", "version", "1.5", "version", 1.5],
    ["job-version", "version", '"1"', "version", "1"],
    ["job-version-newer", "version", "version 2", "version", 2],
    ["job-key-missing", "title", "text", "title", GONE],
    ["job-key-missing", "mesh", "object", "mesh", GONE],
    ["job-key-missing", "rolls[0].flaws[0].width", "a finite number in mm", "rolls.0.flaws.0.width", GONE],
    ["job-key-unknown", "edges.E1.colour", "the nearest known key is", "edges.E1", { colour: "red" }],
    [
      "job-key-unknown",
      "edges.E1.colour",
      "known here: kind, force, cable, prestretched",
      "edges.E1",
      { colour: "red" },
    ],
    ["job-key-unknown", "prestres", "nearest known key is prestress", "prestres", {}],
    ["job-key-unknown", "allowances.Seam", "nearest known key is seam", "allowances.Seam", 40],
    ["job-key-unknown", "seams.pairs[0][1].edgee", "nearest known key is edge", "seams.pairs.0.1.edgee", "x"],
    ["job-key-unknown", "fabric.warpStiffness", "known here: id, Ew", "fabric.warpStiffness", 1],
    [
      "job-key-unknown",
      "rig.adjusters[1].turnbuckle.turn",
      "nearest known key is perTurn",
      "rig.adjusters.1.turnbuckle.turn",
      1,
    ],
    ["job-key-unknown", 'edges["north.a"].knd', "nearest known key is kind", "edges", { "north.a": { knd: "free" } }],
    ["job-value-type", "prestress.warp", '"2" is not a finite number in kN/m', "prestress.warp", "2"],
    ["job-value-type", "prestress.warp", "NaN is not a finite number", "prestress.warp", Number.NaN],
    ["job-value-type", "prestress.weft", "Infinity is not a finite number", "prestress.weft", Number.POSITIVE_INFINITY],
    ["job-value-type", "anchors[0].support[2]", "null is not a finite number", "anchors.0.support.2", null],
    ["job-value-type", "settle", "true or false", "settle", "yes"],
    ["job-value-type", "seams.count", '"many"', "seams.count", "many"],
    ["job-value-type", "seams.count", "2.5", "seams.count", 2.5],
    ["job-value-type", "fabric", "text or an object", "fabric", 12],
    ["job-value-type", "nest.pins[0].rotation", "90 is not 0 or 180", "nest.pins.0.rotation", 90],
    ["job-value-type", "nest.seed", "whole number", "nest.seed", 1.5],
    ["job-value-type", "rolls", "a list", "rolls", {}],
    ["job-value-range", "prestress.warp", "0 kN/m is not above, 0 kN/m", "prestress.warp", 0],
    ["job-value-range", "prestress.warp", "most allowed, 200 kN/m", "prestress.warp", 2000],
    ["job-value-range", "edges.north.force", "null for the force that balances", "edges.north.force", -3],
    ["job-value-range", "seams.pairs[0][0].at", "1.2 is above the most allowed, 1", "seams.pairs.0.0.at", 1.2],
    ["job-value-range", "seams.count", "0 is below the least allowed, 1", "seams.count", 0],
    ["job-value-range", "compensation.default.warp", "1.2 % is 0.012", "compensation.default.warp", 1.2],
    ["job-value-range", "allowances.clamp", "set-back", "allowances.clamp", -10],
    ["job-value-range", "title", "empty", "title", ""],
    ["job-value-range", "rolls", "0 entries", "rolls", []],
    ["job-value-choice", "mesh.unit", '"km" is none of "m", "mm", "cm", "ft", "in"', "mesh.unit", "km"],
    ["job-value-choice", "edges.north.kind", '"rope" is none of', "edges.north.kind", "rope"],
    ["job-value-text", "title", "line break", "title", "a\nb"],
    ["job-value-text", "title", "broken letter", "title", "a\ud800"],
    ["job-name", 'edges["a\\tb"]', "control character", "edges.a\tb", {}],
    ["job-fabric-unknown", "fabric", "pes-pvc-2", "fabric", "canvas"],
    ["job-fabric-incomplete", "fabric.Ef", "Ef missing", "fabric.Ef", GONE],
    ["job-fabric-constants", "fabric.nuWf", "below 1", "fabric.nuWf", 1.3],
    ["job-cable-unknown", "edges.north.cable", "1x19-stainless-16", "edges.north.cable", "string"],
    ["job-turnbuckle-unknown", "rig.adjusters[0].turnbuckle", "open-body-m20", "rig.adjusters.0.turnbuckle", "M20"],
    ["job-turnbuckle", "rig.adjusters[1].turnbuckle", "pin to pin", "rig.adjusters.1.turnbuckle.longest", 300],
    ["job-adjuster-place", "rig.adjusters[0]", "one end of an edge", "rig.adjusters.0.edge", "north"],
    ["job-adjuster-place", "rig.adjusters[0]", "or hauls a ring", "rig.adjusters.0.ring", "ring"],
    ["job-adjuster-place", "rig.adjusters[0]", "its far pin", "rig.adjusters.0.support", [0, 0, 9]],
    [
      "job-adjuster-place",
      "rig.adjusters[1]",
      "one jack hauls one ring",
      "rig.adjusters",
      [
        { name: "J1", ring: "top" },
        { name: "J2", ring: "top" },
      ],
    ],
    ["job-stages", "rig.stages[2]", "0.2 does not rise", "rig.stages.2", 0.2],
    ["job-mesh", "mesh", "both a file and an inline mesh", "mesh.vertices", []],
    ["job-mesh", "mesh", "not complete", "mesh", { vertices: [] }],
    ["job-name-twice", "anchors[1]", '"A1"', "anchors.1.name", "A1"],
    ["job-name-twice", "rolls[1]", '"R7"', "rolls.1", { id: "R7" }],
    ["job-anchor-place", "anchors[0]", "both vertex and at", "anchors.0.at", [0, 0, 0]],
    ["job-warp", "warp", "no direction", "warp", [0, 0, 0]],
    ["job-seams-pairs", "seams.pairs", "missing", "seams.pairs", GONE],
    ["job-seams-pairs", "seams.pairs", '"bands"', "seams.layout", "bands"],
    ["job-roll-width", "rolls[0]", "selvedges of 50 mm a side", "rolls.0", { width: 100, selvedge: 50 }],
    [
      "job-roll-width",
      "fabric",
      "selvedges of 500 mm a side",
      "fabric",
      { id: "pes-pvc-1", rollWidth: 900, selvedge: 500 },
    ],
    ["job-depth", "papers", "deeper than 200 levels", "papers.site", deep],
  ])("%s at %s, saying %s", (code, where, words, at, value) => {
    const error = failure((job) => setAt(job, at.split("."), value));
    expect([error.code, error.where]).toEqual([code, where]);
    expect(error.message).toContain(words);
  });

  it.each([[null], [[]], ["job"], [12], [undefined]])("a job that is %j", (value) => {
    expect(failureOf(value).code).toBe("job-format");
  });

  it("names everything that is wrong in one go", () => {
    const error = failure((j) => {
      j.colour = "red";
      j.prestress.warp = "2";
      j.nest.gap = -1;
    });
    expect(error.where).toEqual(expect.arrayContaining(["colour", "prestress.warp", "nest.gap"]));
    expect(error.message.split("\n")).toHaveLength(3);
  });

  it.each(["", "edges", "papers.site", "compensation", "rolls.0"])(
    "__proto__ hidden in %j, without touching any prototype",
    (at) => {
      const job: Loose = structuredClone(buildFullJob());
      let here = job;
      for (const step of at.split(".").filter((s) => s !== "")) here = here[step];
      Object.defineProperty(here, "__proto__", { value: { kind: "free" }, enumerable: true });
      const error = failureOf(JSON.parse(JSON.stringify(job)));
      expect(error.code).toBe("job-key-unknown");
      expect(error.where).toContain("__proto__");
      expect(({} as Loose).kind).toBeUndefined();
    },
  );

  it("nothing but PlanError comes out, whatever stands at whichever place (seed 11)", () => {
    const paths: PropertyKey[][] = [];
    const collect = (value: unknown, path: PropertyKey[]): void => {
      if (path.length > 0) paths.push(path);
      if (value !== null && typeof value === "object") {
        for (const [k, v] of Object.entries(value)) collect(v, [...path, Array.isArray(value) ? Number(k) : k]);
      }
    };
    collect(buildFullJob(), []);
    const anything = fc.oneof(fc.constant(undefined), fc.constant(Number.NaN), fc.jsonValue({ maxDepth: 2 }));
    fc.assert(
      fc.property(fc.constantFrom(...paths), anything, (path, value) => {
        const job: Loose = structuredClone(buildFullJob());
        let here = job;
        for (const step of path.slice(0, -1)) here = here[step];
        here[path[path.length - 1]] = value;
        try {
          readJob(job, catalogues);
        } catch (error) {
          expect(error).toBeInstanceOf(PlanError);
          expect((error as PlanError).message.length).toBeGreaterThan(20);
        }
      }),
      { seed: 11, numRuns: 1500 },
    );
  });
});

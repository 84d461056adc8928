// A job with nothing decided, for the form tests; and how to look at what came back.

import type { MeshParts } from "../../src/core/form/readObj.ts";
import type { Finding } from "../../src/core/problem.ts";
import type { Job, MeshSource } from "../../src/core/records/job.ts";

/** The least job; what is given replaces its defaults. */
export function buildJob(own: Partial<Job> = {}): Job {
  return {
    title: "Test roof",
    issue: "A",
    meshName: "test.obj",
    prestress: { warp: 2, weft: 2 },
    warp: null,
    settle: false,
    fabric: {
      id: "job",
      Ew: 1000,
      Ef: 800,
      nuWf: 0.3,
      G: 30,
      alpha: 0,
      rollWidth: 2500,
      selvedge: 20,
      rollLength: 50000,
      mass: 1,
      strength: null,
      status: {},
    },
    edges: {},
    anchors: [],
    seams: { layout: "auto", from: null, to: null, count: "auto", pairs: [], maxWidth: null, maxLength: null },
    panels: {},
    compensation: {},
    decompensation: { clamped: null, ring: null, cable: null },
    allowances: { seam: 60, seamOn: "both", pocket: 120, pocketStrip: false, clamp: 50, hem: 40 },
    rolls: null,
    nest: { steps: 10, seconds: null, seed: 1, gap: 10, turn: true, bite: null, pins: [] },
    papers: { date: "", drawnBy: "", checkedBy: "", sheet: "A4", units: "metric" },
    ...own,
  };
}

/** Mesh parts with unit, axis and outer face said. */
export function placeMesh(parts: MeshParts, own: Partial<MeshSource> = {}): MeshSource {
  return { ...parts, unit: "m", up: "z", outside: "up", ...own };
}

/** Codes of the findings of a level, sorted. */
export function listCodes(findings: readonly Finding[], level?: Finding["level"]): string[] {
  return findings
    .filter((f) => level === undefined || f.level === level)
    .map((f) => f.code)
    .sort();
}

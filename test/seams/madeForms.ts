// Found forms made for the tests of the seams station: a plane with named edges, a saddle, a ring, a tent with belts, and OBJ
// meshes read with a few lines of their own. Only what the station reads is filled in.
import type { FormEdge, FoundForm } from "../../src/core/records/foundForm.ts";
import type { Job, SeamDecision } from "../../src/core/records/job.ts";
import { buildAdjacency, findBoundaryLoops } from "../../src/core/surface/adjacency.ts";
import { measureArea } from "../../src/core/surface/measures.ts";
import type { Surface, Vec3 } from "../../src/core/surface/surface.ts";

/** A named polyline on the mesh. */
export interface NamedLine {
  id: string;
  kind: FormEdge["kind"];
  vertices: number[];
}

export function makeSurface(places: readonly Vec3[], faces: readonly number[][]): Surface {
  return { xyz: Float64Array.from(places.flat()), tri: Uint32Array.from(faces.flat()) };
}

function turnAt(surface: Surface, a: number, v: number, b: number): number {
  const x = (i: number) => [0, 1, 2].map((k) => surface.xyz[3 * i + k]);
  const p = x(v).map((c, k) => c - x(a)[k]);
  const q = x(b).map((c, k) => c - x(v)[k]);
  const dot = p[0] * q[0] + p[1] * q[1] + p[2] * q[2];
  return Math.acos(Math.min(1, Math.max(-1, dot / (Math.hypot(...p) * Math.hypot(...q)))));
}

/** Form with named lines; boundary runs without a name become clamped edges, parted where they turn by more than 30°. */
export function makeForm(surface: Surface, lines: readonly NamedLine[] = []): FoundForm {
  const adjacency = buildAdjacency(surface);
  const length = (loop: number[]) =>
    loop.reduce((sum, v, i) => {
      const w = loop[(i + 1) % loop.length];
      return sum + Math.hypot(...[0, 1, 2].map((k) => surface.xyz[3 * w + k] - surface.xyz[3 * v + k]));
    }, 0);
  const loops = findBoundaryLoops(surface, adjacency).sort((a, b) => length(b) - length(a));
  const key = (a: number, b: number) => (a < b ? `${a} ${b}` : `${b} ${a}`);
  const nameOf = new Map<string, NamedLine>();
  for (const line of lines)
    for (let i = 1; i < line.vertices.length; i++) nameOf.set(key(line.vertices[i - 1], line.vertices[i]), line);
  const edges: FormEdge[] = [];
  const corners = new Set<number>();
  let number = 0;
  const add = (id: string, kind: FormEdge["kind"], vertices: number[], loop: number) =>
    edges.push({ id, kind, vertices, loop, force: null, forceFrom: "none", reaction: null });
  loops.forEach((loop, l) => {
    const n = loop.length;
    const own = loop.map((v, i) => nameOf.get(key(v, loop[(i + 1) % n])));
    const breaks: number[] = [];
    for (let i = 0; i < n; i++) {
      const turn = turnAt(surface, loop[(i + n - 1) % n], loop[i], loop[(i + 1) % n]);
      const changes = own[i] !== own[(i + n - 1) % n];
      if (changes || (!own[i] && turn > Math.PI / 6)) breaks.push(i);
      if (changes || turn > Math.PI / 6) corners.add(loop[i]);
    }
    const starts = breaks.length > 0 ? breaks : [0];
    starts.forEach((from, k) => {
      const to = k + 1 < starts.length ? starts[k + 1] : starts[0] + n;
      const vertices: number[] = [];
      for (let i = from; i <= to; i++) vertices.push(loop[i % n]);
      const line = own[from];
      add(line?.id ?? `E${++number}`, line?.kind ?? "clamped", vertices, l);
    });
  });
  for (const line of lines)
    if (["ridge", "valley", "belt"].includes(line.kind)) add(line.id, line.kind, line.vertices, -1);
  return {
    surface,
    fixed: new Uint8Array(surface.xyz.length / 3),
    loops,
    stress: { warp: 2, weft: 2 },
    edges,
    anchors: [...corners].map((vertex, i) => ({ id: `A${i + 1}`, vertex, isolated: true })),
    residual: { max: 0, rms: 0, normalMax: 0 },
    area: measureArea(surface),
    reactions: [],
  };
}

/** A grid over [0,1]² moved by a map; faces may be wound the other way by the caller. */
export function makeGrid(nx: number, ny: number, place: (u: number, v: number) => Vec3): Surface {
  const places: Vec3[] = [];
  for (let j = 0; j <= ny; j++) for (let i = 0; i <= nx; i++) places.push(place(i / nx, j / ny));
  const faces: number[][] = [];
  const at = (i: number, j: number) => j * (nx + 1) + i;
  for (let j = 0; j < ny; j++)
    for (let i = 0; i < nx; i++) {
      const even = (i + j) % 2 === 0;
      if (even) faces.push([at(i, j), at(i + 1, j), at(i + 1, j + 1)], [at(i, j), at(i + 1, j + 1), at(i, j + 1)]);
      else faces.push([at(i, j), at(i + 1, j), at(i, j + 1)], [at(i + 1, j), at(i + 1, j + 1), at(i, j + 1)]);
    }
  return makeSurface(places, faces);
}

/** Rows of a grid from ring (row 0) to rim (last row), closed round; outer face outwards and up. */
export function makeRing(n: number, rows: number, place: (turn: number, row: number) => Vec3): Surface {
  const places: Vec3[] = [];
  for (let j = 0; j <= rows; j++) for (let i = 0; i < n; i++) places.push(place((2 * Math.PI * i) / n, j / rows));
  const faces: number[][] = [];
  const at = (i: number, j: number) => j * n + (i % n);
  for (let j = 0; j < rows; j++)
    for (let i = 0; i < n; i++)
      faces.push([at(i, j), at(i, j + 1), at(i + 1, j + 1)], [at(i, j), at(i + 1, j + 1), at(i + 1, j)]);
  return makeSurface(places, faces);
}

/** A tent from a ring of radius 1 at height h to a rim of radius r at 0, with radial belts over it. */
export function makeTent(n: number, rows: number, r: number, h: number, belts: number): FoundForm {
  const surface = makeRing(n, rows, (turn, row) => {
    const at = 1 + (r - 1) * row;
    return [at * Math.cos(turn), at * Math.sin(turn), h * (1 - row) ** 1.5];
  });
  const lines = Array.from({ length: belts }, (_, b): NamedLine => {
    const i = Math.round((b * n) / belts);
    return { id: `belt ${b + 1}`, kind: "belt", vertices: Array.from({ length: rows + 1 }, (_, j) => j * n + i) };
  });
  return makeForm(surface, lines);
}

/** Reads v, triangle f and named l lines of an OBJ text; cables on the rim are cables, others belts. */
export function readForm(text: string): FoundForm {
  const places: Vec3[] = [];
  const faces: number[][] = [];
  const lines: NamedLine[] = [];
  let name = "";
  for (const row of text.split("\n")) {
    const word = row.trim().split(/\s+/);
    if (word[0] === "v") places.push([Number(word[1]), Number(word[2]), Number(word[3])]);
    if (word[0] === "f") faces.push(word.slice(1).map((w) => Number.parseInt(w, 10) - 1));
    if (word[0] === "g") name = word[1];
    if (word[0] === "l")
      lines.push({
        id: name,
        kind: name.includes("belt") ? "belt" : "cable",
        vertices: word.slice(1).map((w) => Number.parseInt(w, 10) - 1),
      });
  }
  return makeForm(makeSurface(places, faces), lines);
}

/** A job of defaults with these seam decisions. */
export function makeJob(seams: Partial<SeamDecision> = {}): Job {
  return {
    title: "test",
    issue: "A",
    meshName: "inline",
    prestress: { warp: 2, weft: 2 },
    warp: null,
    settle: false,
    fabric: {
      id: "job",
      Ew: 600,
      Ef: 500,
      nuWf: 0.25,
      G: 20,
      alpha: 0,
      rollWidth: 2500,
      selvedge: 25,
      rollLength: 50000,
      mass: 1,
      strength: null,
      status: {},
    },
    edges: {},
    anchors: [],
    seams: {
      layout: "auto",
      from: null,
      to: null,
      count: "auto",
      pairs: [],
      maxWidth: null,
      maxLength: null,
      doubleCloth: false,
      ...seams,
    },
    panels: {},
    compensation: {},
    decompensation: { clamped: null, ring: null, cable: null },
    proof: { mean: 0.05, rms: 0.25, moved: null, force: 0.1, slack: 0.02 },
    allowances: { seam: 40, seamOn: "both", pocket: 100, pocketStrip: false, cover: 0, clamp: 0, hem: 40 },
    rolls: null,
    nest: { steps: 1, seconds: null, seed: 1, gap: 10, turn: true, bite: null, pins: [] },
    rig: {
      adjusters: null,
      struts: [],
      stays: [],
      stages: [1],
      temperature: 20,
      frameAlpha: 0,
      limit: 0.5,
      readingError: 0.03,
      selfWeight: false,
      defaults: [],
      defaultCable: {
        id: "job",
        EA: null,
        minBreakingForce: null,
        diameter: null,
        mass: null,
        alpha: null,
        status: {},
      },
      defaultTurnbuckle: {} as never,
    },
    survey: [],
    clothCut: false,
    papers: { date: "", drawnBy: "", checkedBy: "", sheet: "A4", units: "metric", site: null },
  };
}

/** The same surface with its vertices numbered the other way round and its triangles in another order. */
export function renumber(form: FoundForm): FoundForm {
  const nV = form.surface.xyz.length / 3;
  const to = (v: number) => nV - 1 - v;
  const xyz = new Float64Array(3 * nV);
  for (let v = 0; v < nV; v++) xyz.set(form.surface.xyz.subarray(3 * v, 3 * v + 3), 3 * to(v));
  const nT = form.surface.tri.length / 3;
  const tri = new Uint32Array(3 * nT);
  for (let t = 0; t < nT; t++)
    for (let k = 0; k < 3; k++) tri[3 * t + k] = to(form.surface.tri[3 * (nT - 1 - t) + ((k + 1) % 3)]);
  return {
    ...form,
    surface: { xyz, tri },
    loops: form.loops.map((loop) => loop.map(to)),
    edges: form.edges.map((edge) => ({ ...edge, vertices: edge.vertices.map(to) })),
    anchors: form.anchors.map((anchor) => ({ ...anchor, vertex: to(anchor.vertex) })),
  };
}

// Facts to draw papers from, made without any station: three panels of a small saddle with hollow edges, two seams, two rolls,
// a patch, findings of all levels. The flat is a plain unrolling by arc lengths: fit for drawing, not for cutting.
import type { Finding } from "../../../src/core/problem.ts";
import type { Facts, FactsPanel, FactsSeam, FactsSide, Vec2 } from "../../../src/core/records/facts.ts";
import type { PanelMark } from "../../../src/core/records/flatPanel.ts";
import type { NestedRoll } from "../../../src/core/records/roll.ts";
import type { Vec3 } from "../../../src/core/surface/surface.ts";
import { withControl } from "./withControl.ts";

const NU = 24;
const NV = 3;
const EW = 0.012;
const EF = 0.02;

export interface SampleOptions {
  stop?: boolean;
  names?: Record<string, string>;
  date?: string;
  sheet?: Facts["job"]["sheet"];
  units?: Facts["job"]["units"];
}

/** Names that break careless writers: beyond Latin, markup, formula, 60 characters, line break, path, same name but for case. */
export const HOSTILE: Record<string, string> = {
  P1: 'Ø Ł β → " < &',
  P2: "=1+1",
  P3: "A panel name of sixty characters that nobody would give ABCD",
  S1: "-S1\nsecond line",
  S2: "@S2, with comma",
  E1: "North\u0007edge",
  E2: "%%c^Jedge",
  R1: "../roll/one",
  R2: "..\\ROLL\\ONE",
  title:
    'Boat shed\r\n"bay 2" <Ø Ł β → &> and a title so long that it does not fit any title block of any sheet that is not A0',
};

/** More of them: right to left, 300 letters, nothing at all, two that differ in case, letters no face has. */
export const STRANGE: Record<string, string> = {
  P1: "לוח אחד",
  P2: "panel ".repeat(50),
  P3: "",
  S1: "seam",
  S2: "SEAM",
  E1: "قماش \u202egnp.exe",
  R1: "roll",
  R2: "ROLL",
  T1: "張力",
  T2: "t".repeat(300),
  title: "\u0000\u202e\ufeff",
};

const point = (u: number, t: number): Vec3 => {
  const x = u * (4 - 0.4 * (1 - t * t));
  const y = t * (2.7 - 0.5 * (1 - u * u));
  return [x, y, 3 + 0.06 * (x * x - y * y)];
};

const gap3 = (a: Vec3, b: Vec3) => Math.hypot(b[0] - a[0], b[1] - a[1], b[2] - a[2]);
const length2 = (run: Vec2[]) =>
  run.slice(1).reduce((s, p, i) => s + Math.hypot(p[0] - run[i]![0], p[1] - run[i]![1]), 0);
const area2 = (ring: Vec2[]) =>
  ring.reduce(
    (s, p, i) => s + (p[0] * ring[(i + 1) % ring.length]![1] - ring[(i + 1) % ring.length]![0] * p[1]) / 2,
    0,
  );

function grid(k: number): { erected: Vec3[]; flat: Vec2[]; triangles: Vec3[] } {
  const t = (j: number) => -1 + (2 * (k + j / NV)) / 3;
  const at = (i: number, j: number) => point(-1 + (2 * i) / NU, t(j));
  const erected: Vec3[] = [];
  const flat: Vec2[] = [];
  // Along the warp each row keeps its own length, so that both sides of a seam are nearly equal.
  const along = Array.from({ length: NV + 1 }, (_, j) => {
    const sums = [0];
    for (let i = 1; i <= NU; i++) sums.push(sums[i - 1]! + gap3(at(i - 1, j), at(i, j)));
    return sums.map((s) => s - sums[NU / 2]!);
  });
  for (let i = 0; i <= NU; i++) {
    const widths = [0];
    for (let j = 1; j <= NV; j++) widths.push(widths[j - 1]! + gap3(at(i, j - 1), at(i, j)));
    for (let j = 0; j <= NV; j++) {
      erected.push(at(i, j));
      // The middle panel stays straight, the outer ones turn their hollow side outward.
      const base = k === 0 ? widths[NV]! : k === 2 ? 0 : widths[NV]! / 2;
      flat.push([(1000 * along[j]![i]!) / (1 + EW), (1000 * (widths[j]! - base)) / (1 + EF)]);
    }
  }
  const triangles: Vec3[] = [];
  for (let i = 0; i < NU; i++) {
    for (let j = 0; j < NV; j++) {
      const a = i * (NV + 1) + j;
      triangles.push([a, a + NV + 1, a + NV + 2], [a, a + NV + 2, a + 1]);
    }
  }
  return { erected, flat, triangles };
}

function offset(run: Vec2[], d: number): Vec2[] {
  return run.map((p, i) => {
    const a = run[Math.max(i - 1, 0)]!;
    const b = run[Math.min(i + 1, run.length - 1)]!;
    const l = Math.hypot(b[0] - a[0], b[1] - a[1]);
    return [p[0] + (d * (b[1] - a[1])) / l, p[1] - (d * (b[0] - a[0])) / l];
  });
}

/** Where the lines a–b and c–d meet. */
function meet(a: Vec2, b: Vec2, c: Vec2, d: Vec2): Vec2 {
  const u = [b[0] - a[0], b[1] - a[1]] as const;
  const v = [d[0] - c[0], d[1] - c[1]] as const;
  const t = ((c[0] - a[0]) * v[1] - (c[1] - a[1]) * v[0]) / (u[0] * v[1] - u[1] * v[0]);
  return [a[0] + t * u[0], a[1] + t * u[1]];
}

function samplePanel(k: number, name: (id: string) => string): FactsPanel {
  const { erected, flat, triangles } = grid(k);
  const row = (j: number) => Array.from({ length: NU + 1 }, (_, i) => i * (NV + 1) + j);
  const column = (i: number) => Array.from({ length: NV + 1 }, (_, j) => i * (NV + 1) + j);
  const plan: { kind: FactsSide["kind"]; id: string; vertices: number[]; allowance: number }[] = [
    k === 0
      ? { kind: "cable", id: "E1", vertices: row(0), allowance: 95 }
      : { kind: "seam", id: `S${k}`, vertices: row(0), allowance: 25 },
    { kind: "clamped", id: "E2", vertices: column(NU), allowance: -60 },
    k === 2
      ? { kind: "cable", id: "E3", vertices: row(NV).reverse(), allowance: 95 }
      : { kind: "seam", id: `S${k + 1}`, vertices: row(NV).reverse(), allowance: 25 },
    { kind: "free", id: "E4", vertices: column(0).reverse(), allowance: 0 },
  ];
  const net: Vec2[] = [];
  const offsets: Vec2[][] = [];
  const marks: PanelMark[] = [];
  const sides = plan.map((s): FactsSide => {
    const run = s.vertices.map((v) => flat[v]!);
    const netFrom = net.length;
    net.push(...run.slice(0, -1));
    offsets.push(offset(run, s.allowance));
    if (s.allowance > 0) marks.push({ kind: s.kind === "seam" ? "seam-line" : "fold-line", points: run });
    // A mark on the cut line itself: writers must leave it out.
    if (s.allowance === 0) marks.push({ kind: "fold-line", points: run.slice(1, -1) });
    const middle = offset(run, -60)[Math.floor(run.length / 2)]!;
    const along = middle[0] === run[0]![0] || s.vertices.length === NV + 1 ? 90 : 0;
    marks.push({ kind: "side-name", at: middle, text: name(s.id), height: 12, angle: along });
    if (s.kind === "seam") {
      const inner = offset(run, -40);
      const outer = offset(run, s.allowance);
      // Not evenly spaced and not symmetric: a panel joined the wrong way round does not meet its marks.
      for (const [n, i] of [3, 8, 14, 21].entries()) {
        marks.push({
          kind: "match",
          points: [outer[i]!, inner[i]!],
          at: offset(run, -55)[i]!,
          text: `${s.id}.${n + 1}`,
          height: 7,
          angle: 0,
        });
      }
    }
    const erectedRun = s.vertices.map((v) => erected[v]!);
    return {
      kind: s.kind,
      id: name(s.id),
      vertices: s.vertices,
      netFrom,
      netTo: 0,
      lengthErected: erectedRun.slice(1).reduce((sum, p, i) => sum + gap3(erectedRun[i]!, p), 0),
      lengthFlat: length2(run),
      allowance: s.allowance,
    };
  });
  sides.forEach((s, i) => {
    s.netTo = sides[(i + 1) % sides.length]!.netFrom;
  });
  const cut = offsets.flatMap((run, i) => {
    const before = offsets.at(i - 1)!;
    return [meet(before.at(-2)!, before.at(-1)!, run[0]!, run[1]!), ...run.slice(1, -1)];
  });
  const centre: Vec2 = [flat[12 * (NV + 1)]![0], (flat[12 * (NV + 1) + 1]![1] + flat[12 * (NV + 1) + 2]![1]) / 2];
  const arrow = [
    [-140, -30],
    [140, -30],
    [116, -20],
    [116, -40],
    [140, -30],
  ].map(([x, y]): Vec2 => [centre[0] + x!, centre[1] + y!]);
  marks.push({ kind: "warp", points: arrow, at: [centre[0], centre[1] + 8], text: "warp", height: 28, angle: 0 });
  marks.push({ kind: "name", at: [centre[0], centre[1] + 72], text: name(`P${k + 1}`), height: 56, angle: 0 });
  marks.push({ kind: "face", at: [centre[0], centre[1] - 76], text: "outer face up", height: 32, angle: 0 });
  marks.push({ kind: "station", at: [centre[0] - 1500, centre[1] + 200] });
  const xs = cut.map((p) => p[0]);
  const ys = cut.map((p) => p[1]);
  return {
    id: name(`P${k + 1}`),
    fabric: "pvc-2",
    batch: "B07",
    erected,
    flat,
    triangles,
    axis: { from: column(0), to: column(NU), turn: 0 },
    target: { warp: 2, weft: 2 },
    compensation: { warp: EW, weft: EF },
    permanent: { warp: 0.008, weft: 0.015 },
    decompensated: [{ side: 1, fade: 0.5 }],
    stress: {
      warp: { min: 1.7, mean: 2, max: 2.3, rmsError: 0.08 },
      weft: { min: 1.6, mean: 1.98, max: 2.4, rmsError: 0.11 },
      compressedShare: 0,
      warpDeviation: 2.1,
    },
    net,
    cut,
    sides,
    marks,
    area: { net: area2(net) / 1e6, cut: area2(cut) / 1e6 },
    size: { length: Math.max(...xs) - Math.min(...xs), width: Math.max(...ys) - Math.min(...ys) },
  };
}

function sampleSeam(k: number, panels: FactsPanel[], name: (id: string) => string): FactsSeam {
  const low = panels[k]!;
  const high = panels[k + 1]!;
  const a = Array.from({ length: NU + 1 }, (_, i) => i * (NV + 1) + NV);
  const b = Array.from({ length: NU + 1 }, (_, i) => i * (NV + 1));
  const path = a.map((v) => low.erected[v]!);
  return {
    id: name(`S${k + 1}`),
    path,
    length: path.slice(1).reduce((s, p, i) => s + gap3(path[i]!, p), 0),
    weld: name(`S${k + 1}`),
    cable: null,
    upper: k === 0 ? high.id : low.id,
    sides: [
      { panel: low.id, vertices: a },
      { panel: high.id, vertices: b },
    ],
  };
}

const FINDINGS: Finding[] = [
  {
    code: "seam-length",
    level: "stop",
    station: "panels",
    where: ["S1"],
    value: 3.2,
    limit: 0.5,
    text: "The two sides of seam S1 differ by 3.2 mm in the flat; 0.5 mm is the limit.",
    remedy: "Let the panels be solved tied together, or move the seam where the surface is less curved.",
    basis: "common practice",
  },
  {
    code: "pocket-fold",
    level: "caution",
    station: "panels",
    where: "P1",
    value: 0.7,
    limit: 0.5,
    text: "The pocket of 95 mm folded along E1 (radius 27 m) is 0.7 % too short at its free edge; 0.5 % is the limit.",
    remedy: "Slit the flap every 400 mm or use a separate pocket strip.",
    basis: "own argument",
  },
  {
    code: "default-prestress",
    level: "note",
    station: "job",
    where: "prestress",
    value: "2.0 kN/m",
    limit: null,
    text: "The job gives no prestress; 2.0 kN/m both ways is taken.",
    remedy: "Give prestress.warp and prestress.weft.",
    basis: "common practice",
  },
];

/** The sample; every call gives equal facts. */
export function sampleFacts(options: SampleOptions = {}): Facts {
  const names = options.names ?? {};
  const name = (id: string) => names[id] ?? id;
  const panels = [0, 1, 2].map((k) => withControl(samplePanel(k, name)));
  const patch: Vec2[] = [
    [0, 0],
    [420, 0],
    [420, 300],
    [200, 420],
    [0, 300],
  ];
  const minOf = (k: number, axis: 0 | 1) => Math.min(...panels[k]!.cut.map((p) => p[axis]));
  const maxOf = (k: number, axis: 0 | 1) => Math.max(...panels[k]!.cut.map((p) => p[axis]));
  const roll = (id: string, placements: NestedRoll["placements"], used: number): NestedRoll => ({
    id: name(id),
    fabric: "pvc-2",
    batch: "B07",
    width: 2500,
    usableWidth: 2460,
    length: 50000,
    used,
    gap: 10,
    flaws: [{ x: 30, y: 2200, length: 300, width: 150 }],
    placements,
    utilisation: 0.62,
    lowerBound: used * 0.9,
  });
  const length0 = maxOf(0, 0) - minOf(0, 0);
  const length2nd = maxOf(2, 0) - minOf(2, 0);
  const rolls = [
    roll(
      "R1",
      [
        { panel: panels[2]!.id, rotation: 180, x: length0 + 20 + maxOf(2, 0), y: 10 + maxOf(2, 1) },
        { panel: panels[0]!.id, rotation: 0, x: 10 - minOf(0, 0), y: 10 - minOf(0, 1) },
      ],
      length0 + length2nd + 30,
    ),
    roll(
      "R2",
      [
        { panel: panels[1]!.id, rotation: 0, x: 500 - minOf(1, 0), y: 10 - minOf(1, 1) },
        { panel: "C1", rotation: 0, x: 20, y: 10 },
      ],
      520 + maxOf(1, 0) - minOf(1, 0),
    ),
  ];
  const rim = (t: number) => Array.from({ length: NU + 1 }, (_, i) => point(-1 + (2 * i) / NU, t));
  const south = rim(-1);
  const north = rim(1);
  return {
    format: "seamstay-facts",
    version: 1,
    job: {
      title: names.title ?? "Boat shed, bay 2",
      issue: "A",
      revision: "9f3c2a71",
      date: options.date ?? "2026-03-02",
      drawnBy: "",
      checkedBy: "",
      sheet: options.sheet ?? "A4",
      units: options.units ?? "metric",
      mesh: "form.obj",
    },
    fabrics: {
      "pvc-2": {
        id: "pvc-2",
        Ew: 600,
        Ef: 500,
        nuWf: 0.25,
        G: 20,
        alpha: 6e-5,
        rollWidth: 2500,
        selvedge: 20,
        rollLength: 50000,
        mass: 1.05,
        strength: { warp: 80, weft: 75 },
        status: {},
      },
    },
    form: {
      vertices: [...south, ...north],
      triangles: south.slice(1).flatMap((_, i): Vec3[] => [
        [i, i + 1, i + NU + 2],
        [i, i + NU + 2, i + NU + 1],
      ]),
      stress: { warp: 2, weft: 2 },
      edges: [
        {
          id: name("E1"),
          kind: "cable",
          vertices: south.map((_, i) => i),
          force: 31.5,
          reaction: null,
          forceFrom: "balance",
          length: 8.4,
        },
        {
          id: name("E2"),
          kind: "clamped",
          vertices: [NU, 2 * NU + 1],
          force: null,
          reaction: { resultant: [-20, 0, 3], greatest: 2.4 },
          forceFrom: "none",
          length: 5.6,
        },
        {
          id: "E3",
          kind: "cable",
          vertices: north.map((_, i) => 2 * NU + 1 - i),
          force: 31.5,
          reaction: null,
          forceFrom: "balance",
          length: 8.4,
        },
        { id: "E4", kind: "free", vertices: [NU + 1, 0], force: null, reaction: null, forceFrom: "none", length: 5.6 },
      ],
      anchors: [
        { id: "A1", vertex: 0, isolated: true },
        { id: "A2", vertex: NU + 1, isolated: true },
      ],
      residual: { max: 0.012, rms: 0.004, normalMax: 0.003 },
      area: 38.2,
      reactions: [
        { anchor: "A1", force: [-22.1, -18.4, 5.2] },
        { anchor: "A2", force: [-22.1, 18.4, 5.2] },
      ],
    },
    layouts: [
      {
        region: "region 1",
        panels: panels.map((p) => p.id),
        widths: [1.8, 1.7, 1.8],
        layout: "bands",
        from: "E4",
        to: "E2",
        count: 3,
        why: "fewest strips that fit the roll",
      },
    ],
    seams: [0, 1].map((k) => sampleSeam(k, panels, name)),
    panels,
    pieces: [{ id: "C1", kind: "patch", for: name("P1"), fabric: "pvc-2", batch: "B07", cut: patch }],
    rolls,
    checks: [
      { station: "form", text: "Balance: greatest out-of-balance force", value: 0.012, limit: 0.05, holds: true },
      {
        station: "panels",
        text: "Seam S1: both sides equally long in the flat, mm",
        value: 3.2,
        limit: 0.5,
        holds: false,
      },
    ],
    findings: FINDINGS.filter((f) => options.stop !== false || f.level !== "stop"),
  };
}

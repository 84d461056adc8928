// Marks on two panels that share a seam, and where marks may stand.
import { describe, expect, it } from "vitest";
import { clipLine } from "../../../src/core/panels/marks/clipLine.ts";
import { chooseMatchPoints } from "../../../src/core/panels/marks/matchMarks.ts";
import { outlinePanel } from "../../../src/core/panels/outline/outlinePanel.ts";
import type { PanelPlace } from "../../../src/core/panels/outline/panelPlace.ts";
import type { CutPanel, PanelMark } from "../../../src/core/records/flatPanel.ts";
import type { Allowances } from "../../../src/core/records/job.ts";
import { ringDistance, ringHolds } from "../../../src/core/surface/ring.ts";
import { panelFrom } from "../panelFrom.ts";

const ALLOW: Allowances = { seam: 40, seamOn: "both", pocket: 60, pocketStrip: false, cover: 0, clamp: 50, hem: 30 };
const N = 90;

/** Two panels either side of a wavy seam of 9 m; seam vertices 0…N on the surface, uneven steps. */
function twoPanels(seamOn: "both" | "one" = "both"): { lower: CutPanel; upper: CutPanel } {
  const seamPoints = Array.from({ length: N + 1 }, (_, k): [number, number] => {
    const x = (9000 * k) / N + (k > 0 && k < N ? 18 * Math.sin(7 * k) : 0);
    return [x, 1000 + 60 * Math.sin(x / 1500)];
  });
  const low = panelFrom(
    [
      { kind: "cable", id: "E1", points: [[0, 0]] },
      { kind: "clamped", id: "E2", points: [[9000, 0]] },
      { kind: "seam", id: "S3", points: seamPoints.slice(1).reverse() },
      { kind: "free", id: "E4", points: [seamPoints[0]] },
    ],
    "P1",
  );
  const up = panelFrom(
    [
      { kind: "seam", id: "S3", points: seamPoints.slice(0, N) },
      { kind: "clamped", id: "E2", points: [seamPoints[N]] },
      { kind: "cable", id: "E3", points: [[9000, 2200]] },
      { kind: "free", id: "E4", points: [[0, 2200]] },
    ],
    "P2",
  );
  const onSeam = (panel: typeof low) => {
    for (let v = 0; v < panel.surfaceVertex.length; v++) {
      const k = seamPoints.findIndex((p) => p[0] === panel.flat[2 * v] && p[1] === panel.flat[2 * v + 1]);
      panel.surfaceVertex[v] = k >= 0 ? k : 1000 + v + (panel.id === "P2" ? 500 : 0);
    }
  };
  onSeam(low);
  onSeam(up);
  const place: PanelPlace = {
    seams: [{ id: "S3", vertices: seamPoints.map((_, k) => k), strips: ["P1", "P2"], upper: "P2" }],
    anchors: [{ id: "A7", vertex: 1000, cutBack: 200 }],
  };
  const allow = { ...ALLOW, seamOn };
  return { lower: outlinePanel(low, place, allow).output, upper: outlinePanel(up, place, allow).output };
}

const matches = (p: CutPanel) => p.marks.filter((m) => m.kind === "match");
const foot = (m: PanelMark) => (m.points as [number, number][])[0];

describe("match marks", () => {
  it("stand at the same points of the seam on both panels, with the same number and ticks", () => {
    const { lower, upper } = twoPanels();
    const [a, b] = [matches(lower), matches(upper)];
    expect(a.length).toBe(b.length);
    expect(a.length).toBeGreaterThan(12);
    a.forEach((m, i) => {
      expect(m.text).toBe(b[i].text);
      expect(Math.hypot(foot(m)[0] - foot(b[i])[0], foot(m)[1] - foot(b[i])[1])).toBeLessThan(1e-6);
    });
  });

  it("reach from the seam line into the allowance, square to it, ticks of 1, 2, 3", () => {
    const { lower } = twoPanels();
    const ticks = new Map<string, number>();
    let name = "";
    for (const m of matches(lower)) {
      if (m.text) name = m.text;
      ticks.set(name, (ticks.get(name) ?? 0) + 1);
      const [p, q] = m.points as [number, number][];
      // A mark stands at a point of the surface; the faired line passes it within 0.2 mm.
      expect(ringDistance(lower.net, ...p)).toBeLessThan(0.2);
      expect(Math.abs(Math.hypot(q[0] - p[0], q[1] - p[1]) - 20)).toBeLessThan(0.25);
      expect(q[1]).toBeGreaterThan(p[1]);
    }
    expect([...ticks.keys()].slice(0, 4)).toEqual(["S3.1", "S3.2", "S3.3", "S3.4"]);
    expect([...ticks.values()].slice(0, 4)).toEqual([1, 2, 3, 1]);
  });

  it("turn inward on the upper panel of a one-sided lap, whose edge is the seam line", () => {
    const { lower, upper } = twoPanels("one");
    expect(upper.marks.some((m) => m.kind === "seam-line")).toBe(false);
    expect(lower.marks.some((m) => m.kind === "seam-line")).toBe(true);
    const [p, q] = matches(upper)[0].points as [number, number][];
    expect(Math.hypot(q[0] - p[0], q[1] - p[1])).toBeCloseTo(10, 1);
    expect(q[1]).toBeGreaterThan(p[1]);
  });

  it("fit no seam that is shifted or turned round: own brute force over shifts of 5 mm", () => {
    for (const total of [1.3, 3.2, 9, 24]) {
      const arc = Array.from({ length: 400 }, (_, k) => (total * k) / 399);
      const at = chooseMatchPoints(arc).map((i) => arc[i]);
      expect(at.length).toBeGreaterThan(0);
      const fits = (other: number[], ticks: (k: number) => number) =>
        other.every((s, k) => at.some((t, j) => Math.abs(s - t) < 0.004 && j % 3 === ticks(k)));
      for (let shift = 0.005; shift < total; shift += 0.005) {
        const moved = at.map((s) => s + shift).filter((s) => s < total);
        if (moved.length === at.length) expect(fits(moved, (k) => k % 3)).toBe(false);
      }
      const turned = at.map((s) => total - s);
      expect(
        fits(turned, (k) => k % 3),
        `turned round, ${total} m`,
      ).toBe(false);
    }
  });

  it("come about every metre", () => {
    const arc = Array.from({ length: 2001 }, (_, k) => k / 100);
    const at = chooseMatchPoints(arc).map((i) => arc[i]);
    for (let k = 1; k < at.length; k++) {
      expect(at[k] - at[k - 1]).toBeGreaterThan(0.7);
      expect(at[k] - at[k - 1]).toBeLessThan(1.3);
    }
    expect(20 - at[at.length - 1]).toBeLessThan(1.3);
  });
});

describe("other marks", () => {
  it("lie on the cloth", () => {
    const { lower, upper } = twoPanels();
    for (const p of [lower, upper])
      for (const m of p.marks) {
        for (const q of m.points ?? [])
          expect(ringHolds(p.cut, ...q) || ringDistance(p.cut, ...q) < 0.1, `${p.id} ${m.kind} at ${q}`).toBe(true);
        if (m.at) expect(ringHolds(p.cut, ...m.at), `${p.id} ${m.kind} ${m.text}`).toBe(true);
      }
  });

  it("name the panel, its face, its neighbours, its edges and its corners", () => {
    const { lower } = twoPanels();
    const texts = lower.marks.map((m) => `${m.kind}: ${m.text ?? ""}`);
    for (const want of [
      "name: P1",
      "face: outer face up",
      "warp: warp",
      "side-name: S3 under P2",
      "side-name: E1",
      "corner: A7",
    ])
      expect(texts).toContain(want);
    const warp = lower.marks.find((m) => m.kind === "warp")?.points as [number, number][];
    expect(warp[0][1]).toBe(warp[1][1]);
    expect(warp[1][0]).toBeGreaterThan(warp[0][0]);
  });

  it("draw fold lines where cloth is folded and none along a set-back", () => {
    const { lower } = twoPanels();
    const folds = lower.marks.filter((m) => m.kind === "fold-line");
    expect(folds.length).toBe(2);
    for (const m of folds) for (const p of m.points ?? []) expect(ringDistance(lower.net, ...p)).toBeLessThan(1e-6);
    const clear = folds.flatMap((m) => m.points ?? []).map((p) => Math.hypot(p[0], p[1]));
    expect(Math.min(...clear)).toBeGreaterThan(199.9);
  });

  it("clips a line at a ring, by hand", () => {
    const square = Float64Array.from([0, 0, 10, 0, 10, 10, 0, 10]);
    expect(
      clipLine(
        [
          [-5, 5],
          [5, 5],
          [5, 20],
        ],
        square,
      ),
    ).toEqual([
      [
        [0, 5],
        [5, 5],
        [5, 10],
      ],
    ]);
  });

  it("come out the same every time", () => {
    expect(JSON.stringify(twoPanels().lower.marks)).toBe(JSON.stringify(twoPanels().lower.marks));
  });
});

// Net outlines: fewer points, both sides of a seam alike and as long as each other, nothing moved by more than 0.2 mm.
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { buildNetOutline, fairLines, keepSeamPoints } from "../../../src/core/panels/outline/netOutline.ts";
import type { FlatPanel, Ring } from "../../../src/core/records/flatPanel.ts";
import { isSimpleRing, ringArea, ringDistance } from "../../../src/core/surface/ring.ts";
import { panelFrom } from "../panelFrom.ts";

/** Two panels that share a seam of n pieces: bowed by their own amounts, with teeth of this height, mm; ends at y = 0. */
function pair(n: number, length: number, bows: [number, number], teeth: number): [FlatPanel, FlatPanel] {
  const line = (bow: number, sign: number) =>
    Array.from({ length: n + 1 }, (_, k): [number, number] => {
      const s = k / n;
      const tooth = k > 0 && k < n ? (k % 2 ? teeth / 2 : -teeth / 2) : 0;
      return [s * length, 4 * s * (1 - s) * bow + sign * tooth];
    });
  const lower = line(bows[0], 1);
  const upper = line(bows[1], 1);
  const deep = 1200;
  const a = panelFrom(
    [
      { kind: "clamped", id: "E1", points: [[0, -deep]] },
      { kind: "clamped", id: "E2", points: [[length, -deep]] },
      { kind: "seam", id: "S1", points: lower.slice(1).reverse() },
      { kind: "clamped", id: "E3", points: [lower[0]] },
    ],
    "P1",
  );
  const b = panelFrom(
    [
      { kind: "seam", id: "S1", points: upper.slice(0, -1) },
      { kind: "clamped", id: "E2", points: [upper[n]] },
      { kind: "clamped", id: "E4", points: [[length, deep]] },
      { kind: "clamped", id: "E3", points: [[0, deep]] },
    ],
    "P2",
  );
  // Surface vertex k is the seam's point k; the others get numbers of their own.
  const own = (panel: FlatPanel, side: number, turned: boolean) => {
    panel.surfaceVertex = panel.surfaceVertex.map((v) => 1000 + 1000 * side + v);
    panel.sides[side].vertices.forEach((v, k) => {
      panel.surfaceVertex[v] = turned ? n - k : k;
    });
  };
  own(a, 2, true);
  own(b, 0, false);
  return [a, b];
}

const place = (panels: FlatPanel[]) => ({ seams: [], anchors: [], keep: keepSeamPoints(panels) });
const runLength = (net: Ring, from: number, to: number) => {
  const n = net.length / 2;
  let sum = 0;
  for (let i = from; i !== to; i = (i + 1) % n) {
    const j = (i + 1) % n;
    sum += Math.hypot(net[2 * j] - net[2 * i], net[2 * j + 1] - net[2 * i + 1]);
  }
  return sum;
};

describe("net outline", () => {
  it("loses teeth of 0.15 mm and most points of a straight seam, on both sides the same", () => {
    const panels = pair(200, 9000, [0, 0], 0.15);
    for (const p of panels) expect(buildNetOutline(p, place(panels)).net.length / 2).toBe(4);
  });

  it("keeps a step that is more than 0.2 mm", () => {
    const points = Array.from({ length: 21 }, (_, k): [number, number] => [100 * k, k < 10 ? 0 : 1]);
    expect(fairLines([points], 0.2, 1)).toContain(9);
    expect(fairLines([points], 0.2, 1)).toContain(10);
    expect(fairLines([points], 2, 1)).toEqual([0, 20]);
  });

  it("stays within 0.2 mm of every point and 0.1 mm of every seam's length; sides of a seam keep the same points", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 2, max: 300 }),
        fc.double({ min: 400, max: 25_000, noNaN: true }),
        fc.tuple(fc.double({ min: -0.04, max: 0.04, noNaN: true }), fc.double({ min: -0.04, max: 0.04, noNaN: true })),
        fc.double({ min: 0, max: 1.5, noNaN: true }),
        (n, length, share, teeth) => {
          const panels = pair(n, length, [share[0] * length, share[1] * length], teeth);
          const out = panels.map((p) => buildNetOutline(p, place(panels)));
          panels.forEach((p, i) => {
            const { net, runs } = out[i];
            const loop = p.sides.flatMap((s) => s.vertices.slice(0, -1));
            const ring = Float64Array.from(loop.flatMap((v) => [p.flat[2 * v], p.flat[2 * v + 1]]));
            fc.pre(isSimpleRing(ring));
            expect(isSimpleRing(net)).toBe(true);
            for (const v of loop)
              expect(ringDistance(net, p.flat[2 * v], p.flat[2 * v + 1])).toBeLessThanOrEqual(0.2 + 1e-9);
            expect(Math.abs(ringArea(net) / ringArea(ring) - 1)).toBeLessThan(1e-3);
            p.sides.forEach((s, k) => {
              const lost = s.lengthFlat - runLength(net, runs[k].netFrom, runs[k].netTo);
              expect(lost).toBeGreaterThan(-1e-6);
              expect(lost).toBeLessThan((s.kind === "seam" ? 0.1 : 0.5) + 1e-6);
            });
          });
          const [a, b] = [out[0].runs[2], out[1].runs[0]];
          const count = (o: (typeof out)[0], r: typeof a) => {
            const m = o.net.length / 2;
            return (r.netTo - r.netFrom + m) % m;
          };
          expect(count(out[0], a)).toBe(count(out[1], b));
        },
      ),
      { seed: 91, numRuns: 120 },
    );
  });

  it("fairs a panel alone where its neighbours are not given, and a closed single side", () => {
    const [a] = pair(200, 9000, [0, 0], 0.15);
    expect(buildNetOutline(a, { seams: [], anchors: [] }).net.length / 2).toBe(4);
    const ring = panelFrom([
      {
        kind: "free",
        id: "E1",
        points: Array.from({ length: 720 }, (_, k): [number, number] => [
          3000 * Math.cos((Math.PI * k) / 360),
          3000 * Math.sin((Math.PI * k) / 360),
        ]),
      },
    ]);
    const { net, runs } = buildNetOutline(ring, { seams: [], anchors: [] });
    expect(runs).toEqual([{ netFrom: 0, netTo: 0 }]);
    expect(net.length / 2).toBeLessThan(500);
    expect(
      ring.sides[0].lengthFlat - runLength(Float64Array.from([...net, net[0], net[1]]), 0, net.length / 2),
    ).toBeLessThan(0.5);
  });
});

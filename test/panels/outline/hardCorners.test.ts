// Corners and sides that are hard to cut, each a fixture of its own: outlines stay simple, every flap folds back inside its own
// outline, booleans neither crash nor leave crumbs. Shapes worked by hand; folding is checked by mirroring points of the flap.
import { describe, expect, test } from "vitest";
import { outlinePanel } from "../../../src/core/panels/outline/outlinePanel.ts";
import type { PanelPlace } from "../../../src/core/panels/outline/panelPlace.ts";
import type { CutPanel, FlatPanel } from "../../../src/core/records/flatPanel.ts";
import type { Allowances } from "../../../src/core/records/job.ts";
import { isSimpleRing, ringArea, ringDistance, ringHolds } from "../../../src/core/surface/ring.ts";
import { type Part, panelFrom } from "../panelFrom.ts";

const ALLOW: Allowances = { seam: 40, seamOn: "both", pocket: 100, pocketStrip: false, cover: 0, clamp: 50, hem: 40 };
const NOWHERE: PanelPlace = { seams: [], anchors: [] };

/** Greatest way, mm, by which a flap folded over its straight net line sticks out of the cut outline. */
function measureStickOut(panel: CutPanel): number {
  let worst = 0;
  const { net, cut } = panel;
  const n = net.length / 2;
  panel.outlines.forEach(({ netFrom, netTo, allowance }, k) => {
    const { kind } = panel.sides[k];
    if (allowance <= 0 || (kind !== "cable" && kind !== "free")) return;
    if ((netTo - netFrom + n) % n !== 1) return;
    const [ax, ay, bx, by] = [net[2 * netFrom], net[2 * netFrom + 1], net[2 * netTo], net[2 * netTo + 1]];
    const l = Math.hypot(bx - ax, by - ay);
    const [ux, uy] = [(bx - ax) / l, (by - ay) / l];
    for (let s = -1; s <= 2; s += 0.005)
      for (let d = 0.02; d < 1; d += 0.07) {
        const p = [ax + s * l * ux + d * allowance * uy, ay + s * l * uy - d * allowance * ux];
        // Only what belongs to this flap: nearer to its line than to any other part of the net.
        if (!ringHolds(cut, p[0], p[1]) || ringHolds(net, p[0], p[1])) continue;
        if (Math.abs(ringDistance(net, p[0], p[1]) - d * allowance) > 0.01) continue;
        const q = [p[0] - 2 * d * allowance * uy, p[1] + 2 * d * allowance * ux];
        if (!ringHolds(cut, q[0], q[1])) worst = Math.max(worst, ringDistance(cut, q[0], q[1]));
      }
  });
  return worst;
}

function cutSound(panel: FlatPanel, place = NOWHERE, allow = ALLOW): CutPanel {
  const { output, findings } = outlinePanel(panel, place, allow);
  expect(findings.filter((f) => f.level === "stop")).toEqual([]);
  expect(isSimpleRing(output.cut)).toBe(true);
  expect(isSimpleRing(output.net)).toBe(true);
  expect(ringArea(output.cut)).toBeGreaterThan(0.3 * ringArea(output.net));
  for (const mark of output.marks)
    for (const [x, y] of mark.points ?? [])
      expect(ringHolds(output.cut, x, y) || ringDistance(output.cut, x, y) < 0.2, `${mark.kind} at ${x}, ${y}`).toBe(
        true,
      );
  return output;
}

/** A wedge: one side along x, the other at this angle; the third a seam. */
const wedge = (degrees: number, a: Part["kind"], b: Part["kind"], length = 6000): FlatPanel => {
  const t = (degrees * Math.PI) / 180;
  return panelFrom([
    { kind: a, id: "E1", points: [[0, 0]] },
    { kind: "seam", id: "S1", points: [[length, 0]] },
    { kind: b, id: "E2", points: [[length * Math.cos(t), length * Math.sin(t)]] },
  ]);
};

describe("very acute corners", () => {
  test.each([4, 8, 15, 30, 60, 89, 91, 120])("two pockets at %i degrees fold back inside", (degrees) => {
    const cut = cutSound(wedge(degrees, "cable", "cable"));
    expect(measureStickOut(cut)).toBeLessThan(0.2);
  });

  test.each([4, 8, 15, 30, 60])("a pocket beside a seam at %i degrees", (degrees) => {
    const cut = cutSound(wedge(degrees, "cable", "seam"));
    expect(measureStickOut(cut)).toBeLessThan(0.2);
  });

  test.each([4, 8, 15, 30, 60])("a pocket beside a clamped side set back, at %i degrees", (degrees) => {
    const cut = cutSound(wedge(degrees, "cable", "clamped"));
    expect(measureStickOut(cut)).toBeLessThan(0.2);
  });

  test.each([6, 20, 45])("an anchor's cut-back of 300 mm in a corner of %i degrees", (degrees) => {
    const place: PanelPlace = { seams: [], anchors: [{ id: "A1", vertex: 0, cutBack: 300 }] };
    const cut = cutSound(wedge(degrees, "cable", "cable"), place);
    expect(ringDistance(cut.cut, 0, 0)).toBeGreaterThan(299.8);
    expect(measureStickOut(cut)).toBeLessThan(0.2);
  });
});

describe("short sides", () => {
  test.each([5, 30, 80, 150, 250])("a pocket %i mm long between two pockets", (short) => {
    const cut = cutSound(
      panelFrom([
        { kind: "cable", id: "E1", points: [[0, 0]] },
        { kind: "cable", id: "E2", points: [[5000, 0]] },
        { kind: "cable", id: "E3", points: [[5000, short]] },
        { kind: "seam", id: "S1", points: [[0, 2500]] },
      ]),
    );
    expect(measureStickOut(cut)).toBeLessThan(0.2);
  });

  test.each([1, 10, 60])("a seam end %i mm long between a pocket and a clamped side", (short) => {
    cutSound(
      panelFrom([
        { kind: "cable", id: "E1", points: [[0, 0]] },
        { kind: "seam", id: "S1", points: [[4000, 0]] },
        { kind: "clamped", id: "E2", points: [[4000, short]] },
        { kind: "seam", id: "S2", points: [[0, 1800]] },
      ]),
    );
  });
});

describe("deep curvature", () => {
  const arc = (R: number, turn: number, hollow: boolean): [number, number][] =>
    Array.from({ length: 61 }, (_, k) => {
      const a = (k / 60 - 0.5) * turn;
      const drop = R * (1 - Math.cos(a));
      return [R * Math.sin(a), hollow ? -drop : drop];
    });
  test.each([
    [250, 2.6, true],
    [250, 2.6, false],
    [600, 3, true],
    [600, 3, false],
    [1500, 2.8, true],
    [1500, 2.8, false],
    [4000, 1.2, true],
  ])("a pocket on R %i mm over %f rad, hollow %s", (R, turn, hollow) => {
    const line = arc(R, turn, hollow);
    const last = line[60];
    const high = hollow ? 2500 : last[1] + 2500;
    const cut = cutSound(
      panelFrom([
        { kind: "cable", id: "E1", points: line.slice(0, 60) },
        { kind: "seam", id: "S1", points: [last] },
        { kind: "seam", id: "S2", points: [[last[0], high]] },
        { kind: "seam", id: "S3", points: [[line[0][0], high]] },
      ]),
    );
    // Slits do not meet: a third of the flap's width apart at the least.
    const feet = cut.marks.filter((m) => m.kind === "slit").map((m) => (m.points ?? [])[0]);
    for (let i = 1; i < feet.length; i++)
      expect(Math.hypot(feet[i][0] - feet[i - 1][0], feet[i][1] - feet[i - 1][1])).toBeGreaterThan(30);
  });
});

// Slits in flaps on curves, against circles: a flap of width p along R is 2p/R out of length at its rim (own argument: rim R − p
// comes to lie on R + p), so over a turn of θ it gapes by 2pθ in all.
import { describe, expect, it } from "vitest";
import { chooseSlits, listFoldFindings, sideCurvature } from "../../../src/core/panels/marks/slitFlaps.ts";
import { outlinePanel } from "../../../src/core/panels/outline/outlinePanel.ts";
import type { PanelPlace } from "../../../src/core/panels/outline/panelPlace.ts";
import { measureBends } from "../../../src/core/panels/outline/sideLine.ts";
import type { CutPanel } from "../../../src/core/records/flatPanel.ts";
import type { Allowances } from "../../../src/core/records/job.ts";
import { ringDistance, ringHolds } from "../../../src/core/surface/ring.ts";
import { panelFrom } from "../panelFrom.ts";

const ALLOW: Allowances = { seam: 40, seamOn: "both", pocket: 60, pocketStrip: false, cover: 0, clamp: 50, hem: 30 };
const NOWHERE: PanelPlace = { seams: [], anchors: [] };
const N = 80;

/** A panel whose lower side is hollow (or bulges) on a circle of this radius over this turn, mm and radians. */
function onCircle(radius: number, turn: number, hollow = true) {
  const arc = Array.from({ length: N + 1 }, (_, k): [number, number] => {
    const a = (k / N - 0.5) * turn;
    const drop = radius * (1 - Math.cos(a));
    return [radius * Math.sin(a), hollow ? -drop : drop];
  });
  const [first, last] = [arc[0], arc[N]];
  return panelFrom([
    { kind: "cable", id: "E1", points: arc.slice(0, N) },
    { kind: "seam", id: "S1", points: [last] },
    { kind: "seam", id: "S2", points: [[last[0], 2500]] },
    { kind: "seam", id: "S3", points: [[first[0], 2500]] },
  ]);
}
const outlined = (panel: ReturnType<typeof onCircle>, allow = ALLOW): CutPanel =>
  outlinePanel(panel, NOWHERE, allow).output;
const slitsOf = (panel: CutPanel) => panel.marks.filter((m) => m.kind === "slit");

describe("slits", () => {
  it.each([
    [20_000, 0.2, true],
    [6000, 0.7, true],
    [6000, 0.5, false],
  ])(
    "R %d mm over %d rad: one for every 10 mm the rim gapes, evenly, square to the fold, clear of it",
    (R, turn, hollow) => {
      const panel = onCircle(R, turn, hollow);
      expect(sideCurvature(panel, panel.sides[0], 240) * R).toBeCloseTo(1, 3);
      const slits = chooseSlits(panel, panel.sides[0], 60);
      expect(slits.length).toBe(Math.max(1, Math.round((2 * 60 * turn) / 10)));
      const length = R * turn;
      slits.forEach(({ s, bend }, k) => {
        expect(Math.abs(s - ((k + 0.5) * length) / slits.length)).toBeLessThan(0.01 * length);
        expect(bend * R).toBeCloseTo(hollow ? -1 : 1, 3);
      });
      const cut = outlined(panel);
      const drawn = slitsOf(cut);
      expect(drawn.length).toBe(slits.length);
      for (const m of drawn) {
        const [foot, rim] = m.points as [number, number][];
        // Inside of 2q/R = 0.5 % the flap folds flat; a fifth of it stays whole in any case.
        expect(ringDistance(cut.net, ...foot)).toBeCloseTo(Math.max(0.0025 * R, 12), 0);
        expect(ringDistance(cut.cut, ...rim)).toBeLessThan(0.1);
        expect(ringHolds(cut.cut, ...foot)).toBe(true);
      }
    },
  );

  it("are said in one note an edge, with 2p/R", () => {
    const R = 6000;
    const [note, ...rest] = listFoldFindings([outlined(onCircle(R, 0.7)), { ...outlined(onCircle(R, 0.7)), id: "P2" }]);
    expect(rest).toEqual([]);
    expect([note.code, note.level, note.where]).toEqual(["pocket-curve", "note", ["E1", "P1", "P2"]]);
    expect(note.value as number).toBeCloseTo((100 * 2 * 60) / R, 2);
    expect(note.text).toContain("16 slits");
  });

  it("are not cut where they would stand too close: the hem is as narrow as its bend asks, a pocket a strip", () => {
    const R = 550;
    const free = onCircle(R, 2);
    free.sides[0].kind = "free";
    const hem = outlinePanel(free, NOWHERE, { ...ALLOW, hem: 60 });
    const [width] = hem.output.outlines.map((o) => o.allowance);
    // 2p/R = 20 % at p = 55 mm; tried in steps of a fifth.
    expect(width).toBeCloseTo(0.8 * 60, 9);
    expect(hem.findings.map((f) => [f.code, f.level])).toContainEqual(["flap-tight", "note"]);
    expect(hem.findings.find((f) => f.code === "flap-tight")?.text).toMatch(/radius down to 0\.55 m.*22 %/);
    const pocket = outlinePanel(onCircle(R, 2), NOWHERE, ALLOW);
    expect(pocket.output.outlines[0].allowance).toBe(0);
    expect(slitsOf(pocket.output)).toEqual([]);
    expect(outlined(onCircle(650, 2)).outlines[0].allowance).toBe(60);
  });

  it("are none where the flap folds flat, on straight sides, or where the pocket is a separate strip", () => {
    const gentle = outlined(onCircle(40_000, 0.1));
    expect(slitsOf(gentle)).toEqual([]);
    expect(listFoldFindings([gentle])).toEqual([]);
    const strip = outlined(onCircle(6000, 0.7), { ...ALLOW, pocketStrip: true });
    expect(slitsOf(strip)).toEqual([]);
    expect(listFoldFindings([strip])).toEqual([]);
  });

  it("stand where the bend is: half the side straight, half on a circle", () => {
    const R = 5000;
    const line: [number, number][] = [];
    for (let k = 0; k < 40; k++) line.push([-4000 + 100 * k, 0]);
    for (let k = 0; k <= 40; k++) line.push([R * Math.sin(0.02 * k), -R * (1 - Math.cos(0.02 * k))]);
    const end = line[line.length - 1];
    const panel = panelFrom([
      { kind: "free", id: "E1", points: line.slice(0, -1) },
      { kind: "seam", id: "S1", points: [end] },
      { kind: "seam", id: "S2", points: [[end[0], 3000]] },
      { kind: "seam", id: "S3", points: [[-4000, 3000]] },
    ]);
    const slits = chooseSlits(panel, panel.sides[0], 60);
    expect(slits.length).toBeGreaterThan(7);
    for (const { s } of slits) expect(s).toBeGreaterThan(4000 - 240);
  });
});

it("bends keep their sign and reach their ends; a line too short for its reach has none", () => {
  const arc = Array.from({ length: 21 }, (_, k): [number, number] => [
    3000 * Math.cos(0.03 * k),
    3000 * Math.sin(0.03 * k),
  ]);
  for (const b of measureBends(arc, 200)) expect(b * 3000).toBeCloseTo(1, 6);
  for (const b of measureBends([...arc].reverse(), 200)) expect(b * 3000).toBeCloseTo(-1, 6);
  expect([...measureBends(arc.slice(0, 3), 1000)]).toEqual([0, 0, 0]);
});

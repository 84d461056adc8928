// What is written on cloth can be read: no text over another, none off the cloth, the name near the middle. Own judge: texts as
// polygons of 0.64 of their height a letter, compared with the boolean library that is not used by the project.
import { describe, expect, it } from "vitest";
import { outlinePanel } from "../../../src/core/panels/outline/outlinePanel.ts";
import type { PanelPlace } from "../../../src/core/panels/outline/panelPlace.ts";
import type { CutPanel, PanelMark } from "../../../src/core/records/flatPanel.ts";
import type { Allowances } from "../../../src/core/records/job.ts";
import { ringBox, ringHolds } from "../../../src/core/surface/ring.ts";
import { type Part, panelFrom } from "../panelFrom.ts";

const ALLOW: Allowances = { seam: 40, seamOn: "both", pocket: 60, pocketStrip: false, cover: 0, clamp: 0, hem: 30 };
const other = await import("clipper2-ts");

/** Corners of a text, in hundredths of a millimetre. */
function corners(mark: PanelMark): { x: number; y: number }[] {
  const [x, y] = mark.at as [number, number];
  const h = mark.height ?? 10;
  const half = 0.32 * (mark.text ?? "").length * h;
  const a = ((mark.angle ?? 0) * Math.PI) / 180;
  return [
    [-half, -h / 2],
    [half, -h / 2],
    [half, h / 2],
    [-half, h / 2],
  ].map(([u, v]) => ({
    x: Math.round(100 * (x + u * Math.cos(a) - v * Math.sin(a))),
    y: Math.round(100 * (y + u * Math.sin(a) + v * Math.cos(a))),
  }));
}

/** Pairs of texts that lie over each other, and texts off the cloth. */
function judge(panel: CutPanel): string[] {
  const texts = panel.marks.filter((m) => m.text !== undefined);
  const bad: string[] = [];
  texts.forEach((m, i) => {
    for (const { x, y } of corners(m)) if (!ringHolds(panel.cut, x / 100, y / 100)) bad.push(`${m.text} off the cloth`);
    for (const o of texts.slice(i + 1)) {
      const both = other.intersect([corners(m)], [corners(o)], other.FillRule.NonZero);
      if (Math.abs(other.areaPaths(both)) > 1e4) bad.push(`${m.text} over ${o.text}`);
    }
  });
  return bad;
}

/** A strip of this size between two seams, cables at its ends, an anchor at each lower corner. */
function strip(length: number, width: number): CutPanel {
  const n = 24;
  const run = (y: number, back: boolean) =>
    Array.from({ length: n }, (_, k): [number, number] => [(length * (back ? n - k : k)) / n, y]);
  const panel = panelFrom([
    { kind: "seam", id: "S11", points: run(0, false) },
    { kind: "cable", id: "cable north", points: [[length, 0]] },
    { kind: "seam", id: "S12", points: run(width, true) },
    { kind: "cable", id: "cable south", points: [[0, width]] },
  ] as Part[]);
  const seam = (id: string, side: number, strips: [string, string], upper: string) => ({
    id,
    vertices: [...panel.sides[side].vertices],
    strips,
    upper,
  });
  const place: PanelPlace = {
    seams: [seam("S11", 0, ["P0", "P1"], "P0"), seam("S12", 2, ["P1", "P2"], "P1")],
    anchors: [
      { id: "corner 1", vertex: 0, cutBack: 0 },
      { id: "corner 2", vertex: n, cutBack: 0 },
    ],
  };
  return outlinePanel(panel, place, ALLOW).output;
}

describe("texts", () => {
  it.each([
    [200, 80],
    [300, 120],
    [400, 400],
    [700, 150],
    [1000, 300],
    [1500, 90],
    [3000, 200],
    [12_000, 1800],
    [900, 2400],
  ])("on a strip of %d x %d mm lie clear of each other and on the cloth, the name always there", (length, width) => {
    const panel = strip(length, width);
    expect(judge(panel)).toEqual([]);
    expect(panel.marks.filter((m) => m.kind === "name").map((m) => m.text)).toEqual(["P1"]);
  });

  it("say which panel lies on top, on both sides of a seam", () => {
    const texts = strip(12_000, 1800)
      .marks.filter((m) => m.kind === "side-name")
      .map((m) => m.text);
    expect(texts).toEqual(["S11 under P0", "cable north", "S12 over P2", "cable south"]);
  });

  it("stand near the middle of a panel that is wider at one end, and where a bent panel has cloth", () => {
    const wedge = outlinePanel(
      panelFrom([
        { kind: "clamped", id: "E1", points: [[0, -400]] },
        { kind: "clamped", id: "E2", points: [[9000, -1300]] },
        { kind: "clamped", id: "E3", points: [[9000, 1300]] },
        { kind: "clamped", id: "E4", points: [[0, 400]] },
      ]),
      { seams: [], anchors: [] },
      ALLOW,
    ).output;
    const name = wedge.marks.find((m) => m.kind === "name")?.at as [number, number];
    const box = ringBox(wedge.cut);
    expect(Math.abs(name[0] - (box.x0 + box.x1) / 2)).toBeLessThan(100);
    const bend = (r: number, back: boolean) =>
      Array.from({ length: 40 }, (_, k): [number, number] => {
        const a = Math.PI * (1 - (back ? 40 - k : k) / 40);
        return [r * Math.cos(a), -r * Math.sin(a)];
      });
    // Half a ring from 2.4 to 4 m radius: its box's middle is off the cloth.
    const banana = outlinePanel(
      panelFrom([
        { kind: "clamped", id: "E1", points: bend(4000, false) },
        { kind: "clamped", id: "E2", points: [[4000, 0]] },
        { kind: "clamped", id: "E3", points: bend(2400, true) },
        { kind: "clamped", id: "E4", points: [[-2400, 0]] },
      ]),
      { seams: [], anchors: [] },
      ALLOW,
    ).output;
    expect(judge(banana)).toEqual([]);
    expect(banana.marks.some((m) => m.kind === "name")).toBe(true);
  });
});

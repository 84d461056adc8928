// Cloth that is no panel: how many pieces, how large, for what, by hand.
import { describe, expect, it } from "vitest";
import { outlinePanel } from "../../../src/core/panels/outline/outlinePanel.ts";
import { buildPieces } from "../../../src/core/panels/pieces/cutPieces.ts";
import type { CutPanel } from "../../../src/core/records/flatPanel.ts";
import type { FoundForm } from "../../../src/core/records/foundForm.ts";
import type { Job } from "../../../src/core/records/job.ts";
import { isSimpleRing, ringArea, ringBox, ringHolds } from "../../../src/core/surface/ring.ts";
import { makeJob } from "../../madeJob.ts";
import { type Part, panelFrom } from "../panelFrom.ts";

const plain = makeJob();
const jobOf = (own: Partial<Job["allowances"]>, anchors: Job["anchors"] = []): Job => ({
  ...plain,
  anchors,
  allowances: { ...plain.allowances, pocket: 80, ...own },
});
/** Only what the pieces look at. */
const form = {
  edges: ["E1", "E2"].map((id) => ({ id })),
  anchors: [{ id: "A1", vertex: 0, isolated: true }],
} as unknown as FoundForm;

const roof = { form, seams: [] };

function cut(parts: Part[], job: Job, id = "P1"): CutPanel {
  return outlinePanel(panelFrom(parts, id), { seams: [], anchors: [] }, job.allowances).output;
}
const OBLONG: Part[] = [
  { kind: "cable", id: "E1", points: [[0, 0]] },
  { kind: "clamped", id: "E2", points: [[7000, 0]] },
  { kind: "seam", id: "S1", points: [[7000, 2000]] },
  { kind: "clamped", id: "E3", points: [[0, 2000]] },
];

describe("pocket strips", () => {
  it("are none where the pocket is folded from the panel", () => {
    const job = jobOf({});
    const { output } = buildPieces([cut(OBLONG, job)], roof, job);
    expect(output.map((p) => p.kind)).toEqual(["test"]);
  });

  it("are twice the pocket wide, together as long as the edge, no longer than 3 m", () => {
    const job = jobOf({ pocketStrip: true });
    const panels = [cut(OBLONG, job), { ...cut(OBLONG, job, "P2"), batch: "B" }];
    const strips = buildPieces(panels, roof, job).output.filter((p) => p.kind === "strip");
    expect(strips.map((p) => p.id)).toEqual([1, 2, 3, 4, 5].map((k) => `E1-strip-${k}`));
    for (const p of strips) {
      expect(ringBox(p.cut)).toEqual({ x0: 0, y0: 0, x1: 14_000 / 5, y1: 160 });
      expect([p.for, p.batch]).toEqual(["E1", null]);
    }
  });

  it("are divided on a bend so that each part gapes by 10 mm at most: pocket times turn", () => {
    const job = jobOf({ pocketStrip: true });
    const R = 8000;
    const turn = 1;
    const arc = Array.from({ length: 81 }, (_, k): [number, number] => {
      const a = turn * (k / 80 - 0.5);
      return [R * Math.sin(a), R * (Math.cos(a) - 1)];
    });
    const end = arc[80];
    const panel = cut(
      [
        { kind: "cable", id: "E1", points: arc.slice(0, -1) },
        { kind: "seam", id: "S1", points: [end] },
        { kind: "seam", id: "S2", points: [[end[0], 3000]] },
        { kind: "seam", id: "S3", points: [[arc[0][0], 3000]] },
      ],
      job,
    );
    const strips = buildPieces([panel], roof, job).output.filter((p) => p.kind === "strip");
    // 80 mm times 1 rad: 80 mm in steps of 10.
    expect(strips.length).toBe(8);
    expect(ringBox(strips[0].cut).x1).toBeCloseTo(panel.sides[0].lengthFlat / 8, 6);
  });

  it("stand in for flaps on sides too short to fold, and the note says so", () => {
    const job = jobOf({ clamp: 0 });
    const short = OBLONG.map(
      (p): Part =>
        p.id === "E1" ? { ...p, kind: "clamped" } : p.id === "E2" ? { ...p, kind: "cable", points: [[7000, 1800]] } : p,
    );
    const { output, findings } = buildPieces([cut(short, job)], roof, job);
    expect(output.filter((p) => p.kind === "strip").map((p) => [p.for, ringBox(p.cut).x1])).toEqual([["E2", 200]]);
    expect(findings.find((f) => f.code === "piece-strip")?.text).toContain("too short or too tightly bent to fold");
  });
});

describe("cover strips", () => {
  const seams = [
    { id: "S1", cable: "ridge-1" },
    { id: "S2", cable: null },
  ];
  const two: Part[] = [
    { kind: "clamped", id: "E1", points: [[0, 0]] },
    { kind: "seam", id: "S2", points: [[7000, 0]] },
    { kind: "clamped", id: "E2", points: [[7000, 2000]] },
    { kind: "seam", id: "S1", points: [[0, 2000]] },
  ];
  it("are laid over the cables between panels where the job asks, as long as the joint, no longer than 3 m", () => {
    const job = jobOf({ cover: 240 });
    const { output, findings } = buildPieces([cut(two, job), cut(two, job, "P2")], { form, seams }, job);
    const covers = output.filter((p) => p.kind === "cover");
    expect(covers.map((p) => [p.id, p.for])).toEqual([["ridge-1-cover-1", "ridge-1"]]);
    expect(ringBox(covers[0].cut)).toEqual({ x0: 0, y0: 0, x1: 2000, y1: 240 });
    expect(findings.find((f) => f.code === "piece-cover")?.text).toContain("2000 mm over it, 1 part of 2000 x 240 mm");
  });
  it("are none by default, and none without an inner cable, which is said", () => {
    const none = jobOf({});
    expect(buildPieces([cut(two, none)], { form, seams }, none).output.some((p) => p.kind === "cover")).toBe(false);
    const job = jobOf({ cover: 240 });
    const { output, findings } = buildPieces([cut(two, job)], roof, job);
    expect(output.some((p) => p.kind === "cover")).toBe(false);
    expect(findings.find((f) => f.code === "piece-cover")?.text).toContain("no ridge, valley or belt");
  });
});

describe("corner patches", () => {
  it("cover the panel's corner from the set-back to 400 mm further, nothing where no set-back is asked", () => {
    const job = jobOf({}, [{ name: "A1", cutBack: 200 }]);
    const [patch] = buildPieces([cut(OBLONG, job)], roof, job).output.filter((p) => p.kind === "patch");
    expect([patch.id, patch.for]).toEqual(["A1-patch-P1", "A1"]);
    // A quarter of a ring, its circles drawn with 48 sides.
    const sides = (48 / 2) * Math.sin((2 * Math.PI) / 48);
    expect(ringArea(patch.cut)).toBeCloseTo((sides * (600 ** 2 - 200 ** 2)) / 4, -2);
    expect(isSimpleRing(patch.cut)).toBe(true);
    expect(ringHolds(patch.cut, 300, 300)).toBe(true);
    expect(ringHolds(patch.cut, 100, 100)).toBe(false);
    const none = jobOf({}, [{ name: "A1" }]);
    expect(buildPieces([cut(OBLONG, none)], roof, none).output.some((p) => p.kind === "patch")).toBe(false);
  });
});

describe("weld tests", () => {
  it("are one a batch that is welded; ids are unique", () => {
    const job = jobOf({ pocketStrip: true }, [{ name: "A1", cutBack: 200 }]);
    const p = cut(OBLONG, job);
    const panels = [
      p,
      { ...p, id: "P2", batch: "B1" },
      { ...p, id: "P3", batch: "B1" },
      { ...p, id: "P4", batch: "B2" },
    ];
    const { output } = buildPieces(panels, roof, job);
    expect(output.filter((q) => q.kind === "test").map((q) => [q.for, q.batch])).toEqual([
      [p.fabric, null],
      ["B1", "B1"],
      ["B2", "B2"],
    ]);
    expect(new Set(output.map((q) => q.id)).size).toBe(output.length);
  });

  it("are none for a roof of one panel without a seam", () => {
    const job = jobOf({});
    const whole = cut(
      OBLONG.map((p) => (p.kind === "seam" ? { ...p, kind: "clamped" as const } : p)),
      job,
    );
    expect(buildPieces([whole], roof, job)).toEqual({ output: [], findings: [], checks: [] });
  });
});

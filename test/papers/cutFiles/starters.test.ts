// The cut files of the starter jobs, every one of them, read by dxf-parser, which is not ours: what the table cuts is what the plan
// holds. The gate reads them by ezdxf as well.
import DxfParser from "dxf-parser";
import { describe, expect, test } from "vitest";
import { writeDxf2000 } from "../../../src/core/papers/cutFiles/dxf2000.ts";
import { writeDxfR12 } from "../../../src/core/papers/cutFiles/dxfR12.ts";
import { writeSvg } from "../../../src/core/papers/cutFiles/svg.ts";
import { ARC_TOLERANCE, withArcs } from "../../../src/core/papers/drawing/arcs.ts";
import { CUT_START } from "../../../src/core/papers/drawing/cutStart.ts";
import type { Drawing } from "../../../src/core/papers/drawing/drawing.ts";
import { tableBites } from "../../../src/core/papers/drawing/placedCloth.ts";
import { panelDrawing, rollDrawing } from "../../../src/core/papers/drawing/rollDrawing.ts";
import type { Facts, FactsPanel, Vec2 } from "../../../src/core/records/facts.ts";
import { STARTERS, starterFacts } from "../made/starterFacts.ts";
import { apart, flattened, placedCuts } from "./readDxf.ts";
import { hasRaster, rasterReason, redFaults } from "./redPixels.ts";

const LIMIT = 0.01;

interface Read {
  layer: string;
  type: string;
  shape?: boolean;
  text?: string;
  vertices?: { x: number; y: number; bulge?: number }[];
}

function read(text: string) {
  const dxf = new DxfParser().parseSync(text)!;
  return {
    header: dxf.header as Record<string, { x: number; y: number }>,
    entities: dxf.entities as unknown as Read[],
  };
}

const points = (e: Read) => e.vertices!.map((v): Vec2 => [v.x, v.y]);
const box = (rings: Vec2[][]) =>
  [0, 1].flatMap((k) => {
    const all = rings.flatMap((r) => r.map((p) => p[k]!));
    return [Math.min(...all), Math.max(...all)];
  });
const area = (ring: Vec2[]) =>
  ring.reduce((s, p, i) => s + p[0] * ring[(i + 1) % ring.length]![1] - ring[(i + 1) % ring.length]![0] * p[1], 0) / 2;

/** Turn of a ring at a point, degrees, between the directions 5 mm before and behind it. */
function turnAt(ring: Vec2[], i: number): number {
  const reach = (step: number) => {
    for (let k = 1; k < ring.length; k++) {
      const p = ring[(i + k * step + ring.length * k) % ring.length]!;
      const d = Math.hypot(p[0] - ring[i]![0], p[1] - ring[i]![1]);
      if (d >= 5) return Math.atan2(p[1] - ring[i]![1], p[0] - ring[i]![0]);
    }
    return 0;
  };
  const off = (reach(1) - reach(-1) - Math.PI) * (180 / Math.PI);
  return Math.abs(((off + 540) % 360) - 180);
}

/** Everything a table must find in a file, in whatever dialect. */
function holds(text: string, wanted: Vec2[][], where: string): void {
  const { header, entities } = read(text);
  const lines = entities.filter((e) => e.vertices);
  const cuts = lines.filter((e) => e.layer === "CUT" && e.shape);
  expect(cuts.length, where).toBe(wanted.length);
  // Each contour is that of one piece, and of another one each.
  const left = new Set(wanted.keys());
  for (const cut of cuts) {
    const ring = points(cut);
    const own = box([ring]);
    const near = [...left].filter((k) => box([wanted[k]!]).every((v, i) => Math.abs(v - own[i]!) < 1));
    const apartOf = near.map((k) => apart(ring, wanted[k]!));
    expect(Math.min(...apartOf), where).toBeLessThan(LIMIT);
    left.delete(near[apartOf.indexOf(Math.min(...apartOf))]!);
    // As the file says: counter-clockwise, from the leftmost corner.
    expect(area(ring), where).toBeGreaterThan(0);
    expect(turnAt(ring, 0), where).toBeGreaterThan(30);
    const further = ring.findIndex((p, i) => p[0] < ring[0]![0] - 0.0005 && turnAt(ring, i) > 30.5);
    expect(further, `${where}: a corner lies left of the start`).toBe(-1);
  }
  // What else is cut is open: slits, never an outline that was left open.
  for (const e of lines) if (e.layer === "CUT" && !e.shape) expect(e.vertices!.length, where).toBeLessThan(4);
  const [drawn, asked] = [box(cuts.map(points)), box(wanted)];
  drawn.forEach((v, i) => {
    expect(Math.abs(v - asked[i]!), where).toBeLessThan(LIMIT);
  });
  const [low, high] = [header.$EXTMIN!, header.$EXTMAX!];
  const all = box(lines.map(points));
  expect(low.x <= all[0]! && high.x >= all[1]! && low.y <= all[2]! && high.y >= all[3]!, where).toBe(true);
  // No doubled point, no piece of line drawn twice, pen before knife, and the unit and the start stated.
  const seen = new Set<string>();
  for (const e of lines.filter((q) => q.layer !== "BED-DO-NOT-CUT")) {
    const run = points(e);
    const ring = e.shape ? [...run, run[0]!] : run;
    for (let i = 0; i + 1 < ring.length; i++) {
      const key = [ring[i]!.join(), ring[i + 1]!.join()].sort().join(" ");
      expect(ring[i]!.join() === ring[i + 1]!.join() || seen.has(key), `${where}: ${key} twice`).toBe(false);
      seen.add(key);
    }
  }
  const layers = entities.map((e) => e.layer);
  const order = ["BED-DO-NOT-CUT", "MARK-PEN", "TEXT-PEN", "CUT"].filter((l) => layers.includes(l));
  order.forEach((l, i) => {
    if (i > 0) expect(layers.indexOf(l), where).toBeGreaterThan(layers.lastIndexOf(order[i - 1]!));
  });
  expect(order.at(-1), where).toBe("CUT");
  const words = entities.map((e) => e.text ?? "");
  expect(words, where).toContain(CUT_START);
  expect(
    words.some((w) => w.includes("UNITS MM") && w.includes("1000 mm")),
    where,
  ).toBe(true);
  const widths = lines.filter((e) => e.layer === "BED-DO-NOT-CUT").map((e) => box([points(e)]));
  expect(
    widths.some(([x0, x1]) => Math.abs(x1! - x0! - 1000) < 1e-9),
    `${where}: bar`,
  ).toBe(true);
}

/** The closed cuts of a file with arcs, cut up, against the straight ones. */
function arcsHold(drawing: Drawing, wanted: Vec2[][], where: string): number {
  const cuts = read(writeDxfR12(withArcs(drawing))).entities.filter((e) => e.layer === "CUT" && e.shape);
  expect(cuts.length, where).toBe(wanted.length);
  let arcs = 0;
  for (const cut of cuts) {
    const bulges = cut.vertices!.map((v) => v.bulge ?? 0);
    arcs += bulges.filter((b) => b !== 0).length;
    const ring = flattened(points(cut), bulges, true, 24);
    const own = box([ring]);
    const near = wanted.filter((w) => box([w]).every((v, i) => Math.abs(v - own[i]!) < 1));
    expect(Math.min(...near.map((w) => apart(ring, w))), where).toBeLessThanOrEqual(ARC_TOLERANCE);
  }
  return arcs;
}

const slitsOf = (panel: FactsPanel) => panel.marks.filter((m) => m.kind === "slit").map((m) => m.points!);

/** Facts of a starter with a table that takes less than the roll. */
const planned = new Map<string, Facts>();
function factsOf(name: (typeof STARTERS)[number]): Facts {
  const facts = planned.get(name) ?? starterFacts(name, { nest: { steps: 2, gap: 10, bite: 15000 } });
  planned.set(name, facts);
  return facts;
}

describe.each(STARTERS)("cut files of %s", (name) => {
  test("rolls and panels, R12 and 2000: every contour within 0.01 mm, closed, counted, on its layer, extents equal, start and unit stated", () => {
    const facts = factsOf(name);
    expect(facts.rolls!.flatMap((r) => r.placements)).toHaveLength(facts.panels!.length + facts.pieces!.length);
    facts.rolls!.forEach((roll, r) => {
      const drawing = rollDrawing(facts, roll);
      for (const write of [writeDxfR12, writeDxf2000])
        holds(write(drawing), placedCuts(facts, r), `${name} ${roll.id}`);
    });
    for (const panel of facts.panels!) {
      const drawing = panelDrawing(facts, panel);
      for (const write of [writeDxfR12, writeDxf2000]) holds(write(drawing), [panel.cut], `${name} ${panel.id}`);
    }
  });

  test("table lengths hold every piece once, as it lies from the start of the length", () => {
    const facts = factsOf(name);
    for (const [r, roll] of facts.rolls!.entries()) {
      const bites = tableBites(facts, roll);
      if (roll.used > 15000) expect(bites.length, roll.id).toBeGreaterThan(1);
      const found = bites.flatMap(({ from, roll: part, words, before }) => {
        const lying = part.placements.map((p) => roll.placements.findIndex((q) => q.panel === p.panel));
        const wanted = lying.map((k) => placedCuts(facts, r)[k]!.map(([x, y]): Vec2 => [x - from, y]));
        holds(writeDxfR12(rollDrawing(facts, part, words, before)), wanted, `${name} ${roll.id} from ${from}`);
        return lying;
      });
      if (bites.length > 0) expect(found.sort((a, b) => a - b)).toEqual([...roll.placements.keys()]);
    }
  });

  test("with arcs for curves no contour lies farther than 0.1 mm from the straight one", () => {
    const facts = factsOf(name);
    const arcs = facts.panels!.map((p) => arcsHold(panelDrawing(facts, p), [p.cut], `${name} ${p.id}`));
    if (name !== "market-hall") expect(Math.max(...arcs)).toBeGreaterThan(0);
  });

  test.skipIf(!hasRaster)(
    `what a renderer draws of a panel's SVG and of a table length lies on the outlines${rasterReason}`,
    () => {
      const facts = factsOf(name);
      const panel = facts.panels![0]!;
      const alone = panelDrawing(facts, panel);
      expect(redFaults(writeSvg(alone), alone, [panel.cut], slitsOf(panel))).toEqual([]);
      const roll = facts.rolls!.findIndex((r) => tableBites(facts, r).length > 0);
      if (roll < 0) return;
      const [bite] = tableBites(facts, facts.rolls![roll]!);
      const drawing = rollDrawing(facts, bite!.roll, bite!.words);
      const lies = bite!.roll.placements.flatMap((p) => {
        const panel = facts.panels!.find((q) => q.id === p.panel);
        const turn = p.rotation === 180 ? -1 : 1;
        return panel ? slitsOf(panel).map((run) => run.map(([x, y]): Vec2 => [turn * x + p.x, turn * y + p.y])) : [];
      });
      expect(redFaults(writeSvg(drawing), drawing, placedCuts({ ...facts, rolls: [bite!.roll] }, 0), lies)).toEqual([]);
    },
  );
});

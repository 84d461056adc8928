// The plan a crew finds its adjusters on, and what each is set to before anything is hung.
import type { Vec2 } from "../../../records/facts.ts";
import type { Vec3 } from "../../../surface/surface.ts";
import { insidePlaces, insidePoint, pointAlong } from "../../drawing/flatGeometry.ts";
import { finalForce, type RigFacts, startPins } from "../../tables/rigReadings.ts";
import { travelOf } from "../../tables/rigTables.ts";
import { cautionsNamed } from "../../words/cautions.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import { addSheet, type Book, drawParagraph } from "../layout/book.ts";
import { flowCautionsInPlace } from "../layout/cautionBlock.ts";
import { type LabelField, leaderStart, setNameInPlace } from "../layout/labelField.ts";
import { type BoxArea, drawRing, drawRun, LARGE } from "../layout/pen.ts";
import { fitRoof, type RoofView } from "../layout/roofView.ts";
import {
  type Column,
  flowGapInPlace,
  flowHeadingInPlace,
  flowTableInPlace,
  flowTextInPlace,
  openFlow,
} from "../layout/table.ts";
import { BODY } from "./scheduleCover.ts";

const AWAY = [4, 7, 10, 14, 18, 24];

function beyond(p: Vec2, from: Vec2, reach: number): Vec2 {
  const d: Vec2 = [p[0] - from[0], p[1] - from[1]];
  const l = Math.hypot(d[0], d[1]) || 1;
  return [p[0] + (reach * d[0]) / l, p[1] + (reach * d[1]) / l];
}

/** The roof with adjusters, masts and stays named as on site. */
export function drawSchedulePlan(book: Book, rig: RigFacts, view: RoofView): void {
  const sheet = addSheet(book, "Plan of the adjusters");
  const nodes = rig.facts.rig?.nodes ?? [];
  const at = (n: number): Vec2 => view.project(nodes[n] as Vec3);
  const stays = (rig.facts.cables ?? []).filter((c) => c.edge === null).map((c) => c.id);
  const runs = [
    ...(rig.facts.rig?.struts ?? [])
      .filter((s) => !s.brace)
      .map((s) => ({ id: s.id, run: s.nodes.map(at), width: 0.9 })),
    ...(rig.facts.rig?.cables ?? [])
      .filter((c) => stays.includes(c.id))
      .map((c) => ({ id: c.id, run: c.nodes.map(at), width: 0.35 })),
  ];
  const dashed = runs.length > 0 ? " Dashed: masts and stays; a mast seen from above is a point." : "";
  const words = `The roof ${view.name}, not to scale; x of the mesh to the right. Thick line and ring: adjuster with its name, then its anchor; the ring is the pin that does not move. Put the same names on the turnbuckles on site before the start.${dashed}`;
  const top = drawParagraph(book, sheet, words, sheet.top, { size: BODY }) - 2;
  const box = { x: sheet.left, y: sheet.bottom, width: sheet.right - sheet.left, height: top - sheet.bottom };
  const pins = rig.adjusters.map((a) => ({ id: a.id, anchor: a.anchor, near: at(a.nodes[0]), far: at(a.nodes[1]) }));
  const inner = { x: box.x + 34, y: box.y + 12, width: box.width - 68, height: box.height - 24 };
  const place = fitRoof(view, inner, [...pins.flatMap((p) => [p.near, p.far]), ...runs.flatMap((r) => r.run)]);
  const middle: Vec2 = [inner.x + inner.width / 2, inner.y + inner.height / 2];
  const outlines = view.panels.flatMap((p) => p.outlines.map((o) => o.map(place)));
  const drawn = pins.map((p): [Vec2, Vec2] => [place(p.near), farEnd(place(p.near), place(p.far), middle)]);
  // Names keep off the adjusters; those of the border keep off the roof too.
  const inside: LabelField = { within: box, outlines: drawn, taken: drawn.map(([, end]) => around(end, 2)) };
  const lines = runs.map((r) => r.run.map(place));
  const border: LabelField = { ...inside, outlines: [...drawn, ...outlines, ...lines] };
  for (const o of outlines) drawRun(sheet.page, o, { width: 0.13, closed: true });
  for (const e of view.edges) drawRun(sheet.page, e.run.map(place), { width: 0.4 });
  for (const r of runs) drawRun(sheet.page, r.run.map(place), { width: r.width, dash: [2, 1.4] });
  pins.forEach((p, i) => {
    const [near, end] = drawn[i];
    drawRun(sheet.page, [near, end], { width: 1.1 });
    drawRing(sheet.page, end, 1.3, { width: 0.4, fill: 1 });
    const spots = AWAY.flatMap((r) => [beyond(end, near, r + 3), beyond(end, middle, r + 3)]);
    const style = { bold: true, size: 14, longest: 60 };
    const name = `${p.id}  (${p.anchor})`;
    // One that stands within the roof, at a ring, has no free place outside: its name lies over the cloth, before all others do.
    const beside = AWAY.flatMap((d) => EIGHT.map((k) => around8(end, d + 2, k)));
    if (!setNameInPlace(book, sheet, border, name, [...spots, ...beside], style))
      setNameInPlace(book, sheet, inside, name, spots, style);
  });
  const kinds = new Map((rig.facts.form?.edges ?? []).map((e) => [e.id, e.kind]));
  for (const e of view.edges) {
    const run = e.run.map(place);
    const within = ["belt", "ridge", "valley"].includes(kinds.get(e.id) ?? "");
    const shares = [0.5, 0.4, 0.6, 0.3, 0.7];
    const spots = within
      ? shares.map((f) => pointAlong(run, f).at)
      : shares.flatMap((f) => AWAY.map((r) => beyond(pointAlong(run, f).at, middle, r)));
    setNameInPlace(book, sheet, within ? inside : border, e.id, spots, { size: BODY, longest: 60 });
  }
  for (const r of runs) {
    const run = r.run.map(place);
    // On its own line, which the name's ground interrupts; a mast seen from above is a point, its name lies beside it.
    const at = pointAlong(run, 0.5).at;
    const on = [0.6, 0.75, 0.5, 0.9, 0.35].map((f) => pointAlong(run, f).at);
    const beside = AWAY.flatMap((d) => EIGHT.map((k) => around8(at, d + 2, k)));
    const upright = Math.hypot(run[run.length - 1][0] - run[0][0], run[run.length - 1][1] - run[0][1]) < UPRIGHT;
    const spots = upright ? beside : [...on, ...beside];
    const before = inside.taken.length;
    const set = setNameInPlace(book, sheet, inside, r.id, spots, { size: BODY, longest: 60 });
    if (set && upright) drawRun(sheet.page, [leaderStart(inside.taken[before], at), at], { width: 0.2 });
  }
  for (const p of view.panels) {
    const outline = (p.outlines[0] ?? []).map(place);
    if (outline.length < 3) continue;
    const clear = { ...inside, outlines: [...drawn, outline] };
    if (!setNameInPlace(book, sheet, clear, p.id, insidePlaces(outline), { size: BODY }))
      setNameInPlace(book, sheet, inside, p.id, [insidePoint(outline).at], { size: BODY });
  }
}

/** A run shorter than this on the sheet is seen as a point, mm. */
const UPRIGHT = 3;

const EIGHT = [0, 1, 2, 3, 4, 5, 6, 7];

/** One of eight places round a point. */
function around8([x, y]: Vec2, reach: number, k: number): Vec2 {
  const a = (k * Math.PI) / 4;
  return [x + 1.6 * reach * Math.cos(a), y + reach * Math.sin(a)];
}

/** Seen from above a short adjuster would vanish: it is drawn at least 5 mm long. */
function farEnd(near: Vec2, far: Vec2, middle: Vec2): Vec2 {
  const length = Math.hypot(far[0] - near[0], far[1] - near[1]);
  if (length > 5) return far;
  return length > 0.5 ? beyond(near, [2 * near[0] - far[0], 2 * near[1] - far[1]], 5) : beyond(near, middle, 5);
}

function around([x, y]: Vec2, r: number): BoxArea {
  return { x: x - r, y: y - r, width: 2 * r, height: 2 * r };
}

/** What every adjuster is set to before the cloth is hung, and where it ends. */
export function flowStart(book: Book, rig: RigFacts): void {
  const { pins, force, travel } = paperUnits(rig.facts.job);
  const flow = openFlow(book, "Before stage 1: set the adjusters");
  flowCautionsInPlace(flow, cautionsNamed(book.facts, "thread-engagement"), BODY);
  const columns: readonly Column[] = [
    { head: ["Adjuster"], width: 34, bold: true },
    { head: ["Anchor"], width: 34 },
    { head: ["SET pin to", `pin, ${pins.unit}`], width: 30, align: "end", bold: true },
    { head: ["Finished,", pins.unit], width: 30, align: "end" },
    { head: ["Shortest,", pins.unit], width: 30, align: "end" },
    { head: ["Longest,", pins.unit], width: 30, align: "end" },
    { head: ["One turn,", travel.unit], width: 26, align: "end" },
    { head: ["Final force,", force.unit], width: 32, align: "end" },
    { head: ["Set, by"], width: 24 },
  ];
  const rows = rig.adjusters.map((a) => [
    a.id,
    a.anchor,
    pins.of(startPins(rig, a)),
    pins.of(a.pinLength),
    pins.of(a.range.shortest),
    pins.of(a.range.longest),
    travel.of(a.perTurn),
    force.of(finalForce(rig, a.id) ?? a.target),
    "",
  ]);
  flowTableInPlace(flow, columns, rows, { size: LARGE });
  flowGapInPlace(flow, 2);
  const text = (words: string) => flowTextInPlace(flow, words, { size: BODY });
  text(
    "Turn every adjuster to its length SET, pin to pin, with the same length of thread in the body at both ends, before the cloth is hung. Grease the threads. Put a paint mark along body and both ends: turns are counted from it.",
  );
  text(
    "Pin to pin is measured from the middle of one pin to the middle of the other, with the tape held tight along the turnbuckle. Under force it grows a little: the lengths in the steps are those a tape reads under the force of that step.",
  );
  const spent = rig.adjusters.filter((a) => travelOf(rig, a).leftIn < 0);
  flowGapInPlace(flow, 3);
  flowHeadingInPlace(flow, "Then hang the cloth");
  flowCautionsInPlace(flow, cautionsNamed(book.facts, "wind-lift", "suspended-load"), BODY);
  const masts = (book.facts.rig?.struts ?? []).filter((s) => !s.brace).map((s) => s.id);
  if (masts.length > 0)
    text(
      `Masts first: ${masts.join(", ")} ${masts.length > 1 ? "stand" : "stands"} held every way, by stays or by lines to firm points, before any cloth is pinned. Until the roof is taut the cloth holds no mast.`,
    );
  text(
    "Cables in their pockets, every corner held by a line until it is pinned to its adjuster. Nothing is turned before all corners are pinned and the area below is clear.",
  );
  if (spent.length > 0) text(`Out of reach at the finished state: ${spent.map((a) => a.id).join(", ")}.`);
}

// The lists for office and store: rolls, panels with all other cloth, seams. Every row carries issue, revision and status,
// because rows are copied out of lists and travel alone.
import type { Facts, FactsPanel, FactsPiece, FactsSeam } from "../../records/facts.ts";
import { batchOf } from "../drawing/clothBatch.ts";
import { boxOf } from "../drawing/flatGeometry.ts";
import { measurePanel } from "../drawing/panelMeasures.ts";
import { decimal } from "../words/decimal.ts";
import { stampOf } from "../words/stamp.ts";
import { type Cell, numberCell, writeCsv } from "./csv.ts";

const TAIL = ["issue", "revision", "status"];

function tailOf(facts: Facts): Cell[] {
  return [facts.job.issue, facts.job.revision, stampOf(facts) || "no stop open"];
}

/** Where each piece of cloth lies, by its id. */
export function placesOf(facts: Facts) {
  const rolls = facts.rolls ?? [];
  return new Map(rolls.flatMap((roll) => roll.placements.map((p) => [p.panel, { roll: roll.id, ...p }] as const)));
}

/** rolls.csv */
export function rollTable(facts: Facts): string {
  const header = ["roll", "fabric", "batch", "width_mm", "usable_width_mm", "length_mm", "used_mm", "pieces"];
  header.push(
    "gap_mm",
    "utilisation_percent",
    "lower_bound_mm",
    "remnant_mm",
    "table_feeds_at_mm",
    "flaws",
    "cost",
    "currency",
    ...TAIL,
  );
  const rows = (facts.rolls ?? []).map((r): Cell[] => [
    r.id,
    r.fabric,
    r.batch,
    numberCell(r.width, 1),
    numberCell(r.usableWidth, 1),
    numberCell(r.length, 0),
    numberCell(r.used, 1),
    numberCell(r.placements.length, 0),
    numberCell(r.gap, 1),
    numberCell(r.utilisation * 100, 2),
    numberCell(r.lowerBound, 1),
    r.remnant === undefined ? null : numberCell(r.remnant, 0),
    (r.feeds ?? []).map((f) => decimal(f, 0)).join("; "),
    numberCell(r.flaws.length, 0),
    typeof r.cost === "number" ? numberCell(r.cost, 2) : null,
    r.currency ?? null,
    ...tailOf(facts),
  ]);
  return writeCsv(header, rows);
}

/** panels.csv: panels first, then patches, strips, covers and test pieces. */
export function panelTable(facts: Facts): string {
  const header = ["panel", "kind", "for", "fabric", "batch", "roll", "x_mm", "y_mm", "rotation_deg", "cutting_order"];
  header.push("length_mm", "width_mm", "net_area_m2", "cut_area_m2", "mass_kg");
  header.push("compensation_warp_percent", "compensation_weft_percent", "stress_warp_mean_kN_per_m");
  header.push("stress_weft_mean_kN_per_m", "compressed_area_percent", ...TAIL);
  const places = placesOf(facts);
  const order = (n: number | undefined): Cell => (n === undefined ? null : numberCell(n, 0));
  const lie = (id: string): Cell[] => {
    const p = places.get(id);
    return p
      ? [p.roll, numberCell(p.x, 1), numberCell(p.y, 1), numberCell(p.rotation, 0), order(p.order)]
      : [null, null, null, null, null];
  };
  const panels = (facts.panels ?? []).map((p): Cell[] => {
    const mass = massOf(facts, p);
    return [
      p.id,
      "panel",
      null,
      p.fabric,
      batchOf(facts, p),
      ...lie(p.id),
      numberCell(p.size.length, 1),
      numberCell(p.size.width, 1),
      numberCell(p.area.net, 3),
      numberCell(p.area.cut, 3),
      mass === null ? null : numberCell(mass, 1),
      numberCell(p.compensation.warp * 100, 3),
      numberCell(p.compensation.weft * 100, 3),
      numberCell(p.stress.warp.mean, 3),
      numberCell(p.stress.weft.mean, 3),
      numberCell(p.stress.compressedShare * 100, 2),
      ...tailOf(facts),
    ];
  });
  const empty = new Array<Cell>(header.length - 12 - TAIL.length).fill(null);
  const size = (piece: FactsPiece): Cell[] => {
    const { min, max } = boxOf(piece.cut);
    return [numberCell(max[0] - min[0], 1), numberCell(max[1] - min[1], 1)];
  };
  const pieces = (facts.pieces ?? []).map((p): Cell[] => [
    p.id,
    p.kind,
    p.for,
    p.fabric,
    batchOf(facts, p),
    ...lie(p.id),
    ...size(p),
    ...empty,
    ...tailOf(facts),
  ]);
  return writeCsv(header, [...panels, ...pieces]);
}

/** control-lengths.csv: what is measured on a panel before it is joined; net line, cut edge, straight between cut corners. */
export function controlTable(facts: Facts): string {
  const header = ["panel", "what", "name", "of", "net_mm", "cut_mm", "cut_chord_mm", ...TAIL];
  const mm = (value: number | null): Cell => (value === null ? null : numberCell(value, 1));
  const rows = (facts.panels ?? []).flatMap((panel) => {
    const measures = measurePanel(panel);
    const lines: Cell[][] = panel.sides.map((s, i) => {
      const { edge, chord } = measures.sides[i];
      return ["side", `${i + 1}`, s.id, numberCell(s.lengthFlat, 1), mm(edge), mm(chord)];
    });
    for (const d of measures.diagonals)
      lines.push(["diagonal", `${d.from.name} to ${d.to.name}`, null, mm(d.length), mm(d.cutLength), null]);
    for (const w of measures.widths)
      lines.push(["width", w.name, `at ${w.station.toFixed(0)} mm`, mm(w.netWidth), mm(w.cutWidth), null]);
    return lines.map((line) => [panel.id, ...line, ...tailOf(facts)]);
  });
  return writeCsv(header, rows);
}

/** What a panel weighs as cut, kg, or null where the fabric's mass is not known. */
export function massOf(facts: Facts, panel: FactsPanel): number | null {
  const mass = facts.fabrics[panel.fabric]?.mass;
  return mass === undefined ? null : mass * panel.area.cut;
}

/** What the panel's own side says of a seam: its length in the flat and its allowance. */
export function seamSide(facts: Facts, seam: FactsSeam, which: 0 | 1) {
  const listed = seam.sides[which];
  const panel = facts.panels?.find((p) => p.id === listed?.panel);
  const first = listed?.vertices[0];
  const last = listed?.vertices.at(-1);
  const sides = panel?.sides.filter((s) => s.id === seam.id) ?? [];
  // A panel that meets itself has the seam twice: the side with the same ends is meant.
  const own = sides.find((s) => s.vertices.includes(first ?? -1) && s.vertices.includes(last ?? -1)) ?? sides[0];
  return { panel: listed?.panel ?? "", flat: own?.lengthFlat ?? null, allowance: own?.allowance ?? null };
}

/** seams.csv: one row a seam, both sides to compare. */
export function seamTable(facts: Facts): string {
  const header = ["seam", "weld", "panel_a", "panel_b", "upper_panel", "length_on_form_m", "flat_a_mm", "flat_b_mm"];
  header.push("difference_mm", "allowance_a_mm", "allowance_b_mm", "cable", ...TAIL);
  const mm = (value: number | null): Cell => (value === null ? null : numberCell(value, 1));
  const rows = (facts.seams ?? []).map((s): Cell[] => {
    const a = seamSide(facts, s, 0);
    const b = seamSide(facts, s, 1);
    const difference = a.flat === null || b.flat === null ? null : numberCell(a.flat - b.flat, 2);
    return [
      s.id,
      s.weld,
      a.panel,
      b.panel,
      s.upper,
      numberCell(s.length, 3),
      mm(a.flat),
      mm(b.flat),
      difference,
      mm(a.allowance),
      mm(b.allowance),
      s.cable,
      ...tailOf(facts),
    ];
  });
  return writeCsv(header, rows);
}

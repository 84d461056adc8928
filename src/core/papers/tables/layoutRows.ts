// The layouts of seams that were compared, as rows: the one taken first in each region, then those it was weighed against.
import type { Facts } from "../../records/facts.ts";
import { decimal } from "../words/decimal.ts";
import { paperUnits } from "../words/paperUnits.ts";

/** Heads of the columns, the units of the job's sheets in them. */
export function layoutHeads({ job }: Facts): string[][] {
  const { span, area } = paperUnits(job);
  return [
    ["Region"],
    ["Strips run"],
    ["Strips"],
    ["Panels"],
    ["Seams", span.unit],
    ["Cloth", area.unit],
    ["Least", `width, ${span.unit}`],
    ["Greatest", `width, ${span.unit}`],
    ["Stress", "off, %"],
    ["Known from"],
    ["Taken"],
  ];
}

/** One row a layout. Widths are net of allowances. */
export function layoutRows({ job, compared = [] }: Facts): string[][] {
  const { span, area } = paperUnits(job);
  return compared.map((row) => [
    row.region,
    `${row.layout}, ${row.from} to ${row.to}`,
    String(row.strips),
    String(row.panels),
    span.of(row.seams),
    area.of(row.cloth),
    span.of(row.least),
    span.of(row.greatest),
    decimal(100 * row.stressError, 1),
    row.measured ? "flat cloth" : "estimate",
    row.taken ? "yes" : "",
  ]);
}

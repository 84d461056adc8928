// After the map: the order of welding with what each piece weighs, what is lifted, and how the roof is folded so that it unfolds in the
// order in which its corners are wanted.
import { foldOrder } from "../../tables/panelOrder.ts";
import { orderWelds } from "../../tables/weldOrder.ts";
import { cautionsNamed } from "../../words/cautions.ts";
import { paperUnits } from "../../words/paperUnits.ts";
import type { Book } from "../layout/book.ts";
import { flowCautionsInPlace } from "../layout/cautionBlock.ts";
import {
  type Column,
  flowGapInPlace,
  flowHeadingInPlace,
  flowTableInPlace,
  flowTextInPlace,
  openFlow,
} from "../layout/table.ts";

const LISTED = 12;

function listed(names: readonly string[]): string {
  return names.length > LISTED
    ? `${names.slice(0, LISTED).join(", ")} and ${names.length - LISTED} more`
    : names.join(", ");
}

/** Order of welding, weights, folding. */
export function flowAssemblyOrder(book: Book): void {
  const { facts } = book;
  const { span, mass } = paperUnits(facts.job);
  const { steps, pieces } = orderWelds(facts);
  const weight = (kg: number | null) => (kg === null ? "not known" : mass.whole(kg));
  const flow = openFlow(book, "Order of welding, weights, folding");
  const columns: readonly Column[] = [
    { head: ["Order"], width: 16, bold: true },
    { head: ["Weld"], width: 34, bold: true },
    { head: ["Seams"], width: 40 },
    { head: ["Joins panels"], width: 64 },
    { head: ["Length,", span.unit], width: 24, align: "end" },
    { head: ["Panels in", "the piece"], width: 24, align: "end" },
    { head: ["It weighs", "about"], width: 30, align: "end" },
    { head: ["Welded by,", "date"], width: 36 },
  ];
  const rows = steps.map((s, i) => [
    `${i + 1}`,
    s.weld,
    listed(s.seams),
    `${listed(s.panels)}${s.closes ? " (closes a ring)" : ""}`,
    span.of(s.length),
    `${s.joined}`,
    weight(s.mass),
    "",
  ]);
  if (rows.length > 0) {
    const words =
      "Next is always the weld that makes the lightest piece, so that little is dragged. A proposal: the floor may choose another order. Weights are cloth as cut, without patches, cables and fittings.";
    flowTextInPlace(flow, words);
    flowGapInPlace(flow, 1.5);
    flowTableInPlace(flow, columns, rows);
  }
  flowHeadingInPlace(flow, "To be lifted");
  pieces.forEach((p, i) => {
    flowTextInPlace(
      flow,
      `Piece ${i + 1} of ${pieces.length}: ${p.panels.length} panels, about ${weight(p.mass)} of cloth: ${p.panels.join(", ")}.`,
    );
  });
  flowHeadingInPlace(
    flow,
    "Folding and unfolding (common practice; settle it with the crew before the bundle is made)",
  );
  flowTextInPlace(
    flow,
    "Outer face inward, each fold padded; every corner with its name on a tag that shows. Draw on the bundle which way it unfolds and which corner of the site it is laid to.",
  );
  pieces.forEach((p, i) => {
    const { corners, panels } = foldOrder(facts, p.panels);
    const which = pieces.length > 1 ? `Piece ${i + 1}: ` : "";
    const first = corners[0] ?? "the end that is wanted first";
    const steps = [
      `${which}Fold zigzag along the seams, panel by panel, the first lowest, the last on top: ${panels.join(", ")}.`,
      `${which}Then fold the pack from its other end towards ${first}, so that ${first} lies on top and outside.`,
      `${which}On site the bundle opens the other way round: ${first} leaves first and is held, then panels ${[...panels].reverse().join(", ")}.${corners.length > 1 ? ` Corners are wanted in this order: ${corners.join(", ")}.` : ""}`,
    ];
    for (const text of steps) flowTextInPlace(flow, text);
  });
  flowGapInPlace(flow, 3);
  flowCautionsInPlace(flow, cautionsNamed(facts, "suspended-load", "heavy-pack", "glass-folds"));
}

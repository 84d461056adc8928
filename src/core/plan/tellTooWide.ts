// Layouts of fewer strips that were cut on the way and did not fit the cloth: said beside the one that was taken, since a table that shows
// them begs the question why they were not.
import type { CutPanel } from "../records/flatPanel.ts";
import type { LayoutChoice } from "../records/stripLayout.ts";
import { type ClothRoom, isTurned, measureExtent } from "./clothRoom.ts";
import type { Fitted } from "./fitted.ts";

/** Width of the pocket that a panel is cut with, mm; 0 where it has none. */
function widestPocket(panel: CutPanel): number {
  return Math.max(0, ...panel.outlines.map((side, k) => (panel.sides[k].kind === "cable" ? side.allowance : 0)));
}

function describeTooWide(choice: LayoutChoice, fitted: Fitted, room: ClothRoom): string | null {
  const own = fitted.panels.output.filter((p) => choice.panels.includes(p.id) && !isTurned(p));
  const sized = own.map((panel) => ({ panel, width: 1000 * measureExtent(panel.cut).width }));
  const widest = sized.reduce((a, b) => (b.width > a.width ? b : a), sized[0]);
  if (!widest || widest.width <= 1000 * room.width) return null;
  const pocket = widestPocket(widest.panel);
  const least = 1000 * room.width;
  const told =
    ` ${choice.count} strips from ${choice.from} to ${choice.to} were cut too: up to ${widest.width.toFixed(0)} mm wide` +
    `${pocket > 0 ? `, pocket of ${pocket.toFixed(0)} mm included` : ""}, of ${least.toFixed(0)} mm usable.`;
  if (pocket === 0 || widest.width - pocket > least) return told;
  return `${told} They may fit with the pockets as separate strips (allowances.pocketStrip).`;
}

/** The choices of a fitted roof, each with the way of fewest strips that was tried for it and came out too wide. */
export function tellTooWide(fitted: Fitted, tried: readonly Fitted[], room: ClothRoom): LayoutChoice[] {
  return fitted.seams.output.choices.map((choice) => {
    const fewer = tried.flatMap((other) => {
      const own = other.seams.output.choices.find((c) => c.region === choice.region);
      const told = own && own.count < choice.count ? describeTooWide(own, other, room) : null;
      return own && told ? [{ count: own.count, told }] : [];
    });
    const least = fewer.reduce((a, b) => (b.count < a.count ? b : a), fewer[0]);
    return least ? { ...choice, why: choice.why + least.told } : choice;
  });
}

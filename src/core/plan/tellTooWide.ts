// Layouts of fewer strips that were cut on the way and did not fit the cloth: said beside the one that was taken, since a table that shows
// them begs the question why they were not.
import type { CutPanel } from "../records/flatPanel.ts";
import type { LayoutChoice } from "../records/stripLayout.ts";
import { type ClothRoom, isTurned, measureExtent } from "./clothRoom.ts";
import type { Fitted } from "./fitted.ts";

/** Width of the pocket or hem that a panel is cut with beside its net outline, mm: the widest of its edges'. */
function widestFlap(panel: CutPanel): number {
  return Math.max(0, ...panel.outlines.map((side, k) => (panel.sides[k].kind === "seam" ? 0 : side.allowance)));
}

function describeTooWide(choice: LayoutChoice, fitted: Fitted, room: ClothRoom): string | null {
  const own = fitted.panels.output.filter((p) => choice.panels.includes(p.id) && !isTurned(p));
  const sized = own.map((panel) => ({ panel, width: 1000 * measureExtent(panel.cut).width }));
  const widest = sized.reduce((a, b) => (b.width > a.width ? b : a), sized[0]);
  if (!widest || widest.width <= 1000 * room.width) return null;
  const flap = widestFlap(widest.panel);
  const flapped = flap > 0 ? `, flap of ${flap.toFixed(0)} mm included` : "";
  return (
    ` ${choice.count} strips from ${choice.from} to ${choice.to} were cut too: up to ${widest.width.toFixed(0)} mm wide` +
    `${flapped}, of ${(1000 * room.width).toFixed(0)} mm usable.`
  );
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

// What the last change came to: the figures of the plan before, and after an arrow those of the one that stands.
import { totalPlan } from "../store/planTotals.ts";
import { useBook } from "../store/useBook.ts";
import { isOlder } from "../store/useShown.ts";
import { figure, keepTogether } from "./figure.ts";

const FIGURES = [
  { key: "panels", what: "panels", unit: "", decimals: 0 },
  { key: "weld", what: "weld", unit: " m", decimals: 2 },
  { key: "left", what: "pieces on no roll", unit: "", decimals: 0 },
  { key: "taken", what: "taken off the rolls", unit: " m", decimals: 2 },
  { key: "cloth", what: "cloth", unit: " m²", decimals: 1 },
  { key: "offcut", what: "offcut", unit: " m²", decimals: 1 },
] as const;

/** One line with the figures that differ; empty before there are two plans to hold against each other. */
export function LastChange() {
  const facts = useBook((b) => b.facts);
  const before = useBook((b) => b.before);
  const older = useBook(isOlder);
  const running = useBook((b) => b.status === "running");
  const still = "This is still the plan before the last change.";
  // its line is always kept: whatever is below it, seams in hand too, must not jump when a plan comes to stand
  if (older || running || facts === null || before === null)
    return <span className="change">{older ? still : "\u00a0"}</span>;
  const now = totalPlan(facts);
  const told = FIGURES.flatMap(({ key, what, unit, decimals }) => {
    const [was, is] = [figure(before[key], decimals), figure(now[key], decimals)];
    return was === is ? [] : [`${what} ${was} → ${is}${unit}`];
  });
  const words = told.length === 0 ? "panels, weld and cloth as before" : told.join(", ");
  return <span className="change">{keepTogether(`Last change: ${words}.`)}</span>;
}

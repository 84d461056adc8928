// Checks that are made once for every panel or roll become one row: forty lines of the same words hide the one that matters. Nothing is
// lost: the row counts them, names them, and gives the one nearest to its limit, or farthest beyond it where they do not hold.
import type { Check } from "../../problem.ts";

/** Checks alike but for the thing checked and its number. */
export interface LikeChecks {
  /** What is checked, without the thing's name. */
  text: string;
  /** "panel" or "roll", and the names; empty for a check that is made once. */
  kind: string;
  names: string[];
  worst: Check;
  /** Name of the worst, where there are several. */
  worstName: string;
}

interface Told {
  check: Check;
  kind: string;
  name: string;
  text: string;
}

/** A check's words begin with the thing it is made of: "panel P1: …". Longest name first, as one may begin another. */
function tell(check: Check, things: readonly { kind: string; name: string }[]): Told {
  const thing = things.find(({ kind, name }) => check.text.startsWith(`${kind} ${name}: `));
  if (!thing) return { check, kind: "", name: "", text: check.text };
  return { check, ...thing, text: check.text.slice(thing.kind.length + thing.name.length + 3) };
}

function keyOf({ check, kind, text }: Told): string {
  return JSON.stringify([check.station, check.holds, kind, check.limit, text]);
}

/** How near a check that holds comes to its limit, how far beyond it one that does not: the greater, the worse. */
function gravity({ value, limit, holds }: Check): number {
  if (typeof value !== "number" || typeof limit !== "number") return 0;
  return holds ? -Math.abs(value - limit) : Math.abs(value - limit);
}

/**
 * The checks in groups of alike ones, in the order in which each kind was first made; those that do not hold are never put together
 * with those that do.
 */
export function likeChecks(
  checks: readonly Check[],
  things: { readonly panels: readonly string[]; readonly rolls: readonly string[] },
): LikeChecks[] {
  const known = [
    ...things.panels.map((name) => ({ kind: "panel", name })),
    ...things.rolls.map((name) => ({ kind: "roll", name })),
  ].sort((a, b) => b.name.length - a.name.length);
  const groups = new Map<string, Told[]>();
  for (const check of checks) {
    const told = tell(check, known);
    const key = keyOf(told);
    const group = groups.get(key);
    if (group && told.name !== "") group.push(told);
    // A check without a thing stands alone, even if its words come twice.
    else groups.set(group ? `${key} ${groups.size}` : key, [told]);
  }
  return [...groups.values()].map((all) => {
    const worst = all.reduce((w, t) => (gravity(t.check) > gravity(w.check) ? t : w));
    const alone = all.length === 1;
    return {
      text: alone ? all[0].check.text : worst.text,
      kind: alone ? "" : worst.kind,
      names: alone ? [] : all.map((t) => t.name),
      worst: worst.check,
      worstName: alone ? "" : worst.name,
    };
  });
}

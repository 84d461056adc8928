// The bytes of facts.json: the same from the command line and from the page.
import { PlanError } from "../problem.ts";
import type { Facts } from "../records/facts.ts";

/**
 * The bytes of facts.json.
 * @throws PlanError facts-not-finite: JSON has no NaN, and a null would pass for "none"
 */
export function writeFactsJson(facts: Facts): Uint8Array<ArrayBuffer> {
  const text = JSON.stringify(facts, (key, value) => {
    if (typeof value === "number" && !Number.isFinite(value)) {
      throw new PlanError(
        "facts-not-finite",
        `the plan holds ${value} under ${JSON.stringify(key)}: a fault of this program; nothing was written`,
        key,
      );
    }
    return value;
  });
  return new TextEncoder().encode(`${text}\n`);
}

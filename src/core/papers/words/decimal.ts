// Numbers as they stand on papers: a fixed count of decimals, never an exponent, never a minus before zero.
import { PlanError } from "../../problem.ts";

/**
 * The number with a fixed count of decimals.
 * @throws PlanError "papers-number" where it is no finite number below 1e12, the limit that keeps exponents out
 */
export function decimal(value: number, decimals: number, where = "papers"): string {
  if (!Number.isFinite(value) || Math.abs(value) >= 1e12) {
    throw new PlanError(
      "papers-number",
      `${where}: ${value} cannot be drawn or listed. Every number on the papers must be finite and below 1e12; plan the job again from the station that gave it.`,
      where,
      { value: String(value) },
    );
  }
  const text = value.toFixed(decimals);
  return Number(text) === 0 ? text.replace("-", "") : text;
}

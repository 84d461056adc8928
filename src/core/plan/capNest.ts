// The job's nest.seconds: a clock beside the plan, since the core has none.
import type { Station } from "../problem.ts";

/**
 * Hooks for runPlan that end the nesting once its seconds are used up; its first layout is always built.
 * @param now a clock in ms
 */
export function capNest(seconds: number | null, now: () => number) {
  let station: Station | null = null;
  let since: number | null = null;
  const spent = () => {
    since ??= now();
    return (now() - since) / 1000;
  };
  return {
    onStation: (next: Station) => {
      station = next;
    },
    cancelled: () => {
      if (station !== "rolls" || seconds === null) return false;
      return spent() > seconds;
    },
    /** Seconds of nesting so far. */
    elapsed: () => (station === "rolls" ? spent() : 0),
  };
}

// What was taken off the panels, in words that leave no doubt which way a per cent is meant. Judges nothing.
// Source: 1/(1 + e) and 1 − e differ by 9 mm on 10 m at 3 % (arithmetic).
import type { Finding } from "../../problem.ts";
import type { FlatPanel } from "../../records/flatPanel.ts";

const percent = (e: number) => `${(100 * e).toFixed(3)} %`;

/** One note for each batch and compensation: elastic and permanent part apart, and what it makes of 1000 mm. */
export function noteCompensation(panels: readonly FlatPanel[]): Finding[] {
  const groups = new Map<string, FlatPanel[]>();
  for (const p of panels) {
    const key = JSON.stringify([p.batch, p.compensation, p.permanent]);
    groups.set(key, [...(groups.get(key) ?? []), p]);
  }
  return [...groups.values()].map((group): Finding => {
    const [{ batch, compensation, permanent }] = group;
    const ways = (["warp", "weft"] as const).map((way) => {
      const e = compensation[way];
      const elastic = (1 + e) / (1 + permanent[way]) - 1;
      const kept =
        Math.abs(permanent[way]) > 1e-9
          ? ` (${percent(elastic)} springs back, ${percent(permanent[way])} is permanent)`
          : ", all of it elastic";
      return `${way} ${percent(e)}${kept}: 1000 mm on the form are cut ${(1000 / (1 + e)).toFixed(2)} mm`;
    });
    return {
      code: "panel-compensated",
      level: "note",
      station: "panels",
      where: group.map((p) => p.id),
      value: compensation.warp,
      limit: null,
      text:
        `${group.length === 1 ? `panel ${group[0].id} is` : `${group.length} panels are`} patterned for ` +
        `${batch === null ? "any batch of the cloth, by no test of its own" : `batch ${batch}`}: ${ways.join("; ")}. ` +
        "Per cent are of the cloth: flat = form / (1 + e), so 1 % takes 9.90 mm off a metre, not 10",
      remedy:
        "the flat shapes hold it already: do not compensate again; another batch needs its own test (compensation, panels)",
      basis: "own argument",
    };
  });
}

/** That laps were counted as two layers, and what follows for the figures. */
export function noteLaps(panels: readonly FlatPanel[], overlap: number): Finding {
  return {
    code: "seam-double",
    level: "note",
    station: "panels",
    where: panels.map((p) => p.id),
    value: 1000 * overlap,
    limit: null,
    text: `the cloth is counted double over the ${(1000 * overlap).toFixed(0)} mm that seams lap, in the flattening and in the assembled roof; stress as patterned is that of one layer, less than intended beside seams`,
    remedy: "leave seams.doubleCloth out to count one layer everywhere",
    basis: "own argument: two layers carry the intended force at half the strain",
  };
}

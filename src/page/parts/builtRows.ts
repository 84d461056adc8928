// The assembled roof as figures: what it carries and where it stands, each held against what was intended.
import type { FactsAsBuilt } from "../../core/records/rig.ts";
import type { FigureRow } from "./FigureTable.tsx";
import { figure } from "./figure.ts";

const percent = (share: number, digits = 1) => figure(100 * share, digits);

/** Rows for a table of figures; forces are those of adjusters and cables, the one furthest off. */
export function listBuiltRows(built: FactsAsBuilt): FigureRow[] {
  const { stress, intended, limits } = built;
  const worst = Math.max(0, ...Object.values(built.panels));
  const rows: FigureRow[] = (["warp", "weft"] as const).map((way) => {
    const { min, mean, max, rmsError } = stress[way];
    const off = Math.abs(mean / intended.stress[way] - 1);
    return {
      what: `As built, mean ${way} stress`,
      value: figure(mean, 2),
      unit: "kN/m",
      against:
        `intended ${figure(intended.stress[way], 2)}, ${percent(off)} % off of ${percent(limits.mean)} allowed; ` +
        `${figure(min, 2)} to ${figure(max, 2)}, rms error ${figure(rmsError, 2)}`,
      holds: off <= limits.mean,
    };
  });
  rows.push({
    what: "As built, worst panel's rms error",
    value: percent(worst, 0),
    unit: "%",
    against: `of the intended stress, ${percent(limits.rms, 0)} % allowed`,
    holds: worst <= limits.rms,
  });
  rows.push({
    what: "Greatest displacement as built",
    value: figure(1000 * built.displacementMax, 1),
    unit: "mm",
    against: `from the form, ${figure(1000 * limits.moved, 0)} mm allowed`,
    holds: built.displacementMax <= limits.moved,
  });
  const off = (id: string) => Math.abs((built.forces[id] ?? 0) / (intended.forces[id] ?? 1) - 1);
  const ids = Object.keys(intended.forces).filter((id) => (intended.forces[id] ?? 0) > 0);
  const most = ids.reduce<string | null>((far, id) => (far === null || off(id) > off(far) ? id : far), null);
  if (most !== null)
    rows.push({
      what: `As built, force furthest off: ${most}`,
      value: figure(built.forces[most] ?? 0, 1),
      unit: "kN",
      against: `intended ${figure(intended.forces[most] ?? 0, 1)}, ${percent(off(most))} % off of ${percent(limits.force)} allowed`,
      holds: off(most) <= limits.force,
    });
  rows.push({
    what: "As built, cloth not taut",
    value: percent(built.compressedShare),
    unit: "%",
    against: `of the area, ${percent(limits.slack)} % allowed`,
    holds: built.compressedShare <= limits.slack,
  });
  return rows;
}

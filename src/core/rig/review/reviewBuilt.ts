// The proof of the assembled roof: stress, displacement, forces and slack cloth as built, each against what was intended. Limits are
// the job's (proof); where it gives none they are common practice, and the plan says so.
import type { Check, Finding } from "../../problem.ts";
import type { FactsAsBuilt } from "../../records/rig.ts";

const BASIS = "limits of the job (proof), or their defaults";

function percent(share: number, digits = 1): string {
  return `${(100 * share).toFixed(digits)} %`;
}

/** One comparison: its check, and its finding where it does not hold. */
interface Compared {
  check: string;
  value: number;
  limit: number;
  finding: { code: string; where: string[]; text: string; remedy: string };
}

function compareMean(built: FactsAsBuilt): Compared[] {
  return (["warp", "weft"] as const).map((way) => {
    const { min, mean, max, rmsError } = built.stress[way];
    const intended = built.intended.stress[way];
    const off = Math.abs(mean / intended - 1);
    return {
      check: `assembled roof: mean ${way} stress, share off the intended ${intended.toFixed(2)} kN/m`,
      value: off,
      limit: built.limits.mean,
      finding: {
        code: "built-mean",
        where: [],
        text:
          `assembled, the roof carries ${mean.toFixed(2)} kN/m ${way} in the mean (${min.toFixed(2)} to ${max.toFixed(2)}, ` +
          `rms error ${rmsError.toFixed(2)}) where ${intended.toFixed(2)} was intended: ${percent(off)} off, ${percent(built.limits.mean)} is allowed`,
        remedy:
          "check the balance of the form, the compensation and decompensation, and the cables' forces and stiffness",
      },
    };
  });
}

function comparePanels(built: FactsAsBuilt): Compared {
  const worst = Math.max(0, ...Object.values(built.panels));
  const beyond = Object.keys(built.panels).filter((id) => built.panels[id] > built.limits.rms);
  return {
    check: "assembled roof: greatest rms stress error of a panel, share of the intended stress",
    value: worst,
    limit: built.limits.rms,
    finding: {
      code: "built-stress",
      where: beyond,
      text:
        `assembled, the stress of ${beyond.length === 1 ? `panel ${beyond[0]}` : `${beyond.length} panels`} is off by up to ` +
        `${percent(worst, 0)} (rms) of what was intended; ${percent(built.limits.rms, 0)} is allowed`,
      remedy: "narrower strips there, or decompensate less along their edges",
    },
  };
}

function compareForces(built: FactsAsBuilt): Compared[] {
  const { forces } = built.intended;
  const ids = Object.keys(forces).filter((id) => forces[id] > 0 && built.forces[id] !== undefined);
  if (ids.length === 0) return [];
  const off = (id: string) => Math.abs(built.forces[id] / forces[id] - 1);
  const beyond = ids.filter((id) => off(id) > built.limits.force);
  const worst = ids.reduce((most, id) => (off(id) > off(most) ? id : most));
  return [
    {
      check: `assembled roof: force of a cable or adjuster, share off the intended one (${worst} most)`,
      value: off(worst),
      limit: built.limits.force,
      finding: {
        code: "built-force",
        where: beyond,
        text:
          `assembled, ${worst} carries ${built.forces[worst].toFixed(2)} kN where ${forces[worst].toFixed(2)} was intended: ` +
          `${percent(off(worst))} off, ${percent(built.limits.force)} is allowed${beyond.length > 1 ? `; ${beyond.length} are beyond it` : ""}`,
        remedy: "check the balance of the form, and the cable's EA and force in the job",
      },
    },
  ];
}

/** Checks of the assembled roof, and a caution for each that does not hold. */
export function reviewBuilt(built: FactsAsBuilt): { findings: Finding[]; checks: Check[] } {
  const { displacementMax, compressedShare, limits } = built;
  const rows: Compared[] = [
    ...compareMean(built),
    comparePanels(built),
    {
      check: "assembled roof: greatest way of a point from the form, mm",
      value: 1000 * displacementMax,
      limit: 1000 * limits.moved,
      finding: {
        code: "built-moved",
        where: [],
        text: `assembled, a point of the roof stands ${(1000 * displacementMax).toFixed(0)} mm from the form; ${(1000 * limits.moved).toFixed(0)} mm is allowed`,
        remedy: "check the balance of the form and the panels' stress; clearances must be looked at anew",
      },
    },
    ...compareForces(built),
    {
      check: "assembled roof: share of the cloth that is not taut",
      value: compressedShare,
      limit: limits.slack,
      finding: {
        code: "cloth-slack",
        where: [],
        text: `${percent(compressedShare)} of the cloth is not taut at the finished state; ${percent(limits.slack)} is allowed`,
        remedy:
          "use narrower strips, check the compensation and the balance of the form: slack cloth flutters and wears",
      },
    },
  ];
  return {
    checks: rows.map((r) => ({
      station: "rig",
      text: r.check,
      value: r.value,
      limit: r.limit,
      holds: r.value <= r.limit,
    })),
    findings: rows
      .filter((r) => !(r.value <= r.limit))
      .map((r) => ({
        ...r.finding,
        level: "caution",
        station: "rig",
        value: r.value,
        limit: r.limit,
        basis: BASIS,
      })),
  };
}

// Readings against the rig: which member or corner each one speaks of, and which cannot be used.
import { type Finding, PlanError } from "../../problem.ts";
import type { Reading } from "../../records/rig.ts";
import type { Vec3 } from "../../surface/surface.ts";
import type { Rig } from "../build/buildRig.ts";
import type { RigInput } from "../rigInput.ts";
import { listMembers, type Member } from "../stages/readState.ts";
import { measureVibrationForce } from "./readReadings.ts";

/** Readings as the fit takes them. */
export interface SortedReadings {
  forces: { row: number; member: Member; kN: number }[];
  /** Places of free nodes: corners at adjusters. */
  corners: { row: number; id: string; node: number; at: Vec3 }[];
  /** Places of held nodes: anchors without an adjuster. */
  anchors: { row: number; id: string; node: number; at: Vec3 }[];
  /** Mean temperature of the readings that give one, degC. */
  temperature: number | null;
  findings: Finding[];
}

/** Distance from its planned place beyond which a surveyed place is taken for another point or another unit, m. */
const strayed = 0.5;

/** @throws PlanError reading-unknown: an id the rig has not, with those it has */
export function sortReadings(input: RigInput, rig: Rig, readings: readonly Reading[]): SortedReadings {
  const out: SortedReadings = { forces: [], corners: [], anchors: [], temperature: null, findings: [] };
  const members = new Map(listMembers(rig).map((m) => [m.id, m]));
  const place = (id: string) => {
    const adjuster = rig.adjusters.find((a) => a.id === id) ?? rig.adjusters.find((a) => a.anchor === id);
    return adjuster?.nodes[0] ?? input.form.anchors.find((a) => a.id === id)?.vertex;
  };
  const known = () =>
    [...members.keys(), ...input.form.anchors.map((a) => a.id)].filter((q, i, all) => all.indexOf(q) === i).join(", ");
  for (const r of readings) {
    const where = `row ${r.row}`;
    const unknown = () =>
      new PlanError(
        "reading-unknown",
        `readings, ${where}: the plan has no ${r.at ? "anchor or corner" : "adjuster, cable or stay"} "${r.id}"; it has ${known()}`,
        [where, r.id],
      );
    if (r.at) {
      const node = place(r.id);
      if (node === undefined) throw unknown();
      const entry = { row: r.row, id: r.id, node, at: r.at };
      const gap = Math.hypot(...r.at.map((q, k) => q - rig.structure.xyz[3 * node + k]));
      if (gap > strayed) {
        out.findings.push(
          refuse(
            r,
            gap,
            strayed,
            `${r.id} is surveyed ${gap.toFixed(2)} m from its planned place, more than ${strayed} m: another point, axis or unit`,
            "check the point and the survey's origin; the reading is left out",
          ),
        );
        continue;
      }
      (rig.structure.held[3 * node] ? out.anchors : out.corners).push(entry);
      continue;
    }
    const member = members.get(r.id);
    if (!member) throw unknown();
    if (r.vibration && rig.cables.some((c) => c.id === r.id && c.edge !== null)) {
      out.findings.push(
        refuse(
          r,
          r.vibration.frequency,
          null,
          `${r.id} runs in a pocket: its frequency is not that of a free span`,
          "read its force with a gauge, or at the adjuster; the reading is left out",
        ),
      );
      continue;
    }
    out.forces.push({ row: r.row, member, kN: r.vibration ? measureVibrationForce(r.vibration) : (r.force ?? 0) });
  }
  const degrees = readings.flatMap((r) => (r.temperature === null ? [] : [r.temperature]));
  if (degrees.length > 0) out.temperature = degrees.reduce((a, b) => a + b) / degrees.length;
  return out;
}

function refuse(r: Reading, value: number, limit: number | null, text: string, remedy: string): Finding {
  return {
    code: r.at ? "reading-place" : "reading-pocket",
    level: "caution",
    station: "rig",
    where: [`row ${r.row}`, r.id],
    value,
    limit,
    text: `readings, row ${r.row}: ${text}`,
    remedy,
    basis: "own argument",
  };
}

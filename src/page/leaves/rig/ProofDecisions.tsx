// How far the roof as built may be from what was intended, before somebody must look at it.

import { setProof } from "../../actions/rig/setProof.ts";
import { NumberField } from "../../parts/Fields.tsx";
import { Fold } from "../../parts/Fold.tsx";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";

const LIMITS = [
  { key: "mean", label: "Mean stress as built may be off by", unit: "%", factor: 0.01 },
  { key: "rms", label: "Stress within a panel may be off by (rms)", unit: "%", factor: 0.01 },
  { key: "moved", label: "A point may stand off the form by", unit: "mm", factor: 1 },
  { key: "force", label: "A cable or adjuster may be off by", unit: "%", factor: 0.01 },
  { key: "slack", label: "Cloth not taut may be", unit: "%", factor: 0.01 },
] as const;

/** The limits, folded away while they are the usual ones. */
export function ProofDecisions() {
  const given = useBook((b) => b.project?.job.proof);
  const held = useBook((b) => b.job?.proof);
  const moved = useBook((b) => b.facts?.asBuilt?.limits.moved);
  return (
    <Fold className="group" path="proof" open={given !== undefined} words="Limits of the roof as built">
      {LIMITS.map(({ key, label, unit, factor }) => (
        <NumberField
          key={key}
          label={label}
          path={`proof.${key}`}
          given={given?.[key] != null}
          value={given?.[key] ?? held?.[key] ?? null}
          none={key === "moved" && moved !== undefined ? String(Math.round(1000 * moved)) : ""}
          unit={unit}
          factor={factor}
          onChange={(value) => act(setProof, { key, value }, label.toLowerCase())}
        />
      ))}
    </Fold>
  );
}

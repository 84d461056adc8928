// What the rig station is given. Types only.
import type { Fabric } from "../records/fabric.ts";
import type { FlatPanel } from "../records/flatPanel.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { CableType, ProofLimits, RigDecision } from "../records/rig.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import type { Vec3 } from "../surface/surface.ts";

/** What the rig station is given. */
export interface RigInput {
  form: FoundForm;
  layout: StripLayout;
  panels: FlatPanel[];
  fabric: Fabric;
  /** Cable of every cable edge, by edge id. */
  cables: Record<string, { type: CableType; prestretched: boolean }>;
  /** Far pin of an anchor, where the job gives it, by anchor id. */
  supports: Record<string, Vec3>;
  /** Where pins were surveyed, by anchor id: far pins of adjusters, else the anchors themselves. */
  survey: Record<string, Vec3>;
  rig: RigDecision;
  /** Overlap (m) of seams whose second layer of cloth carries too; null: one layer everywhere. */
  lap: { overlap: number; on: "both" | "one" } | null;
  /** Limits for the assembled roof. */
  proof: ProofLimits;
}

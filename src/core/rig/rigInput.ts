// What the rig station is given. Types only.
import type { Fabric } from "../records/fabric.ts";
import type { FlatPanel } from "../records/flatPanel.ts";
import type { FoundForm } from "../records/foundForm.ts";
import type { CableMaking, CableType, ProofLimits, RigDecision } from "../records/rig.ts";
import type { StripLayout } from "../records/stripLayout.ts";
import type { Vec3 } from "../surface/surface.ts";

/** How far a clamped edge stands from where it is drawn, at one known point of it. m */
export interface EdgeShift {
  /** Length along the edge as drawn. */
  at: number;
  by: Vec3;
}

/** What the rig station is given. */
export interface RigInput {
  form: FoundForm;
  layout: StripLayout;
  panels: FlatPanel[];
  fabric: Fabric;
  /** Cable of every cable edge, by edge id. */
  cables: Record<string, { type: CableType; prestretched: boolean; making?: CableMaking }>;
  /** How far the cloth is cut back at an anchor's plate, mm, by anchor id. */
  cutBacks: Record<string, number>;
  /** Far pin of an anchor, where the job gives it, by anchor id. */
  supports: Record<string, Vec3>;
  /** Where pins were surveyed, by anchor id: far pins of adjusters, else the anchors themselves. */
  survey: Record<string, Vec3>;
  /** Known points of clamped edges that stand elsewhere than the cut cloth was made for, by edge, ascending along it. */
  shifts: Record<string, EdgeShift[]>;
  rig: RigDecision;
  /** Overlap (m) of seams whose second layer of cloth carries too; null: one layer everywhere. */
  lap: { overlap: number; on: "both" | "one" } | null;
  /** Limits for the assembled roof. */
  proof: ProofLimits;
}

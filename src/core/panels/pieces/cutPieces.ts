// Cloth that is no panel of the form but is cut from the same rolls: pocket and cover strips (edgeStrips.ts), patches where corners
// are set back to a plate, pieces to try the weld on. mm. Does not: nest, draw. Sizes are common practice.
import type { Finding, StationResult } from "../../problem.ts";
import type { CutPanel, CutPiece, Ring } from "../../records/flatPanel.ts";
import type { FoundForm } from "../../records/foundForm.ts";
import type { Job } from "../../records/job.ts";
import type { Seam } from "../../records/stripLayout.ts";
import { ringArea } from "../../surface/ring.ts";
import { intersectRings, subtractRings } from "../outline/polygonBooleans.ts";
import { buildCoverStrips, buildPocketStrips, noteOf, rectangle } from "./edgeStrips.ts";

/** A corner patch reaches this much further than the cloth is set back, mm. */
const PATCH_REACH = 400;
/** Weld test piece: along the weld, and across both halves, mm. */
const TEST_LENGTH = 300;
const TEST_WIDTH = 450;

/** A patch on every panel corner at an anchor where the job sets cloth back: the panel's own net outline there, warp on warp. */
function buildPatches(
  panels: readonly CutPanel[],
  form: FoundForm,
  job: Job,
): { pieces: CutPiece[]; findings: Finding[] } {
  const pieces: CutPiece[] = [];
  for (const decision of job.anchors) {
    const cutBack = decision.cutBack ?? 0;
    const anchor = form.anchors.find((a) => a.id === decision.name);
    if (!(cutBack > 0) || anchor === undefined) continue;
    for (const panel of panels) {
      const v = panel.surfaceVertex.indexOf(anchor.vertex);
      if (v < 0) continue;
      const cut = cutPatch(panel, [panel.flat[2 * v], panel.flat[2 * v + 1]], cutBack);
      if (cut === null) continue;
      const { fabric, batch } = panel;
      pieces.push({ id: `${anchor.id}-patch-${panel.id}`, kind: "patch", for: anchor.id, fabric, batch, cut });
    }
  }
  if (pieces.length === 0) return { pieces, findings: [] };
  const text = `${pieces.length === 1 ? "1 corner patch" : `${pieces.length} corner patches`} of one layer, from where the cloth is set back to ${PATCH_REACH} mm further, warp along the panel's warp`;
  const remedy = "Patches follow from anchors.cutBack; more layers or another size are the engineer's.";
  return {
    pieces,
    findings: [noteOf("piece-patch", [...new Set(pieces.map((p) => p.for))], pieces.length, text, remedy)],
  };
}

/** What of a panel's net lies on the cloth, between the set-back and the patch's reach. */
function cutPatch(panel: CutPanel, [x, y]: [number, number], cutBack: number): Ring | null {
  const reach = cutBack + PATCH_REACH;
  const n = 48;
  const circle = (radius: number): Ring =>
    Float64Array.from({ length: 2 * n }, (_, i) => {
      const a = (2 * Math.PI * (i >> 1)) / n;
      return i % 2 === 0 ? x + radius * Math.cos(a) : y + radius * Math.sin(a);
    });
  const inside = subtractRings(intersectRings([panel.net], [circle(reach)]), [circle(cutBack)]);
  const best = inside.reduce<Ring | null>((most, r) => (ringArea(r) > (most ? ringArea(most) : 0) ? r : most), null);
  return best !== null && ringArea(best) > 0 ? best : null;
}

/** One piece to try the weld on for each batch that is welded. */
function buildTests(panels: readonly CutPanel[]): { pieces: CutPiece[]; findings: Finding[] } {
  const cloths = new Map<string, { fabric: string; batch: string | null }>();
  for (const { fabric, batch, sides } of panels)
    if (sides.some((s) => s.kind === "seam")) cloths.set(`${fabric}|${batch ?? ""}`, { fabric, batch });
  const pieces = [...cloths.values()].map(
    ({ fabric, batch }, k): CutPiece => ({
      id: `weld-test-${k + 1}`,
      kind: "test",
      for: batch ?? fabric,
      fabric,
      batch,
      cut: rectangle(TEST_LENGTH, TEST_WIDTH),
    }),
  );
  if (pieces.length === 0) return { pieces, findings: [] };
  const text = `${pieces.length === 1 ? "a piece" : `${pieces.length} pieces, one a batch,`} of ${TEST_LENGTH} x ${TEST_WIDTH} mm to try the weld on: cut in two along the warp, welded with the seam's overlap, torn in strips`;
  return {
    pieces,
    findings: [
      noteOf(
        "piece-test",
        pieces.map((p) => p.id),
        pieces.length,
        text,
        "Number and size of weld tests are the office's quality plan.",
      ),
    ],
  };
}

/**
 * Pocket strips, cover strips, patches and test pieces that these panels need, in that order.
 * @units mm, length along the warp
 * @throws PlanError outline-span (polygonBooleans.ts)
 */
export function buildPieces(
  panels: readonly CutPanel[],
  roof: { form: FoundForm; seams: readonly Pick<Seam, "id" | "cable">[] },
  job: Job,
): StationResult<CutPiece[]> {
  const parts = [
    buildPocketStrips(panels, roof.form, job),
    buildCoverStrips(panels, roof.seams, job),
    buildPatches(panels, roof.form, job),
    buildTests(panels),
  ];
  return { output: parts.flatMap((p) => p.pieces), findings: parts.flatMap((p) => p.findings), checks: [] };
}

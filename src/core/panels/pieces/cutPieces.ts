// Cloth that is no panel of the form but is cut from the same rolls: strips for pockets that are not folded from the panel,
// patches where corners are set back to a plate, pieces to try the weld on. mm. Does not: nest, draw.
// Sizes are common practice; how strips are divided is own argument (below).
import type { Finding, StationResult } from "../../problem.ts";
import type { CutPanel, CutPiece, Ring } from "../../records/flatPanel.ts";
import type { FoundForm } from "../../records/foundForm.ts";
import type { Job } from "../../records/job.ts";
import { ringArea } from "../../surface/ring.ts";
import { intersectRings, subtractRings } from "../outline/polygonBooleans.ts";
import { listPoints, measureBends } from "../outline/sideLine.ts";

/** Longest part of a pocket strip, and the shortest worth dividing, mm. */
const STRIP_LONGEST = 3000;
const STRIP_SHORTEST = 500;
/** What the edge of a strip's part may be out of length, mm. */
const STRIP_GAPE = 10;
/** A corner patch reaches this much further than the cloth is set back, mm. */
const PATCH_REACH = 400;
/** Weld test piece: along the weld, and across both halves, mm. */
const TEST_LENGTH = 300;
const TEST_WIDTH = 450;

/** A straight rectangle, its length along the warp. */
function rectangle(length: number, width: number): Ring {
  return Float64Array.from([0, 0, length, 0, length, width, 0, width]);
}

/** The one batch all these panels share, or null. */
function sharedBatch(panels: readonly CutPanel[]): string | null {
  const [first] = panels;
  return first !== undefined && panels.every((p) => p.batch === first.batch) ? first.batch : null;
}

function note(code: string, where: string[], value: number, text: string, remedy: string): Finding {
  return { code, level: "note", station: "panels", where, value, limit: null, text, remedy, basis: "common practice" };
}

/** Sides whose pocket is a separate strip: cable sides without an allowance of their own. */
function listStripSides(panel: CutPanel): number[] {
  return panel.sides.flatMap((side, k) => (side.kind === "cable" && panel.outlines[k].allowance === 0 ? [k] : []));
}

/**
 * Pocket strips edge by edge: straight, twice the pocket wide, folded in the middle over the cable and laid on both faces. On a bend
 * of radius R an edge of the strip is p/R out of length, so it is divided into parts of one length that each gape by 10 mm at most.
 */
function buildStrips(
  panels: readonly CutPanel[],
  form: FoundForm,
  job: Job,
): { pieces: CutPiece[]; findings: Finding[] } {
  const { pocket } = job.allowances;
  if (!(pocket > 0)) return { pieces: [], findings: [] };
  const edges = new Map<string, { panels: CutPanel[]; length: number; turn: number }>();
  for (const panel of panels)
    for (const k of listStripSides(panel)) {
      const side = panel.sides[k];
      const edge = edges.get(side.id) ?? { panels: [], length: 0, turn: 0 };
      const points = listPoints(panel, side.vertices);
      const bends = measureBends(points, 4 * pocket);
      for (let i = 1; i < points.length; i++) {
        const step = Math.hypot(points[i][0] - points[i - 1][0], points[i][1] - points[i - 1][1]);
        edge.turn += (step * (Math.abs(bends[i - 1]) + Math.abs(bends[i]))) / 2;
      }
      edge.panels.push(panel);
      edge.length += side.lengthFlat;
      edges.set(side.id, edge);
    }
  const pieces: CutPiece[] = [];
  const findings: Finding[] = [];
  const longest = Math.min(STRIP_LONGEST, job.nest.bite ?? Infinity, job.fabric.rollLength);
  for (const { id } of form.edges) {
    const edge = edges.get(id);
    if (edge === undefined) continue;
    const gapes = Math.min(Math.ceil((pocket * edge.turn) / STRIP_GAPE), Math.floor(edge.length / STRIP_SHORTEST));
    const parts = Math.max(1, Math.ceil(edge.length / longest), gapes);
    const cut = rectangle(edge.length / parts, 2 * pocket);
    const batch = sharedBatch(edge.panels);
    for (let k = 1; k <= parts; k++)
      pieces.push({ id: `${id}-strip-${k}`, kind: "strip", for: id, fabric: job.fabric.id, batch, cut });
    findings.push(
      note(
        "piece-strip",
        [id],
        parts,
        `edge ${id}: ${edge.length.toFixed(0)} mm of its pocket are a separate strip, ${parts} ${parts === 1 ? "part" : "parts"} of ` +
          `${(edge.length / parts).toFixed(0)} x ${(2 * pocket).toFixed(0)} mm, folded in the middle, butted end to end` +
          (job.allowances.pocketStrip
            ? ""
            : "; the sides there are too short or too tightly bent to fold a flap of this width"),
        "Give allowances.pocketStrip and allowances.pocket to have it otherwise.",
      ),
    );
  }
  return { pieces, findings };
}

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
    findings: [note("piece-patch", [...new Set(pieces.map((p) => p.for))], pieces.length, text, remedy)],
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
      note(
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
 * Strips, patches and test pieces that these panels need, in that order.
 * @units mm, length along the warp
 * @throws PlanError outline-span (polygonBooleans.ts)
 */
export function buildPieces(panels: readonly CutPanel[], form: FoundForm, job: Job): StationResult<CutPiece[]> {
  const parts = [buildStrips(panels, form, job), buildPatches(panels, form, job), buildTests(panels)];
  return { output: parts.flatMap((p) => p.pieces), findings: parts.flatMap((p) => p.findings), checks: [] };
}

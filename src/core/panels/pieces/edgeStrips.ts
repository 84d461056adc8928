// Straight strips laid along a line of the roof: over an edge cable as its pocket, over a cable between panels as its cover. mm.
// Sizes are common practice; how strips are divided is own argument (divideInPlace).
import type { Finding } from "../../problem.ts";
import type { CutPanel, CutPiece, PanelSide, Ring } from "../../records/flatPanel.ts";
import type { FoundForm } from "../../records/foundForm.ts";
import type { Job } from "../../records/job.ts";
import type { Seam } from "../../records/stripLayout.ts";
import { listPoints, measureBends } from "../outline/sideLine.ts";

/** Longest part of a strip, and the shortest worth dividing, mm. */
const STRIP_LONGEST = 3000;
const STRIP_SHORTEST = 500;
/** What the edge of a strip's part may be out of length, mm. */
const STRIP_GAPE = 10;

/** Pieces of one kind with what must be said of them. */
export interface MadePieces {
  pieces: CutPiece[];
  findings: Finding[];
}

/** A straight rectangle, its length along the warp. */
export function rectangle(length: number, width: number): Ring {
  return Float64Array.from([0, 0, length, 0, length, width, 0, width]);
}

/** A note on pieces of cloth. */
export function noteOf(code: string, where: string[], value: number, text: string, remedy: string): Finding {
  return { code, level: "note", station: "panels", where, value, limit: null, text, remedy, basis: "common practice" };
}

/** The one batch all these panels share, or null. */
function sharedBatch(panels: readonly CutPanel[]): string | null {
  const [first] = panels;
  return first !== undefined && panels.every((p) => p.batch === first.batch) ? first.batch : null;
}

/** A line of the roof along which strips are laid: its sides' panels, flat length, and turn (rad) in the flat. */
interface Line {
  panels: CutPanel[];
  length: number;
  turn: number;
}

function addSideInPlace(line: Line, panel: CutPanel, side: PanelSide, half: number): void {
  const points = listPoints(panel, side.vertices);
  const bends = measureBends(points, 4 * half);
  for (let i = 1; i < points.length; i++) {
    const step = Math.hypot(points[i][0] - points[i - 1][0], points[i][1] - points[i - 1][1]);
    line.turn += (step * (Math.abs(bends[i - 1]) + Math.abs(bends[i]))) / 2;
  }
  line.panels.push(panel);
  line.length += side.lengthFlat;
}

/**
 * Straight strips along a line, `half` wide on each side of it. On a bend of radius R an edge of the strip is half/R out of length,
 * so it is divided into parts of one length that each gape by 10 mm at most.
 */
function divide(id: string, kind: "strip" | "cover", line: Line, half: number, job: Job): CutPiece[] {
  const longest = Math.min(STRIP_LONGEST, job.nest.bite ?? Infinity, job.fabric.rollLength);
  const gapes = Math.min(Math.ceil((half * line.turn) / STRIP_GAPE), Math.floor(line.length / STRIP_SHORTEST));
  const count = Math.max(1, Math.ceil(line.length / longest), gapes);
  const cut = rectangle(line.length / count, 2 * half);
  const batch = sharedBatch(line.panels);
  return Array.from({ length: count }, (_, k) => ({
    id: `${id}-${kind}-${k + 1}`,
    kind,
    for: id,
    fabric: job.fabric.id,
    batch,
    cut,
  }));
}

function tellParts(pieces: readonly CutPiece[]): string {
  const [{ cut }] = pieces;
  return `${pieces.length} ${pieces.length === 1 ? "part" : "parts"} of ${cut[2].toFixed(0)} x ${cut[5].toFixed(0)} mm`;
}

/** Pocket strips edge by edge: twice the pocket wide, folded in the middle over the cable and laid on both faces. */
export function buildPocketStrips(panels: readonly CutPanel[], form: FoundForm, job: Job): MadePieces {
  const { pocket } = job.allowances;
  if (!(pocket > 0)) return { pieces: [], findings: [] };
  const edges = new Map<string, Line>();
  for (const panel of panels)
    panel.sides.forEach((side, k) => {
      // A pocket that is no strip is an allowance of the panel.
      if (side.kind !== "cable" || panel.outlines[k].allowance !== 0) return;
      const edge = edges.get(side.id) ?? { panels: [], length: 0, turn: 0 };
      addSideInPlace(edge, panel, side, pocket);
      edges.set(side.id, edge);
    });
  const made: MadePieces = { pieces: [], findings: [] };
  for (const { id } of form.edges) {
    const edge = edges.get(id);
    if (edge === undefined) continue;
    const pieces = divide(id, "strip", edge, pocket, job);
    made.pieces.push(...pieces);
    const text =
      `edge ${id}: ${edge.length.toFixed(0)} mm of its pocket are a separate strip, ${tellParts(pieces)}, folded in the middle, ` +
      `butted end to end${job.allowances.pocketStrip ? "" : "; the sides there are too short or too tightly bent to fold a flap of this width"}`;
    const remedy = "Give allowances.pocketStrip and allowances.pocket to have it otherwise.";
    made.findings.push(noteOf("piece-strip", [id], pieces.length, text, remedy));
  }
  return made;
}

/** Cover strips over every cable that parts two panels (ridge, valley, belt), where the job asks for them. */
export function buildCoverStrips(
  panels: readonly CutPanel[],
  seams: readonly Pick<Seam, "id" | "cable">[],
  job: Job,
): MadePieces {
  const { cover } = job.allowances;
  if (!(cover > 0)) return { pieces: [], findings: [] };
  const cables = new Map<string, Line>();
  for (const seam of seams) {
    if (seam.cable === null) continue;
    const line = cables.get(seam.cable) ?? { panels: [], length: 0, turn: 0 };
    // Both sides of a seam are equally long: the first panel's speaks for it.
    const panel = panels.find((p) => p.sides.some((s) => s.id === seam.id));
    const side = panel?.sides.find((s) => s.id === seam.id);
    if (panel && side) addSideInPlace(line, panel, side, cover / 2);
    cables.set(seam.cable, line);
  }
  const made: MadePieces = { pieces: [], findings: [] };
  for (const [id, line] of cables) {
    if (!(line.length > 0)) continue;
    const pieces = divide(id, "cover", line, cover / 2, job);
    made.pieces.push(...pieces);
    const text = `cable ${id}: a cover of ${line.length.toFixed(0)} mm over it, ${tellParts(pieces)}, laid over the joint and butted end to end`;
    made.findings.push(
      noteOf("piece-cover", [id], pieces.length, text, "Give allowances.cover to have it otherwise; 0 for none."),
    );
  }
  if (cables.size === 0)
    made.findings.push(
      noteOf(
        "piece-cover",
        [],
        0,
        "covers are asked for, but no ridge, valley or belt parts two panels: none is cut",
        "Leave allowances.cover out.",
      ),
    );
  return made;
}

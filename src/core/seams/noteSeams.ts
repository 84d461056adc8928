// What is said about a layout of seams: strips that run along an edge, are too long, too wide or very narrow, cables that end in the cloth.
import type { Finding } from "../problem.ts";
import type { StripEstimate } from "../records/stripLayout.ts";
import type { StripSize } from "./stripWidth.ts";
import type { RegionLayout } from "./trial.ts";

/** Strips narrower than this are a caution, m. own: two weld overlaps of 40 mm and a hand between. */
export const NARROW = 0.15;

/** Seams left out because they hug an edge. */
export function noteHugging(layout: RegionLayout): Finding[] {
  return layout.placement.hugging.map((j) => ({
    code: "seam-hugs-edge",
    level: "stop" as const,
    station: "seams" as const,
    where: [layout.region.id, `seam ${j + 1}`],
    value: null,
    limit: null,
    text: `Seam ${j + 1} of ${layout.region.id} from ${layout.candidate.from} to ${layout.candidate.to} runs along the edge of the cloth or touches it between its ends; it was left out.`,
    remedy: "Lay the strips between two other edges, ask for another count, or give the seams one by one.",
    basis: "own argument",
  }));
}

/** Strips that do not suit the cloth. */
export function noteSizes(
  strips: readonly StripEstimate[],
  sizes: readonly StripSize[],
  options: { usableWidth: number; maxLength: number | null },
): Finding[] {
  const findings: Finding[] = [];
  strips.forEach(({ panels }, j) => {
    const size = sizes[j];
    const base = { station: "seams" as const, where: panels.length === 1 ? panels[0] : panels };
    if (options.maxLength !== null && size.length > options.maxLength && panels.length === 1)
      findings.push({
        ...base,
        code: "strip-length",
        level: "stop",
        value: size.length,
        limit: options.maxLength,
        text: `${panels[0]} is about ${size.length.toFixed(2)} m long; the cloth gives ${options.maxLength.toFixed(2)} m, and no seam across it keeps clear of its edges.`,
        remedy: "Lay the strips the other way, give the seams one by one (pairs), or take a longer roll.",
        basis: "job: seams.maxLength or the roll's length",
      });
    if (size.width > options.usableWidth * 1.0005)
      findings.push({
        ...base,
        code: "strip-width",
        level: "caution",
        value: size.width,
        limit: options.usableWidth,
        text: `${panels.join(", ")} is about ${size.width.toFixed(3)} m wide before flattening; ${options.usableWidth.toFixed(3)} m can be used.`,
        remedy: "Ask for more strips, or leave the count to the tool.",
        basis: "estimate; the flat panel decides",
      });
    if (size.width < NARROW)
      findings.push({
        ...base,
        code: "strip-narrow",
        level: "caution",
        value: size.width,
        limit: NARROW,
        text: `${panels.join(", ")} is only about ${size.width.toFixed(3)} m wide.`,
        remedy: "Ask for fewer strips or lay them between other edges.",
        basis: "own argument: room for two weld overlaps",
      });
  });
  return findings;
}

/** Inner cables that divide nothing. */
export function notePruned(pruned: readonly string[]): Finding[] {
  return pruned.map((id) => ({
    code: "seam-cable-open",
    level: "caution" as const,
    station: "seams" as const,
    where: id,
    value: null,
    limit: null,
    text: `${id} ends inside the cloth and divides nothing: that part of it is no border between panels.`,
    remedy: "Lead the cable on to an edge or another cable, or lay a seam along its line.",
    basis: "own argument",
  }));
}

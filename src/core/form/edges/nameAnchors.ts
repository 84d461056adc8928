// The form's anchors in order with their names, and which vertices are held in space. Forces come later.

import { type Finding, PlanError } from "../../problem.ts";
import type { FormAnchor, FormEdge } from "../../records/foundForm.ts";
import type { AnchorDecision } from "../../records/job.ts";
import { nextHalfedge } from "../../surface/adjacency.ts";
import type { Surface } from "../../surface/surface.ts";
import { buildFormFinding } from "../formFinding.ts";
import type { HeldPoint } from "./heldPoints.ts";

/** Anchors and the held vertices of the whole form. */
export interface Anchorage {
  anchors: FormAnchor[];
  /** 1 where held. @shape nV */
  fixed: Uint8Array<ArrayBuffer>;
  findings: Finding[];
}

/** Vertices that share a side with a held one, for held vertices inside the surface. */
function findCrowded(surface: Surface, fixed: Uint8Array<ArrayBuffer>): Set<number> {
  const out = new Set<number>();
  const { tri } = surface;
  for (let h = 0; h < tri.length; h++) {
    const a = tri[h];
    const b = tri[nextHalfedge(h)];
    if (fixed[a] && fixed[b]) out.add(a).add(b);
  }
  return out;
}

function giveNames(vertices: readonly number[], held: Map<number, HeldPoint>, edgeIds: ReadonlySet<string>): string[] {
  const own = vertices.map((v) => held.get(v)?.name ?? null);
  const used = new Set<string>(edgeIds);
  for (const name of own) if (name !== null) used.add(name);
  let count = 0;
  return own.map((name) => {
    if (name !== null) return name;
    let id = "";
    do id = `A${++count}`;
    while (used.has(id));
    return id;
  });
}

/**
 * Anchors and held vertices.
 * @param onLoops anchor vertices of the loops, loop by loop
 * @throws PlanError anchor-unknown: the job names an anchor that is not there; anchor-double: it bears an edge's name
 */
export function nameAnchors(
  surface: Surface,
  onLoops: readonly number[],
  held: Map<number, HeldPoint>,
  edges: readonly FormEdge[],
  decisions: readonly AnchorDecision[],
): Anchorage {
  const fixed = new Uint8Array(surface.xyz.length / 3);
  const boundary = new Set(edges.filter((e) => e.loop >= 0).flatMap((e) => e.vertices));
  const inside = [...held.values()].filter((h) => !boundary.has(h.vertex));
  const order = inside.toSorted((a, b) => a.order - b.order || a.vertex - b.vertex).map((h) => h.vertex);
  const vertices = [...new Set([...onLoops, ...order])];
  const clamped = new Set(edges.filter((e) => e.kind === "clamped").flatMap((e) => e.vertices));
  for (const v of vertices) fixed[v] = 1;
  for (const v of clamped) fixed[v] = 1;
  for (const h of inside) fixed[h.vertex] = 1;
  const edgeIds = new Set(edges.map((e) => e.id));
  for (const d of decisions)
    if (edgeIds.has(d.name))
      throw new PlanError(
        "anchor-double",
        `anchor ${d.name}: an edge of the form has that name already; give another`,
        `anchors.${d.name}`,
      );
  const ids = giveNames(vertices, held, edgeIds);
  for (const d of decisions)
    if (!ids.includes(d.name))
      throw new PlanError(
        "anchor-unknown",
        `anchor ${d.name}: the form has no anchor of that name; it has ${ids.join(", ") || "none"}; give its vertex, or its position with "at" in metres`,
        `anchors.${d.name}`,
      );
  const crowded = findCrowded(surface, fixed);
  const anchors = vertices.map((vertex, i): FormAnchor => {
    const isolated = !clamped.has(vertex) && (boundary.has(vertex) || !crowded.has(vertex));
    return { id: ids[i], vertex, isolated };
  });
  const assumed = anchors.filter((a) => !held.has(a.vertex) && !clamped.has(a.vertex));
  const findings = assumed.slice(0, 1).map(() =>
    buildFormFinding("note", {
      code: "anchor-default",
      where: assumed.map((a) => a.id),
      value: assumed.length,
      text: `the mesh does not say that ${assumed.map((a) => a.id).join(", ")} ${assumed.length > 1 ? "are" : "is"} fixed: taken as anchor${assumed.length > 1 ? "s" : ""} because the boundary turns a corner there`,
      remedy: "fix the points in the mesh (p), or name them under anchors in the job",
      basis: "common practice",
    }),
  );
  return { anchors, fixed, findings };
}

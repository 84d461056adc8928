// What the shape of a job cannot say: names used twice, keys that exclude each other, catalogue ids, rolls without width.
// Knows no mesh.
import { PlanError } from "../problem.ts";
import type { Catalogues } from "./catalogues.ts";
import type { JobFile } from "./jobSchema.ts";
import { unknownEntry } from "./resolveEntries.ts";

/**
 * Throws where a well-shaped job contradicts itself.
 * @throws PlanError job-mesh: not exactly one of a file and vertices with faces; job-name-twice; job-anchor-place: vertex
 * and at together; job-warp: a direction of no length; job-seams-pairs: pairs without that layout or the other way round;
 * job-stages: stages that do not rise; job-adjuster-place: neither or both of
 * anchor and edge, or an edge without end; job-turnbuckle: longest not above shortest; job-cable-unknown, job-turnbuckle-unknown
 */
export function checkJobMeaning(file: JobFile, catalogues: Catalogues): void {
  checkMesh(file.mesh);
  checkNames("anchors", file.anchors);
  checkNames("rig.adjusters", file.rig?.adjusters);
  checkNames("rig.struts", file.rig?.struts);
  checkNames("rig.stays", file.rig?.stays);
  checkNames(
    "rolls",
    file.rolls?.map((r, i) => ({ name: r.id ?? `R${i + 1}` })),
  );
  if (file.warp?.every((c) => c === 0)) {
    throw new PlanError("job-warp", "warp: [0, 0, 0] is no direction; give one such as [1, 0, 0]", "warp");
  }
  file.anchors?.forEach((a, i) => {
    if (a.vertex === undefined || a.at === undefined) return;
    const where = `anchors[${i}]`;
    throw new PlanError("job-anchor-place", `${where}: both vertex and at are given; leave one out`, where);
  });
  checkSeams(file);
  for (const [name, edge] of Object.entries(file.edges ?? {})) {
    if (typeof edge.cable !== "string" || edge.cable in catalogues.cables) continue;
    throw unknownEntry("cable", edge.cable, catalogues.cables, `edges.${name}.cable`);
  }
  checkRig(file.rig, catalogues);
}

function checkMesh(mesh: JobFile["mesh"]): void {
  const inline = mesh.vertices !== undefined || mesh.triangles !== undefined || mesh.faces !== undefined;
  const whole = mesh.vertices !== undefined && (mesh.triangles === undefined) !== (mesh.faces === undefined);
  if (mesh.file !== undefined ? !inline : whole) return;
  const wanted = '"file", or "vertices" with one of "triangles" and "faces"';
  const found = mesh.file !== undefined ? "both a file and an inline mesh are given" : "the mesh is not complete";
  throw new PlanError("job-mesh", `mesh: ${found}; give either ${wanted}`, "mesh");
}

function checkNames(list: string, rows: { name: string }[] | undefined): void {
  const seen = new Map<string, number>();
  rows?.forEach((row, i) => {
    const before = seen.get(row.name);
    if (before !== undefined) {
      throw new PlanError(
        "job-name-twice",
        `${list}[${i}]: the name ${JSON.stringify(row.name)} is already that of ${list}[${before}]; give it another one`,
        `${list}[${i}]`,
      );
    }
    seen.set(row.name, i);
  });
}

function checkSeams({ seams }: JobFile): void {
  if (seams?.layout === undefined) return;
  if ((seams.layout === "pairs") === (seams.pairs !== undefined)) return;
  const text =
    seams.layout === "pairs"
      ? 'seams.pairs: missing, though the layout is "pairs"; list the seams, each with its two ends'
      : `seams.pairs: given, though the layout is "${seams.layout}"; say "layout": "pairs" or take the pairs out`;
  throw new PlanError("job-seams-pairs", text, "seams.pairs");
}

function checkRig(rig: JobFile["rig"], catalogues: Catalogues): void {
  rig?.adjusters?.forEach((a, i) => {
    const where = `rig.adjusters[${i}]`;
    const places = [a.anchor, a.edge, a.ring].filter((place) => place !== undefined).length;
    const twice = a.ring !== undefined && (rig.adjusters ?? []).findIndex((b) => b.ring === a.ring) < i;
    const support = a.support !== undefined && a.ring === undefined;
    if (places !== 1 || (a.edge === undefined) !== (a.end === undefined) || twice || support) {
      const text = twice
        ? `${where}: ring ${a.ring} has an adjuster already; one jack hauls one ring`
        : `${where}: an adjuster stands at an anchor ("anchor"), or at one end of an edge ("edge" and "end"), or hauls a ring ("ring", with its far pin as "support")`;
      throw new PlanError("job-adjuster-place", text, where);
    }
    if (typeof a.turnbuckle === "string" && !(a.turnbuckle in catalogues.turnbuckles)) {
      throw unknownEntry("turnbuckle", a.turnbuckle, catalogues.turnbuckles, `${where}.turnbuckle`);
    }
    if (typeof a.turnbuckle === "object" && a.turnbuckle.longest <= a.turnbuckle.shortest) {
      const { longest, shortest } = a.turnbuckle;
      throw new PlanError(
        "job-turnbuckle",
        `${where}.turnbuckle: longest ${longest} mm is not above shortest ${shortest} mm; both are pin to pin`,
        `${where}.turnbuckle`,
        { longest, shortest },
      );
    }
  });
  rig?.stages?.forEach((share, i, all) => {
    if (i === 0 || share > all[i - 1]) return;
    throw new PlanError(
      "job-stages",
      `rig.stages[${i}]: ${share} does not rise above the stage before, ${all[i - 1]}; stages rise to 1`,
      `rig.stages[${i}]`,
      { share, before: all[i - 1] },
    );
  });
}

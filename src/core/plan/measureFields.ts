// What a view colours the surface by: stress of every triangle as patterned and as built, balance and curvature of every
// vertex of the form. Worked out again from the facts alone; judges nothing.
import { isCable, measureStations } from "../form/balance/cablePull.ts";
import { measureResidual, sumForces } from "../form/balance/measureBalance.ts";
import { measureMembraneForces } from "../form/balance/membraneForces.ts";
import { measureCurvature } from "../form/relief/measureRelief.ts";
import type { Facts, FactsForm, Vec2 } from "../records/facts.ts";
import type { FormEdge } from "../records/foundForm.ts";
import { buildErectedMetric, buildStiffness, type ClothStiffness, measureTriangleStrain } from "../structure/cloth.ts";
import type { Surface, Vec3 } from "../surface/surface.ts";

/** Values to colour by; NaN where a place has none (a held vertex has no residual). */
export interface SurfaceFields {
  /** Of each triangle of each panel, panel by panel, kN/m; absent before the panels station. */
  patterned?: { warp: Float32Array<ArrayBuffer>; weft: Float32Array<ArrayBuffer> };
  /** Of each triangle of rig.cloth, of assembled.cloth where there is no rig, kN/m. */
  built?: { warp: Float32Array<ArrayBuffer>; weft: Float32Array<ArrayBuffer> };
  /** Of each vertex of the form: share of the mean summed membrane force (facts.md, form.residual). */
  residual: Float32Array<ArrayBuffer>;
  /** Of each vertex of the form off its rim and cables: Gaussian curvature, 1/m2; negative is a saddle. */
  curvature: Float32Array<ArrayBuffer>;
}

/**
 * Balance and curvature of the form, both as the form station measures them.
 * @param warp direction the prestress is measured along, as the job gives it; null: the mean of both is taken
 */
export function measureFormFields(form: FactsForm, warp: Vec3 | null): Pick<SurfaceFields, "residual" | "curvature"> {
  const surface = { xyz: Float64Array.from(form.vertices.flat()), tri: Uint32Array.from(form.triangles.flat()) };
  const edges = form.edges.map((e): FormEdge => ({ ...e, loop: 0, forceFrom: "none" }));
  const fixed = new Uint8Array(form.vertices.length);
  for (const a of form.anchors) fixed[a.vertex] = 1;
  for (const e of edges) if (e.kind === "clamped") for (const v of e.vertices) fixed[v] = 1;
  return {
    residual: measureFormResidual(form, surface, edges, fixed, warp),
    curvature: Float32Array.from(measureCurvature(surface, edges, fixed)),
  };
}

/**
 * Stress as patterned, kN/m.
 * @source facts.md "Strain and stress"
 */
export function measurePatterned(
  facts: Facts,
  panels: NonNullable<Facts["panels"]>,
): NonNullable<SurfaceFields["patterned"]> {
  return join(
    panels.map((p) =>
      measureStress(p.erected.flat(), p.triangles.flat(), p.flat.flat(), p.permanent, stiffnessOf(facts, p.fabric)),
    ),
  );
}

/**
 * Stress as built, kN/m.
 * @source facts.md "Strain and stress"
 */
export function measureBuilt(
  facts: Facts,
  built: NonNullable<Facts["assembled"]>,
): NonNullable<SurfaceFields["built"]> {
  const byId = new Map(facts.panels?.map((p) => [p.id, p]));
  const none = { warp: 0, weft: 0 };
  return join(
    built.cloth.map((c) => {
      const panel = byId.get(c.panel);
      const erected = c.nodes.flatMap((n) => built.nodes[n]);
      return measureStress(
        erected,
        [0, 1, 2],
        c.flat.flat(),
        panel?.permanent ?? none,
        stiffnessOf(facts, panel?.fabric ?? ""),
      );
    }),
  );
}

type Stress = NonNullable<SurfaceFields["patterned"]>;

function stiffnessOf(facts: Facts, fabric: string): ClothStiffness {
  return buildStiffness(facts.fabrics[fabric] ?? Object.values(facts.fabrics)[0]);
}

function join(parts: Stress[]): Stress {
  const size = parts.reduce((n, p) => n + p.warp.length, 0);
  const out = { warp: new Float32Array(size), weft: new Float32Array(size) };
  let at = 0;
  for (const { warp, weft } of parts) {
    out.warp.set(warp, at);
    out.weft.set(weft, at);
    at += warp.length;
  }
  return out;
}

/** Warp and weft stress of flat triangles (mm) pulled onto their places (m). @shape xyz 3*n, tri 3*nT, flat 2*n */
function measureStress(
  xyz: number[],
  tri: number[],
  flat: number[] | Vec2,
  permanent: { warp: number; weft: number },
  d: ClothStiffness,
): Stress {
  const corners = Uint32Array.from(tri);
  const metric = buildErectedMetric(Float64Array.from(xyz), corners);
  const xy = Float64Array.from(flat, (v, i) => (v / 1000) * (1 + (i % 2 === 0 ? permanent.warp : permanent.weft)));
  const nT = corners.length / 3;
  const out = { warp: new Float32Array(nT), weft: new Float32Array(nT) };
  const e = new Float64Array(7);
  for (let t = 0; t < nT; t++) {
    measureTriangleStrain(metric, xy, corners, t, e);
    out.warp[t] = d.ww * e[0] + d.wf * e[1];
    out.weft[t] = d.wf * e[0] + d.ff * e[1];
  }
  return out;
}

function measureFormResidual(
  { stress }: FactsForm,
  surface: Surface,
  edges: readonly FormEdge[],
  fixed: Uint8Array<ArrayBuffer>,
  warp: Vec3 | null,
): Float32Array<ArrayBuffer> {
  const membrane = measureMembraneForces(surface, { ...stress, direction: warp });
  const stations = edges.map((e) => (isCable(e) ? measureStations(surface.xyz, e.vertices) : null));
  const { size } = measureResidual(
    surface,
    membrane,
    sumForces(membrane, edges, stations),
    fixed,
    edges,
    stations,
    false,
  );
  let scale = 0;
  let free = 0;
  for (let v = 0; v < fixed.length; v++) {
    if (fixed[v]) continue;
    scale += membrane.size[v];
    free++;
  }
  return Float32Array.from(size, (r, v) => (fixed[v] ? Number.NaN : (r * free) / scale));
}

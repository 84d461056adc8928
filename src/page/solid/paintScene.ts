// Colours of the scene: cloth or a field on the points of the surface, inks on its lines, and the light on what is pointed at.
import { type BufferAttribute, type BufferGeometry, Color, type Mesh, type MeshLambertMaterial } from "three";
import { LineMaterial } from "three/addons/lines/LineMaterial.js";
import type { LineSegments2 } from "three/addons/lines/LineSegments2.js";
import type { ModelLine } from "./buildModel.ts";
import type { Colours, DrawnLine, SceneInk, Surface } from "./stageOrders.ts";

/** Widths of lines, CSS pixels. */
const WIDTHS: Record<ModelLine["kind"], number> = {
  seam: 2,
  cable: 4,
  clamped: 5,
  free: 2,
  inner: 4,
  adjuster: 5,
  strut: 5,
};

/** What stands on the stage, and how it is to look. */
export interface StageParts {
  surface: Surface | null;
  mesh: Mesh<BufferGeometry, MeshLambertMaterial> | null;
  /** The surface's own triangles, and fewer of them for turning; null: not yet made. */
  whole: BufferGeometry | null;
  fewer: BufferGeometry | null;
  lines: { line: DrawnLine; object: LineSegments2 }[];
  /** Of lines, by their kind and whether they are lit: one for each line would be set up anew with every model. */
  inks: Map<string, LineMaterial>;
  colours: Colours | null;
  ink: SceneInk;
  /** Dots of the canvas to a CSS pixel. */
  density: number;
  lit: Set<string>;
  /** Whether colours must be laid on anew before the next drawing. */
  stale: boolean;
}

/**
 * Colours of the points: the field's, or cloth with every other panel a little darker; what is lit is mixed with the lit ink. Lines
 * that are lit are drawn in its ink.
 */
export function paintInPlace(parts: StageParts): void {
  const { surface, mesh, colours, ink, lit } = parts;
  parts.stale = false;
  lightLinesInPlace(parts);
  if (surface === null || mesh === null) return;
  const plain = [new Color(ink.cloth), new Color(ink.clothOther)].map((c) => [c.r, c.g, c.b]);
  const lamp = new Color(ink.lit);
  const lampOf = [lamp.r, lamp.g, lamp.b];
  const attribute = mesh.geometry.getAttribute("color") as BufferAttribute;
  const out = attribute.array as Float32Array;
  const litOwner = surface.owners.map((id) => surface.owners.length > 1 && lit.has(id));
  for (let p = 0; p < surface.owner.length; p++) {
    const owner = surface.owner[p];
    const cloth = plain[owner % 2];
    const share = litOwner[owner] ? 0.45 : 0;
    for (let k = 0; k < 3; k++) {
      const own = colours === null ? cloth[k] : colours[3 * p + k];
      out[3 * p + k] = own + share * (lampOf[k] - own);
    }
  }
  attribute.needsUpdate = true;
}

/** The material of a line, lit or not. */
export function inkOf(
  { inks, lit }: Pick<StageParts, "inks" | "lit">,
  { id, kind }: Pick<DrawnLine, "id" | "kind">,
): LineMaterial {
  const name = `${kind} ${lit.has(id)}`;
  const known = inks.get(name);
  if (known !== undefined) return known;
  const fresh = new LineMaterial();
  inks.set(name, fresh);
  return fresh;
}

function lightLinesInPlace(parts: StageParts): void {
  for (const { line, object } of parts.lines) {
    const lit = parts.lit.has(line.id);
    const material = inkOf(parts, line);
    material.color.set(lit ? parts.ink.lit : parts.ink.lines[line.kind]);
    material.linewidth = parts.density * (WIDTHS[line.kind] + (lit ? 3 : 0));
    object.material = material;
  }
}

// Colours of the scene: cloth or a field on the points of the surface, inks on its lines, and the light on what is pointed at.
import { type BufferAttribute, type BufferGeometry, Color, type Mesh, type MeshLambertMaterial } from "three";
import { LineMaterial } from "three/addons/lines/LineMaterial.js";
import type { LineSegments2 } from "three/addons/lines/LineSegments2.js";
import type { Model, ModelLine } from "./buildModel.ts";

/** Colours of a theme, as CSS writes them. */
export interface SceneInk {
  cloth: string;
  clothOther: string;
  lit: string;
  lines: Record<ModelLine["kind"], string>;
}

/** CSS pixels */
const WIDTHS: Record<ModelLine["kind"], number> = {
  seam: 2,
  cable: 4,
  clamped: 5,
  free: 2,
  inner: 4,
  adjuster: 5,
  strut: 5,
};

/** What stands on the scene, and how it is to look. */
export interface SceneParts {
  model: Model | null;
  mesh: Mesh<BufferGeometry, MeshLambertMaterial> | null;
  /** The mesh's own triangles, and fewer of them for turning; null: not yet made. */
  whole: BufferGeometry | null;
  fewer: BufferGeometry | null;
  lines: { line: ModelLine; object: LineSegments2 }[];
  /** Of lines, by their kind and whether they are lit: one for each line would be set up anew with every model. */
  inks: Map<string, LineMaterial>;
  colours: Float32Array | null;
  ink: SceneInk;
  lit: Set<string>;
  /** Whether colours must be laid on anew before the next drawing. */
  stale: boolean;
  job: string;
  /** Half width and height of the model as first seen, m. */
  reach: [number, number];
  /** Whether a person has turned or moved the view: until then it shows all of whatever is put in. */
  turned: boolean;
}

/** Dots of the canvas to a CSS pixel. */
export const density = () => Math.min(devicePixelRatio, 2);

/** Shares of full light for shades as they stand on a screen, in fine steps: one power for each point would take too long. */
const LIGHT = Float32Array.from({ length: 4096 }, (_, i) => new Color().setRGB(i / 4095, 0, 0, "srgb").r);

/** Shades 0…1 of a screen (sRGB) as shares of light. */
export function linearise(shades: Float32Array): Float32Array {
  return shades.map((s) => LIGHT[Math.round(4095 * s)]);
}

/**
 * Colours of the points: the field's, or cloth with every other panel a little darker; what is lit is mixed with the lit ink. Lines
 * that are lit are drawn in its ink.
 */
export function paintInPlace(parts: SceneParts): void {
  const { model, mesh, colours, ink, lit } = parts;
  parts.stale = false;
  lightLinesInPlace(parts);
  if (model === null || mesh === null) return;
  const plain = [new Color(ink.cloth), new Color(ink.clothOther)].map((c) => [c.r, c.g, c.b]);
  const lamp = new Color(ink.lit);
  const lampOf = [lamp.r, lamp.g, lamp.b];
  const attribute = mesh.geometry.getAttribute("color") as BufferAttribute;
  const out = attribute.array as Float32Array;
  const litOwner = model.owners.map((id) => model.owners.length > 1 && lit.has(id));
  for (let p = 0; p < model.owner.length; p++) {
    const owner = model.owner[p];
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
export function inkOf({ inks, lit }: Pick<SceneParts, "inks" | "lit">, { id, kind }: ModelLine): LineMaterial {
  const name = `${kind} ${lit.has(id)}`;
  const known = inks.get(name);
  if (known !== undefined) return known;
  const fresh = new LineMaterial();
  inks.set(name, fresh);
  return fresh;
}

function lightLinesInPlace(parts: SceneParts): void {
  for (const { line, object } of parts.lines) {
    const lit = parts.lit.has(line.id);
    const material = inkOf(parts, line);
    material.color.set(lit ? parts.ink.lit : parts.ink.lines[line.kind]);
    material.linewidth = density() * (WIDTHS[line.kind] + (lit ? 3 : 0));
    object.material = material;
  }
}

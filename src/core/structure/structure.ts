// Cloth, cables, adjusters and struts as one assembly of elements: what equilibrium is solved on. Types and building only.
// Leaves out: sliding of a cable in its pocket, doubled cloth at patches, bending; weight only as loads on the nodes.
import { PlanError } from "../problem.ts";
import type { ClothStiffness } from "./cloth.ts";

/**
 * @shape xyz 3*nN; held 3*nN (1: that coordinate is fixed in space); load 3*nN: outer force on the nodes; tri 3*m; shape 6*m: gradient of the three corner functions in the cloth's
 *   own axes, (g0w, g0f, g1w, g1f, g2w, g2f); area m: flat area; layers m: layers of cloth in the mean (1, more where seams lap); law m: index into laws; link 2*k; EA k; strut k (1: carries
 *   compression too)
 * @units m, m2, kN; flat shapes are those of the relaxed cloth (permanent strain put back)
 */
export interface Structure {
  xyz: Float64Array<ArrayBuffer>;
  held: Uint8Array<ArrayBuffer>;
  load: Float64Array<ArrayBuffer>;
  tri: Uint32Array<ArrayBuffer>;
  shape: Float64Array<ArrayBuffer>;
  area: Float64Array<ArrayBuffer>;
  layers: Float64Array<ArrayBuffer>;
  law: Uint16Array<ArrayBuffer>;
  laws: ClothStiffness[];
  link: Uint32Array<ArrayBuffer>;
  EA: Float64Array<ArrayBuffer>;
  strut: Uint8Array<ArrayBuffer>;
}

/** The cloth's part: flat shapes as six numbers a triangle (x, y of its corners, m), counter-clockwise. */
export interface ClothElements {
  tri: Uint32Array<ArrayBuffer>;
  flat: Float64Array<ArrayBuffer>;
  law: Uint16Array<ArrayBuffer>;
  laws: ClothStiffness[];
  /** Layers of cloth; left out: one everywhere. */
  layers?: Float64Array<ArrayBuffer>;
}

/** The links' part. */
export interface LinkElements {
  link: Uint32Array<ArrayBuffer>;
  EA: Float64Array<ArrayBuffer>;
  strut: Uint8Array<ArrayBuffer>;
}

/** The nodes' part. @shape each 3*nN */
export interface Nodes {
  xyz: Float64Array<ArrayBuffer>;
  held: Uint8Array<ArrayBuffer>;
  /** kN; left out: none */
  load?: Float64Array<ArrayBuffer>;
}

/**
 * Puts nodes, cloth and links together.
 * @throws PlanError structure-flat: a flat triangle without area or wound clockwise; structure-link: a link with EA not above 0
 */
export function buildStructure(nodes: Nodes, cloth: ClothElements, links: LinkElements): Structure {
  const m = cloth.tri.length / 3;
  const shape = new Float64Array(6 * m);
  const area = new Float64Array(m);
  for (let t = 0; t < m; t++) {
    const f = cloth.flat.subarray(6 * t, 6 * t + 6);
    const det = (f[2] - f[0]) * (f[5] - f[1]) - (f[4] - f[0]) * (f[3] - f[1]);
    if (!(det > 0))
      throw new PlanError(
        "structure-flat",
        `flat triangle ${t} has a doubled area of ${det} m2; it must be wound counter-clockwise and have an area`,
        `triangle ${t}`,
        { triangle: t },
      );
    area[t] = det / 2;
    for (let a = 0; a < 3; a++) {
      const [p, q] = [2 * ((a + 1) % 3), 2 * ((a + 2) % 3)];
      shape[6 * t + 2 * a] = (f[p + 1] - f[q + 1]) / det;
      shape[6 * t + 2 * a + 1] = (f[q] - f[p]) / det;
    }
  }
  for (let k = 0; k < links.EA.length; k++) {
    if (!(links.EA[k] > 0))
      throw new PlanError(
        "structure-link",
        `link ${k} has a stiffness EA of ${links.EA[k]} kN; give its cable or adjuster an EA above 0`,
        `link ${k}`,
        { link: k },
      );
  }
  const { xyz, held } = nodes;
  return {
    xyz,
    held,
    load: nodes.load ?? new Float64Array(xyz.length),
    tri: cloth.tri,
    shape,
    area,
    layers: cloth.layers ?? new Float64Array(m).fill(1),
    law: cloth.law,
    laws: cloth.laws,
    ...links,
  };
}

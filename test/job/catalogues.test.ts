import { describe, expect, it } from "vitest";
import { readCatalogues } from "../../src/core/job/catalogues.ts";
import { PlanError } from "../../src/core/problem.ts";
import { catalogueFiles, catalogues } from "./catalogueFiles.ts";

// biome-ignore lint/suspicious/noExplicitAny: a test bends parsed JSON
type Loose = any;

function failure(bend: (files: Loose) => void): PlanError {
  const files = structuredClone(catalogueFiles());
  bend(files);
  try {
    readCatalogues(files);
  } catch (error) {
    if (error instanceof PlanError) return error;
    throw error;
  }
  throw new Error("accepted");
}

describe("catalogues", () => {
  it("hold generic cloths only, each value with status and source", () => {
    for (const { fabric, source } of Object.values(catalogues.fabrics)) {
      expect(Object.keys(fabric.status).sort()).toEqual(Object.keys(source).sort());
      expect(fabric.id).toMatch(/^(pes-pvc|ptfe-glass)-\d+$/);
    }
  });

  it("keep the published cloth as published", () => {
    // Adv. Mater. Sci. Eng. 2015, art. 387153, Table 3: 1520/1290 MPa at 0.82 mm, 5500/5000 N/5cm, 1050 g/m2, roll 3.00 m.
    const { fabric } = catalogues.fabrics["pes-pvc-1050"];
    expect(fabric.Ew).toBeCloseTo(1520 * 0.82, 0);
    expect(fabric.Ef).toBeCloseTo(1290 * 0.82, 0);
    expect(fabric.strength).toEqual({ warp: 5500 * 0.02, weft: 5000 * 0.02 });
    expect([fabric.mass, fabric.rollWidth]).toEqual([1.05, 3000]);
    expect(fabric.status).toMatchObject({ Ew: "verified", Ef: "verified", strength: "verified", nuWf: "from memory" });
  });

  it("give EA of a 1x19 strand on its metallic area", () => {
    // 19 wires in a circle of five wire diameters: fill 19/25 (geometry); 130 kN/mm2 on that area (EN 1993-1-11:2006
    // Table 3.1, from memory). With the full circle EA would be a third too high.
    const { cable, area } = catalogues.cables["1x19-stainless-16"];
    expect(area).toBeCloseTo((19 / 25) * (Math.PI / 4) * 256, 1);
    expect(Math.abs((cable.EA ?? 0) / (130 * area) - 1)).toBeLessThan(1e-3);
  });

  it("give two pitches a turn of a body with right and left hand thread", () => {
    // ISO 724 coarse pitch: M20 2.5, M30 3.5.
    expect(catalogues.turnbuckles["open-body-m20"].perTurn).toBe(5);
    expect(catalogues.turnbuckles["open-body-m30"].perTurn).toBe(7);
    for (const t of Object.values(catalogues.turnbuckles)) expect(t.capacity).toBeNull();
  });

  it("have a caution for every paper, with all four parts", () => {
    for (const paper of ["schedule", "cables", "hardware", "rolls", "panels", "seams"] as const) {
      expect(catalogues.cautions.filter((c) => c.papers.includes(paper)).length, paper).toBeGreaterThan(0);
    }
  });

  it.each<[string, string, (files: Loose) => void]>([
    [
      "catalogue-shape",
      "fabrics.fabrics.0.Ew.value",
      (f) => {
        f.fabrics.fabrics[0].Ew.value = -1;
      },
    ],
    [
      "catalogue-shape",
      "fabrics.fabrics.0",
      (f) => {
        f.fabrics.fabrics[0].colour = "white";
      },
    ],
    [
      "catalogue-shape",
      "fabrics.fabrics.1.G.status",
      (f) => {
        f.fabrics.fabrics[1].G.status = "sure";
      },
    ],
    [
      "catalogue-shape",
      "cautions.cautions.0.consequence",
      (f) => {
        f.cautions.cautions[0].consequence = "";
      },
    ],
    [
      "catalogue-shape",
      "cables.version",
      (f) => {
        f.cables.version = 2;
      },
    ],
    [
      "catalogue-entry",
      "pes-pvc-2",
      (f) => {
        f.fabrics.fabrics[0].id = "pes-pvc-2";
      },
    ],
    [
      "catalogue-entry",
      "none",
      (f) => {
        f.fabrics.default = "none";
      },
    ],
    [
      "catalogue-entry",
      "pes-pvc-1",
      (f) => {
        f.fabrics.fabrics[0].nuWf.value = 1.2;
      },
    ],
    [
      "catalogue-entry",
      "1x19-stainless-8",
      (f) => {
        f.cables.cables[0].EA.value *= 1 / 0.76;
      },
    ],
    [
      "catalogue-entry",
      "open-body-m12",
      (f) => {
        f.turnbuckles.turnbuckles[0].longest.value = 10;
      },
    ],
  ])("refuse with %s at %s", (code, where, bend) => {
    expect(failure(bend)).toMatchObject({ code, where });
  });
});

// The project's own catalogues, read as the command line reads them.
import { readFileSync } from "node:fs";
import { type Catalogues, readCatalogues } from "../../src/core/job/catalogues.ts";

export function readTemplate(name: string): unknown {
  return JSON.parse(readFileSync(new URL(`../../templates/${name}`, import.meta.url), "utf8"));
}

export function catalogueFiles() {
  return {
    fabrics: readTemplate("fabrics.json"),
    cables: readTemplate("cables.json"),
    turnbuckles: readTemplate("turnbuckles.json"),
    cautions: readTemplate("cautions.json"),
  };
}

export const catalogues: Catalogues = readCatalogues(catalogueFiles());

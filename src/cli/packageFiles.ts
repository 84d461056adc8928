// Files that come with the program: catalogues, starter jobs, fonts. Found from where the built program lies.
import { readdirSync, readFileSync } from "node:fs";
import { createRequire } from "node:module";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { type Catalogues, readCatalogues } from "../core/job/catalogues.ts";
import { PlanError } from "../core/problem.ts";
import { withFile } from "./fileErrors.ts";

/** A starter job as the list shows it. */
export interface Starter {
  name: string;
  /** One line: what it is and what it shows. */
  line: string;
}

/** The folder of the package: the nearest above this file that holds templates/. */
function findPackageRoot(): string {
  let here = dirname(fileURLToPath(import.meta.url));
  for (;;) {
    try {
      readdirSync(join(here, "templates"));
      return here;
    } catch {
      const above = dirname(here);
      if (above === here) {
        throw new PlanError(
          "package-incomplete",
          "the folder templates is missing beside the program; install it anew",
        );
      }
      here = above;
    }
  }
}

const root = findPackageRoot();

/** Where a file of the package lies, by its path in it. */
export function findPackageFile(path: string): string {
  return join(root, path);
}

function readTemplateJson(name: string): unknown {
  const path = join(root, "templates", name);
  return JSON.parse(withFile(path, () => readFileSync(path, "utf8")));
}

/** The catalogues as shipped. */
export function loadCatalogues(): Catalogues {
  return readCatalogues({
    fabrics: readTemplateJson("fabrics.json"),
    cables: readTemplateJson("cables.json"),
    turnbuckles: readTemplateJson("turnbuckles.json"),
    cautions: readTemplateJson("cautions.json"),
  });
}

/** The starter jobs, in the order of the list. */
export function listStarters(): Starter[] {
  return (readTemplateJson("starters.json") as { starters: Starter[] }).starters;
}

/** Path of a starter's folder. */
export function starterFolder(name: string): string {
  return join(root, "templates", name);
}

/** Where the built page lies. */
export function pageFolder(): string {
  return join(root, "dist", "page");
}

/** The two faces papers are lettered in. */
export function loadFonts(): { regular: Uint8Array; bold: Uint8Array } {
  const require = createRequire(import.meta.url);
  const read = (face: string) => {
    const path = require.resolve(`dejavu-fonts-ttf/ttf/${face}.ttf`);
    return new Uint8Array(withFile(path, () => readFileSync(path)));
  };
  return { regular: read("DejaVuSans"), bold: read("DejaVuSans-Bold") };
}

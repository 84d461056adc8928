// Every paper of a plan, from its facts alone: cut files for each roll and panel, lists, panel cards, findings. Reads no clock, no
// file, no network; the fonts are handed in. The PDF library is loaded only when a paper is really written.
import type { Facts } from "../records/facts.ts";
import type { Drawing } from "./drawing.ts";
import { writeDxfR12 } from "./dxfR12.ts";
import { fileNames } from "./fileNames.ts";
import type { FontFiles } from "./pdf/book.ts";
import { rigFacts } from "./rigReadings.ts";
import { cableTable, hardwareTable, moveTable } from "./rigTables.ts";
import { panelDrawing, rollDrawing } from "./rollDrawing.ts";
import { writeSvg } from "./svg.ts";
import { panelTable, rollTable, seamTable } from "./tables.ts";

export interface PaperFile {
  /** Relative to the folder of the plan, with forward slashes. */
  path: string;
  bytes: Uint8Array;
}

function cutFiles(folder: string, ids: readonly string[], drawingOf: (i: number) => Drawing): [string, string][] {
  return fileNames(ids).flatMap((name, i): [string, string][] => {
    const drawing = drawingOf(i);
    return [
      [`${folder}/${name}.dxf`, writeDxfR12(drawing)],
      [`${folder}/${name}.svg`, writeSvg(drawing)],
    ];
  });
}

/**
 * The papers that the facts allow: a plan that stopped early still gets its findings sheets, a plan without rolls its panels.
 * Equal facts give equal bytes. facts.json itself is the caller's.
 * @throws PlanError papers-number, papers-outline: the facts hold what cannot be drawn; papers-unknown-piece: a roll places
 *   cloth that is not there
 */
export async function writePapers(facts: Facts, options: { fonts: FontFiles }): Promise<{ files: PaperFile[] }> {
  const texts: [string, string][] = [];
  const { rolls, panels, seams } = facts;
  if (rolls) {
    texts.push(
      ...cutFiles(
        "rolls",
        rolls.map((r) => r.id),
        (i) => rollDrawing(facts, rolls[i]),
      ),
    );
    texts.push(["rolls.csv", rollTable(facts)]);
  }
  if (panels) {
    texts.push(
      ...cutFiles(
        "panels",
        panels.map((p) => p.id),
        (i) => panelDrawing(facts, panels[i]),
      ),
    );
    texts.push(["panels.csv", panelTable(facts)]);
  }
  if (seams) texts.push(["seams.csv", seamTable(facts)]);
  const rig = rigFacts(facts);
  const cables = (facts.cables ?? []).length > 0;
  if (cables) texts.push(["cables.csv", cableTable(facts)]);
  if (rig) texts.push(["tensioning.csv", moveTable(rig)], ["hardware.csv", hardwareTable(rig)]);
  const encoder = new TextEncoder();
  const files = texts.map(([path, text]): PaperFile => ({ path, bytes: encoder.encode(text) }));
  if (panels && panels.length > 0) {
    const { writePanelCards } = await import("./pdf/panelCards.ts");
    files.push({ path: "panel-cards.pdf", bytes: await writePanelCards(facts, options.fonts) });
  }
  if (cables || rig) {
    const { writeCableSheets } = await import("./pdf/cableSheets.ts");
    files.push({ path: "cables.pdf", bytes: await writeCableSheets(facts, options.fonts) });
  }
  if (rig) {
    const { writeTensioningSchedule } = await import("./pdf/tensioningSchedule.ts");
    files.push({ path: "tensioning-schedule.pdf", bytes: await writeTensioningSchedule(rig, options.fonts) });
  }
  const { writeFindingSheets } = await import("./pdf/findingSheets.ts");
  files.push({ path: "findings.pdf", bytes: await writeFindingSheets(facts, options.fonts) });
  return { files };
}

// Every paper of a plan, from its facts alone: cut files for each roll and panel, lists, cards, papers of the rig, findings, an
// index, all in one zip where asked. Reads no clock, no file, no network; the fonts are handed in. PDF and zip libraries are loaded
// only when such a paper is really written.
import type { Finding } from "../problem.ts";
import type { Facts } from "../records/facts.ts";
import { DEFAULT_PAPERS, type PaperChoice } from "./choosePapers.ts";
import { writeDxf2000 } from "./cutFiles/dxf2000.ts";
import { writeDxfR12 } from "./cutFiles/dxfR12.ts";
import { writeSvg } from "./cutFiles/svg.ts";
import { withArcs } from "./drawing/arcs.ts";
import type { Drawing } from "./drawing/drawing.ts";
import { tableBites } from "./drawing/placedCloth.ts";
import { panelDrawing, rollDrawing } from "./drawing/rollDrawing.ts";
import { fileNames } from "./fileNames.ts";
import type { PaperFile } from "./paperFile.ts";
import type { FontFiles } from "./pdf/layout/book.ts";
import { controlTable, panelTable, rollTable, seamTable } from "./tables/clothTables.ts";
import { rigFacts } from "./tables/rigReadings.ts";
import { cableTable, hardwareTable, moveTable } from "./tables/rigTables.ts";
import { namesOf } from "./words/names.ts";

type Wants = (choice: PaperChoice) => boolean;

/** A cut file in every dialect that is wanted. */
function cutFiles(
  folder: string,
  ids: readonly string[],
  drawingOf: (i: number) => Drawing,
  wants: Wants,
): PaperFile[] {
  if (!wants("cut-files") && !wants("dxf2000") && !wants("arcs")) return [];
  const encoder = new TextEncoder();
  return fileNames(ids).flatMap((name, i) => {
    const drawing = drawingOf(i);
    const texts: [string, string][] = [];
    if (wants("cut-files")) {
      texts.push([`${folder}/${name}.dxf`, writeDxfR12(drawing)], [`${folder}/${name}.svg`, writeSvg(drawing)]);
    }
    if (wants("dxf2000")) texts.push([`${folder}/dxf2000/${name}.dxf`, writeDxf2000(drawing)]);
    if (wants("arcs")) {
      const curved = withArcs(drawing);
      texts.push([`${folder}/arcs/${name}.dxf`, writeDxfR12(curved)], [`${folder}/arcs/${name}.svg`, writeSvg(curved)]);
      if (wants("dxf2000")) texts.push([`${folder}/arcs/dxf2000/${name}.dxf`, writeDxf2000(curved)]);
    }
    return texts.map(([path, text]): PaperFile => ({ path, bytes: encoder.encode(text) }));
  });
}

function allCutFiles(facts: Facts, wants: Wants): PaperFile[] {
  const rolls = facts.rolls ?? [];
  const panels = facts.panels ?? [];
  const bites = rolls.flatMap((roll) => tableBites(facts, roll).map((b, k) => ({ ...b, id: `${roll.id}-${k + 1}` })));
  const ids = (list: readonly { id: string }[]) => list.map((e) => e.id);
  return [
    ...cutFiles("rolls", ids(rolls), (i) => rollDrawing(facts, rolls[i]), wants),
    ...cutFiles("bites", ids(bites), (i) => rollDrawing(facts, bites[i].roll, bites[i].words, bites[i].before), wants),
    ...cutFiles("panels", ids(panels), (i) => panelDrawing(facts, panels[i]), wants),
  ];
}

function lists(facts: Facts): PaperFile[] {
  const texts: [string, string][] = [];
  const rig = rigFacts(facts);
  if (facts.rolls) texts.push(["rolls.csv", rollTable(facts)]);
  if (facts.panels) texts.push(["panels.csv", panelTable(facts)], ["control-lengths.csv", controlTable(facts)]);
  if (facts.seams) texts.push(["seams.csv", seamTable(facts)]);
  if ((facts.cables ?? []).length > 0) texts.push(["cables.csv", cableTable(facts)]);
  if (rig) texts.push(["tensioning.csv", moveTable(rig)], ["hardware.csv", hardwareTable(rig)]);
  const encoder = new TextEncoder();
  return texts.map(([path, text]) => ({ path, bytes: encoder.encode(text) }));
}

async function sheets(facts: Facts, fonts: FontFiles, wants: Wants): Promise<PaperFile[]> {
  const files: PaperFile[] = [];
  const rig = rigFacts(facts);
  if (wants("roll-sheets") && (facts.rolls ?? []).length > 0) {
    const { writeRollSheets } = await import("./pdf/cloth/rollSheets.ts");
    files.push({ path: "roll-sheets.pdf", bytes: await writeRollSheets(facts, fonts) });
  }
  if (wants("panel-cards") && (facts.panels ?? []).length > 0) {
    const { writePanelCards } = await import("./pdf/cloth/panelCards.ts");
    files.push({ path: "panel-cards.pdf", bytes: await writePanelCards(facts, fonts) });
  }
  if (wants("rig") && ((facts.cables ?? []).length > 0 || rig)) {
    const { writeCableSheets } = await import("./pdf/rig/cableSheets.ts");
    files.push({ path: "cables.pdf", bytes: await writeCableSheets(facts, fonts) });
  }
  if (wants("rig") && rig) {
    const { writeTensioningSchedule } = await import("./pdf/rig/tensioningSchedule.ts");
    files.push({ path: "tensioning-schedule.pdf", bytes: await writeTensioningSchedule(rig, fonts) });
  }
  if (wants("findings")) {
    const { writeFindingSheets } = await import("./pdf/findingSheets.ts");
    files.push({ path: "findings.pdf", bytes: await writeFindingSheets(facts, fonts) });
  }
  return files;
}

/** Names that no face of the sheets is asked to draw: plain letters need no look into it. */
const PLAIN = /^[\u0020-\u024f]*$/;

/** What the papers add to the findings: letters of names that the sheets cannot show. */
async function ownFindings(facts: Facts, fonts: FontFiles): Promise<Finding[]> {
  if (namesOf(facts).every((name) => PLAIN.test(name))) return [];
  const { tellLetters } = await import("./pdf/nameLetters.ts");
  return tellLetters(facts, fonts);
}

/**
 * The papers that are asked for and that the facts allow: a plan that stopped early still gets its findings sheets, a plan without
 * rolls its panels, one clamped all round no paper of a rig. Equal facts give equal bytes. facts.json itself is the caller's;
 * `findings` are what belongs into it: those of the facts, and what the papers add.
 * @throws PlanError papers-number, papers-outline: the facts hold what cannot be drawn; papers-unknown-piece: a roll places
 *   cloth that is not there
 */
export async function writePapers(
  given: Facts,
  options: { fonts: FontFiles; papers?: readonly PaperChoice[] },
): Promise<{ files: PaperFile[]; findings: Finding[] }> {
  const findings = [...given.findings, ...(await ownFindings(given, options.fonts))];
  const facts = { ...given, findings };
  const chosen = new Set(options.papers ?? DEFAULT_PAPERS);
  const wants: Wants = (choice) => chosen.has(choice);
  const files = [
    ...allCutFiles(facts, wants),
    ...(wants("lists") ? lists(facts) : []),
    ...(await sheets(facts, options.fonts, wants)),
  ];
  if (wants("index")) {
    const { writeIndexSheet } = await import("./pdf/indexSheet.ts");
    const paths = files.map((f) => f.path);
    files.push({ path: "index.pdf", bytes: await writeIndexSheet(facts, options.fonts, paths) });
  }
  if (wants("bundle")) {
    const { writeBundle } = await import("./bundle.ts");
    files.push({ path: "papers.zip", bytes: writeBundle(files, facts.job.date) });
  }
  return { files, findings };
}

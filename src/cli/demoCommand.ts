// seamstay demo: plans every starter into ./out and says what came out, in words of the workshop.
import { join } from "node:path";
import type { Facts } from "../core/records/facts.ts";
import type { Surroundings } from "./makePlan.ts";
import type { OutputFile } from "./outputFolder.ts";
import { listStarters, starterFolder } from "./packageFiles.ts";
import { parseOptions } from "./parseOptions.ts";
import { planInto } from "./planCommand.ts";
import { measurePlan, plural, writeUrgent } from "./summary.ts";

/** The verb. @returns exit status 0, or 1 where a plan holds a stop */
export async function demoCommand(args: string[], around: Surroundings): Promise<number> {
  parseOptions("demo", args, { operands: [], values: [], flags: [] });
  let exit = 0;
  for (const { name, line } of listStarters()) {
    const folder = join("out", name);
    const { facts, files } = await planInto(join(starterFolder(name), "job.json"), folder, around, { quiet: false });
    if (facts.findings.some((f) => f.level === "stop")) exit = 1;
    around.terminal.out([`${name}: ${line}`, ...describePlan(facts, files, folder), ""].join("\n"));
  }
  return exit;
}

const KINDS: Record<string, string> = {
  patch: "corner patches",
  strip: "pocket strips",
  cover: "cover strips",
  test: "weld tests",
};

function listKinds(facts: Facts): string {
  return [...new Set((facts.pieces ?? []).map((p) => KINDS[p.kind]))].join(", ");
}

/** What a fabricator gets, and where to look first. */
function describePlan(facts: Facts, files: OutputFile[], folder: string): string[] {
  const f = measurePlan(facts);
  const cloths = [...new Set((facts.rolls ?? []).map((r) => `${r.fabric}, ${(r.width / 1000).toFixed(2)} m wide`))];
  const urgent = writeUrgent(facts.findings);
  const stamp = f.stops > 0 ? "The papers are stamped NOT FOR ISSUE." : "Nothing stops the papers from being issued.";
  return [
    `  To cut      ${plural(f.panels ?? 0, "panel")}${f.pieces ? ` and ${plural(f.pieces, "other piece")} (${listKinds(facts)})` : ""}, ${f.cutArea?.toFixed(1)} m2 with allowances`,
    `  To weld     ${plural(f.seams ?? 0, "seam")}, ${f.seamLength?.toFixed(1)} m`,
    `  To lay out  ${f.rollLength?.toFixed(2)} m of cloth from ${plural(f.rolls ?? 0, "roll")} (${cloths.join("; ")}), ${(100 * (f.utilisation ?? 0)).toFixed(0)} % used`,
    ...(f.adjusters && f.steps !== null
      ? [
          `  To pull     ${plural(f.adjusters, "adjuster")} in ${plural(f.steps, "step")}; the greatest force on the way is ${(100 * (f.greatestShare ?? 0)).toFixed(0)} % of its limit`,
        ]
      : []),
    `  To trust    stress in the cloth within ${f.stressError?.toFixed(2)} kN/m (rms) of what is wanted; ${f.checks - f.checksFailed} of ${f.checks} checks hold`,
    `  To decide   ${plural(f.stops, "stop")}, ${plural(f.cautions, "caution")}, ${plural(f.notes, "note")}. ${stamp}`,
    ...(urgent === "" ? [] : [urgent]),
    ...listFirst(files, folder),
    `  ${files.length} files in ${folder}; the rest are cut files, lists, and facts.json with every number.`,
  ];
}

/** The papers a person opens first, each with what it is for; the cut file itself where there is no sheet of the roll. */
const FIRST: [kind: RegExp, words: string][] = [
  [/^findings\.pdf$/, "what was checked, what is open"],
  [/^roll-sheets\.pdf$|^rolls\/[^/]*\.dxf$/, "what lies where on the roll"],
  [/^panel-cards\.pdf$/, "lengths to tape and marks, panel by panel"],
  [/^tensioning-schedule\.pdf$/, "what the crew turns, and what the gauge reads"],
];

function listFirst(files: OutputFile[], folder: string): string[] {
  const first = FIRST.flatMap(([kind, words]) => {
    const found = files.map((f) => f.path).filter((path) => kind.test(path));
    // A sheet before the file for the table.
    const path = found.find((name) => name.endsWith(".pdf")) ?? found[0];
    return path === undefined ? [] : [{ path: join(folder, path), words }];
  });
  const width = Math.max(0, ...first.map((f) => f.path.length));
  return first.map(
    ({ path, words }, i) => `  ${(i === 0 ? "To open" : "").padEnd(11)} ${path.padEnd(width)}  ${words}`,
  );
}

// seamstay demo: plans every starter into ./out and says what came out, in words of the workshop.
import { join } from "node:path";
import type { Facts } from "../core/records/facts.ts";
import type { Surroundings } from "./makePlan.ts";
import type { OutputFile } from "./outputFolder.ts";
import { listStarters, starterFolder } from "./packageFiles.ts";
import { parseOptions } from "./parseOptions.ts";
import { planInto } from "./planCommand.ts";
import { measurePlan, writeUrgent } from "./summary.ts";

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

/** What a fabricator gets, and where to look first. */
function describePlan(facts: Facts, files: OutputFile[], folder: string): string[] {
  const f = measurePlan(facts);
  const cloths = [...new Set((facts.rolls ?? []).map((r) => `${r.fabric}, ${(r.width / 1000).toFixed(2)} m wide`))];
  const urgent = writeUrgent(facts.findings);
  const stamp = f.stops > 0 ? "The papers are stamped NOT FOR ISSUE." : "Nothing stops the papers from being issued.";
  return [
    `  To cut      ${f.panels} panels${f.pieces ? ` and ${f.pieces} pieces` : ""}, ${f.cutArea?.toFixed(1)} m2 with allowances`,
    `  To weld     ${f.seams} seams, ${f.seamLength?.toFixed(1)} m`,
    `  To lay out  ${f.rollLength?.toFixed(2)} m of cloth from ${f.rolls} roll${f.rolls === 1 ? "" : "s"} (${cloths.join("; ")}), ${(100 * (f.utilisation ?? 0)).toFixed(0)} % used`,
    ...(f.adjusters && f.steps !== null
      ? [
          `  To pull     ${f.adjusters} adjusters in ${f.steps} steps; the greatest force on the way is ${(100 * (f.greatestShare ?? 0)).toFixed(0)} % of its limit`,
        ]
      : []),
    `  To trust    stress in the cloth within ${f.stressError?.toFixed(2)} kN/m (rms) of what is wanted; ${f.checks - f.checksFailed} of ${f.checks} checks hold`,
    `  To decide   ${f.stops} stops, ${f.cautions} cautions, ${f.notes} notes. ${stamp}`,
    ...(urgent === "" ? [] : [urgent]),
    `  ${files.length} files in ${folder}. Look first at ${listFirst(files, folder).join(", then ")}.`,
  ];
}

/** One file of each kind that a person opens first: findings, a roll to cut, a panel card. */
function listFirst(files: OutputFile[], folder: string): string[] {
  const first = [/finding.*\.pdf$/i, /roll.*\.(pdf|svg|dxf)$/i, /panel.*\.(pdf|svg|dxf)$/i]
    .map((kind) => files.find((f) => kind.test(f.path))?.path)
    .filter((path) => path !== undefined);
  return (first.length > 0 ? first : ["facts.json"]).map((path) => join(folder, path));
}

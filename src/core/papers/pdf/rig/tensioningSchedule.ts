// The tensioning schedule: what a crew holds in its hands. Cover, plan with adjusters, one block a stage, what to do outside the
// window, temperature, log, the visit after settling, sign-off. The numbers are the rig station's; nothing is judged or rounded to fit here.
import type { Facts } from "../../../records/facts.ts";
import type { RigFacts } from "../../tables/rigReadings.ts";
import { closeBook, type FontFiles, openBook } from "../layout/book.ts";
import { viewRoof } from "../layout/roofView.ts";
import { flowCover } from "./scheduleCover.ts";
import { drawSchedulePlan, flowStart } from "./schedulePlan.ts";
import { flowLog, flowOutside, flowSignOff, flowTemperature } from "./scheduleRecord.ts";
import { flowStages } from "./scheduleStages.ts";
import { flowVisit } from "./scheduleVisit.ts";

/** The bytes of tensioning-schedule.pdf. */
export async function writeTensioningSchedule(rig: RigFacts, fonts: FontFiles): Promise<Uint8Array> {
  const { facts }: { facts: Facts } = rig;
  const book = await openBook(facts, fonts, "tensioning schedule", "rig");
  flowCover(book, rig);
  drawSchedulePlan(book, rig, viewRoof(facts));
  flowStart(book, rig);
  flowStages(book, rig);
  flowOutside(book, rig);
  flowTemperature(book, rig);
  flowLog(book, rig);
  flowVisit(book, rig);
  flowSignOff(book);
  return closeBook(book);
}

// First sheets of the tensioning schedule: what it is and is not, why it may not be issued, who and what must be there, the limits
// of the day, how heavy each turnbuckle is to turn, and the cautions that hold from the first step to the last.

import { allMoves, jackStep, limitOf, type RigFacts } from "../../tables/rigReadings.ts";
import { bodyTorque, HAND_TORQUE, THREAD_FRICTION, threadOf, threadText } from "../../tables/turnbuckleWork.ts";
import { cautionsOf } from "../../words/cautions.ts";
import { paperUnits, unitsInText } from "../../words/paperUnits.ts";
import { siteLimits } from "../../words/siteLimits.ts";
import { holdReason } from "../../words/stamp.ts";
import { typeText } from "../../words/typeText.ts";
import type { Book } from "../layout/book.ts";
import { flowCautionsInPlace } from "../layout/cautionBlock.ts";
import { drawBox, LARGE } from "../layout/pen.ts";
import {
  type Column,
  type Flow,
  flowGapInPlace,
  flowHeadingInPlace,
  flowTableInPlace,
  flowTextInPlace,
  needInPlace,
  openFlow,
  tableHeight,
} from "../layout/table.ts";
import { flowCalledInPlace } from "./scheduleCalled.ts";

/** Size of running text, pt. */
export const BODY = 10;

const LIMIT_COLUMNS: readonly Column[] = [
  { head: ["Limit set by the engineer"], width: 125 },
  { head: ["Value"], width: 85, bold: true },
  { head: ["Today"], width: 50 },
];

/** Sheets up to the plan. */
export function flowCover(book: Book, rig: RigFacts): void {
  const flow = openFlow(book, "Tensioning schedule");
  flowScopeInPlace(flow, rig);
  flowGearInPlace(flow, rig);
  const rows = siteLimits(rig.facts.job).map((l) => [l.what, l.value, ""]);
  // Signed off as one: never half on a sheet where a whole one holds it.
  const whole = tableHeight(LIMIT_COLUMNS, rows.length, LARGE) + 9;
  if (whole < flow.sheet.top - flow.sheet.bottom) needInPlace(flow, whole);
  flowHeadingInPlace(flow, "Limits for the day");
  flowTableInPlace(flow, LIMIT_COLUMNS, rows, { size: LARGE });
  flowTorqueInPlace(flow, rig);
  flowCalledInPlace(flow, rig, BODY);
  flowHeadingInPlace(flow, "Cautions from the first step to the last");
  flowCautionsInPlace(flow, cautionsOf(rig.facts, "schedule"), BODY);
}

function flowScopeInPlace(flow: Flow, rig: RigFacts): void {
  const { facts, tensioning, adjusters } = rig;
  const { force, temperature } = paperUnits(facts.job);
  const text = (words: string, bold = false) => flowTextInPlace(flow, words, { size: BODY, bold });
  const reason = holdReason(facts, "rig");
  if (reason !== "") {
    flowHeadingInPlace(flow, "Not for issue: do not tension from these sheets");
    text(`Because: ${reason}.`, true);
    const stops = facts.findings.filter((f) => f.level === "stop");
    for (const f of stops.slice(0, 6)) {
      flowTextInPlace(flow, unitsInText(facts.job, `• ${f.text} ${f.remedy}`), { size: BODY, indent: 4 });
    }
    if (stops.length > 6) text(`And ${stops.length - 6} more: see the findings sheets.`);
    // Several defaults may be taken at one place: the place is told once.
    const taken = [...new Set(facts.findings.flatMap((f) => (f.code === "rig-default" ? f.where : [])))];
    const more = taken.length > 24 ? ` and ${taken.length - 24} more` : "";
    if (taken.length > 0)
      text(`Still to be given in the job (see the findings sheets): ${taken.slice(0, 24).join(", ")}${more}.`);
  }
  flowHeadingInPlace(flow, "What this is");
  const steps = Math.max(0, ...allMoves(tensioning).map((m) => m.step));
  text(
    `The order in which ${adjusters.length} adjusters are turned to bring this roof from hanging slack to its prestress: ${steps} steps in ${tensioning.stages.length} stages, each worked out on the whole structure (cloth as cut, cables, adjusters) at ${temperature.whole(tensioning.referenceTemperature)} without wind, snow or rain. Forces in ${force.unit}.`,
  );
  flowHeadingInPlace(flow, "What this is not");
  text(
    "No design for wind, snow, ponding or seismic load, no lifting plan, no method statement for work at height, no proof of cables, fittings, anchors or foundations. It does not know the site. Local law, the codes in force and the licensed engineer decide, and outrank every line of it.",
  );
  flowHeadingInPlace(flow, "Rules that hold at every step");
  text("No gauge, no tensioning.", true);
  text("Stop at force OR travel, whichever comes first. Never turn on to reach the other.", true);
  text("Read after every step, write it down, then go on. Outside the window: stop and ask the engineer.", true);
  text("Nobody in the line of a cable or below the work. No step above the wind limit.", true);
}

function flowGearInPlace(flow: Flow, rig: RigFacts): void {
  const { force } = paperUnits(rig.facts.job);
  const greatest = Math.max(...rig.tensioning.stages.flatMap((s) => rig.adjusters.map((a) => s.forces[a.id] ?? 0)));
  const accuracy = `± ${Number((100 * rig.tensioning.readingError).toPrecision(3))} %`;
  const heavy = rig.adjusters.filter((a) => jackStep(rig, a) !== null).map((a) => a.id);
  const jack =
    heavy.length > 0
      ? `Jack or puller with its own gauge, for ${heavy.join(", ")}: by estimate too heavy for a hand (table below)`
      : "Bar of half a metre (20 in) for the turnbuckles; a jack at hand in case a thread runs heavier than estimated";
  const gear = [
    "One person in charge who may stop the work, and a second who only reads and writes",
    "One person at each adjuster that is moved in the same step, in speaking contact",
    `Force gauge for every adjuster moved, up to at least ${force.whole(1.25 * greatest)}, calibrated, good to ${accuracy} of the final force: the windows stand on that`,
    jack,
    "Steel tape or rule for pin to pin, total station or long tape for corners, thermometer on cloth and steel, wind meter at roof height",
    "Platforms and fall protection; lines to hold every corner; a way to tie the cloth down within the hour",
    "These sheets with the same revision in every hand",
  ];
  flowHeadingInPlace(flow, "Before the start: all of it there, each ticked");
  for (const text of gear) {
    needInPlace(flow, 10.5);
    drawBox(flow.sheet.page, { x: flow.sheet.left, y: flow.y - 4.6, width: 3.8, height: 3.8 }, { width: 0.35 });
    flowTextInPlace(flow, text, { size: BODY, indent: 7 });
    flowGapInPlace(flow, 0.8);
  }
}

function flowTorqueInPlace(flow: Flow, rig: RigFacts): void {
  const { force, torque } = paperUnits(rig.facts.job);
  const columns: readonly Column[] = [
    { head: ["Adjuster"], width: 34, bold: true },
    { head: ["Thread, turnbuckle"], width: 62 },
    { head: ["When", `turned, ${force.unit}`], width: 30, align: "end" },
    { head: ["Limit", `${force.unit}`], width: 30, align: "end" },
    { head: ["Torque at body", `${torque.unit}, about`], width: 44, align: "end" },
    { head: ["How it is turned"], width: 62, bold: true },
  ];
  const rows = rig.adjusters.map((a) => {
    // What it bears when it is turned here; others that follow may bring it higher, then later corrections are heavier.
    const most = Math.max(0, ...allMoves(rig.tensioning).flatMap((m) => (m.adjuster === a.id ? [m.expect] : [])));
    const limit = limitOf(rig, a.id);
    const thread = threadOf(a);
    const step = jackStep(rig, a);
    const later = thread !== null && bodyTorque(a.target, thread, THREAD_FRICTION) > HAND_TORQUE;
    return [
      a.id,
      `${threadText(a)}: ${typeText(a.turnbuckle)}`,
      force.of(most),
      limit === null ? "not given" : force.of(limit),
      thread ? torque.of(bodyTorque(most, thread, THREAD_FRICTION)) : "–",
      step === null
        ? thread
          ? later
            ? "by hand; JACK to correct later"
            : "by hand"
          : "try; jack at hand"
        : `JACK from step ${step} on`,
    ];
  });
  flowHeadingInPlace(flow, "How heavy the turnbuckles turn");
  flowTableInPlace(flow, columns, rows, { size: LARGE });
  flowGapInPlace(flow, 1.5);
  flowTextInPlace(
    flow,
    `Estimate from force, thread and a friction of ${THREAD_FRICTION} (0.10 greased to 0.20 dry; common practice), both ends turned by the body; a thread not given is taken by the name of the turnbuckle or as the thickest coarse one of its pitch. A hand gives about ${torque.whole(HAND_TORQUE)} at half a metre, 20 in (common practice). Above that, at the finished force too, the load is taken over by the jack, the body turned free, the load set down again. Limit: ${Number((100 * rig.tensioning.limit).toPrecision(3))} % of what the turnbuckle bears.`,
  );
}

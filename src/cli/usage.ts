// What the verbs are and how they are called. The texts of `seamstay help`.

import { PAPER_CHOICES } from "../core/papers/choosePapers.ts";

/** Stations a plan can stop after. */
export const UNTIL = ["form", "seams", "panels", "rolls", "rig"] as const;

/** The verbs in the order a person meets them. */
export const VERBS: { verb: string; call: string; words: string; more: string[] }[] = [
  {
    verb: "start",
    call: "start [TEMPLATE DIR]",
    words: "copies a starter job into a new folder; without arguments lists the starters",
    more: ["  nothing that exists is overwritten"],
  },
  {
    verb: "plan",
    call: "plan JOB|FORM.obj --out DIR [--until STATION] [--papers LIST] [--json] [--quiet]",
    words: "plans a job and writes facts.json and the papers into DIR",
    more: [
      "  JOB is a job file (JSON); a mesh (OBJ, metres, z up) is planned with the defaults of common practice",
      `  --until STATION   stops after ${UNTIL.join(", ")}`,
      "  --papers LIST     writes these papers, with commas between them, in place of all but arcs and bundle; all: every one",
      ...Object.entries(PAPER_CHOICES).map(([name, what]) => `      ${name.padEnd(13)} ${what}`),
      "  --json            prints one JSON object on stdout in place of words",
      "  --quiet           prints nothing but errors",
      "  DIR is made, or replaced where it holds an earlier plan; files in it that are not of the plan stay",
    ],
  },
  {
    verb: "check",
    call: "check JOB|FORM.obj [--json] [--quiet]",
    words: "plans a job without writing anything, and prints its checks and findings",
    more: [],
  },
  {
    verb: "papers",
    call: "papers FACTS.json --out DIR [--papers LIST] [--json] [--quiet]",
    words: "writes the papers of a plan anew from its facts.json, planning nothing",
    more: ["  --papers LIST     as with plan: help plan lists what can be named"],
  },
  {
    verb: "correct",
    call: "correct JOB --readings FILE.csv [--stage PERCENT] [--out DIR] [--json] [--quiet]",
    words: "says what to turn after forces and places have been read on site",
    more: [
      "  FILE.csv    time,by,id,force_kN,frequency_Hz,free_length_m,mass_kg_m,temperature_C,x,y,z; one row a reading:",
      "              a force, or a frequency with free length and mass, or the place of an anchor or corner",
      "  --stage N   read at the end of that stage, in per cent; the finished roof where it is left out",
      "  --out DIR   keeps readings and correction there, in place of the folder readings beside the job, under the next",
      "              free number; nothing is overwritten. Sets kept there of the same plan and stage are built on: the turns",
      "              told after them are taken as made",
    ],
  },
  {
    verb: "open",
    call: "open [JOB|FORM.obj] [--port N]",
    words: "serves the page to this machine only, with a job in it where one is named, until Ctrl-C",
    more: ["  --port N   the port to serve on, 4720 where none is given; 0 takes any free one"],
  },
  { verb: "demo", call: "demo", words: "plans the starter jobs into ./out and says what came out", more: [] },
  { verb: "help", call: "help [VERB]", words: "this text, or more on one verb", more: [] },
];

/** The whole help, or that of one verb. */
export function writeHelp(verb?: string): string {
  const one = VERBS.find((v) => v.verb === verb);
  if (one !== undefined) return [`seamstay ${one.call}`, `  ${one.words}`, ...one.more].join("\n");
  return [
    "seamstay: from a found tensile form to cut cloth",
    "",
    ...VERBS.flatMap((v) => [`  seamstay ${v.call}`, `      ${v.words}`]),
    "",
    "Exit status: 0 done, 1 the plan holds a stop and its papers are not for issue, 2 bad input or usage.",
    "First steps: seamstay start market-hall bay && seamstay plan bay/job.json --out bay/plan",
  ].join("\n");
}

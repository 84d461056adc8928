// Every act on the job, done with the keys alone: each is one that undo names, and what it leaves stands in the job that is saved.
import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { strFromU8, unzipSync } from "fflate";
import { describe, expect, it } from "vitest";
import { benchOfFile, clear, LONG, openPlanned } from "./bench.ts";
import {
  awaitChoosers,
  givenBy,
  inTurn,
  type Keyed,
  keyed,
  leaf,
  placed,
  pressed,
  rested,
  tabTo,
  typed,
  unfolded,
} from "./keys.ts";
import { SAIL_JOB, sailFiles } from "./smallForm.ts";

const HEAD = [6.8, -0.6, 5];
const JOB = {
  ...SAIL_JOB,
  anchors: [{ name: "C2", support: HEAD }],
  rig: {
    ...SAIL_JOB.rig,
    struts: [{ name: "mast", from: [6.5, -0.4, 0], to: HEAD, EA: 449_000 }],
    stays: [
      { name: "G1", from: HEAD, to: [9, -2.5, 0], EA: 20_000 },
      { name: "G2", from: HEAD, to: [9, 0.8, 0], EA: 20_000 },
      { name: "G3", from: HEAD, to: [6, -4, 0], EA: 20_000 },
    ],
  },
};

interface Act {
  /** Its function, as the page dispatches it. */
  act: string;
  keys: Keyed;
  /** What undo calls it. */
  words: string;
  /** What is seen after it. */
  seen?: RegExp;
  /** Taken back by a key at once: what it leads to is not wanted here. */
  back?: true;
}

const bench = benchOfFile();

/** A table handed over as a file of a person. */
const given =
  (name: string, text: string): Keyed =>
  async (page) => {
    await givenBy(page.getByLabel("Take in a log (CSV)"), [{ name, mimeType: "text/csv", buffer: Buffer.from(text) }])(
      page,
    );
  };

const ACTS: { number: number; acts: Act[] }[] = [
  {
    number: 1,
    acts: [
      {
        act: "askPrestress",
        keys: keyed("Prestress is taken", "ArrowDown"),
        words: "where prestress is taken from",
        back: true,
      },
      { act: "setPrestress", keys: typed("Prestress along the warp", "2,5"), words: "prestress warp" },
      { act: "setSettle", keys: keyed("Settle the mesh into balance first", "Space"), words: "settling", back: true },
      { act: "setMeshWord", keys: keyed("Axis that points up", "ArrowDown"), words: "up axis of the mesh", back: true },
      { act: "setEdge", keys: typed(/^Force/, "21"), words: "force of east" },
      { act: "setCableFigure", keys: keyed(/^Cable/, "End"), words: "cable of east" },
      {
        act: "setCableFigure",
        keys: typed("Breaking force of the cable", "150"),
        words: "Breaking force of the cable of east",
      },
      {
        act: "setTerminal",
        keys: inTurn(unfolded("How the cable is made"), typed("Last end fitting takes off", "120")),
        words: "end fitting of east",
      },
      { act: "setEdge", keys: keyed("Prestretched", "Space"), words: "prestretching of east" },
      {
        act: "setAnchor",
        keys: inTurn(unfolded("Anchors (4)"), placed("Far pin of C1", ["-0.8", "-0.7", "2.9"])),
        words: "far pin of C1",
      },
      { act: "setAnchor", keys: typed("Cloth cut back at C1", "100"), words: "cut back at C1" },
      {
        act: "addAnchor",
        keys: inTurn(typed("Its name", "tie"), placed("Place of the new anchor", ["3", "0.45", "3.8"])),
        words: "anchor tie added",
        seen: /^Anchors \(5\)$/,
      },
      { act: "removeAnchor", keys: pressed("Remove anchor"), words: "anchor tie removed", seen: /^Anchors \(4\)$/ },
    ],
  },
  {
    number: 2,
    acts: [
      {
        act: "takeLayout",
        // "Take these seams in hand" stands there before the first layout is worked out
        keys: inTurn(rested, pressed("Compare layouts"), pressed(/^Take (\d+|fewest) strips/)),
        words: "layout taken",
        seen: /Taken because: /,
      },
      { act: "setLayout", keys: typed("Number of strips", "3"), words: "number of strips", seen: /between 3 panels/ },
      {
        act: "layPairs",
        keys: inTurn(rested, pressed("Take these seams in hand")),
        words: "seams taken in hand",
        seen: /^Seams by hand$/,
      },
      { act: "addSeam", keys: pressed("Add one after"), words: "seam added", seen: /between 4 panels/ },
      { act: "evenSeams", keys: pressed("Even them out", "Space"), words: "seams evened" },
      { act: "removeSeam", keys: pressed("Remove"), words: "seam 1 removed", seen: /between 3 panels/ },
      { act: "moveSeamEnd", keys: typed(/^Begins on/, "40"), words: "end of seam 1" },
      {
        act: "takeSeams",
        keys: pressed("Give back to the plan"),
        words: "seams given back to the plan",
        back: true,
      },
    ],
  },
  {
    number: 3,
    acts: [
      { act: "setFabric", keys: keyed(/^Cloth( default)?$/, "ArrowDown"), words: "cloth" },
      { act: "ownCloth", keys: inTurn(rested, keyed(/^Cloth( default)?$/, "End")), words: "cloth of its own" },
      {
        act: "setClothFigure",
        keys: typed("Stiffness along the warp, Ew", "400"),
        words: "stiffness along the warp, ew",
      },
      { act: "setCompensation", keys: typed("Compensation warp", "0.7"), words: "compensation warp" },
      { act: "setAllowance", keys: typed("Overlap of a seam", "60"), words: "overlap of a seam" },
      { act: "setAllowance", keys: keyed("Overlap lies on", "ArrowDown"), words: "where the overlap lies" },
      { act: "setAllowance", keys: keyed("Pockets are strips of their own", "Space"), words: "pocket strips" },
      {
        act: "setDecompensation",
        keys: typed("Compensation taken back along cables over", "0.4"),
        words: "compensation taken back along cables",
      },
      {
        act: "setPanel",
        keys: inTurn(rested, pressed(/^Panel P2/, "Space"), typed("Warp of P2 turned by", "1")),
        words: "warp of P2",
      },
    ],
  },
  {
    number: 4,
    acts: [
      { act: "addRoll", keys: pressed("Add a roll"), words: "roll added" },
      { act: "setRoll", keys: typed("Width over all", "3200"), words: "width over all of R1" },
      { act: "addFlaw", keys: pressed("Mark a flaw on R1"), words: "flaw on R1" },
      { act: "setFlaw", keys: typed("Flaw 1 of R1 is long", "900"), words: "flaw 1 of R1" },
      { act: "setFlaw", keys: keyed("Flaw 1 of R1 is measured from", "ArrowDown"), words: "flaw 1 of R1" },
      { act: "removeFlaw", keys: pressed("Remove flaw 1"), words: "flaw 1 of R1 removed" },
      { act: "removeRoll", keys: pressed("Remove roll"), words: "roll R1 removed", back: true },
      { act: "setNest", keys: typed("Gap between cuts", "12"), words: "gap between cuts" },
      {
        act: "setPin",
        keys: inTurn(rested, async (page) => {
          await tabTo(page, page.locator("svg.roll").getByRole("button", { name: /^P2 / }));
          await page.keyboard.press("Shift+ArrowRight");
        }),
        words: "P2 pinned",
        seen: /^P2 on R1 at/,
      },
      { act: "setPin", keys: inTurn(rested, pressed("Let go")), words: "P2 let go" },
    ],
  },
  {
    number: 5,
    acts: [
      { act: "setStages", keys: typed("Stages, % of the target", "40 100"), words: "stages" },
      { act: "setRigFigure", keys: typed("No part beyond", "45"), words: "limit of erection" },
      { act: "setReadingError", keys: typed("A reading may be off by", "4"), words: "error of readings" },
      {
        act: "setProof",
        keys: inTurn(unfolded("Limits of the roof as built"), typed("Cloth not taut may be", "3")),
        words: "cloth not taut may be",
      },
      { act: "setAdjuster", keys: inTurn(rested, typed("EA of T-C1", "55000")), words: "EA of T-C1" },
      { act: "setAdjuster", keys: keyed("Turnbuckle of T-C1", "End"), words: "turnbuckle of T-C1" },
      { act: "removeAdjuster", keys: pressed("Remove T-C4"), words: "adjuster T-C4 removed", seen: /^3 adjusters in/ },
      {
        act: "addAdjuster",
        keys: inTurn(rested, keyed("One more adjuster", "ArrowDown")),
        words: "adjuster at C4",
        seen: /^4 adjusters in/,
      },
      { act: "setSupport", keys: typed("Breaking force of G1", "180"), words: "Breaking force of G1" },
    ],
  },
  {
    number: 6,
    acts: [
      { act: "setHead", keys: typed("Title", "Kiosk sail, south"), words: "title" },
      { act: "setPapers", keys: typed("Drawn by", "AB"), words: "drawn by" },
      { act: "setPapers", keys: keyed(/^Sheet( default)?$/, "ArrowDown"), words: "sheet" },
    ],
  },
  {
    number: 7,
    acts: [
      { act: "setSiteLimit", keys: typed("Greatest gust", "9"), words: "greatest gust" },
      {
        act: "addSurveyed",
        keys: inTurn(
          unfolded("Survey (0)"),
          keyed("It lies at", "ArrowDown"),
          placed("Where C2 really is", ["6.81", "-0.6", "5"]),
        ),
        words: "survey of C2",
        seen: /^Survey \(1\)$/,
      },
      { act: "setClothCut", keys: keyed("The cloth is cut already", "Space"), words: "whether the cloth is cut" },
      { act: "moveSurveyed", keys: placed("C2", ["6.82", "-0.6", "5"]), words: "survey of C2" },
      {
        act: "moveSurveyed",
        keys: pressed("Remove the survey of C2"),
        words: "survey of C2 removed",
        seen: /^Survey \(0\)$/,
      },
      {
        act: "addReading",
        keys: inTurn(rested, pressed("T-C1"), typed("Force, kN", "12")),
        words: "reading of T-C1",
        seen: /^1 reading in the log\./,
      },
      { act: "strikeReading", keys: pressed(/^Strike/), words: "reading struck", seen: /1 of them struck/ },
      {
        act: "strikeReading",
        keys: pressed(/^Count again/),
        words: "reading counted again",
        seen: /^1 reading in the log\./,
      },
      {
        act: "addTurns",
        keys: inTurn(pressed(/^Work out corrections/), pressed(/^These turns were made/)),
        words: "turns made",
        seen: /^turned: /,
      },
      {
        act: "takeLog",
        keys: inTurn(rested, given("readings.csv", "time,id,force_kN\n2026-03-04T10:00,T-C2,14\n")),
        words: "log taken in",
        seen: /^2 readings in the log\./,
      },
    ],
  },
];

describe("acts on the job by keyboard alone", () => {
  // One test: leaf goes on from leaf, so that a second try begins with the job opened anew.
  it("each is done, leaf after leaf, and all of it stands in the job that a key saves", {
    timeout: 2 * LONG,
  }, async () => {
    const desk = await openPlanned(bench, sailFiles(JOB), { acceptDownloads: true });
    const { page } = desk;
    awaitChoosers(page);
    for (const { number, acts } of ACTS) {
      await rested(page);
      await leaf(page, number);
      for (const { keys, words, seen, back } of acts) {
        await keys(page);
        await page.getByRole("button", { name: `Undo ${words}`, exact: true }).waitFor();
        if (seen) await page.getByText(seen).first().waitFor();
        if (back) {
          await page.keyboard.press("Control+z");
          await page.getByRole("button", { name: `Redo ${words}`, exact: true }).waitFor();
        }
      }
    }
    await rested(page);
    await page.keyboard.press("Escape");
    const [saved] = await Promise.all([page.waitForEvent("download"), page.keyboard.press("Control+s")]);
    const files = unzipSync(readFileSync(await saved.path()));
    expect(JSON.parse(strFromU8(files["job.json"]))).toMatchObject({
      title: "Kiosk sail, south",
      prestress: { warp: 2.5 },
      edges: { east: { force: 21, cable: { minBreakingForce: 150 }, terminals: [0, 120], prestretched: true } },
      anchors: [{ name: "C2" }, { name: "C1", support: [-0.8, -0.7, 2.9], cutBack: 100 }],
      fabric: { Ew: 400 },
      compensation: { default: { warp: 0.007 } },
      allowances: { seam: 60, seamOn: "one", pocketStrip: true },
      decompensation: { cable: 0.4 },
      panels: { P2: { warp: 1 } },
      rolls: [{ width: 3200 }],
      nest: { gap: 12 },
      rig: { stages: [0.4, 1], limit: 0.45, reading: { error: 0.04 }, stays: [{ minBreakingForce: 180 }, {}, {}] },
      proof: { slack: 0.03 },
      papers: { drawnBy: "AB", sheet: "A3", site: { windGust: 9 } },
      clothCut: true,
    });
    expect(strFromU8(files["site-log.csv"]).split("\n").length).toBeGreaterThan(3);
    await clear(desk);
  });

  it("no act of the page is left out", () => {
    const top = join(import.meta.dirname, "../../src/page");
    const sources = readdirSync(top, { recursive: true, encoding: "utf8" }).filter((f) => /\.tsx?$/.test(f));
    const dispatched = sources.flatMap((f) =>
      [...readFileSync(join(top, f), "utf8").matchAll(/\bact\(\s*(\w+),/g)].map((m) => m[1]),
    );
    const done = new Set(ACTS.flatMap(({ acts }) => acts.map((a) => a.act)));
    expect([...new Set(dispatched)].filter((name) => !done.has(name))).toEqual([]);
    expect([...done].filter((name) => !dispatched.includes(name))).toEqual([]);
  });
});

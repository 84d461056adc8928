import { spawnSync } from "node:child_process";
import fontkit from "@pdf-lib/fontkit";
import { PDFDocument } from "pdf-lib";
import { describe, expect, test } from "vitest";
import { writeFindingSheets } from "../../src/core/papers/pdf/findingSheets.ts";
import { writePapers } from "../../src/core/papers/writePapers.ts";
import type { Facts } from "../../src/core/records/facts.ts";
import { crowded } from "./made/crowdedFacts.ts";
import { largeJob } from "./made/largeJob.ts";
import {
  fonts,
  missing,
  papersOf,
  reason,
  saved,
  shared,
  sizeOf,
  textOf,
  type Word,
  wordsOf,
} from "./made/madePapers.ts";
import { HOSTILE, STRANGE, sampleFacts } from "./made/sampleFacts.ts";
import { withRig } from "./made/sampleRig.ts";
import { readCsv } from "./tables/readCsv.ts";

const SHEETS = { A4: [297, 210], A3: [420, 297], Letter: [279.4, 215.9], Tabloid: [431.8, 279.4] } as const;

const plain = () => withRig(sampleFacts());
const hostile = () =>
  withRig(sampleFacts({ names: HOSTILE, sheet: "Letter", units: "imperial" }), { names: HOSTILE, issuable: true });
const full = () => withRig(crowded(), { more: 26 });

const SETS: Record<string, () => Facts> = {
  "plain, A4": plain,
  "plain, Letter, imperial": () => withRig(sampleFacts({ sheet: "Letter", units: "imperial", stop: false })),
  "hostile names, Letter, imperial": hostile,
  "names right to left, of 300 letters, empty, equal but for case, A4": () =>
    withRig(sampleFacts({ names: STRANGE }), { names: STRANGE }),
  "no stop, rig for issue, A3": () => withRig(sampleFacts({ stop: false, sheet: "A3" }), { issuable: true }),
  "crowded, A4": full,
  "crowded, Tabloid": () => ({ ...full(), job: { ...crowded().job, sheet: "Tabloid" } }),
};

const PDFS = [
  "panel-cards.pdf",
  "roll-sheets.pdf",
  "cables.pdf",
  "tensioning-schedule.pdf",
  "findings.pdf",
  "index.pdf",
];

/** facts.md: an open stop stamps all but the findings; the rig's papers are stamped too while anything is a default. */
function stamped(facts: Facts, name: string): boolean {
  if (name === "findings.pdf") return false;
  const stop = facts.findings.some((f) => f.level === "stop");
  const rig = name === "cables.pdf" || name === "tensioning-schedule.pdf";
  return stop || (rig && facts.tensioning?.issuable !== true);
}

/** Words of one sheet that leave its frame, are under 9 pt, or lie over another, from their boxes. */
function layoutFaults(here: readonly Word[], width: number, height: number, where: string) {
  const [outside, small, overlaps]: [string[], string[], string[]] = [[], [], []];
  for (const w of here) {
    const inside = w.x0 > 20 && w.x1 < width - 10 && w.y0 > 9.5 && w.y1 < height - 9.5;
    if (!inside) outside.push(`${where}: "${w.text}" at ${w.x0.toFixed(1)}, ${w.y0.toFixed(1)}`);
    if (sizeOf(w) < 8.95) small.push(w.text);
  }
  // Letters stand within 0.15 … 0.82 of the height of the box; only those parts must be apart.
  const ink = here.map((w) => ({ ...w, y0: w.y0 + 0.2 * (w.y1 - w.y0), y1: w.y1 - 0.22 * (w.y1 - w.y0) }));
  ink.sort((a, b) => a.x0 - b.x0);
  ink.forEach((a, i) => {
    for (const b of ink.slice(i + 1)) {
      if (b.x0 >= a.x1 - 0.05) break;
      if (a.y0 < b.y1 && b.y0 < a.y1) overlaps.push(`${where}: "${a.text}" over "${b.text}"`);
    }
  });
  return { outside, small, overlaps };
}

describe("writePapers", () => {
  test("writes every paper under a safe path, and the same bytes twice", async () => {
    for (const make of [hostile, () => sampleFacts({ date: "" })]) {
      const first = await shared(make);
      const second = await papersOf(make());
      expect([...second.keys()]).toEqual([...first.keys()]);
      for (const [path, bytes] of first) {
        expect(path).toMatch(/^([a-z]+\/(dxf2000\/)?)?[A-Za-z0-9][A-Za-z0-9._-]*$/);
        expect(Buffer.compare(bytes, second.get(path)!), path).toBe(0);
      }
    }
    const rig = ["cables.csv", "tensioning.csv", "hardware.csv", "cables.pdf", "tensioning-schedule.pdf"];
    const made = await shared(plain);
    expect([...made.keys()].sort()).toEqual(
      [
        ...["R1", "R2"].flatMap((r) => [`rolls/${r}.dxf`, `rolls/${r}.svg`, `rolls/dxf2000/${r}.dxf`]),
        ...["P1", "P2", "P3"].flatMap((p) => [`panels/${p}.dxf`, `panels/${p}.svg`, `panels/dxf2000/${p}.dxf`]),
        ...[
          "rolls.csv",
          "panels.csv",
          "seams.csv",
          "control-lengths.csv",
          "roll-sheets.pdf",
          "panel-cards.pdf",
          "findings.pdf",
          "index.pdf",
        ],
        ...rig,
      ].sort(),
    );
  });

  test("a plan that stopped early still gets its findings sheets", async () => {
    const { format, version, job, fabrics, checks, findings } = sampleFacts();
    expect([...(await papersOf({ format, version, job, fabrics, checks, findings })).keys()]).toEqual([
      "findings.pdf",
      "index.pdf",
    ]);
    const { rolls: _, pieces: __, ...noRolls } = sampleFacts();
    // Clamped all round: no cables and no adjusters, so no paper of a rig.
    const names = [...(await papersOf(noRolls)).keys()];
    expect(names).toContain("panel-cards.pdf");
    expect(names.some((n) => /^(rolls|cables|tensioning|hardware)/.test(n))).toBe(false);
  });

  test("facts are not changed", async () => {
    const facts = hostile();
    const before = JSON.stringify(facts);
    await papersOf(facts);
    expect(JSON.stringify(facts)).toBe(before);
  });

  test("lists: units in the head, numbers of the facts, no formula, status on every row", async () => {
    for (const stop of [true, false]) {
      const facts = sampleFacts({ names: HOSTILE, stop });
      const papers = await papersOf(facts);
      for (const name of ["rolls.csv", "panels.csv", "seams.csv", "control-lengths.csv"]) {
        const [head, ...rows] = readCsv(new TextDecoder("utf-8", { fatal: true }).decode(papers.get(name)!));
        const status = head!.indexOf("status");
        for (const row of rows) {
          expect(row[status]).toBe(stop ? "NOT FOR ISSUE" : "no stop open");
          for (const cell of row) expect(/^[=+@]|^-(?![\d.]+$)/.test(cell), cell).toBe(false);
        }
        if (name === "panels.csv") {
          expect(rows.map((r) => r[0])).toEqual([HOSTILE.P1, `'${HOSTILE.P2}`, HOSTILE.P3, "C1"]);
          const length = head!.indexOf("length_mm");
          expect(Number(rows[0]![length])).toBeCloseTo(facts.panels![0]!.size.length, 1);
          expect(rows[3]![head!.indexOf("roll")]).toBe(HOSTILE.R2);
          expect(Number(rows[0]![head!.indexOf("mass_kg")])).toBeCloseTo(1.05 * facts.panels![0]!.area.cut, 1);
        }
        if (name === "control-lengths.csv") {
          const sides = rows.filter((r) => r[0] === HOSTILE.P1 && r[1] === "side");
          expect(sides.map((r) => Number(r[4]).toFixed(1))).toEqual(
            facts.panels![0]!.sides.map((s) => s.lengthFlat.toFixed(1)),
          );
        }
        if (name === "seams.csv") {
          const of = (column: string) => Number(rows[0]![head!.indexOf(column)]);
          expect(of("flat_a_mm")).toBeCloseTo(facts.panels![0]!.sides[2]!.lengthFlat, 1);
          expect(of("flat_b_mm")).toBeCloseTo(facts.panels![1]!.sides[0]!.lengthFlat, 1);
          expect(of("difference_mm")).toBeCloseTo(of("flat_a_mm") - of("flat_b_mm"), 1);
        }
      }
    }
  });
});

describe.skipIf(missing.length > 0)(`PDF sheets read by other programs${reason}`, () => {
  for (const [title, make] of Object.entries(SETS)) {
    test(`${title}: sound files, every word inside its frame, none over another, none under 9 pt`, async () => {
      const facts = make();
      const [width, height] = SHEETS[facts.job.sheet];
      const papers = await shared(make);
      const [outside, small, overlaps]: [string[], string[], string[]] = [[], [], []];
      for (const name of PDFS) {
        expect(spawnSync("qpdf", ["--check", saved(papers.get(name)!)]).status).toBe(0);
        const { words, pages } = wordsOf(papers.get(name)!);
        for (let page = 1; page <= pages; page++) {
          const here = words.filter((w) => w.page === page);
          const faults = layoutFaults(here, width, height, `${name} sheet ${page}`);
          outside.push(...faults.outside);
          small.push(...faults.small);
          overlaps.push(...faults.overlaps);
          // Short names: then nothing is shortened, no head and above all no number.
          const cut = here.filter((w) => w.text.includes("…") && w.y0 > 24 && w.y1 < height - 31);
          if (title.startsWith("plain")) expect(cut, `${name} sheet ${page}`).toEqual([]);
          // A heading, 12 pt and bold, is never the last of a sheet.
          const body = here.filter((w) => w.y1 < height - 31);
          const last = body.filter((w) => w.y1 > Math.max(...body.map((v) => v.y1)) - 1);
          for (const w of last)
            expect(Math.abs(sizeOf(w) - 12), `${name} sheet ${page}: "${w.text}"`).toBeGreaterThan(0.3);
          const text = here.map((w) => w.text).join(" ");
          const head = here.filter((w) => w.y0 < 24).map((w) => w.text);
          expect(head.join(" ").includes("NOT FOR ISSUE"), `${name} sheet ${page}`).toBe(stamped(facts, name));
          for (const field of [
            "Title",
            "Issue",
            "Revision",
            "Date",
            `${page} of ${pages}`,
            "Units",
            "Reference temperature",
          ]) {
            expect(text, `${name} sheet ${page}`).toContain(field);
          }
          expect(text).toContain(facts.job.revision);
        }
      }
      expect({ outside, small, overlaps }).toEqual({ outside: [], small: [], overlaps: [] });
    });
  }

  test("120 panels with names of 60 letters: no word of any sheet of any paper leaves its frame, is too small or lies over another", {
    timeout: 240_000,
  }, async () => {
    const facts = largeJob(120);
    const { files } = await writePapers(facts, {
      fonts,
      papers: ["panel-cards", "roll-sheets", "rig", "findings", "index"],
    });
    expect(files.map((f) => f.path).sort()).toEqual([...PDFS].sort());
    const faults: string[] = [];
    const least: Record<string, number> = { "panel-cards.pdf": 120, "roll-sheets.pdf": 40, "findings.pdf": 20 };
    for (const { path, bytes } of files) {
      const { words, pages } = wordsOf(bytes);
      expect(pages, path).toBeGreaterThan(least[path] ?? 0);
      for (let page = 1; page <= pages; page++) {
        const here = words.filter((w) => w.page === page);
        const [width, height] = SHEETS[facts.job.sheet];
        faults.push(...Object.values(layoutFaults(here, width, height, `${path} sheet ${page}`)).flat());
        expect(here.map((w) => w.text).join(" "), `${path} sheet ${page}`).toContain(`${page} of ${pages}`);
      }
    }
    expect(faults).toEqual([]);
  });

  test("a card holds what the welder measures", async () => {
    const facts = plain();
    const { words } = wordsOf((await shared(plain)).get("panel-cards.pdf")!);
    const card = words.filter((w) => w.page === 2).map((w) => w.text);
    const panel = facts.panels![0]!;
    for (const side of panel.sides) {
      expect(card).toContain(side.id);
      expect(card).toContain(side.lengthFlat.toFixed(0));
      expect(card).toContain(side.lengthErected.toFixed(3));
    }
    const [c1, , c3] = panel.sides.map((s) => panel.net[s.netFrom]!);
    expect(card).toContain(Math.hypot(c3![0] - c1![0], c3![1] - c1![1]).toFixed(0));
    for (const word of ["warp", "B07,", "R1", "Cut", "Marked", "Measured", "Welded", "below"])
      expect(card).toContain(word);
    expect(card.join(" ")).toMatch(/Scale 1:(10|20|25|50|75|100),/);
  });

  test("an imperial card holds the same lengths in feet, inches and sixteenths, to half a sixteenth", async () => {
    const make = SETS["plain, Letter, imperial"]!;
    const facts = make();
    const text = textOf((await shared(make)).get("panel-cards.pdf")!, 2);
    const told = [...text.matchAll(/(?:(\d+)' )?(?:(\d+) )?(?:(\d+)\/(\d+)|(\d+))"/g)].map(
      ([, feet, inch, a, b, whole]) =>
        25.4 * (12 * Number(feet ?? 0) + Number(inch ?? 0) + (b ? Number(a) / Number(b) : Number(whole))),
    );
    const panel = facts.panels![0]!;
    const { diagonals, widths } = panel.control!;
    const lengths = [
      ...panel.sides.flatMap((s) => [s.lengthFlat, 1000 * s.lengthErected]),
      ...diagonals.map((d) => d.length),
      ...widths.flatMap((w) => [w.at, w.net, w.cut]),
    ];
    expect(lengths.length).toBeGreaterThan(12);
    for (const mm of lengths)
      expect(Math.min(...told.map((t) => Math.abs(t - mm)))).toBeLessThanOrEqual(25.4 / 32 + 1e-6);
    expect(text).not.toMatch(/\d mm|\d m²|\d kg/);
  });

  test("the findings sheets hold every finding and check, and say what the plan does not do", async () => {
    const facts = full();
    const text = textOf((await shared(full)).get("findings.pdf")!);
    for (const f of facts.findings) expect(text.replace(/ /g, "")).toContain(f.code);
    expect(text).toContain("does not design for wind, snow or ponding");
    expect(text).toContain("licensed engineer decide");
    expect(text.split("CAUTION").length).toBeGreaterThan(1);
  });

  test("a limit that is a least one says so on the findings sheets: a greater value is no fault", async () => {
    const facts = sampleFacts({ stop: false });
    const check = { station: "rolls", text: "used length", value: 27583, limit: 26154, holds: true } as const;
    facts.checks = [
      check,
      { ...check, text: "slope", value: 3, limit: 5 },
      { ...check, text: "teeth", value: 1, limit: 4, holds: false },
    ];
    const text = textOf(await writeFindingSheets(facts, fonts)).replace(/\s+/g, " ");
    expect(text).toContain("27583 at least 26154 yes");
    expect(text).toContain(" 3 5 yes");
    expect(text).toContain(" 1 at least 4 NO");
  });

  test("letters no face has are shown as ? and told in a note; those it has stay", async () => {
    const make = SETS["names right to left, of 300 letters, empty, equal but for case, A4"]!;
    const facts = make();
    const made = (f: Facts) => writePapers(f, { fonts, papers: ["findings"] });
    const written = async (f: Facts) => textOf((await made(f)).files[0]!.bytes).replace(/ /g, "");
    // What the papers add belongs into the facts, and drawn from those they are the same.
    const { files, findings } = await made(facts);
    expect(findings.slice(0, -1)).toEqual(facts.findings);
    expect(findings.at(-1)).toMatchObject({ code: "papers-letters", level: "note" });
    expect(findings.at(-1)!.where).toContain(STRANGE.T1);
    const again = await made({ ...facts, findings });
    expect(again.findings).toEqual(findings);
    expect(Buffer.compare(again.files[0]!.bytes, files[0]!.bytes)).toBe(0);
    expect((await made(sampleFacts({ names: HOSTILE }))).findings).toEqual(sampleFacts({ names: HOSTILE }).findings);
    expect(facts.rig!.adjusters.some((a) => a.id === STRANGE.T1)).toBe(true);
    expect(await written(facts)).toContain("papers-letters");
    expect(await written(facts)).toContain("??");
    expect(await written(sampleFacts({ names: HOSTILE }))).not.toContain("papers-letters");
  });

  test("no date, no clock: the file says nothing of the day it was made", async () => {
    const info = (facts: Facts) =>
      writeFindingSheets(facts, fonts).then((b) => spawnSync("pdfinfo", [saved(b)], { encoding: "utf8" }).stdout);
    expect(await info(sampleFacts({ date: "" }))).not.toContain("CreationDate");
    expect(await info(sampleFacts({ date: "2026-03-02" }))).toMatch(/CreationDate:.*Mar +2.*2026/);
    expect(await info(sampleFacts())).toMatch(/Producer: +Seamstay\n/);
  });

  test("letters drawn from the subset of the face look like those of the whole face", async () => {
    const line = "ABCDEFGHIJKLMNOPQRSTUVWXYZ abcdefghijklmnopqrstuvwxyz 0123456789 ØŁβ→≤±°²–…%&<>\"'()";
    const raster = async (subset: boolean) => {
      const doc = await PDFDocument.create({ updateMetadata: false });
      doc.registerFontkit(fontkit);
      const page = doc.addPage([842, 200]);
      for (const [i, bytes] of [fonts.regular, fonts.bold].entries()) {
        page.drawText(line, { x: 10, y: 60 + 60 * i, size: 11, font: await doc.embedFont(bytes, { subset }) });
      }
      return spawnSync("pdftoppm", ["-r", "72", "-gray", saved(await doc.save())], { maxBuffer: 1 << 28 }).stdout;
    };
    const [part, whole] = [await raster(true), await raster(false)];
    const ink = (b: Buffer) => b.reduce((s, v) => s + (v < 128 ? 1 : 0), 0);
    expect(ink(part)).toBeGreaterThan(1000);
    expect(Buffer.compare(part, whole)).toBe(0);
  });
});

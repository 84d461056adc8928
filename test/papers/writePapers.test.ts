import { spawnSync } from "node:child_process";
import { existsSync, mkdtempSync, readFileSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import fontkit from "@pdf-lib/fontkit";
import { PDFDocument } from "pdf-lib";
import { describe, expect, test } from "vitest";
import { writePapers } from "../../src/core/papers/writePapers.ts";
import type { Facts } from "../../src/core/records/facts.ts";
import { crowded } from "./crowdedFacts.ts";
import { readCsv } from "./readCsv.ts";
import { HOSTILE, sampleFacts } from "./sampleFacts.ts";

const face = (name: string) => new Uint8Array(readFileSync(`node_modules/dejavu-fonts-ttf/ttf/${name}.ttf`));
const fonts = { regular: face("DejaVuSans"), bold: face("DejaVuSans-Bold") };
const has = (tool: string) => ["/usr/bin", "/usr/local/bin", "/bin"].some((d) => existsSync(join(d, tool)));
const missing = ["qpdf", "pdftotext", "pdftoppm"].filter((t) => !has(t));
const reason = missing.length > 0 ? ` (skipped: ${missing.join(", ")} not on this machine)` : "";
const MM = 72 / 25.4;
const SHEETS = { A4: [297, 210], A3: [420, 297], Letter: [279.4, 215.9], Tabloid: [431.8, 279.4] } as const;

async function papersOf(facts: Facts): Promise<Map<string, Uint8Array>> {
  const { files } = await writePapers(facts, { fonts });
  expect(new Set(files.map((f) => f.path.toLowerCase())).size).toBe(files.length);
  return new Map(files.map((f) => [f.path, f.bytes]));
}

function saved(bytes: Uint8Array): string {
  const file = join(mkdtempSync(join(tmpdir(), "papers-")), "paper.pdf");
  writeFileSync(file, bytes);
  return file;
}

interface Word {
  page: number;
  text: string;
  /** mm from the upper left */
  x0: number;
  y0: number;
  x1: number;
  y1: number;
}

/** Every word of a PDF with its box, by a reader that is not ours. */
function wordsOf(bytes: Uint8Array): { words: Word[]; pages: number } {
  const run = spawnSync("pdftotext", ["-bbox", saved(bytes), "-"], { encoding: "utf8", maxBuffer: 1 << 28 });
  expect(run.status).toBe(0);
  let page = 0;
  const words: Word[] = [];
  for (const m of run.stdout.matchAll(
    /<page |<word xMin="([\d.-]+)" yMin="([\d.-]+)" xMax="([\d.-]+)" yMax="([\d.-]+)">([^<]*)</g,
  )) {
    if (m[0].startsWith("<page")) page++;
    else {
      const [x0, y0, x1, y1] = [m[1], m[2], m[3], m[4]].map((v) => Number(v) / MM) as [number, number, number, number];
      words.push({ page, text: m[5]!, x0, y0, x1, y1 });
    }
  }
  return { words, pages: page };
}

const SETS: Record<string, () => Facts> = {
  "plain, A4": () => sampleFacts(),
  "hostile names, Letter": () => sampleFacts({ names: HOSTILE, sheet: "Letter", units: "imperial" }),
  "no stop, A3": () => sampleFacts({ stop: false, sheet: "A3" }),
  "crowded, A4": crowded,
  "crowded, Tabloid": () => ({ ...crowded(), job: { ...crowded().job, sheet: "Tabloid" } }),
};

describe("writePapers", () => {
  test("writes every paper under a safe path, and the same bytes twice", async () => {
    for (const make of [() => sampleFacts({ names: HOSTILE }), () => sampleFacts({ date: "" })]) {
      const first = await papersOf(make());
      const second = await papersOf(make());
      expect([...second.keys()]).toEqual([...first.keys()]);
      for (const [path, bytes] of first) {
        expect(path).toMatch(/^([a-z]+\/)?[A-Za-z0-9][A-Za-z0-9._-]*$/);
        expect(Buffer.compare(bytes, second.get(path)!), path).toBe(0);
      }
    }
    const plain = await papersOf(sampleFacts());
    expect([...plain.keys()].sort()).toEqual(
      [
        ...["R1", "R2"].flatMap((r) => [`rolls/${r}.dxf`, `rolls/${r}.svg`]),
        ...["P1", "P2", "P3"].flatMap((p) => [`panels/${p}.dxf`, `panels/${p}.svg`]),
        ...["rolls.csv", "panels.csv", "seams.csv", "panel-cards.pdf", "findings.pdf"],
      ].sort(),
    );
  });

  test("a plan that stopped early still gets its findings sheets", async () => {
    const { format, version, job, fabrics, checks, findings } = sampleFacts();
    expect([...(await papersOf({ format, version, job, fabrics, checks, findings })).keys()]).toEqual(["findings.pdf"]);
    const { rolls: _, pieces: __, ...noRolls } = sampleFacts();
    const names = [...(await papersOf(noRolls)).keys()];
    expect(names).toContain("panel-cards.pdf");
    expect(names.some((n) => n.startsWith("rolls"))).toBe(false);
  });

  test("facts are not changed", async () => {
    const facts = sampleFacts({ names: HOSTILE });
    const before = JSON.stringify(facts);
    await papersOf(facts);
    expect(JSON.stringify(facts)).toBe(before);
  });

  test("lists: units in the head, numbers of the facts, no formula, status on every row", async () => {
    for (const stop of [true, false]) {
      const facts = sampleFacts({ names: HOSTILE, stop });
      const papers = await papersOf(facts);
      for (const name of ["rolls.csv", "panels.csv", "seams.csv"]) {
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
      const papers = await papersOf(facts);
      const [outside, small, overlaps]: [string[], string[], string[]] = [[], [], []];
      for (const name of ["panel-cards.pdf", "findings.pdf"]) {
        expect(spawnSync("qpdf", ["--check", saved(papers.get(name)!)]).status).toBe(0);
        const { words, pages } = wordsOf(papers.get(name)!);
        for (let page = 1; page <= pages; page++) {
          const here = words.filter((w) => w.page === page);
          for (const w of here) {
            const inside = w.x0 > 20 && w.x1 < width - 10 && w.y0 > 9.5 && w.y1 < height - 9.5;
            if (!inside) outside.push(`${name} sheet ${page}: "${w.text}" at ${w.x0.toFixed(1)}, ${w.y0.toFixed(1)}`);
            // The box of a word is ascent and descent of its face: 1.164 of the size in DejaVu Sans.
            if (((w.y1 - w.y0) * MM) / 1.164 < 8.95) small.push(w.text);
          }
          // Letters stand within 0.15 … 0.82 of the height of the box; only those parts must be apart.
          const ink = here.map((w) => ({ ...w, y0: w.y0 + 0.2 * (w.y1 - w.y0), y1: w.y1 - 0.22 * (w.y1 - w.y0) }));
          ink.sort((a, b) => a.x0 - b.x0);
          ink.forEach((a, i) => {
            for (const b of ink.slice(i + 1)) {
              if (b.x0 >= a.x1 - 0.05) break;
              if (a.y0 < b.y1 && b.y0 < a.y1) overlaps.push(`${name} sheet ${page}: "${a.text}" over "${b.text}"`);
            }
          });
          const text = here.map((w) => w.text).join(" ");
          expect(text.includes("NOT FOR ISSUE")).toBe(facts.findings.some((f) => f.level === "stop"));
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

  test("a card holds what the welder measures", async () => {
    const facts = sampleFacts();
    const { words } = wordsOf((await papersOf(facts)).get("panel-cards.pdf")!);
    const card = words.filter((w) => w.page === 1).map((w) => w.text);
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

  test("the findings sheets hold every finding and check, and say what the plan does not do", async () => {
    const facts = crowded();
    const papers = await papersOf(facts);
    const text = wordsOf(papers.get("findings.pdf")!)
      .words.map((w) => w.text)
      .join(" ");
    for (const f of facts.findings) expect(text.replace(/ /g, "")).toContain(f.code);
    expect(text).toContain("does not design for wind, snow or ponding");
    expect(text).toContain("licensed engineer decide");
    expect(text.split("CAUTION").length).toBeGreaterThan(1);
  });

  test("no date, no clock: the file says nothing of the day it was made", async () => {
    const info = (facts: Facts) =>
      papersOf(facts).then((p) => spawnSync("pdfinfo", [saved(p.get("findings.pdf")!)], { encoding: "utf8" }).stdout);
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

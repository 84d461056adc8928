// What stands on every sheet of every paper, read back by pdftotext: one revision, its issue and the one it supersedes, sheet n of m, units; and what
// stands on none of them: a measure in units the job does not use.
import { unzipSync } from "fflate";
import { describe, expect, test } from "vitest";
import { choosePapers, PAPER_CHOICES, type PaperChoice } from "../../src/core/papers/choosePapers.ts";
import { writePapers } from "../../src/core/papers/writePapers.ts";
import type { Facts } from "../../src/core/records/facts.ts";
import { fonts, missing, papersOf, reason, textOf, wordsOf } from "./made/madePapers.ts";
import { sampleFacts } from "./made/sampleFacts.ts";
import { withRig } from "./made/sampleRig.ts";

function job(changes: Partial<Facts["job"]>, stop = true): Facts {
  const facts = withRig(sampleFacts({ stop }), { issuable: !stop });
  return { ...facts, job: { ...facts.job, ...changes } };
}

/** Every PDF with its sheets as text. */
function sheetsOf(papers: ReadonlyMap<string, Uint8Array>): { path: string; texts: string[] }[] {
  return [...papers].flatMap(([path, bytes]) => {
    if (!path.endsWith(".pdf")) return [];
    const { pages } = wordsOf(bytes);
    return [{ path, texts: Array.from({ length: pages }, (_, k) => textOf(bytes, k + 1)) }];
  });
}

describe.skipIf(missing.length > 0)(`every sheet${reason}`, () => {
  test("one revision, the issue and what it supersedes, drawn and checked by, sheet n of m: on every sheet, in the bundle too", async () => {
    for (const stop of [true, false]) {
      const facts = job({ supersedes: "P7", issue: "B", drawnBy: "ab", checkedBy: "cd" }, stop);
      const { files } = await writePapers(facts, { fonts, papers: choosePapers("all") });
      const held = Object.entries(unzipSync(files.find((f) => f.path === "papers.zip")!.bytes));
      expect(held).toHaveLength(files.length - 1);
      const sheets = sheetsOf(new Map(held));
      expect(sheets).toHaveLength(6);
      for (const { path, texts } of sheets) {
        texts.forEach((text, k) => {
          for (const words of [
            facts.job.revision,
            "Issue, supersedes",
            "B, P7",
            "ab",
            "cd",
            `${k + 1} of ${texts.length}`,
          ])
            expect(text, `${path} sheet ${k + 1}`).toContain(words);
          // By the reason in the stamp: its words are named in cautions too. The findings carry no stamp of their own.
          if (path !== "findings.pdf")
            expect(text.includes("open stop: seam-length"), `${path} sheet ${k + 1}`).toBe(stop);
        });
      }
      const cuts = held.filter(([path]) => /\.(dxf|svg)$/.test(path));
      expect(cuts.length).toBeGreaterThan(10);
      for (const [path, bytes] of cuts) {
        const text = new TextDecoder().decode(bytes);
        expect(text, path).toContain(`ISSUE B SUPERSEDES P7 REVISION ${facts.job.revision}`);
        expect(text.includes("NOT FOR ISSUE"), path).toBe(stop);
      }
      for (const [path, bytes] of held.filter(([p]) => p.endsWith(".csv"))) {
        const [, ...rows] = new TextDecoder().decode(bytes).trimEnd().split("\r\n");
        for (const row of rows)
          expect(row.replaceAll('"', ""), path).toContain(`B,${facts.job.revision},${stop ? "NOT FOR" : "no stop"}`);
      }
      expect(sheets.find((s) => s.path === "index.pdf")!.texts.join()).toContain("takes the place of issue P7");
    }
  });

  test("imperial sheets hold no metric measure that has not its imperial one beside it", async () => {
    const facts = job({ units: "imperial", sheet: "Letter" });
    // A finding a crew must know stands on the schedule in the station's metric words.
    facts.findings = [
      ...facts.findings,
      {
        code: "travel-alone",
        level: "caution",
        station: "rig",
        where: "T1",
        value: 1.7,
        limit: 1,
        text: "10 mm taken in at all adjusters adds 33 kN to the 46 kN of T1: lengths alone overload this roof",
        remedy: "No tensioning without gauges",
        basis: "own argument",
      },
    ];
    facts.form = {
      ...facts.form!,
      relief: {
        curvature: { least: -0.0123, leastAt: 0, greatest: 0.0034, greatestAt: 1 },
        stripWidth: 1.21,
        slope: { least: 4.2, leastAt: 2 },
        flatShare: 0.01,
        pits: 0,
      },
    };
    const metric =
      /[-−]?\d+(?:\.\d+)? (?:mm|m|m²|kN|kN\/m|kN·m|N·m|kg|kg\/m2|1\/m²|m\/s|°C|degC)(?![\w²/·])(?!,? ?[[(])/g;
    // The bar of a cut file is drawn in metric whatever the sheets are.
    const stray = (text: string) =>
      (text.replaceAll("1000 mm bar", "").match(metric) ?? []).filter((m) => !m.startsWith("- "));
    for (const { path, texts } of sheetsOf(await papersOf(facts))) {
      // Columns Value and Limit of the findings stay metric, as its head says; sentences there are wrapped into columns.
      if (path === "findings.pdf") {
        const form = /Form: .*?below 2°/.exec(texts[0]!)![0];
        expect(stray(form)).toEqual([]);
        for (const unit of ["kip", "1/ft²", "ft]"]) expect(form).toContain(unit);
        continue;
      }
      texts.forEach((text, k) => {
        expect(stray(text), `${path} sheet ${k + 1}`).toEqual([]);
      });
    }
    expect(stray("12.5 mm and 3 kN [0.674 kip], 1.50 kN/m")).toEqual(["12.5 mm", "1.50 kN/m"]);
  });

  test("a thread of the job's own stands on the hardware list and under the torque; without one it is called assumed", async () => {
    const facts = job({}, false);
    const [first, ...others] = facts.rig!.adjusters;
    const own = { ...first!, id: "own", thread: 33, turnbuckle: "job", ends: "single" as const, perTurn: 3.5 };
    const rig = { ...facts.rig!, adjusters: others };
    const withOwn: Facts = { ...facts, rig: { ...rig, adjusters: [own, ...others] } };
    withOwn.tensioning = JSON.parse(JSON.stringify(facts.tensioning).replaceAll('"T1"', '"own"'));
    const papers = await papersOf(withOwn);
    for (const name of ["cables.pdf", "tensioning-schedule.pdf"]) {
      const text = textOf(papers.get(name)!);
      expect(text, name).toContain("M33: as in the job");
      expect(text, name).not.toContain("M33 assumed");
      expect(text, name).toContain("assumed");
    }
    const hardware = new TextDecoder().decode(papers.get("hardware.csv"));
    expect(hardware).toMatch(/\r\nown,A1,as in the job,33\.0,single,3\.50,/);
  });

  test("column Where: the places of a finding by name, of like ones together, ten and how many more; a value behind each where they differ", async () => {
    const facts = job({}, false);
    const like = (where: string | string[], value: number): Facts["findings"][number] => ({
      code: "allowance-missed",
      level: "caution",
      station: "panels",
      where,
      value,
      limit: 10,
      text: `A side of ${[where].flat()[0]} misses its allowance by ${value} mm.`,
      remedy: "Look at it.",
      basis: "own argument",
    });
    facts.findings = [
      like("P1", 12),
      like(["P2", "S1"], 31),
      {
        ...like(
          Array.from({ length: 14 }, (_, i) => `v${i}`),
          5,
        ),
        code: "built-moved",
        text: "They moved.",
      },
    ];
    const text = textOf((await papersOf(facts)).get("findings.pdf")!).replace(/\s+/g, "");
    expect(text).toContain("P1(12);P2,S1(31)");
    expect(text).toContain("Theworstof2alike:AsideofP2missesitsallowanceby31mm.");
    expect(text).toContain("v9and4more");
    expect(text).not.toContain("v10");
  });
});

/** Files that a choice stands for in this job. */
const EXPECTED: Record<PaperChoice, RegExp> = {
  "cut-files": /^(rolls|bites|panels)\/[^/]+\.(dxf|svg)$/,
  dxf2000: /^(rolls|bites|panels)\/dxf2000\/[^/]+\.dxf$/,
  arcs: /^(rolls|bites|panels)\/arcs\/[^/]+\.(dxf|svg)$/,
  "roll-sheets": /^roll-sheets\.pdf$/,
  "panel-cards": /^panel-cards\.pdf$/,
  lists: /^(rolls|panels|seams|control-lengths|cables|tensioning|hardware)\.csv$/,
  rig: /^(cables|tensioning-schedule)\.pdf$/,
  findings: /^findings\.pdf$/,
  index: /^index\.pdf$/,
  bundle: /^papers\.zip$/,
};
const COUNT: Record<PaperChoice, number> = {
  "cut-files": 10,
  dxf2000: 5,
  arcs: 10,
  "roll-sheets": 1,
  "panel-cards": 1,
  lists: 7,
  rig: 2,
  findings: 1,
  index: 1,
  bundle: 1,
};

test.each(Object.keys(PAPER_CHOICES) as PaperChoice[])(
  "papers chosen as %s: these and no other files",
  async (choice) => {
    const { files } = await writePapers(job({}), { fonts, papers: choosePapers(choice) });
    expect(files.map((f) => f.path).filter((p) => !EXPECTED[choice].test(p))).toEqual([]);
    expect(files).toHaveLength(COUNT[choice]);
  },
);

import { describe, expect, test } from "vitest";
import { writeCableSheets } from "../../../src/core/papers/pdf/rig/cableSheets.ts";
import { writeTensioningSchedule } from "../../../src/core/papers/pdf/rig/tensioningSchedule.ts";
import {
  cornerDistances,
  cornerHeights,
  finalForce,
  holdReadings,
  jackStep,
  limitOf,
  rigFacts,
  stopForce,
} from "../../../src/core/papers/tables/rigReadings.ts";
import { cableTable, hardwareTable, moveTable } from "../../../src/core/papers/tables/rigTables.ts";
import type { Facts } from "../../../src/core/records/facts.ts";
import { fonts, missing, reason, sizeOf, textOf, wordsOf } from "../made/madePapers.ts";
import { sampleFacts } from "../made/sampleFacts.ts";
import { withRig } from "../made/sampleRig.ts";
import { readCsv } from "../tables/readCsv.ts";

const facts = withRig(sampleFacts({ stop: false }));
const rig = rigFacts(facts)!;
const sheets = writeTensioningSchedule(rig, fonts);
const moves = rig.tensioning.stages.flatMap((s) => s.moves);

describe("readings", () => {
  test("a move is stopped at the top of its window, or at the member's limit where that is less", () => {
    const move = { ...moves[0]!, high: 60 };
    expect(limitOf(rig, move.adjuster)).toBeCloseTo(0.55 * 90, 9);
    expect(stopForce(rig, move)).toBeCloseTo(0.55 * 90, 9);
    expect(stopForce(rig, { ...move, high: 10 })).toBe(10);
    // A cable is as weak as its end fitting.
    const [first] = facts.cables!;
    const fitted = { ...rig, facts: { ...facts, cables: [{ ...first!, minBreakingForce: 184, fitting: 60 }] } };
    expect(limitOf(fitted, first!.id)).toBeCloseTo(0.55 * 60, 9);
    // Without a capacity there is no limit to hold it to.
    expect(stopForce(rig, { ...move, adjuster: "T2" })).toBe(60);
  });

  test("hold windows are the gauge's share of the final force; a mast's force is negative and its window too", () => {
    const [first] = rig.tensioning.stages;
    const readings = holdReadings(rig, first!);
    expect(readings.map((r) => r.id)).toEqual(Object.keys(first!.forces));
    const t1 = readings.find((r) => r.id === "T1")!;
    expect([t1.planned, t1.low, t1.high]).toEqual([4, 2, 6]);
    const mast = readings.find((r) => r.id === "mast-1")!;
    expect(mast.low).toBeCloseTo(-3.3, 9);
    expect(mast.high).toBeCloseTo(-1.1, 9);
  });

  test("a hold window is that of the move before it where the force is the same, though the last stage ends off the target", () => {
    const aim = rig.adjusters[0]!;
    const off = {
      ...rig.tensioning.stages.at(-1)!,
      forces: { ...rig.tensioning.stages.at(-1)!.forces, [aim.id]: 0.98 * aim.target },
    };
    const stages = [...rig.tensioning.stages.slice(0, -1), off];
    const made = { ...rig, tensioning: { ...rig.tensioning, stages } };
    const window = rig.tensioning.readingError * aim.target;
    const hold = holdReadings(made, off).find((r) => r.id === aim.id)!;
    expect(hold.high - hold.planned).toBeCloseTo(window, 9);
    // What the sheets call final is what the last stage reaches, on every sheet.
    expect(finalForce(made, aim.id)).toBeCloseTo(0.98 * aim.target, 9);
    expect(finalForce(made, "nobody")).toBeNull();
  });

  test("corner distances: round the roof and across, each pair once", () => {
    const distances = cornerDistances(rig, rig.tensioning.stages[0]!);
    const of = (a: string, b: string) => distances.find((d) => d.from === a && d.to === b)!.finished;
    expect(distances).toHaveLength(6);
    expect(of("T1", "T2")).toBeCloseTo(8, 9);
    expect(of("T2", "T3")).toBeCloseTo(5.4, 9);
    expect(of("T1", "T3")).toBeCloseTo(Math.hypot(8, 5.4), 9);
    const stage = { ...rig.tensioning.stages[0]!, corners: { T1: [0, 0, 0], T2: [3, 4, 0] } as const };
    const at = cornerDistances(rig, { ...stage, corners: { T1: [0, 0, 0], T2: [3, 4, 0] } });
    expect(at.find((d) => d.from === "T1" && d.to === "T2")!.atStage).toBeCloseTo(5, 9);
    expect(at.find((d) => d.from === "T1" && d.to === "T3")!.atStage).toBeNull();
    const heights = cornerHeights(rig, { ...stage, corners: { T1: [0, 0, 2.5] } });
    expect(heights.map((h) => h.id)).toEqual(rig.adjusters.map((a) => a.id));
    expect([heights[0]!.atStage, heights[1]!.atStage]).toEqual([2.5, null]);
    expect(heights[0]!.finished).toBe(facts.rig!.nodes[rig.adjusters[0]!.nodes[0]]![2]);
  });
});

describe("lists of the rig", () => {
  const rows = (text: string) => {
    const [head, ...body] = readCsv(text);
    return body.map((r) => Object.fromEntries(head!.map((h, i) => [h, r[i]!])));
  };

  test("tensioning.csv holds every move as the facts have it", () => {
    const table = rows(moveTable(rig));
    expect(table).toHaveLength(moves.length);
    table.forEach((row, i) => {
      const m = moves[i]!;
      expect([row.step, row.adjuster, row.way]).toEqual([
        `${m.step}`,
        m.adjuster,
        m.travel > 0 ? "shorten" : "lengthen",
      ]);
      expect(Number(row.pin_from_mm)).toBeCloseTo(1000 * m.pinFrom, 1);
      expect(Number(row.pin_to_mm)).toBeCloseTo(1000 * m.pinTo, 1);
      expect(Number(row.expect_kN)).toBeCloseTo(m.expect, 2);
      expect(Number(row.stop_at_kN)).toBeCloseTo(stopForce(rig, m), 2);
      // Whole turns and sixths are what is turned: they must add up to the travel.
      const [, whole, , part] = /^(?:(\d+) turns?)?( \+ )?(?:(\d)\/6)?/.exec(row.turns!)!;
      expect((Number(whole ?? 0) + Number(part ?? 0) / 6) * 6).toBeCloseTo(Math.abs(m.travel), 0);
      expect(row.reference_temperature_degC).toBe("15.0");
      expect(row.status).toBe("NOT FOR ISSUE");
    });
  });

  test("cables.csv and hardware.csv: numbers of the facts, missing values empty, terminals said not to be deducted", () => {
    const [first, second] = rows(cableTable(facts));
    expect(first).toMatchObject({
      cable: "E1",
      terminals_deducted: "no",
      slack_length_m: "8.3900",
      stations_from: "A1",
    });
    expect(first!.stations_erected_m).toBe("S1 at 2.4321; S2 at 5.1000");
    expect(second).toMatchObject({ min_breaking_force_kN: "", utilisation_percent: "", stations_from: "" });
    const [t1, t2] = rows(hardwareTable(rig));
    expect(t1).toMatchObject({
      adjuster: "T1",
      start_pin_to_pin_mm: "1050.0",
      travel_used_mm: "51.0",
      thread_mm: "24.0",
    });
    expect(t1).toMatchObject({ left_to_shorten_mm: "99.5", left_to_lengthen_mm: "100.5", capacity_kN: "90.0" });
    expect(t2!.capacity_kN).toBe("");
    expect([t1!.ends, t1!.engagement_at_longest_mm, t1!.weakest_part]).toEqual(["", "", ""]);
    // both-handed: what is turned out leaves each thread by half; one thread: by all of it
    const told = (ends: "both" | "single") => {
      const own = { ends, engagement: 26, weakest: "anchor" as const };
      return rows(hardwareTable({ ...rig, adjusters: rig.adjusters.map((a) => ({ ...a, ...own })) }))[0]!;
    };
    const left = 1000 * rig.adjusters[0]!.range.longest - 1050;
    expect(told("both")).toMatchObject({ ends: "right and left hand", weakest_part: "anchor" });
    expect(Number(told("both").engagement_least_mm)).toBeCloseTo(26 + left / 2, 1);
    expect(told("single")).toMatchObject({ ends: "single", engagement_at_longest_mm: "26.0" });
    expect(Number(told("single").engagement_least_mm)).toBeCloseTo(26 + left, 1);
    const issued = withRig(sampleFacts({ stop: false }), { issuable: true });
    expect(rows(cableTable(issued))[0]!.status).toBe("no stop open, no default taken");
    expect(rows(cableTable(withRig(sampleFacts(), { issuable: true })))[0]!.status).toBe("NOT FOR ISSUE");
  });
});

describe.skipIf(missing.length > 0)(`schedule as another reader finds it${reason}`, () => {
  /** Pages whose title begins so. */
  const pages = (bytes: Uint8Array, title: string) =>
    Array.from({ length: wordsOf(bytes).pages }, (_, i) => i + 1).filter((p) =>
      wordsOf(bytes)
        .words.filter((w) => w.page === p && w.y0 < 24)
        .map((w) => w.text)
        .join(" ")
        .includes(title),
    );

  test("what the numbers of the plan call for stands before any work, with its signal word, the like of many told once", async () => {
    const caution = (code: string, where: string, text: string) => ({
      ...{ code, where, text, level: "caution" as const, station: "rig" as const, value: 1, limit: 1 },
      ...{ remedy: "do this", basis: "test" },
    });
    const spent = ["T1", "T2", "T3", "T4", "T5", "T6"].map((id) =>
      caution("travel-spent", id, `${id} has little left`),
    );
    const alone = caution("travel-alone", "T1", "10 mm taken in at all adjusters adds 34 kN to the 62 kN of T1");
    const called = { ...facts, findings: [...facts.findings, ...spent, alone] };
    const bytes = await writeTensioningSchedule(rigFacts(called)!, fonts);
    const text = textOf(bytes).replace(/\s+/g, " ");
    expect(text.indexOf("What the numbers of this plan call for")).toBeLessThan(text.indexOf("Before stage 1"));
    expect(text).toContain("WARNING: 10 mm taken in at all adjusters adds 34 kN to the 62 kN of T1. Do this.");
    expect(text).toContain("CAUTION: T4 has little left. Do this.");
    expect(text).toContain("CAUTION: the like holds for T5, T6 (findings sheets).");
    expect(textOf(await sheets)).not.toContain("What the numbers of this plan call for");
  });

  test("the visit after settling: each adjuster with its final force, window and the travel left; heights at every hold point", async () => {
    const text = textOf(await sheets).replace(/\s+/g, " ");
    const visit = text.slice(text.indexOf("Re-tension visit after settling"));
    const last = holdReadings(rig, rig.tensioning.stages.at(-1)!);
    for (const a of rig.adjusters) {
      const { planned, low, high } = last.find((r) => r.id === a.id)!;
      expect(visit).toContain(`${a.id} ${planned.toFixed(1)} ${low.toFixed(1)} – ${high.toFixed(1)}`);
      expect(text).toContain(`${a.id}, height`);
      const set = text.slice(text.indexOf("Before stage 1"), text.indexOf("Then hang the cloth"));
      expect(set).toContain(`${a.perTurn.toFixed(1)} ${planned.toFixed(1)}`);
    }
  });

  test("every move stands on its stage's sheets with what to turn, which way, how far, tape, gauge, window and stop", async () => {
    const bytes = await sheets;
    rig.tensioning.stages.forEach((stage, k) => {
      const text = pages(bytes, `Stage ${k + 1} of 3`)
        .map((p) => textOf(bytes, p))
        .join(" ");
      for (const m of stage.moves) {
        const tape = (v: number) => (Math.round(2000 * v) / 2).toFixed(1);
        const gauge = m.expect < 1 ? "slack" : m.expect.toFixed(1);
        for (const word of [
          m.adjuster,
          m.travel > 0 ? "SHORTEN" : "LENGTHEN",
          `from ${tape(m.pinFrom)}`,
          `to ${tape(m.pinTo)}`,
          `${Math.abs(m.travel).toFixed(1)} mm`,
          gauge,
          `${m.low.toFixed(1)} – ${m.high.toFixed(1)}`,
          `${stopForce(rig, m).toFixed(1)} kN`,
        ])
          expect(text, `stage ${k + 1}, ${m.adjuster}`).toContain(word);
      }
      expect(text).toContain(`HOLD POINT ${k + 1}`);
      for (const id of Object.keys(stage.forces)) expect(text).toContain(id);
      expect(text).toContain("T1 – T3");
    });
  });

  test("before an adjuster is set its caution is read; a mast stands before cloth is pinned to it, and is told only where there is one", async () => {
    const text = textOf(await sheets).replace(/\s+/g, " ");
    const from = text.indexOf("Before stage 1");
    expect(text.indexOf("A turnbuckle turned out too far", from)).toBeLessThan(text.indexOf("SET pin to", from));
    expect(text.indexOf("Slack or half-tensioned", from)).toBeLessThan(text.indexOf("Cables in their pockets", from));
    expect(text).toContain("Masts first: mast-1 stands held every way");
    const bare = { ...facts, rig: { ...facts.rig!, struts: [] }, cables: facts.cables!.filter((c) => c.edge !== null) };
    const none = textOf(await writeTensioningSchedule(rigFacts(bare)!, fonts)).replace(/\s+/g, " ");
    expect(none).not.toContain("Masts first");
    expect(none).not.toContain("Dashed: masts");
  });

  test("cautions stand before the step they belong to, the gravest first", async () => {
    const bytes = await sheets;
    for (const [k] of rig.tensioning.stages.entries()) {
      const here = pages(bytes, `Stage ${k + 1} of 3`).flatMap((page) =>
        wordsOf(bytes)
          .words.filter((w) => w.page === page)
          .map((w) => ({ ...w, y: w.y0 + 1000 * page })),
      );
      const first = (text: string) => Math.min(...here.filter((w) => w.text === text).map((w) => w.y));
      expect(first("DANGER")).toBeLessThan(first("WARNING"));
      expect(first("WARNING")).toBeLessThan(first("Moves"));
      expect(first("Moves")).toBeLessThan(first("SHORTEN"));
    }
    // The step near its limit, the one that is let out, and the one too heavy for a hand have words of their own before them.
    const text = pages(bytes, "Stage 3 of 3")
      .map((p) => textOf(bytes, p))
      .join(" ");
    expect(text).toMatch(
      /WARNING before step 5: E1 comes to 94 % of its limit .* SHORTEN .*WARNING before step 6: T4 is let OUT.*LENGTHEN/,
    );
  });

  test("step, hold and temperature tables are set in 11 pt or more", async () => {
    const bytes = await sheets;
    const large = ["SHORTEN", "LENGTHEN", "999.0", "mast-1", "41.0", "slack"];
    const table = [...pages(bytes, "Stage"), ...pages(bytes, "Finished forces"), ...pages(bytes, "Log")];
    const words = wordsOf(bytes).words.filter((w) => table.includes(w.page) && large.includes(w.text));
    expect(words.length).toBeGreaterThan(20);
    for (const w of words) expect(sizeOf(w), w.text).toBeGreaterThan(10.9);
  });

  test("every word in the row of a move is set in 11 pt or more, and nothing on any sheet in less than 9 pt", async () => {
    const { words } = wordsOf(await sheets);
    const ways = words.filter((w) => w.text === "SHORTEN" || w.text === "LENGTHEN");
    expect(ways).toHaveLength(moves.length);
    for (const way of ways) {
      // Two lines a row: the second begins 5.4 mm below the first.
      const row = words.filter((w) => w.page === way.page && w.y0 > way.y0 - 1 && w.y0 < way.y0 + 6);
      expect(row.length).toBeGreaterThan(12);
      for (const w of row) expect(sizeOf(w), w.text).toBeGreaterThan(10.9);
    }
    for (const w of words) expect(sizeOf(w), w.text).toBeGreaterThan(8.9);
  });

  test("sixteen members at four corners: what is signed stands on the sheet of its numbers", async () => {
    const more = Object.fromEntries(Array.from({ length: 8 }, (_, i) => [`belt-${i + 1}`, 3]));
    const stages = rig.tensioning.stages.map((s) => ({ ...s, forces: { ...s.forces, ...more } }));
    const many = { ...facts, tensioning: { ...facts.tensioning!, stages } };
    const bytes = await writeTensioningSchedule(rigFacts(many)!, fonts);
    stages.forEach((_, k) => {
      const text = wordsOf(bytes)
        .words.map((w) => w.page)
        .filter((p, i, all) => all.indexOf(p) === i)
        .map((p) => textOf(bytes, p))
        .find((t) => t.includes(`HOLD POINT ${k + 1}`))!;
      expect(text).toContain("belt-8");
      expect(text).toMatch(/Released for the next stage|Finished state accepted/);
    });
  });

  test("the window of a pressed member reads from – to without a dash among its minus signs", async () => {
    const bytes = await sheets;
    const text = pages(bytes, "Stage 1 of 3")
      .map((p) => textOf(bytes, p))
      .join(" ");
    expect(text).toContain("-3.3 to -1.1");
    expect(text).toContain("minus is pressed");
  });

  test("the cover says what it is not, what must be there, and which limits nobody gave", async () => {
    const bytes = await sheets;
    const cover = [1, 2].map((p) => textOf(bytes, p)).join(" ");
    for (const words of [
      "No gauge, no tensioning.",
      "Stop at force OR travel",
      "No design for wind, snow, ponding",
      "licensed engineer decide",
      "not given: do not start",
      "no state is left overnight",
      "stands on defaults",
      "Jack",
    ])
      expect(cover).toContain(words);
    const given: Facts = {
      ...facts,
      job: { ...facts.job, site: { windMean: 6, windGust: 9.5, temperatureLow: 5, night: "all corners at 60 %" } },
    };
    const other = await writeTensioningSchedule(rigFacts(given)!, fonts);
    const text = [1, 2].map((p) => textOf(other, p)).join(" ");
    for (const words of ["6.0 m/s", "9.5 m/s", "5 °C", "night all corners at 60 %"]) expect(text).toContain(words);
  });

  test("reference temperature in every title block; imperial sheets speak feet and kip", async () => {
    const us = { ...facts, job: { ...facts.job, units: "imperial" as const, sheet: "Letter" as const } };
    const bytes = await writeTensioningSchedule(rigFacts(us)!, fonts);
    for (let p = 1; p <= wordsOf(bytes).pages; p++) expect(textOf(bytes, p)).toContain("59 °F");
    const text = textOf(bytes);
    // 42 kN / 4.4482216 = 9.44 kip; 0.999 m = 39.33 in = 3 ft 3 5/16 in.
    expect(text).toContain("9.44");
    expect(text).toContain(`3' 3 5/16"`);
    const cables = textOf(await writeCableSheets(us, fonts));
    // 8.37 m = 329.53 in = 27 ft 5 1/2 in.
    expect(cables).toContain(`27' 5 1/2"`);
    expect(cables).toContain("Terminals are NOT deducted");
    expect(cables).toContain("metallic area");
  });

  test("no length between corners is shortened on a narrow sheet in feet, inches and sixteenths", async () => {
    const us = { ...facts, job: { ...facts.job, units: "imperial" as const, sheet: "Letter" as const } };
    const far = (p: readonly number[]) => p.map((v) => 1.4123 * v) as [number, number, number];
    const wide = { ...us, rig: { ...us.rig!, nodes: us.rig!.nodes.map(far) } };
    const { words } = wordsOf(await writeTensioningSchedule(rigFacts(wide)!, fonts));
    expect(words.filter((w) => /….*&quot;|'.*…/.test(w.text)).map((w) => w.text)).toEqual([]);
  });

  test("a jack is asked for from the step at which the torque passes what a hand gives", async () => {
    expect(jackStep(rig, rig.adjusters[0]!)).toBeNull();
    const heavy = { ...rig.adjusters[0]!, thread: 48, perTurn: 10 };
    expect(jackStep(rig, heavy)).toBe(3);
    const strong = { ...facts, rig: { ...facts.rig!, adjusters: [heavy, ...facts.rig!.adjusters.slice(1)] } };
    const text = textOf(await writeTensioningSchedule(rigFacts(strong)!, fonts));
    expect(text).toContain("JACK from step 3 on");
    expect(text).toMatch(/CAUTION before step 3: T1/);
  });
});

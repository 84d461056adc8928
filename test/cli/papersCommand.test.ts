// Papers from facts alone: what comes out is what the plan itself wrote, byte for byte; what is no facts file is told.
import { mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { writePapers } from "../../src/core/papers/writePapers.ts";
import { runPlan } from "../../src/core/plan/runPlan.ts";
import { SMALL_JOB, smallForm } from "../page/smallForm.ts";
import { call, makeScratch } from "./fakePlan.ts";

const scratch = makeScratch();
const at = (name: string) => join(scratch, name);
const doors = { runPlan, writePapers };

/** Every file of a folder but the list of what was written, by its path. */
function read(folder: string): Record<string, string> {
  const paths = readdirSync(folder, { recursive: true, withFileTypes: true }).filter((e) => e.isFile());
  return Object.fromEntries(
    paths.map((e) => join(e.parentPath, e.name)).map((p) => [p.slice(folder.length), readFileSync(p, "latin1")]),
  );
}

/** A plan as the command line writes it, with names the sheets have no letters for. @returns its folder */
async function planSmall(): Promise<string> {
  mkdirSync(at("job"), { recursive: true });
  writeFileSync(at("job/booth.obj"), smallForm(4));
  writeFileSync(at("job/job.json"), JSON.stringify({ ...SMALL_JOB, title: "Booth 漢", nest: { steps: 1 } }));
  const { exit, err } = await call(["plan", at("job/job.json"), "--out", at("plan"), "--quiet"], doors);
  expect([err, exit]).toEqual(["", expect.any(Number)]);
  return at("plan");
}

describe("papers of facts", { timeout: 240_000 }, () => {
  it("are those of the plan, byte for byte, facts too; a choice writes what plan writes for it", async () => {
    const plan = await planSmall();
    const before = read(plan);
    const again = await call(["papers", join(plan, "facts.json"), "--out", at("again")], doors);
    expect(again.err).toBe("");
    expect(again.out).toMatch(/^Booth 漢, issue A, revision \w+: papers from its facts, nothing planned anew\n/);
    expect(read(at("again"))).toEqual(before);
    expect(read(plan)).toEqual(before);
    const choice = ["--papers", "arcs,lists,bundle", "--quiet"];
    const [planned, drawn] = [at("planned"), at("drawn")];
    const { exit } = await call(["plan", at("job/job.json"), "--out", planned, ...choice], doors);
    expect((await call(["papers", join(plan, "facts.json"), "--out", drawn, ...choice], doors)).exit).toBe(exit);
    expect(read(drawn)).toEqual(read(planned));
    expect(Object.keys(read(drawn))).toEqual(expect.arrayContaining(["/papers.zip", "/rolls.csv"]));
  });

  it("are not drawn from what is no facts file, or a broken one: said with its name, and nothing is written", async () => {
    const facts = JSON.parse(readFileSync(join(await planSmall(), "facts.json"), "utf8"));
    const given: [string, unknown, RegExp][] = [
      ["job.json", SMALL_JOB, /job\.json: this is no facts file.*\(facts-format\)/s],
      ["newer.json", { ...facts, version: 2 }, /version 2 of the facts is newer.*\(facts-version-newer\)/s],
      ["old.json", { ...facts, version: "1" }, /old\.json: version is missing.*\(facts-broken\)/s],
      ["title.json", { ...facts, job: { ...facts.job, title: 7 } }, /job\.title is missing or not.*\(facts-broken\)/s],
      ["kinds.json", { ...facts, panels: {}, form: [] }, /panels, form are missing or not.*\(facts-broken\)/s],
      [
        "deep.json",
        { ...facts, panels: facts.panels.map((p: object) => ({ ...p, cut: 1 })) },
        /deep\.json: no papers can be drawn.*\(facts-broken\)/s,
      ],
    ];
    for (const [name, value, words] of given) {
      writeFileSync(at(name), JSON.stringify(value));
      const { exit, out, err } = await call(["papers", at(name), "--out", at("none")], doors);
      expect([name, exit, out]).toEqual([name, 2, ""]);
      expect(err).toMatch(words);
    }
    writeFileSync(at("cut.json"), '{"format": "seamstay-facts",');
    expect((await call(["papers", at("cut.json"), "--out", at("none")], doors)).err).toMatch(
      /the facts file is not JSON: line 1/,
    );
    expect((await call(["papers", at("deep.json")], doors)).err).toMatch(/papers wants --out DIR/);
    expect(readdirSync(scratch)).not.toContain("none");
  });
});

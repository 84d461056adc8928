import { mkdirSync, truncateSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { PAPER_CHOICES } from "../../src/core/papers/choosePapers.ts";
import { buildDoors, call, makeScratch, SQUARE, stopFinding } from "./fakePlan.ts";

const scratch = makeScratch();
const at = (name: string) => join(scratch, name);
const write = (name: string, content: string | Uint8Array) => {
  writeFileSync(at(name), content);
  return at(name);
};
const least = { format: "seamstay-job", version: 1, title: "Bay 2", mesh: { file: "form.obj" } };
write("form.obj", SQUARE);
const job = write("job.json", JSON.stringify(least));

describe("usage", () => {
  it.each<[string, string[]]>([
    ["no verb is given", []],
    ['there is no verb "pln"; there is start, plan', ["pln"]],
    ["plan wants JOB, which is missing", ["plan", "--out", "x"]],
    ["plan wants --out DIR", ["plan", job]],
    ["--out wants a value behind it", ["plan", job, "--out"]],
    ["--out wants a value behind it", ["plan", job, "--out", "--quiet"]],
    ["--out wants a value behind it", ["plan", job, "--out="]],
    ["plan knows no option --ouput; it has --out --until --papers --json --quiet", ["plan", job, "--ouput", "x"]],
    ["plan knows no option -o", ["plan", job, "-o", "x"]],
    ["--json takes no value", ["plan", job, "--out", "x", "--json=yes"]],
    ["--out is given twice", ["plan", job, "--out", "x", "--out", "y"]],
    [
      "--until sewing: no such station; it is one of form, seams, panels, rolls, rig",
      ["plan", job, "--out", "x", "--until", "sewing"],
    ],
    ['plan takes no "bay"; put names with spaces in quotes', ["plan", "my", "bay", "--out", "x"]],
    ["plan: JOB is empty", ["plan", "", "--out", "x"]],
    ["check knows no option --out; it has --json --quiet", ["check", job, "--out", "x"]],
    ["demo knows no option --fast; it has none", ["demo", "--fast"]],
    ["start wants DIR", ["start", "market-hall"]],
    ['there is no verb "pln"', ["help", "pln"]],
  ])("%s", async (words, args) => {
    const { exit, out, err } = await call(args);
    expect([exit, out]).toEqual([2, ""]);
    expect(err).toContain(words);
    expect(err).toContain("(usage)");
    expect(err).toMatch(args.length === 0 ? /First steps: seamstay start/ : /usage: seamstay |try: seamstay help/);
    expect(err).not.toContain(" at ");
  });

  it("helps with all verbs, and with one", async () => {
    const all = await call(["help"]);
    expect(all.exit).toBe(0);
    for (const verb of ["start", "plan", "check", "demo", "help"]) expect(all.out).toContain(`seamstay ${verb}`);
    expect((await call(["plan", "--help"])).out).toBe((await call(["help", "plan"])).out);
    expect((await call(["--help"])).out).toBe(all.out);
  });
});

describe("papers chosen", () => {
  it("hands the papers named on to their writer, all that are usual where none are", async () => {
    const { doors } = buildDoors();
    const asked: (readonly string[] | undefined)[] = [];
    const listening: typeof doors = {
      ...doors,
      writePapers: (facts, options) => {
        asked.push(options.papers);
        return doors.writePapers(facts, options);
      },
    };
    await call(["plan", job, "--out", at("chosen"), "--papers", "rig, bundle", "--quiet"], listening);
    await call(["plan", job, "--out", at("usual"), "--quiet"], listening);
    await call(["plan", job, "--out", at("every"), "--papers", "all", "--quiet"], listening);
    expect(asked).toEqual([["rig", "bundle"], undefined, Object.keys(PAPER_CHOICES)]);
  });

  it("refuses a word that names no paper before anything is planned, and says which there are", async () => {
    const { doors, calls } = buildDoors();
    const { exit, err } = await call(["plan", job, "--out", at("none"), "--papers", "cards"], doors);
    expect(exit).toBe(2);
    expect(err).toContain('"cards" names no paper; choose of: all, cut-files, dxf2000, arcs');
    expect(calls).toEqual([]);
    const help = await call(["help", "plan"]);
    for (const choice of Object.keys(PAPER_CHOICES)) expect(help.out).toContain(`\n      ${choice} `);
  });
});

describe("input that cannot be read", () => {
  mkdirSync(at("folder"));
  // Sparse: takes no room on the disk.
  truncateSync(write("huge.json", ""), 257 * 1024 * 1024);
  const bad = (name: string, value: object) => write(name, JSON.stringify({ ...least, ...value }));
  it.each<[string, string, string]>([
    ["file-missing", at("none.json"), "there is no such file"],
    ["file-missing", bad("lost.json", { mesh: { file: "lost.obj" } }), "lost.obj"],
    ["file-folder", at("folder"), "name the file in it"],
    ["file-folder", bad("dir.json", { mesh: { file: "folder" } }), "name the file in it"],
    ["file-text", write("latin.json", Uint8Array.of(123, 10, 34, 0xe4, 34, 125)), "line 2 is not UTF-8"],
    ["file-text", write("wide.json", Uint8Array.of(0xff, 0xfe, 123, 0)), "looks like UTF-16"],
    [
      "file-text",
      write("latin.obj", Uint8Array.of(...new TextEncoder().encode(SQUARE), 35, 0xe4, 10)),
      "line 6 is not UTF-8",
    ],
    ["job-json", write("comma.json", '{\n "format": "seamstay-job",\n}'), "line 3, column 1"],
    ["job-json", write("empty.json", ""), "the end of the file"],
    ["job-format", write("facts.json", '{"format": "seamstay-facts"}'), "seamstay-job"],
    ["job-key-unknown", bad("key.json", { edges: { E1: { colour: 1 } } }), "edges.E1.colour"],
    ["mesh-kind", at("form.stl"), "OBJ"],
    ["file-size", at("huge.json"), "257 MB is more than the 256 MB"],
    ["mesh-no-faces", write("points.obj", "v 0 0 0\n"), "no faces"],
    ["mesh-json", bad("inline.json", { mesh: { vertices: [[0, 0]], triangles: [[0, 0, 0]] } }), "mesh.vertices[0][2]"],
  ])("%s: %s", async (code, path, words) => {
    const { doors, calls } = buildDoors();
    const { exit, out, err } = await call(["plan", path, "--out", at("never")], doors);
    expect([exit, out]).toEqual([2, ""]);
    expect(err).toContain(words);
    expect(err.trimEnd().endsWith(`(${code})`)).toBe(true);
    expect(err).not.toMatch(/\n\s+at /);
    expect(calls).toHaveLength(0);
  });

  it("says the same as one JSON object where JSON is asked for", async () => {
    const { exit, out } = await call(["check", at("none.json"), "--json"]);
    expect(JSON.parse(out)).toMatchObject({ command: "check", exit, error: { code: "file-missing" } });
  });
});

describe("plan", () => {
  it("plans a job with the mesh beside it, wherever one stands", async () => {
    const { doors, calls } = buildDoors();
    const { exit, out, err } = await call(["plan", job, "--out", at("plan1")], doors);
    expect([exit, err]).toEqual([0, ""]);
    const [planned, source, options] = calls[0];
    expect(planned.title).toBe("Bay 2");
    expect([...source.xyz]).toHaveLength(12);
    expect(source).toMatchObject({ unit: "m", up: "z", outside: "up" });
    expect(options.revision).toMatch(/^[0-9A-F]{8}$/);
    expect("until" in options).toBe(false);
    // 10 m at 0.8 and 5 m at 0.5, one width: 70 % of 15 m.
    expect(out).toContain("15.00 m of cloth, 70 % of it used");
    expect(out).toContain(`Wrote 3 files to ${at("plan1")}`);
  });

  it("plans a bare mesh with the least job", async () => {
    const { doors, calls } = buildDoors();
    expect((await call(["plan", write("north_bay.OBJ", SQUARE), "--out", at("plan2")], doors)).exit).toBe(0);
    expect(calls[0][0]).toMatchObject({ title: "north bay", meshName: "north_bay.OBJ" });
  });

  it("stops after the station that is named, and says nothing where quiet is asked for", async () => {
    const { doors, calls } = buildDoors();
    const { exit, out, err } = await call(["plan", job, "--out", at("plan3"), "--until", "seams", "--quiet"], doors);
    expect([exit, out, err]).toEqual([0, "", ""]);
    expect(calls[0][2].until).toBe("seams");
  });

  it("exits 1 where the plan holds a stop, and says so", async () => {
    const { exit, out } = await call(
      ["plan", job, "--out", at("plan4")],
      buildDoors({ findings: [stopFinding] }).doors,
    );
    expect(exit).toBe(1);
    expect(out).toContain("STOP    P3: panel P3 is 3100 mm wide");
    expect(out).toContain("add a seam (roll-width)");
    expect(out).toContain("NOT FOR ISSUE");
  });

  it("prints one JSON object with exit, figures, findings, the notes of reading among them, and files", async () => {
    const { exit, out, err } = await call(
      ["plan", job, "--out", at("plan5"), "--json"],
      buildDoors({ findings: [stopFinding] }).doors,
    );
    const told = JSON.parse(out);
    expect([exit, err]).toEqual([1, ""]);
    expect(told).toMatchObject({ command: "plan", exit: 1, figures: { rolls: 2, rollLength: 15, stops: 1 } });
    expect(told.files.map((f: { path: string }) => f.path)).toEqual(["facts.json", "findings.pdf", "rolls/R1.dxf"]);
    const codes = told.findings.map((f: { code: string }) => f.code);
    expect(codes).toContain("job-default");
    expect(codes.at(-1)).toBe("roll-width");
  });

  it("never writes a number that is none", async () => {
    const nan = { ...stopFinding, value: Number.NaN };
    const { exit, err } = await call(["plan", job, "--out", at("plan6")], buildDoors({ findings: [nan] }).doors);
    expect(exit).toBe(2);
    expect(err).toContain("(facts-not-finite)");
  });

  it("calls a fault of the program by its name", async () => {
    const { doors } = buildDoors();
    const broken = {
      ...doors,
      runPlan: () => {
        throw new TypeError("x is undefined");
      },
    };
    const { exit, err } = await call(["plan", job, "--out", at("plan7")], broken);
    expect(exit).toBe(3);
    expect(err).toContain("a fault of the program, not of the job");
  });
});

describe("check", () => {
  it("prints checks and every finding, plans to the end and writes nothing", async () => {
    const { doors, calls } = buildDoors({ findings: [stopFinding] });
    const { exit, out } = await call(["check", job], doors);
    expect(exit).toBe(1);
    expect(calls[0][2].until).toBeUndefined();
    expect(out).toContain("holds  form: residual: 1e-9 (limit 0.01)");
    expect(out).toContain("NOTE    prestress.warp");
    expect(out.indexOf("STOP")).toBeLessThan(out.indexOf("NOTE"));
  });
});

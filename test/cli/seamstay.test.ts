// The built command line as a process. It is built here, into a folder of its own, so that no older build is tested.
import { spawn, spawnSync } from "node:child_process";
import { existsSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { build } from "vite";
import { beforeAll, describe, expect, it } from "vitest";
import { listStarters } from "../../src/cli/packageFiles.ts";
import type { Finding } from "../../src/core/problem.ts";
import { makeScratch, SQUARE } from "./fakePlan.ts";

const dist = join(import.meta.dirname, "../../out/test-dist");
const program = join(dist, "seamstay.js");
const scratch = makeScratch();

beforeAll(async () => {
  await build({ logLevel: "error", build: { outDir: dist, sourcemap: false } });
});

function seamstay(...args: string[]) {
  const run = spawnSync(process.execPath, [program, ...args], { cwd: scratch, encoding: "utf8" });
  return { exit: run.status, out: run.stdout, err: run.stderr };
}

const hash = (folder: string) =>
  Object.fromEntries(
    readdirSync(folder, { recursive: true, withFileTypes: true })
      .filter((e) => e.isFile())
      .map((e) => [
        join(e.parentPath, e.name).slice(folder.length),
        readFileSync(join(e.parentPath, e.name), "latin1"),
      ]),
  );

describe("the built command line", () => {
  it("helps, and refuses in words with exit 2", () => {
    expect(seamstay("help")).toMatchObject({ exit: 0, err: "" });
    const none = seamstay("plan", "none.json", "--out", "x");
    expect(none).toMatchObject({ exit: 2, out: "" });
    expect(none.err).toBe(
      "seamstay: plan: none.json: there is no such file or folder; check the name and the folder it is looked for in\n  (file-missing)\n",
    );
    expect(seamstay("bogus").exit).toBe(2);
  });

  it.each(listStarters())("plans the starter $name from a folder of its own, twice to the same bytes", ({ name }) => {
    expect(seamstay("start", name, `bay-${name}`).exit).toBe(0);
    const job = join(`bay-${name}`, "job.json");
    const first = seamstay("plan", job, "--out", `a-${name}`, "--json");
    expect(first).toMatchObject({ exit: 0, err: "" });
    const told = JSON.parse(first.out);
    expect(told.figures).toMatchObject({ stops: 0, checksFailed: 0 });
    // A roof that is pulled up has its dangers however good its job is; nothing else is to be cautioned of.
    const cautions = told.findings.filter((f: Finding) => f.level === "caution").map((f: Finding) => f.code);
    expect(cautions).toEqual(name === "market-hall" ? [] : ["stage-slack", "travel-alone"]);
    expect(told.figures.panels).toBeGreaterThan(1);
    for (const f of told.files) expect(existsSync(join(scratch, `a-${name}`, f.path)), f.path).toBe(true);
    expect(seamstay("plan", job, "--out", `b-${name}`, "--quiet")).toEqual({ exit: 0, out: "", err: "" });
    expect(hash(join(scratch, `b-${name}`))).toEqual(hash(join(scratch, `a-${name}`)));
    const facts = JSON.parse(readFileSync(join(scratch, `a-${name}`, "facts.json"), "utf8"));
    expect(facts.job.revision).toMatch(/^[0-9A-F]{8}$/);
    expect(facts.form.residual.normalMax).toBeLessThan(name === "market-hall" ? 1e-8 : 1e-6);
    // What the job gives is enough to issue a schedule, where there is one.
    expect(facts.tensioning?.issuable ?? true).toBe(true);
    expect(facts.rig === undefined).toBe(name === "market-hall");
  });

  it("stops after the station asked for", () => {
    const run = seamstay("plan", "bay-market-hall/job.json", "--out", "form-only", "--until", "form", "--json");
    expect(JSON.parse(run.out).figures).toMatchObject({ panels: null, rolls: null, triangles: 3456 });
    const facts = JSON.parse(readFileSync(join(scratch, "form-only", "facts.json"), "utf8"));
    expect(Object.keys(facts)).not.toContain("panels");
  });

  it("says what a mesh lacks in one block without a stack", () => {
    writeFileSync(join(scratch, "points.obj"), "v 0 0 0\nv 1 0 0\n");
    const run = seamstay("plan", "points.obj", "--out", "y");
    expect(run.exit).toBe(2);
    expect(run.err).toContain("(mesh-no-faces)");
    expect(run.err).not.toMatch(/\n\s+at /);
    expect(existsSync(join(scratch, "y"))).toBe(false);
  });

  it("leaves nothing behind where it is interrupted", async () => {
    const child = spawn(process.execPath, [program, "plan", "bay-market-hall/job.json", "--out", "cut-short"], {
      cwd: scratch,
    });
    await new Promise((next) => setTimeout(next, 400));
    child.kill("SIGINT");
    const ended = await new Promise((next) => child.on("close", (code, signal) => next(signal ?? code)));
    // Cut short at any moment: no folder, or a whole one.
    const left = readdirSync(scratch).filter((name) => name.startsWith("cut-short"));
    if (ended === "SIGINT") expect(left).toEqual([]);
    else expect(left).toEqual(["cut-short"]);
    if (left.length > 0) expect(existsSync(join(scratch, "cut-short", "seamstay-files.json"))).toBe(true);
  });

  it("does not call it a fault where the reader of its words goes away", () => {
    writeFileSync(join(scratch, "square.obj"), SQUARE);
    const run = spawnSync("sh", ["-c", `"${process.execPath}" "${program}" help | true; exit 0`], { encoding: "utf8" });
    expect(run.stderr).toBe("");
  });
});

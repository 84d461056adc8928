// `npm run -s bench -- NAME …`: one measured case, one JSON object on stdout. Times are this machine's; no test asserts them.
import { readFileSync, writeFileSync } from "node:fs";
import { loadCatalogues, loadFonts } from "../../src/cli/packageFiles.ts";
import { readInput } from "../../src/cli/readInput.ts";
import { buildSoundSurface, type SoundSurface } from "../../src/core/form/repair/soundSurface.ts";
import { runPlan } from "../../src/core/plan/runPlan.ts";
import type { Station } from "../../src/core/problem.ts";
import { benchCorrect } from "./correctCase.ts";
import { benchDrag } from "./dragCase.ts";
import { benchFlatten } from "./flattenCase.ts";
import { benchForm } from "./formCase.ts";
import { benchGeodesic } from "./geodesicCase.ts";
import { benchPack, type PackInstance } from "./packCase.ts";
import { benchPapers } from "./papersCase.ts";
import { benchStock } from "./stockCase.ts";

const CASES: Record<string, { call: string; least: number; run: (args: string[]) => unknown }> = {
  plan: { call: "plan JOB|FORM.obj", least: 1, run: ([job]) => benchPlan(job) },
  drag: { call: "drag JOB|FORM.obj", least: 1, run: ([job]) => benchDragged(job) },
  slide: {
    call: "slide JOB.json MESH.obj",
    least: 2,
    // the page's bench brings a browser with it, so it is a file of its own
    run: async ([job, mesh]) =>
      (await import(new URL("./chunks/slideCase.js", import.meta.url).href)).benchSlide(job, mesh),
  },
  turn: {
    call: "turn JOB.json MESH.obj",
    least: 2,
    run: async ([job, mesh]) =>
      (await import(new URL("./chunks/turnCase.js", import.meta.url).href)).benchTurn(job, mesh),
  },
  first: {
    call: "first JOB.json MESH.obj",
    least: 2,
    run: async ([job, mesh]) =>
      (await import(new URL("./chunks/firstViewCase.js", import.meta.url).href)).benchFirstView(job, mesh),
  },
  rounds: {
    call: "rounds JOB.json MESH.obj ROUNDS",
    least: 3,
    run: async ([job, mesh, rounds]) =>
      (await import(new URL("./chunks/roundsCase.js", import.meta.url).href)).benchRounds(
        job,
        mesh,
        readCount(rounds, "ROUNDS"),
      ),
  },
  flatten: { call: "flatten STRIP.obj", least: 1, run: ([strip]) => benchFlatten(readSurface(strip).surface) },
  form: { call: "form N", least: 1, run: ([n]) => benchForm(readCount(n, "N")) },
  geodesic: { call: "geodesic MESH.obj PAIRS.txt", least: 2, run: ([mesh, pairs]) => benchPairs(mesh, pairs) },
  correct: { call: "correct STATES", least: 1, run: ([n]) => benchCorrect(readCount(n, "STATES")) },
  papers: {
    call: "papers PANELS",
    least: 1,
    run: ([panels]) => benchPapers(readCount(panels, "PANELS"), loadFonts()),
  },
  stock: {
    call: "stock PANELS SEED",
    least: 2,
    run: ([panels, seed]) => benchStock(readCount(panels, "PANELS"), readCount(seed, "SEED", 0)),
  },
  pack: {
    call: "pack INSTANCE.json SECONDS SEED OUT.json",
    least: 4,
    run: async ([instance, seconds, seed, out]) => {
      const read: PackInstance = JSON.parse(readFileSync(instance, "utf8"));
      const span = Number(seconds);
      if (!(span > 0)) throw new UsageError(`SECONDS ${seconds} is not above 0`);
      const file = new URL("./packWorker.js", import.meta.url);
      const { result, ...figures } = await benchPack(read, span, readCount(seed, "SEED", 0), file);
      writeFileSync(out, `${JSON.stringify(result)}\n`);
      return { name: read.name, ...figures };
    },
  },
};

class UsageError extends Error {}

function readCount(text: string, name: string, least = 1): number {
  const n = Number(text);
  if (!Number.isInteger(n) || n < least) throw new UsageError(`${name} ${text} is no whole number from ${least}`);
  return n;
}

/** The surface of a mesh file as the form station would take it: metres, z up. */
function readSurface(path: string): SoundSurface {
  return buildSoundSurface(readInput(path, loadCatalogues()).source);
}

/** Pairs of vertices, counted from 0 in the file's own order, one pair a line. */
function benchPairs(meshPath: string, pairsPath: string): unknown {
  const { surface, fromSource } = readSurface(meshPath);
  const pairs = readFileSync(pairsPath, "utf8")
    .split("\n")
    .filter((line) => line.trim() !== "")
    .map((line): [number, number] => {
      const [a, b] = line
        .trim()
        .split(/[\s,]+/)
        .map((n) => fromSource[readCount(n, "vertex", 0)] ?? -1);
      if (!(a >= 0 && b >= 0)) throw new UsageError(`the mesh has no pair "${line.trim()}"`);
      return [a, b];
    });
  return benchGeodesic(surface, pairs);
}

/** Milliseconds a station takes, summed where it is run more than once (`runs`), its processor time, and the whole chain; cold. */
function benchPlan(path: string): unknown {
  const { job, source, revision } = readInput(path, loadCatalogues());
  const stations: Partial<Record<Station, number>> = {};
  const runs: Partial<Record<Station, number>> = {};
  const cpu: Partial<Record<Station, number>> = {};
  const begin = performance.now();
  let open: Station | null = null;
  let since = begin;
  let used = process.cpuUsage();
  const close = (next: Station | null) => {
    const now = performance.now();
    if (open !== null) {
      stations[open] = (stations[open] ?? 0) + now - since;
      runs[open] = (runs[open] ?? 0) + 1;
      const { user, system } = process.cpuUsage(used);
      cpu[open] = (cpu[open] ?? 0) + (user + system) / 1000;
    }
    used = process.cpuUsage();
    open = next;
    since = now;
  };
  runPlan(job, source, { revision, onStation: close }, {});
  close(null);
  return { stations, cpu, runs, totalMs: performance.now() - begin };
}

function benchDragged(path: string): unknown {
  const { job, source } = readInput(path, loadCatalogues());
  return benchDrag(job, source);
}

async function runBench([name, ...args]: string[]): Promise<number> {
  const found = name === undefined ? undefined : CASES[name];
  if (found === undefined || args.length !== found.least) {
    const calls = Object.values(CASES).map((c) => `  bench ${c.call}`);
    process.stderr.write(
      `bench: ${found === undefined ? `no case ${name ?? ""}` : `call it as`}\n${calls.join("\n")}\n`,
    );
    return 2;
  }
  try {
    process.stdout.write(`${JSON.stringify(await found.run(args))}\n`);
    return 0;
  } catch (error) {
    process.stderr.write(`bench ${name}: ${error instanceof Error ? error.message : String(error)}\n`);
    return 2;
  }
}

process.exitCode = await runBench(process.argv.slice(2));

// A fault leads to the place of the job it speaks of, and what lies in a file names the file.
import { describe, expect, it } from "vitest";
import type { JobFile } from "../../src/core/job/jobSchema.ts";
import { placeOfFault } from "../../src/page/parts/placeOfFault.ts";
import { benchOfFile, focused, LONG, openWith } from "./bench.ts";
import { SMALL_JOB, smallFiles } from "./smallForm.ts";

const pin = { panel: "P1", roll: "R1", x: 0, y: 30, rotation: 0 as const };
const job = {
  ...SMALL_JOB,
  rolls: [{ id: "R0" }, { id: "R1" }],
  nest: { pins: [{ ...pin, panel: "P9" }, pin, pin] },
  rig: {
    adjusters: [{ name: "T1", anchor: "C1" }],
    struts: [{ name: "M1", from: [0, 0, 0], to: "C1" }],
    stays: [
      { name: "S1", from: "C1", to: [1, 0, 0] },
      { name: "S2", from: "C7", to: [1, 0, 0] },
    ],
  },
} as unknown as JobFile;

it.each([
  ["pin-piece", ["P9", "R1"], "nest.pins[0]"],
  // pinned twice: the second one is too many
  ["pin-piece", ["P1", "R1"], "nest.pins[2]"],
  ["rig-place", ["S2"], "rig.stays[1]"],
  ["rig-place", ["M1"], "rig.struts[0]"],
  ["adjuster-anchor", ["T1"], "rig.adjusters.T1"],
  ["job-value-range", ["rolls[0].width"], "rolls[0].width"],
  ["job-key-unknown", ["edges.north.forc"], "edges.north.forc"],
  // no field decides these
  ["job-key-unknown", ["fabrc"], undefined],
  ["obj-index-range", ["mesh line 9, column 4"], undefined],
])("%s at %s leads to %s", (code, where, path) => {
  expect(placeOfFault({ code, where }, job)).toBe(path);
});

const bench = benchOfFile();

describe("a fault on the page", { timeout: LONG }, () => {
  it("a pin of a piece that is not there is shown, and let go", async () => {
    const { page, context } = await openWith(
      bench,
      smallFiles({ ...SMALL_JOB, nest: { steps: 1, pins: [{ ...pin, panel: "P9" }] } } as typeof SMALL_JOB),
    );
    const alert = page.getByRole("alert");
    await alert.getByText("The pin of P9 on roll R1").waitFor();
    await alert.getByRole("button", { name: "Show me" }).click();
    await focused(page, "nest.pins[0]");
    await page.keyboard.press("Enter");
    await page.getByText(/^Planned, revision/).waitFor();
    await context.close();
  });

  it("a key nobody knows leads to the thing it was given for", async () => {
    const edges = { default: { kind: "clamped" }, north: { kind: "clamped", forc: 3 } };
    const { page, context } = await openWith(bench, smallFiles({ ...SMALL_JOB, edges } as typeof SMALL_JOB));
    const alert = page.getByRole("alert");
    await alert.getByText(/edges\.north\.forc: no such key; the nearest known key is force/).waitFor();
    await alert.getByRole("button", { name: "Show me" }).click();
    await page.getByText("Is this surface in balance").waitFor();
    await context.close();
  });

  it("what is wrong in a mesh names its file, and another is opened", async () => {
    const [given, mesh] = smallFiles();
    const spoilt = { ...mesh, buffer: Buffer.concat([mesh.buffer, Buffer.from("f 1 2 999\n")]) };
    const { page, context } = await openWith(bench, [given, spoilt]);
    const alert = page.getByRole("alert");
    await alert.getByText(/^booth\.obj: mesh line \d+, column 7: index 999 is out of range/).waitFor();
    await alert.getByRole("button", { name: "Open another" }).click();
    await page.getByRole("dialog", { name: "Jobs" }).waitFor();
    await context.close();
  });
});

// What open refuses before it serves anything; what it serves is tried in test/page/server.test.ts.
import { expect, it } from "vitest";
import { openCommand } from "../../src/cli/openCommand.ts";
import { PlanError } from "../../src/core/problem.ts";

const terminal = { out: () => {}, err: () => {}, live: false };
const codeOf = (args: string[]) =>
  openCommand(args, terminal).then(
    () => "",
    (e) => (e instanceof PlanError ? e.code : String(e)),
  );

it.each([
  [["--port", "none"], "usage"],
  [["--port", "70000"], "usage"],
  [["--port", "1.5"], "usage"],
  [["a.json", "b.json"], "usage"],
  [["missing.json"], "file-missing"],
  [["form.stl"], "mesh-kind"],
])("refuses %j", async (args, code) => {
  expect(await codeOf(args)).toBe(code);
});

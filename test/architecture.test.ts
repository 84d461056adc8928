// Who may import whom (DEVELOPERS.md, "Map"). A rule set that saw no file proves nothing, so the count is asserted too.
import { readdirSync } from "node:fs";
import { cruise, type ICruiseResult } from "dependency-cruiser";
import { expect, test } from "vitest";

const order = ["problem", "numeric", "surface", "records", "structure"];
const stations = ["form", "seams", "panels", "rolls", "rig"];
const folder = (name: string) => (name === "problem" ? "^src/core/problem\\.ts$" : `^src/core/${name}/`);

/** Rules: a lower layer never imports a higher one, stations never each other, core never cli, page or Node. */
function buildRules() {
  const rules: { name: string; severity: "error"; from: object; to: object }[] = [
    { name: "no cycle", severity: "error", from: {}, to: { circular: true } },
    { name: "core is pure", severity: "error", from: { path: "^src/core/" }, to: { dependencyTypes: ["core"] } },
    { name: "core knows no door", severity: "error", from: { path: "^src/core/" }, to: { path: "^src/(cli|page)/" } },
    {
      name: "doors see job, plan, papers, records, problem only",
      severity: "error",
      from: { path: "^src/(cli|page)/" },
      to: {
        path: "^src/core/",
        pathNot: [
          "^src/core/(job|plan|papers|records)/",
          "^src/core/problem\\.ts$",
          "^src/core/form/reading/readObj\\.ts$",
          "^src/core/form/reading/readMeshJson\\.ts$",
        ],
      },
    },
    {
      name: "papers read records only",
      severity: "error",
      from: { path: "^src/core/papers/" },
      to: { path: "^src/core/", pathNot: ["^src/core/(papers|records|surface)/", "^src/core/problem\\.ts$"] },
    },
    {
      name: "job reads records only",
      severity: "error",
      from: { path: "^src/core/job/" },
      to: { path: "^src/core/", pathNot: ["^src/core/(job|records|surface)/", "^src/core/problem\\.ts$"] },
    },
    {
      name: "doors do not know each other",
      severity: "error",
      from: { path: "^src/page/" },
      to: { path: "^src/cli/" },
    },
    {
      name: "three only in the solid view",
      severity: "error",
      from: { path: "^src/", pathNot: "^src/page/solid/" },
      to: { path: "(^|/)three(/|$)" },
    },
    {
      name: "the reader of PDF only where sheets are shown",
      severity: "error",
      from: { path: "^src/", pathNot: "^src/page/(sheets/openSheets|worker/sheetWorker)\\.ts$" },
      to: { path: "(^|/)pdfjs-dist(/|$)" },
    },
    {
      name: "react only in the page",
      severity: "error",
      from: { path: "^src/", pathNot: "^src/page/" },
      to: { path: "(^|/)(react|react-dom|zustand|idb)(/|$)" },
    },
    {
      name: "acts on the project are pure",
      severity: "error",
      from: { path: "^src/page/actions/" },
      to: { pathNot: ["^src/page/actions/", "^src/page/store/project\\.ts$"] },
    },
    { name: "tests are not shipped", severity: "error", from: { path: "^src/" }, to: { path: "^test/" } },
  ];
  order.forEach((layer, i) => {
    const above = [...order.slice(i + 1), ...stations, "plan", "job", "papers"].map(folder);
    rules.push({
      name: `${layer} imports nothing above it`,
      severity: "error",
      from: { path: folder(layer) },
      to: { path: above },
    });
  });
  for (const s of stations) {
    const others = [...stations.filter((o) => o !== s), "plan", "job", "papers"].map(folder);
    rules.push({ name: `${s} knows no neighbour`, severity: "error", from: { path: folder(s) }, to: { path: others } });
  }
  return rules;
}

test("imports run one way, and the check saw every file", async () => {
  const result = await cruise(
    ["src"],
    {
      ruleSet: { forbidden: buildRules() },
      validate: true,
      tsPreCompilationDeps: true,
      doNotFollow: { path: "node_modules" },
    } as never,
    {
      conditionNames: ["import"],
      extensions: [".ts", ".tsx", ".js", ".json"],
    } as never,
  );
  const output = result.output as ICruiseResult;
  const found = output.summary.violations.map((v) => `${v.rule.name}: ${v.from} -> ${v.to}`);
  expect(found).toEqual([]);
  const files = readdirSync("src", { recursive: true, encoding: "utf8" }).filter((f) => /\.(ts|tsx|js|css)$/.test(f));
  const seen = output.modules.filter((m) => m.source.startsWith("src/")).length;
  expect(seen).toBe(files.length);
  expect(seen).toBeGreaterThan(40);
});

test("no file gathers others under a name that says nothing", () => {
  const files = readdirSync("src", { recursive: true, encoding: "utf8" });
  expect(files.filter((f) => /(^|\/)(index|utils|helpers|common|types)(\.ts)?$/.test(f))).toEqual([]);
});

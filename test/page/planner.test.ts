// Papers and corrections share the plan's worker: what is ended for the other is no longer shown as going on, and Stop reaches each. No
// browser; a worker that never answers stands for long work.
import { beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import type { Facts } from "../../src/core/records/facts.ts";
import { bookStore } from "../../src/page/store/bookStore.ts";
import type { Project } from "../../src/page/store/project.ts";

const facts = {} as Facts;
const reading = { time: "08:00", by: "", id: "T1", force: 41, frequency: null, freeLength: null, massPerMetre: null };
const project = {
  id: "p",
  job: {},
  mesh: null,
  log: [{ ...reading, temperature: null, at: null }],
} as unknown as Project;
let planner: typeof import("../../src/page/worker/planner.ts");
const under = () => {
  const { writing, correcting } = bookStore.getState();
  return { writing, correcting };
};

beforeAll(async () => {
  vi.stubGlobal(
    "Worker",
    class {
      postMessage() {}
      terminate() {}
    },
  );
  planner = await import("../../src/page/worker/planner.ts");
});

beforeEach(() => {
  bookStore.setState({ status: "done", writing: false, correcting: false, papersFault: null, correctFault: null });
});

describe("one worker for papers and corrections", () => {
  it("papers ended by a correction are no longer written (bug: said so for good)", () => {
    planner.requestPapers(facts);
    expect(under()).toEqual({ writing: true, correcting: false });
    planner.requestCorrection(project, 1, null);
    expect(under()).toEqual({ writing: false, correcting: true });
  });

  it("a correction ended by papers is no longer worked out (bug: said so for good)", () => {
    planner.requestCorrection(project, 1, null);
    planner.requestPapers(facts);
    expect(under()).toEqual({ writing: true, correcting: false });
  });

  it("Stop reaches what is shown as going on, and says so; a new plan takes those words away (bug: they stayed)", () => {
    planner.requestPapers(facts);
    planner.stopPlan();
    expect(under()).toEqual({ writing: false, correcting: false });
    expect(bookStore.getState().papersFault?.code).toBe("cancelled");
    planner.requestPlan(project);
    expect(bookStore.getState()).toMatchObject({ status: "running", papersFault: null });
    planner.stopPlan();
    expect(bookStore.getState().status).toBe("stopped");
  });
});

// One worker plans, writes papers and works out corrections: what is ended for the other is no longer shown as going on, Stop reaches
// each, and nothing of a job that left the desk comes to stand under the next. No browser; a worker that answers only where the test does
// stands for long work.
import { beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import type { Facts } from "../../src/core/records/facts.ts";
import { bookStore, openProject } from "../../src/page/store/bookStore.ts";
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
/** What the page asked last, and the worker it asked. */
let asked: { run: number } | null = null;
let worker: { onmessage: (event: { data: unknown }) => void } | null = null;
const under = () => {
  const { writing, correcting } = bookStore.getState();
  return { writing, correcting };
};

beforeAll(async () => {
  vi.stubGlobal(
    "Worker",
    class {
      onmessage = () => {};
      postMessage(request: { kind: string; run: number }) {
        if (!["plan", "papers", "correct"].includes(request.kind)) return;
        asked = request;
        worker = this;
      }
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
    planner.requestCorrection(project, 1, null);
    planner.stopPlan();
    expect(bookStore.getState().correctFault?.code).toBe("cancelled");
    planner.requestPlan(project);
    expect(bookStore.getState()).toMatchObject({ status: "running", papersFault: null });
    planner.stopPlan();
    expect(bookStore.getState().status).toBe("stopped");
  });
});

describe("another job opened", () => {
  const facts = { form: {}, findings: [] };
  const answers = {
    plan: { kind: "planned", added: { bones: facts, fields: {} } },
    correction: { kind: "corrected", corrected: {} },
    papers: { kind: "papers", files: [], added: [] },
    "plan that cannot be made": { kind: "failed", fault: { code: "x", message: "x", where: [] } },
  };

  it.each(Object.entries(answers))(
    "the %s of the former job that comes in at that moment is not its own (bug: it was taken)",
    async (_, answer) => {
      const { planOnChange } = await import("../../src/page/worker/planOnChange.ts");
      vi.useFakeTimers();
      try {
        planOnChange();
        openProject({ project, past: [], future: [] });
        await vi.runAllTimersAsync();
        if (answer.kind === "corrected") planner.requestCorrection(project, 1, null);
        if (answer.kind === "papers") planner.requestPapers(facts as unknown as Facts);
        const { run } = asked ?? { run: -1 };
        const former = worker;
        openProject({ project: { ...project, id: "q", job: {} as Project["job"] }, past: [], future: [] });
        former?.onmessage({ data: { ...answer, run } });
        expect(bookStore.getState()).toMatchObject({ facts: null, corrected: null, papers: null, fault: null });
        await vi.runAllTimersAsync();
        expect(bookStore.getState()).toMatchObject({ status: "running", facts: null });
        expect(asked?.run).toBeGreaterThan(run);
        planner.stopPlan();
      } finally {
        vi.useRealTimers();
      }
    },
  );
});

// Stopped while the roof is tied after a seam was let go: nothing is planned when the tie ends, the seams stay where they were laid and
// can be slid again. No browser: a worker that answers only where the test does stands for the tie.
import { beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import type { FactsSeam } from "../../src/core/records/facts.ts";
import { bookStore, openProject } from "../../src/page/store/bookStore.ts";
import type { Project } from "../../src/page/store/project.ts";
import type { DragReply, DragRequest, Request, SeamPlaces } from "../../src/page/worker/messages.ts";

let dragger: typeof import("../../src/page/worker/dragger.ts");
let planner: typeof import("../../src/page/worker/planner.ts");
let plans = 0;
let tie: Extract<DragRequest, { kind: "tie" }> | null = null;
let drags: { onmessage: (event: { data: DragReply }) => void } | null = null;

const at = (share: number): SeamPlaces => [
  { edge: "south", at: share },
  { edge: "north", at: 0.5 },
];
const grips = [{ weld: "S1", ends: at(0.5), pair: 0 }];
const project = {
  id: "p",
  job: { seams: { pairs: [at(0.5)] } },
  mesh: null,
  log: [],
} as unknown as Project;
const state = () => bookStore.getState();
const say = (data: DragReply) => drags?.onmessage({ data });

beforeAll(async () => {
  vi.stubGlobal(
    "Worker",
    class {
      onmessage = () => {};
      postMessage(request: DragRequest | Request) {
        if (request.kind === "plan") plans++;
        if (request.kind === "listen") drags = this as never;
        if (request.kind === "tie") tie = request;
        if (request.kind === "drag") {
          const { run, weld, to } = request;
          queueMicrotask(() => say({ kind: "dragged", run, weld, to, path: [], panels: [], ms: 1 }));
        }
      }
      terminate() {}
    },
  );
  dragger = await import("../../src/page/worker/dragger.ts");
  planner = await import("../../src/page/worker/planner.ts");
  const { planOnChange } = await import("../../src/page/worker/planOnChange.ts");
  planOnChange();
});

/** Runs of roofs, far from those the planner counts. */
let run = 1000;
beforeEach(async () => {
  vi.useFakeTimers();
  tie = null;
  openProject({ project, past: [], future: [] });
  await vi.runAllTimersAsync();
  planner.stopPlan();
  bookStore.setState({ status: "done" });
  dragger.watchSeams();
  dragger.openRoofs(++run, project);
  say({ kind: "grips", run, grips: grips as never });
  plans = 0;
  return () => {
    vi.useRealTimers();
  };
});

/** Slides the seam's end, lets it go, and waits until the plan waits for the tie. */
async function letGo(share: number): Promise<void> {
  dragger.takeEnd("S1", 0);
  dragger.slideEnd({ edge: "south", at: share });
  dragger.letGo();
  await vi.runAllTimersAsync();
  expect(state().tying).toBe(state().project);
  expect(state()).toMatchObject({ status: "running", progress: { words: "tying the roof again" } });
  expect(plans).toBe(0);
}

/** The worker's answer to the tie that was asked. */
function tied(): void {
  const next = tie?.next ?? Number.NaN;
  say({ kind: "tied", run: next, seams: [] as FactsSeam[], panels: [], ms: 1 });
  say({ kind: "grips", run: next, grips: [{ ...grips[0], ends: tie?.pairs[0] }] as never });
}

describe("the roof tied after a seam was let go", () => {
  it("planned once it is tied", async () => {
    await letGo(0.6);
    tied();
    await vi.runAllTimersAsync();
    expect(plans).toBe(1);
    expect(state()).toMatchObject({ status: "running", tying: null });
  });

  it("stopped meanwhile: tied to its end and shown, and nothing is planned then", async () => {
    await letGo(0.6);
    planner.stopPlan();
    expect(state().status).toBe("stopped");
    tied();
    await vi.runAllTimersAsync();
    expect(plans).toBe(0);
    expect(state()).toMatchObject({ status: "stopped", tying: null, tied: { of: state().project } });
    expect(state().project?.job.seams?.pairs).toEqual([at(0.6)]);
  });

  it("stopped meanwhile and slid again: tied anew, and that is planned", async () => {
    await letGo(0.6);
    planner.stopPlan();
    tied();
    await letGo(0.7);
    expect(tie?.pairs).toEqual([at(0.7)]);
    tied();
    await vi.runAllTimersAsync();
    expect(plans).toBe(1);
  });

  it("stopped meanwhile and it cannot be tied: nothing is planned, it can be planned again", async () => {
    await letGo(0.6);
    planner.stopPlan();
    say({ kind: "untied", run: tie?.next ?? Number.NaN });
    await vi.runAllTimersAsync();
    expect(state()).toMatchObject({ status: "stopped", tying: null });
    expect(plans).toBe(0);
    planner.requestPlan(state().project as Project);
    expect(plans).toBe(1);
  });

  it("stopped meanwhile and taken back: what stood before is planned", async () => {
    await letGo(0.6);
    planner.stopPlan();
    const { undo } = await import("../../src/page/store/bookStore.ts");
    undo();
    tied();
    await vi.runAllTimersAsync();
    expect(state().project).toBe(project);
    expect(plans).toBe(1);
  });
});

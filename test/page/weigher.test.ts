// Layouts worked out side by side: one after another, stopped and gone on with, what was worked out stays. No browser: a worker that
// answers only where the test does stands for long work.
import { beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import type { ComparedLayout } from "../../src/core/plan/measureLayout.ts";
import type { LayoutRow } from "../../src/core/records/stripLayout.ts";
import { bookStore, openProject } from "../../src/page/store/bookStore.ts";
import type { Project } from "../../src/page/store/project.ts";
import type { DragReply, DragRequest } from "../../src/page/worker/messages.ts";

type Ask = Extract<DragRequest, { kind: "weigh" }>;

let dragger: typeof import("../../src/page/worker/dragger.ts");
let asked: Ask[] = [];
let worker: { onmessage: (event: { data: DragReply }) => void; onerror: (event: Event) => void };

const project = { id: "p", job: {}, mesh: null, log: [] } as unknown as Project;
const row = { region: "r", from: "a", to: "b", layout: "bands", strips: 4, taken: true } as unknown as LayoutRow;
/** The layout the plan would take by itself, one strip more, one fewer. */
const rows = [row];
const layout = { asked: {}, rows: [], ways: rows, lines: [], refused: null } as ComparedLayout;

const weighed = () => bookStore.getState().weighed;
const last = () => asked[asked.length - 1];
const say = (data: DragReply) => worker.onmessage({ data });
const roof = (run: number) => say({ kind: "grips", run, grips: [] });
const done = ({ run, turn }: Ask) => say({ kind: "weighed", run, turn, layout });
const begun = ({ run, turn }: Ask, words = "cutting") => say({ kind: "weighing", run, turn, share: 0.5, words });
const isEnded = ({ stop }: Ask) => stop !== null && stop[0] === 1;

beforeAll(async () => {
  vi.stubGlobal("crossOriginIsolated", true);
  vi.stubGlobal(
    "Worker",
    class {
      onmessage = () => {};
      onerror = () => {};
      constructor() {
        worker = this;
      }
      postMessage(request: DragRequest) {
        if (request.kind === "weigh") asked.push(request);
      }
      terminate() {}
    },
  );
  dragger = await import("../../src/page/worker/dragger.ts");
  const { planOnChange } = await import("../../src/page/worker/planOnChange.ts");
  planOnChange();
});

let run = 0;
beforeEach(() => {
  vi.useFakeTimers();
  asked = [];
  openProject({ project, past: [], future: [] });
  bookStore.setState({ job: { seams: { count: "auto" } } as never, facts: { compared: rows } as never });
  dragger.watchSeams();
  dragger.openRoofs(++run, project);
  roof(run);
  return () => {
    vi.useRealTimers();
  };
});

describe("layouts compared", () => {
  it("one after another, each with how far it has come", () => {
    dragger.weigher.begin();
    expect(weighed()).toMatchObject({ asks: { length: 3 }, open: false, done: [], doing: { share: 0, words: "" } });
    begun(last(), "flattening");
    expect(weighed()?.doing).toEqual({ share: 0.5, words: "flattening" });
    for (const n of [1, 2, 3]) {
      expect(asked.length).toBe(n);
      done(last());
      expect(weighed()?.done.length).toBe(n);
    }
    expect(weighed()?.doing).toBeNull();
    expect(asked.length).toBe(3);
  });

  it("where none were weighed by the plan, the first tells which others there are", () => {
    bookStore.setState({ facts: { compared: [] } as never });
    dragger.weigher.begin();
    expect(weighed()).toMatchObject({ asks: { length: 1 }, open: true });
    done(last());
    expect(weighed()).toMatchObject({ asks: { length: 3 }, open: false, done: { length: 1 } });
  });

  it("stopped: the worker is told, what was worked out stays, and it goes on from there (bug: could not be stopped)", () => {
    dragger.weigher.begin();
    done(last());
    const second = last();
    dragger.weigher.stop();
    expect(isEnded(second)).toBe(true);
    expect(weighed()).toMatchObject({ done: { length: 1 }, doing: null });
    begun(second);
    expect(weighed()?.doing).toBeNull();
    dragger.weigher.goOn();
    expect(asked.length).toBe(3);
    expect(last().asked).toEqual(second.asked);
    expect(isEnded(last())).toBe(false);
    // an answer of the former turn would come twice
    done(second);
    expect(weighed()?.done.length).toBe(1);
    done(last());
    done(last());
    expect(weighed()).toMatchObject({ done: { length: 3 }, doing: null });
    dragger.weigher.goOn();
    expect(weighed()?.doing).toBeNull();
  });

  it("stopped in the moment one is done: that one is shown, no other is begun", () => {
    dragger.weigher.begin();
    const first = last();
    dragger.weigher.stop();
    done(first);
    expect(weighed()).toMatchObject({ done: { length: 1 }, doing: null });
    expect(asked.length).toBe(1);
  });

  it("no memory is shared: stopped at the layout's end", () => {
    vi.stubGlobal("crossOriginIsolated", false);
    try {
      dragger.weigher.begin();
      expect(last().stop).toBeNull();
      dragger.weigher.stop();
      expect(weighed()?.doing).toBeNull();
    } finally {
      vi.stubGlobal("crossOriginIsolated", true);
    }
  });

  it("the roof made anew meanwhile: the one under way is asked of the new one (bug: was worked out for ever)", () => {
    dragger.weigher.begin();
    done(last());
    const former = last();
    dragger.openRoofs(++run, { ...project });
    roof(run);
    expect(isEnded(former)).toBe(true);
    expect(last()).toMatchObject({ run, asked: former.asked });
    done(former);
    expect(weighed()?.done.length).toBe(1);
  });

  it("the job changed: not worked out any more, and there when the change is undone (bug: went on behind)", () => {
    dragger.weigher.begin();
    done(last());
    const other = { ...project, job: {} as Project["job"] };
    bookStore.setState({ project: other });
    expect(isEnded(last())).toBe(true);
    expect(weighed()?.doing).toBeNull();
    dragger.weigher.goOn();
    expect(asked.length).toBe(2);
    // nor with a roof of the other job, nor by itself with one of its own
    dragger.openRoofs(++run, other);
    roof(run);
    dragger.weigher.goOn();
    expect(asked.length).toBe(2);
    bookStore.setState({ project });
    dragger.openRoofs(++run, project);
    roof(run);
    expect(asked.length).toBe(2);
    dragger.weigher.goOn();
    expect(asked.length).toBe(3);
  });

  it("another job opened: ended (bug: went on under it)", () => {
    dragger.weigher.begin();
    openProject({ project: { ...project, id: "q", job: {} as Project["job"] }, past: [], future: [] });
    expect(isEnded(last())).toBe(true);
    expect(weighed()).toBeNull();
  });

  it("the worker broken: it stands stopped, and goes on once there is a roof again (bug: was worked out for ever)", () => {
    dragger.weigher.begin();
    worker.onerror(new Event("error"));
    expect(weighed()?.doing).toBeNull();
    dragger.weigher.goOn();
    expect(asked.length).toBe(1);
    expect(weighed()?.doing).toBeNull();
    dragger.openRoofs(++run, project);
    roof(run);
    dragger.weigher.goOn();
    expect(asked.length).toBe(2);
    expect(weighed()?.doing).not.toBeNull();
  });
});

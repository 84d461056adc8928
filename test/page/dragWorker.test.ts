// The worker that holds the roof, fed by hand where the test runs: a layout it works out is left where the page no longer wants it.
import { beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import { fitPanels } from "../../src/core/plan/fitPanels.ts";
import type { DragReply, DragRequest, WeighAsk } from "../../src/page/worker/messages.ts";
import { makeForm, makeGrid, makeJob } from "../seams/madeForms.ts";

const said: DragReply[] = [];
const told = (kind: DragReply["kind"]) => said.filter((s) => s.kind === kind);
let onSaid: (reply: DragReply) => void = () => {};
const port = { onmessage: (_: { data: unknown }) => {}, close: () => {} };
const worker = {
  onmessage: (_: { data: DragRequest }) => {},
  postMessage: (reply: DragReply) => {
    said.push(reply);
    onSaid(reply);
  },
};

const ask = (more: Partial<WeighAsk & { run: number }> = {}) =>
  worker.onmessage({ data: { kind: "weigh", run: 1, turn: 1, asked: { count: 5 }, stop: null, ...more } });

beforeAll(async () => {
  vi.stubGlobal("self", worker);
  vi.useFakeTimers({ toFake: ["setTimeout", "clearTimeout"] });
  await import("../../src/page/worker/dragWorker.ts");
  const form = makeForm(makeGrid(24, 18, (u, v) => [12 * (u - 0.5), 9 * (v - 0.5), 7 * (u - 0.5) * (v - 0.5)]));
  const job = makeJob();
  const fitted = fitPanels(form, job, { seams: {}, panels: {}, onStation: () => {} });
  worker.onmessage({ data: { kind: "listen", roofs: port as unknown as MessagePort } });
  port.onmessage({ data: { run: 1, roof: { form, job, fitted } } });
  return () => {
    vi.useRealTimers();
  };
});

beforeEach(() => {
  said.length = 0;
  onSaid = () => {};
});

describe("a layout worked out", () => {
  it("tells how far it has come, up to its end", () => {
    ask({ turn: 7 });
    const shares = told("weighing").map((s) => (s.kind === "weighing" ? s.share : Number.NaN));
    expect(shares.length).toBeGreaterThan(2);
    expect(shares).toEqual([...shares].sort((a, b) => a - b));
    expect(shares.at(-1)).toBeLessThanOrEqual(1);
    expect(said.at(-1)).toMatchObject({ kind: "weighed", turn: 7, layout: { refused: null, rows: [{ strips: 5 }] } });
  });

  it.each(["seams of", "flattening"])(
    "stopped at %s it is left there, and no answer comes (bug: went on to its end)",
    (at) => {
      const stop = new Int32Array(new SharedArrayBuffer(4));
      onSaid = (reply) => {
        if (reply.kind === "weighing" && reply.words.startsWith(at)) Atomics.store(stop, 0, 1);
      };
      ask({ stop });
      expect(stop[0]).toBe(1);
      expect(told("weighed")).toEqual([]);
      // the next one is worked out as ever
      ask({ turn: 2, stop: new Int32Array(new SharedArrayBuffer(4)) });
      expect(told("weighed")).toMatchObject([{ turn: 2, layout: { refused: null } }]);
    },
  );

  it("not begun where it was stopped before, or of a roof that is no longer the one", () => {
    ask({ stop: new Int32Array(new SharedArrayBuffer(4)).fill(1) });
    ask({ run: 2 });
    expect(said).toEqual([]);
  });

  it("one that cannot be laid says why", () => {
    ask({ asked: { layout: "bands", from: "nowhere", to: "E3" } });
    expect(told("weighed")).toMatchObject([{ layout: { rows: [] } }]);
    expect(JSON.stringify(said)).toMatch(/nowhere/);
  });
});

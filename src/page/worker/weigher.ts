// Layouts worked out beside the one that stands, one after another; can be stopped and gone on with. What was worked out stays.
import { listAsks } from "../../core/plan/listAsks.ts";
import { bookStore } from "../store/bookStore.ts";
import { isSameWork } from "../store/hand.ts";
import type { DragReply, WeighAsk } from "./messages.ts";

/** @param send asks the worker that holds the roof */
export function createWeigher(send: (ask: WeighAsk) => void) {
  /** Answers of another turn were asked for before. */
  let turn = 0;
  let stop: WeighAsk["stop"] = null;

  /** The worker leaves what it works out at the next place where it looks; where no memory is shared, at the layout's end. */
  const leave = () => {
    if (stop !== null) Atomics.store(stop, 0, 1);
  };

  const askNext = () => {
    const { weighed } = bookStore.getState();
    if (weighed === null) return;
    const asked = weighed.asks[weighed.done.length];
    bookStore.setState({ weighed: { ...weighed, doing: asked === undefined ? null : { share: 0, words: "" } } });
    if (asked === undefined) return;
    leave();
    stop = crossOriginIsolated ? new Int32Array(new SharedArrayBuffer(4)) : null;
    send({ turn: ++turn, asked, stop });
  };

  const isReady = () => {
    const { grips, project } = bookStore.getState();
    return isSameWork(grips?.of, project);
  };

  return {
    /** Begins with the layouts worth comparing with the one that stands. */
    begin: (): void => {
      const { project, job, facts } = bookStore.getState();
      if (project === null || job === null || !isReady()) return;
      const rows = facts?.compared ?? [];
      // seams given one by one were weighed against nothing: what the plan would take by itself says which ways there are
      const weighed = { of: project, asks: listAsks(job, rows), open: rows.length === 0, done: [], doing: null };
      bookStore.setState({ weighed });
      askNext();
    },

    /** Goes on after a stop. */
    goOn: (): void => {
      const { weighed, project } = bookStore.getState();
      if (weighed?.doing === null && isSameWork(weighed.of, project) && isReady()) askNext();
    },

    /** The roof was made anew: what the worker had of the former one is asked again. */
    askAnew: (): void => {
      const { weighed, grips } = bookStore.getState();
      if (weighed !== null && weighed.doing !== null && isSameWork(weighed.of, grips?.of)) askNext();
    },

    stop: (): void => {
      leave();
      const { weighed } = bookStore.getState();
      if (weighed === null || weighed.doing === null) return;
      bookStore.setState({ weighed: { ...weighed, doing: null } });
    },

    hear: (reply: Extract<DragReply, { kind: "weighing" | "weighed" }>): void => {
      const { weighed, job } = bookStore.getState();
      if (weighed === null || reply.turn !== turn) return;
      const stopped = weighed.doing === null;
      if (reply.kind === "weighing") {
        const { share, words } = reply;
        if (!stopped) bookStore.setState({ weighed: { ...weighed, doing: { share, words } } });
        return;
      }
      // done in the very moment it was stopped: it is shown all the same
      const asks = weighed.open && job !== null ? listAsks(job, reply.layout.ways) : weighed.asks;
      bookStore.setState({ weighed: { ...weighed, asks, open: false, done: [...weighed.done, reply.layout] } });
      if (!stopped) askNext();
    },
  };
}

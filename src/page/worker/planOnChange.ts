// When a plan begins: a little after the job has changed, not while a seam is slid, and after the tie of one that was let go.
import { bookStore } from "../store/bookStore.ts";
import { isSameWork, isSliding } from "../store/hand.ts";
import { putBack, weigher } from "./dragger.ts";
import { leaveJob, pausePlan, planSoon, startDue } from "./planner.ts";

/** Quiet time before a changed job is planned, ms: a second thought within it costs no plan. */
const QUIET = 250;

/** Begins to plan whatever changes. */
export function planOnChange(): void {
  let timer: ReturnType<typeof setTimeout> | undefined;
  bookStore.subscribe((now, before) => {
    const { project, hand } = now;
    // stopped right after a change: that change is not planned either, until the next one or until it is asked for
    if (now.status === "stopped" && before.status !== "stopped") clearTimeout(timer);
    if (project?.id !== before.project?.id) leaveJob();
    if (project !== null && !isSameWork(project, before.project)) {
      clearTimeout(timer);
      // of the job as it was: gone on with if it comes back
      weigher.stop();
      timer = setTimeout(() => planSoon(project), project.id !== before.project?.id ? 0 : QUIET);
      // its grips are gone, so nobody could let it go
      if (hand !== null && hand.laid === null) putBack();
    }
    if (isSliding(hand)) {
      if (!isSliding(before.hand)) pausePlan();
    } else if (isSliding(before.hand) || now.tying !== before.tying) startDue();
  });
}

// How much of the surface is drawn: less while it is turned where frames come slowly, all of it once it is still.

/** A frame that takes longer than this is slow, ms: fewer than 30 a second, with what a screen's beat is off by. */
const SLOW = 35;
/** Turned no more since this long, it is still, ms. */
const STILL = 250;

export interface Pace {
  /** It was turned, moved, zoomed. */
  move: () => void;
  /** A drawing begins. @returns whether less is to be drawn */
  begin: () => boolean;
}

/** What is asked of the browser: the time in ms, what comes with the next frame, what comes later. */
export interface PaceClock {
  now: () => number;
  nextFrame: (then: () => void) => void;
  later: (then: () => void, ms: number) => void;
}

export const BROWSER_CLOCK: PaceClock = {
  now: () => performance.now(),
  nextFrame: (then) => requestAnimationFrame(then),
  later: (then, ms) => setTimeout(then, ms),
};

/** The pace of a view; `draw` asks for a drawing. The last whole drawing says whether frames come slowly. */
export function createPace(draw: () => void, clock: PaceClock): Pace {
  let slow = false;
  let moved = Number.NEGATIVE_INFINITY;
  /** From the first move until it is still. */
  let moving = false;
  /** A move that is not drawn yet: a slow frame may take longer than it takes to be still. */
  let owed = false;
  let waits = false;
  /** Whether the newest drawing showed less. */
  let less = false;
  const settle = () => {
    waits = false;
    const rest = moved + STILL - clock.now();
    if (rest > 0 || owed) {
      wait(Math.max(rest, STILL / 4));
      return;
    }
    moving = false;
    if (less) draw();
  };
  const wait = (ms: number) => {
    if (waits) return;
    waits = true;
    clock.later(settle, ms);
  };
  return {
    move: () => {
      moved = clock.now();
      moving = owed = true;
      wait(STILL);
      draw();
    },
    begin: () => {
      const begun = clock.now();
      const judged = moving || less;
      owed = false;
      less = slow && moving;
      // the browser takes a slow frame's time after the drawing was handed over, before the next frame
      if (!less && judged)
        clock.nextFrame(() => {
          slow = clock.now() - begun > SLOW;
        });
      return less;
    },
  };
}

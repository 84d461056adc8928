// Where the focus goes next: an act that brings something new, or takes its own button away, hands it on to what is there after it.
import { useRef } from "react";

/**
 * `ask` names the place before the act; `at` is the ref of each place that may be named. Of a group it is the first entry that has the
 * focus, all of it chosen, so that what is typed takes the place of what stands there.
 */
export function useNextFocus() {
  const next = useRef<string | null>(null);
  const ask = (place: string) => {
    next.current = place;
  };
  const at = (place: string) => (element: HTMLElement | null) => {
    if (element === null || next.current !== place) return;
    next.current = null;
    const goal = element instanceof HTMLFieldSetElement ? element.querySelector("input") : element;
    goal?.focus();
    if (goal instanceof HTMLInputElement) goal.select();
  };
  return { ask, at };
}

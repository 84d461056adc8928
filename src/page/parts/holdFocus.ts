// The focus is not lost when what had it goes with the act it did (a seam removed, a layout taken): it goes to what is nearest in the
// page and still there, so that the next Tab goes on from the same place.

const FOCUSABLE = "button:not(:disabled), input:not(:disabled), select, summary, [tabindex='0'], h1[tabindex]";

/** Watches the focus of the page. @returns what ends it */
export function holdFocus(): () => void {
  /** What had the focus last, and everything it stood in, from the inside out. */
  let last: Element | null = null;
  let around: Element[] = [];
  const note = (e: FocusEvent) => {
    last = e.target instanceof Element ? e.target : null;
    around = [];
    for (let p = last?.parentElement; p != null && p !== document.body; p = p.parentElement) around.push(p);
  };
  const mend = () => {
    if (last === null || last.isConnected || document.activeElement !== document.body) return;
    const near = around.find((p) => p.isConnected && p.querySelector(FOCUSABLE) !== null);
    const next = near?.querySelector<HTMLElement>(FOCUSABLE) ?? document.querySelector<HTMLElement>("h1[tabindex]");
    last = null;
    next?.focus({ preventScroll: true });
  };
  const watch = new MutationObserver(mend);
  watch.observe(document.body, { childList: true, subtree: true });
  addEventListener("focusin", note);
  return () => {
    watch.disconnect();
    removeEventListener("focusin", note);
  };
}

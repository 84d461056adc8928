// The focus is not lost when what had it goes with the act it did (a seam removed, a layout taken): it goes to what is nearest in the
// page and still there, so that the next Tab goes on from the same place. Only what the focus stands in is watched, and not what is
// within that. Whoever leaves it for the empty page is not called back.

const FOCUSABLE = "button:not(:disabled), input:not(:disabled), select, summary, [tabindex='0'], h1[tabindex]";

/** Watches the focus of the page. @returns what ends it */
export function holdFocus(): () => void {
  /** What has the focus, and everything it stands in, from the inside out. */
  let last: Element | null = null;
  let around: Element[] = [];
  const mend = () => {
    if (last === null || last.isConnected) return;
    const near = around.find((p) => p.isConnected && p.querySelector(FOCUSABLE) !== null);
    forget();
    if (document.activeElement !== document.body) return;
    const next = near?.querySelector<HTMLElement>(FOCUSABLE) ?? document.querySelector<HTMLElement>("h1[tabindex]");
    next?.focus({ preventScroll: true });
  };
  const watch = new MutationObserver(mend);
  const forget = () => {
    watch.disconnect();
    last = null;
    around = [];
  };
  const note = (e: FocusEvent) => {
    forget();
    last = e.target instanceof Element ? e.target : null;
    for (let p = last?.parentElement; p != null && p !== document.body; p = p.parentElement) {
      around.push(p);
      watch.observe(p, { childList: true });
    }
  };
  // some browsers tell of the focus going before what had it is taken out: only after that is it known why it went
  const leave = () =>
    queueMicrotask(() => {
      if (last?.isConnected && document.activeElement === document.body) forget();
    });
  addEventListener("focusin", note);
  addEventListener("focusout", leave);
  return () => {
    forget();
    removeEventListener("focusin", note);
    removeEventListener("focusout", leave);
  };
}

// A sheet laid over the book: keys, findings, jobs. Escape puts it away.
import { useLayoutEffect, useRef } from "react";
import { bookStore } from "../store/bookStore.ts";

/** The sheet; focus goes into it and comes back. */
export function Sheet({ title, children }: { title: string; children: React.ReactNode }) {
  const dialog = useRef<HTMLDialogElement>(null);
  useLayoutEffect(() => {
    const shown = dialog.current;
    shown?.showModal();
    // only a sheet that is closed, not one that is merely gone, gives the focus back to where it was
    return () => shown?.close();
  }, []);
  const close = () => bookStore.setState({ sheet: "none" });
  return (
    <dialog
      ref={dialog}
      className="over"
      aria-label={title}
      onClose={() => dialog.current !== null && close()}
      onKeyDown={(e) => {
        // the browser tells of its closing a moment later, and a key pressed meanwhile would be lost
        if (e.key !== "Escape") return;
        e.preventDefault();
        e.stopPropagation();
        close();
      }}
    >
      <header>
        <h2>{title}</h2>
        <button type="button" onClick={close}>
          Close
        </button>
      </header>
      <div className="body" tabIndex={0} role="group" aria-label={title}>
        {children}
      </div>
    </dialog>
  );
}

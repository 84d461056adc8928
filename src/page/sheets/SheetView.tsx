// A PDF on the page: one sheet at a time at reading size, turned with keys, its words below it, and printed.
import { useCallback, useEffect, useRef, useState } from "react";
import { isTyping } from "../parts/keys.ts";
import type { PaperFile } from "../store/bookStore.ts";
import type { OpenSheets } from "./openSheets.ts";

/** How much larger or smaller one press makes it, and how far that goes. */
const STEP = 1.25;
const LEAST = 0.4;
const MOST = 4;

interface Shown {
  turn: (sheet: number) => void;
  /** 0: as wide as the page. */
  zoomBy: (factor: number) => void;
  sheet: number;
  count: number;
}

const KEYS: Record<string, (v: Shown) => void> = {
  PageDown: (v) => v.turn(v.sheet + 1),
  PageUp: (v) => v.turn(v.sheet - 1),
  ArrowRight: (v) => v.turn(v.sheet + 1),
  ArrowLeft: (v) => v.turn(v.sheet - 1),
  Home: (v) => v.turn(1),
  End: (v) => v.turn(v.count),
  "+": (v) => v.zoomBy(STEP),
  "=": (v) => v.zoomBy(STEP),
  "-": (v) => v.zoomBy(1 / STEP),
  "0": (v) => v.zoomBy(0),
};

const explain = (error: unknown) => (error instanceof Error ? error.message : String(error));

/** The paper taken apart by a worker, for as long as it is looked at. */
function useOpenSheets(file: PaperFile): { sheets: OpenSheets | null; fault: string } {
  const [sheets, setSheets] = useState<OpenSheets | null>(null);
  const [fault, setFault] = useState("");
  useEffect(() => {
    let gone = false;
    let mine: OpenSheets | null = null;
    const open = async () => {
      const { openSheets } = await import("./openSheets.ts");
      if (gone) return;
      mine = await openSheets(file.bytes);
      if (gone) mine.close();
      else setSheets(mine);
    };
    open().catch((error: unknown) => !gone && setFault(explain(error)));
    return () => {
      gone = true;
      mine?.close();
    };
  }, [file]);
  return { sheets, fault };
}

/** Draws the sheet as wide as asked for, CSS pixels. @returns its words once it stands, with the sheet they are of */
function useDrawnSheet(sheets: OpenSheets | null, sheet: number, wide: number, onFault: (words: string) => void) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const [words, setWords] = useState<{ of: number; lines: string[] } | null>(null);
  useEffect(() => {
    const on = canvas.current;
    if (sheets === null || on === null || wide === 0) return;
    let gone = false;
    const draw = async () => {
      const { width, height } = await sheets.sizeOf(sheet);
      if (gone) return;
      Object.assign(on.style, { width: `${wide}px`, height: `${(wide * height) / width}px` });
      const drawn = await sheets.draw(on, sheet, (Math.min(devicePixelRatio, 2) * wide) / width);
      const lines = drawn ? await sheets.wordsOf(sheet) : [];
      if (drawn && !gone) setWords({ of: sheet, lines });
    };
    draw().catch((error: unknown) => !gone && onFault(explain(error)));
    return () => {
      gone = true;
    };
  }, [sheets, sheet, wide, onFault]);
  return { canvas, words };
}

/** Printing, while the sheets are made ready; `at` is the one in hand. */
function usePrint(sheets: OpenSheets | null, onFault: (words: string) => void) {
  const [at, setAt] = useState<number | null>(null);
  const asked = useRef(0);
  const putAway = useRef<(() => void) | null>(null);
  const end = useCallback(() => {
    asked.current++;
    putAway.current?.();
    putAway.current = null;
    setAt(null);
  }, []);
  // what is printed goes with the paper; so does what is only being made ready
  useEffect(() => end, [end]);
  const begin = useCallback(async () => {
    if (sheets === null) return;
    end();
    const mine = asked.current;
    const cancelled = () => asked.current !== mine;
    try {
      setAt(1);
      const { printSheets } = await import("./printSheets.ts");
      const done = await printSheets(sheets, (n) => !cancelled() && setAt(n), cancelled);
      if (!cancelled()) putAway.current = done;
    } catch (error) {
      if (!cancelled()) onFault(explain(error));
    }
    if (!cancelled()) setAt(null);
  }, [sheets, end, onFault]);
  return { at, begin, end };
}

/** The width a place has for what lies in it, CSS pixels; 0 before it is known. */
function useWidth() {
  const place = useRef<HTMLDivElement>(null);
  const [wide, setWide] = useState(0);
  useEffect(() => {
    const element = place.current;
    if (element === null) return;
    const watch = new ResizeObserver(() => setWide(element.clientWidth));
    watch.observe(element);
    return () => watch.disconnect();
  }, []);
  return { place, wide };
}

/** The view. */
export function SheetView({ file }: { file: PaperFile }) {
  const { sheets, fault: shut } = useOpenSheets(file);
  const [fault, setFault] = useState("");
  const [sheet, setSheet] = useState(1);
  const [zoom, setZoom] = useState(1);
  const { place, wide } = useWidth();
  const { canvas, words } = useDrawnSheet(sheets, sheet, Math.floor(zoom * wide), setFault);
  const print = usePrint(sheets, setFault);
  const count = sheets?.count ?? 0;
  const turn = (to: number) => {
    setSheet(Math.min(Math.max(to, 1), Math.max(count, 1)));
    place.current?.scrollTo(0, 0);
  };
  const zoomBy = (factor: number) => setZoom((z) => (factor === 0 ? 1 : Math.min(Math.max(z * factor, LEAST), MOST)));
  const { begin } = print;
  const said = shut || fault;
  useEffect(() => {
    // the book itself is nothing to print: the key prints the paper that is looked at
    const hear = (e: KeyboardEvent) => {
      if (!(e.ctrlKey || e.metaKey) || e.shiftKey || e.altKey || e.key.toLowerCase() !== "p") return;
      const over = document.querySelector("dialog[open]");
      if (said !== "" || isTyping(e.target) || (over !== null && !over.contains(place.current))) return;
      e.preventDefault();
      if (!e.repeat) void begin();
    };
    addEventListener("keydown", hear);
    return () => removeEventListener("keydown", hear);
  }, [begin, said, place]);
  if (said !== "")
    return (
      <p className="waiting" role="alert">
        {file.path} cannot be shown or printed here ({said}). Save it and open it in another program.
      </p>
    );
  return (
    <>
      <div className="turning">
        <button type="button" disabled={sheet <= 1} onClick={() => turn(sheet - 1)}>
          ‹ Sheet before
        </button>
        <span role="status">{count === 0 ? "Opening…" : `Sheet ${sheet} of ${count}`}</span>
        <button type="button" disabled={sheet >= count} onClick={() => turn(sheet + 1)}>
          Next sheet ›
        </button>
        <button type="button" aria-label="Smaller" disabled={zoom <= LEAST} onClick={() => zoomBy(1 / STEP)}>
          −
        </button>
        <button type="button" aria-label="Larger" disabled={zoom >= MOST} onClick={() => zoomBy(STEP)}>
          +
        </button>
        <button type="button" disabled={zoom === 1} onClick={() => zoomBy(0)}>
          As wide as the page
        </button>
        {print.at === null ? (
          <button type="button" className="main" disabled={count === 0} onClick={print.begin}>
            Print
          </button>
        ) : (
          <>
            <span role="status">
              Making sheet {print.at} of {count} ready to print…
            </span>
            <button type="button" onClick={print.end}>
              Stop printing
            </button>
          </>
        )}
      </div>
      <div
        ref={place}
        className="preview sheets"
        tabIndex={0}
        role="group"
        aria-label={`Paper ${file.path}`}
        onKeyDown={(e) => {
          const act = KEYS[e.key];
          if (act === undefined || e.ctrlKey || e.metaKey || e.altKey) return;
          // larger than its place it is moved with these
          if (zoom > 1 && /^Arrow/.test(e.key)) return;
          e.preventDefault();
          e.stopPropagation();
          act({ turn, zoomBy, sheet, count });
        }}
      >
        <canvas
          ref={canvas}
          role="img"
          aria-label={`Sheet ${sheet} of ${file.path}; its words follow`}
          aria-busy={words?.of !== sheet}
        />
        <details>
          <summary>Words of sheet {sheet}</summary>
          <pre>{words?.of === sheet ? words.lines.join("\n") : "Reading…"}</pre>
        </details>
      </div>
    </>
  );
}

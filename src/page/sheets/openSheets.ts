// The one module that knows the reader of PDF: opens a paper, draws its sheets, reads their words. A worker of its own takes the file
// apart; nothing is fetched for it, since the faces of our sheets lie in the file.
import { getDocument, PDFWorker } from "pdfjs-dist";
import { readWords } from "./readWords.ts";

/** Size of a sheet, points of 1/72 inch. */
export interface SheetSize {
  width: number;
  height: number;
}

/** A PDF that lies open; sheets are counted from 1. */
export interface OpenSheets {
  count: number;
  sizeOf: (sheet: number) => Promise<SheetSize>;
  /**
   * Draws a sheet on a canvas, which takes its size; one that is still being drawn by this call is given up.
   * @param scale dots to a point
   * @returns whether it was drawn to its end
   */
  draw: (canvas: HTMLCanvasElement, sheet: number, scale: number) => Promise<boolean>;
  /** Its words in the order they are read, a line each. */
  wordsOf: (sheet: number) => Promise<string[]>;
  /** Ends the worker; what is being drawn is given up. */
  close: () => void;
}

/** Opens the bytes of a PDF. @throws Error where it cannot be read */
export async function openSheets(bytes: Uint8Array<ArrayBuffer>): Promise<OpenSheets> {
  const port = new Worker(new URL("../worker/sheetWorker.ts", import.meta.url), {
    type: "module",
    name: "seamstay-sheets",
  });
  const broke = new Promise<never>((_, refuse) => {
    port.onerror = (event) => {
      event.preventDefault();
      refuse(new Error(event.message || "its worker broke down"));
    };
  });
  const worker = PDFWorker.create({ port });
  // the bytes are handed over, and the paper itself must stay
  const task = getDocument({ data: bytes.slice(), worker, isEvalSupported: false, useWasm: false, stopAtErrors: true });
  // the reader takes its faces out of the document only once the worker has answered, so that is ended last
  const close = () => {
    const ended = Promise.race([task.destroy(), broke]).catch(() => {});
    void ended.then(() => {
      worker.destroy();
      port.terminate();
    });
  };
  const book = await Promise.race([task.promise, broke]).catch((error: unknown) => {
    close();
    throw error;
  });
  const soon = <T>(work: Promise<T>) => Promise.race([work, broke]);
  const pageOf = (sheet: number) => soon(book.getPage(sheet));
  /** What is being drawn on each canvas: two drawings at once on one would run into each other. */
  const drawings = new WeakMap<HTMLCanvasElement, { cancel: () => void; promise: Promise<void> }>();
  return {
    count: book.numPages,
    sizeOf: async (sheet) => {
      const { width, height } = (await pageOf(sheet)).getViewport({ scale: 1 });
      return { width, height };
    },
    draw: async (canvas, sheet, scale) => {
      const page = await pageOf(sheet);
      const before = drawings.get(canvas);
      before?.cancel();
      await before?.promise.catch(() => {});
      const viewport = page.getViewport({ scale });
      Object.assign(canvas, { width: Math.floor(viewport.width), height: Math.floor(viewport.height) });
      const drawing = page.render({ canvas, viewport });
      drawings.set(canvas, drawing);
      try {
        await soon(drawing.promise);
        return true;
      } catch (error) {
        if (error instanceof Error && error.name === "RenderingCancelledException") return false;
        throw error;
      } finally {
        page.cleanup();
      }
    },
    wordsOf: async (sheet) => {
      const { items } = await soon((await pageOf(sheet)).getTextContent());
      return readWords(items.flatMap((i) => ("str" in i ? [{ text: i.str, at: i.transform, width: i.width }] : [])));
    },
    close,
  };
}

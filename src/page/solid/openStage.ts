// The stage of a canvas: in a worker of its own where the browser hands the canvas over, else in the page.
import type { StageBegin, StageOrder, StageWord } from "./stageOrders.ts";

/** A worker failed to draw: from then on it is done in the page. */
let here = false;

function openBeside(canvas: HTMLCanvasElement, begin: Omit<StageBegin, "canvas">, hear: (word: StageWord) => void) {
  const worker = new Worker(new URL("./stageWorker.ts", import.meta.url), { type: "module", name: "seamstay-draw" });
  const broken = () => {
    worker.terminate();
    here = true;
    hear({ kind: "broken" });
  };
  worker.onmessage = ({ data }: MessageEvent<StageWord>) => (data.kind === "broken" ? broken() : hear(data));
  worker.onerror = (event) => {
    event.preventDefault();
    broken();
  };
  const handed = canvas.transferControlToOffscreen();
  worker.postMessage({ canvas: handed, ...begin } satisfies StageBegin, [handed]);
  return (order: StageOrder) => worker.postMessage(order);
}

function openHere(canvas: HTMLCanvasElement, begin: Omit<StageBegin, "canvas">, hear: (word: StageWord) => void) {
  const stage = import("./stage.ts").then(({ createStage }) => createStage(canvas, begin, hear));
  stage.catch(() => hear({ kind: "broken" }));
  return (order: StageOrder) => {
    stage.then((take) => take(order)).catch(() => hear({ kind: "broken" }));
  };
}

/**
 * Opens the stage of a canvas that was drawn on by nobody yet.
 * @param hear is told of drawings; and that nothing can be drawn, `again` where another canvas may be tried
 * @returns what takes orders
 */
export function openStage(
  canvas: HTMLCanvasElement,
  begin: Omit<StageBegin, "canvas">,
  hear: { drawn: (word: Extract<StageWord, { kind: "drawn" }>) => void; broken: (again: boolean) => void },
): (order: StageOrder) => void {
  const beside = !here && "transferControlToOffscreen" in canvas;
  const open = beside ? openBeside : openHere;
  return open(canvas, begin, (word) => (word.kind === "drawn" ? hear.drawn(word) : hear.broken(beside)));
}

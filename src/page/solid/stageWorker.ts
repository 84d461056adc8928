// The worker that draws the surface. Where there is no graphics card the one who draws waits until each picture is done: not the page.
import { createStage } from "./stage.ts";
import type { StageBegin, StageOrder, StageWord } from "./stageOrders.ts";

const tell = (word: StageWord) => self.postMessage(word);

self.onmessage = ({ data: { canvas, ...begin } }: MessageEvent<StageBegin>) => {
  try {
    const take = createStage(canvas, begin, tell);
    self.onmessage = ({ data }: MessageEvent<StageOrder>) => take(data);
  } catch {
    self.onmessage = null;
    tell({ kind: "broken" });
  }
};

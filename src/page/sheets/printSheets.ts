// Prints a PDF by the browser's own print: every sheet as a picture of its true size on a page of that size, nothing of the book.
import type { OpenSheets, SheetSize } from "./openSheets.ts";

/** Dots to an inch; a browser on a tablet makes no canvas of more dots than `MOST`. */
const DENSITY = 300;
const MOST = 16e6;

/** Pages for the sizes, by their place in the list: a picture may not run over its page by a hair, it would take another one. */
function rulesOf(sizes: readonly SheetSize[]): string {
  return sizes
    .map(
      ({ width, height }, i) => `
@page sheet${i} { size: ${width}pt ${height}pt; margin: 0 }
.printed .size${i} { page: sheet${i}; width: ${width}pt; height: ${height - 0.1}pt }`,
    )
    .join("");
}

function blobOf(canvas: HTMLCanvasElement): Promise<Blob> {
  return new Promise((done, refuse) => {
    canvas.toBlob(
      (blob) => (blob === null ? refuse(new Error("the browser made no picture of the sheet")) : done(blob)),
      "image/png",
    );
  });
}

/**
 * Makes all sheets ready and opens the browser's print; put away again when that is closed.
 * @param onSheet told of each sheet before it is drawn
 * @returns what puts it away before; null where it was given up by `cancelled`
 */
export async function printSheets(
  sheets: OpenSheets,
  onSheet: (sheet: number) => void,
  cancelled: () => boolean,
): Promise<(() => void) | null> {
  const sizes: SheetSize[] = [];
  const urls: string[] = [];
  const place = document.createElement("div");
  place.className = "printed";
  const canvas = document.createElement("canvas");
  const drop = () => {
    for (const url of urls) URL.revokeObjectURL(url);
  };
  const add = async (sheet: number) => {
    onSheet(sheet);
    const size = await sheets.sizeOf(sheet);
    const scale = Math.min(DENSITY / 72, Math.sqrt(MOST / (size.width * size.height)));
    if (!(await sheets.draw(canvas, sheet, scale))) return false;
    let kind = sizes.findIndex((s) => s.width === size.width && s.height === size.height);
    if (kind < 0) kind = sizes.push(size) - 1;
    const picture = document.createElement("img");
    picture.className = `size${kind}`;
    picture.alt = `Sheet ${sheet} of ${sheets.count}`;
    picture.src = URL.createObjectURL(await blobOf(canvas));
    urls.push(picture.src);
    await picture.decode();
    place.append(picture);
    return true;
  };
  let whole = false;
  try {
    for (let sheet = 1; sheet <= sheets.count; sheet++) if (!(await add(sheet)) || cancelled()) return null;
    whole = true;
  } finally {
    // given up or failed: nothing of it stays
    if (!whole) drop();
  }
  const style = new CSSStyleSheet();
  style.replaceSync(rulesOf(sizes));
  document.adoptedStyleSheets.push(style);
  document.body.append(place);
  const putAway = () => {
    removeEventListener("afterprint", putAway);
    document.adoptedStyleSheets = document.adoptedStyleSheets.filter((s) => s !== style);
    place.remove();
    drop();
  };
  addEventListener("afterprint", putAway);
  print();
  return putAway;
}

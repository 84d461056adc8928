// Papers made once and read by many tests: files of a set of facts, words of a PDF with their boxes as another reader finds them.
import { spawnSync } from "node:child_process";
import { existsSync, mkdtempSync, readFileSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { expect } from "vitest";
import { writePapers } from "../../../src/core/papers/writePapers.ts";
import type { Facts } from "../../../src/core/records/facts.ts";

const face = (name: string) => new Uint8Array(readFileSync(`node_modules/dejavu-fonts-ttf/ttf/${name}.ttf`));
export const fonts = { regular: face("DejaVuSans"), bold: face("DejaVuSans-Bold") };
const has = (tool: string) => ["/usr/bin", "/usr/local/bin", "/bin"].some((d) => existsSync(join(d, tool)));
/** Readers of PDF this machine does not have. */
export const missing = ["qpdf", "pdftotext", "pdftoppm"].filter((t) => !has(t));
export const reason = missing.length > 0 ? ` (skipped: ${missing.join(", ")} not on this machine)` : "";
export const MM = 72 / 25.4;

/** Files by path. */
export async function papersOf(facts: Facts): Promise<Map<string, Uint8Array>> {
  const { files } = await writePapers(facts, { fonts });
  expect(new Set(files.map((f) => f.path.toLowerCase())).size).toBe(files.length);
  return new Map(files.map((f) => [f.path, f.bytes]));
}

/** The same papers for the same maker of facts: made at the first call. */
export const shared = (() => {
  const made = new Map<() => Facts, Promise<Map<string, Uint8Array>>>();
  return (make: () => Facts) => {
    const papers = made.get(make) ?? papersOf(make());
    made.set(make, papers);
    return papers;
  };
})();

/** A file of these bytes for a program to read. */
export function saved(bytes: Uint8Array): string {
  const file = join(mkdtempSync(join(tmpdir(), "papers-")), "paper.pdf");
  writeFileSync(file, bytes);
  return file;
}

export interface Word {
  page: number;
  text: string;
  /** mm from the upper left */
  x0: number;
  y0: number;
  x1: number;
  y1: number;
}

const read = new Map<Uint8Array, { words: Word[]; pages: number }>();

/** Every word of a PDF with its box, by a reader that is not ours. */
export function wordsOf(bytes: Uint8Array): { words: Word[]; pages: number } {
  const known = read.get(bytes);
  if (known) return known;
  const run = spawnSync("pdftotext", ["-bbox", saved(bytes), "-"], { encoding: "utf8", maxBuffer: 1 << 28 });
  expect(run.status).toBe(0);
  let page = 0;
  const words: Word[] = [];
  for (const m of run.stdout.matchAll(
    /<page |<word xMin="([\d.-]+)" yMin="([\d.-]+)" xMax="([\d.-]+)" yMax="([\d.-]+)">([^<]*)</g,
  )) {
    if (m[0].startsWith("<page")) page++;
    else {
      const [x0, y0, x1, y1] = [m[1], m[2], m[3], m[4]].map((v) => Number(v) / MM) as [number, number, number, number];
      words.push({ page, text: m[5]!, x0, y0, x1, y1 });
    }
  }
  read.set(bytes, { words, pages: page });
  return { words, pages: page };
}

/** All words of a page, or of all, in reading order of the file, as one line; bound spaces read as spaces. */
export function textOf(bytes: Uint8Array, page?: number): string {
  return wordsOf(bytes)
    .words.filter((w) => page === undefined || w.page === page)
    .map((w) => w.text)
    .join(" ")
    .replaceAll("\u00a0", " ")
    .replaceAll("&apos;", "'")
    .replaceAll("&quot;", '"');
}

/** Letters of a word in points: the box of a word is ascent and descent of its face, 1.164 of the size in DejaVu Sans. */
export function sizeOf(word: Word): number {
  return ((word.y1 - word.y0) * MM) / 1.164;
}

// Names of any length where there is little room: the beginning and the end stay, by which names of one kind differ.
import { cutMiddle } from "../../core/papers/words/cutMiddle.ts";

const letters = new Intl.Segmenter("en", { granularity: "grapheme" });

/** The name, or its beginning and its end with a sign of omission between them, `most` letters in all. */
export function shortName(name: string, most: number): string {
  if (name.length <= most) return name;
  const all = Array.from(letters.segment(name), (s) => s.segment);
  if (all.length <= most) return name;
  const head = Math.ceil((most - 1) / 2);
  return cutMiddle(all, head, most - 1 - head);
}

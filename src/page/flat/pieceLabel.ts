// What a piece of cloth on a roll is called in the drawing: by its name where that can be read, else by its number in the order of
// cutting, as on the printed roll sheet; the list beside the drawing says whose number it is. Pure numbers.

/** Lowest letters that are read without effort, and the highest worth drawing, screen pixels. own: common sizes of text on screens. */
const LEAST = 11;
const MOST = 24;

/** A letter is about so wide for its height. */
const LETTER = 0.62;

/** What a piece has room for. */
export interface LabelRoom {
  /** Extent along the roll and, where the label stands, across it, mm. */
  length: number;
  across: number;
  /** Screen pixels of one mm. */
  scale: number;
}

/** Letters for some words, mm, as high as the piece lets them be; 0 where they could not be read. */
function lettersFor(words: string, { length, across, scale }: LabelRoom, share: number): number {
  const height = Math.min(MOST / scale, share * across, length / (LETTER * (words.length + 1)));
  return height * scale < LEAST ? 0 : height;
}

/** The label of a piece and the height of its letters, mm; null where not even the number has room. */
export function pieceLabel(
  name: string,
  order: number | undefined,
  room: LabelRoom,
): { words: string; height: number } | null {
  const letters = lettersFor(name, room, 0.5);
  if (letters > 0) return { words: name, height: letters };
  if (order === undefined) return null;
  // digits are lower than their line, so that they may fill the piece; they need not be larger than the least that is read
  const digits = lettersFor(String(order), room, 1.25);
  return digits === 0 ? null : { words: String(order), height: Math.min(digits, (1.1 * LEAST) / room.scale) };
}

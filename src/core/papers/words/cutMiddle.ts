// A text too long for its place: its beginning and its end stay, for names of one kind differ there.

/** So many letters of the beginning and of the end, an ellipsis between them. @shape letters each a whole one */
export function cutMiddle(letters: readonly string[], head: number, tail: number): string {
  const begin = letters.slice(0, head).join("").trimEnd();
  const end = tail === 0 ? "" : letters.slice(-tail).join("").trimStart();
  return `${begin}…${end}`;
}

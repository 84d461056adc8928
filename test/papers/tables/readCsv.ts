// A CSV reader of the tests, apart from the writer.

/** A strict reader after RFC 4180: throws on a bare quote, a bare CR or LF, a row of another width. */
export function readCsv(text: string): string[][] {
  const rows: string[][] = [];
  let i = 0;
  while (i < text.length) {
    const row: string[] = [];
    for (;;) {
      let cell = "";
      if (text[i] === '"') {
        for (i++; ; i++) {
          if (i >= text.length) throw new Error("a quote stays open");
          if (text[i] !== '"') cell += text[i];
          else if (text[i + 1] === '"') {
            cell += '"';
            i++;
          } else break;
        }
        i++;
      } else {
        while (i < text.length && text[i] !== "," && text[i] !== "\r") {
          if (text[i] === '"' || text[i] === "\n") throw new Error(`a bare character at ${i}`);
          cell += text[i++];
        }
      }
      row.push(cell);
      if (text[i] !== ",") break;
      i++;
    }
    if (text.slice(i, i + 2) !== "\r\n") throw new Error(`row ${rows.length + 1} is not ended by CRLF`);
    i += 2;
    if (rows.length > 0 && row.length !== rows[0]!.length)
      throw new Error(`row ${rows.length + 1}: ${row.length} cells`);
    rows.push(row);
  }
  return rows;
}

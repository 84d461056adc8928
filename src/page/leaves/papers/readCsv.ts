// The cells of a list that the papers hold, for looking at. Source of the format: RFC 4180, as the writer of the lists keeps it.

/** Rows of cells as text; an apostrophe that keeps a table program from running a cell is no part of it. */
export function readCsv(text: string): string[][] {
  const rows: string[][] = [];
  for (const line of text.replace(/^\uFEFF/, "").match(/(?:"(?:[^"]|"")*"|[^"\r\n])+/g) ?? []) {
    const cells = [...line.matchAll(/(?:^|,)(?:"((?:[^"]|"")*)"|([^,]*))/g)];
    rows.push(cells.map(([, quoted, plain]) => (quoted?.replaceAll('""', '"') ?? plain).replace(/^'(?=[=+\-@])/, "")));
  }
  return rows;
}

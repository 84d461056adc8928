// A paper looked at on the page.
import { useEffect, useMemo } from "react";
import { listCells } from "../../../core/plan/listCells.ts";
import { blobOf } from "../../keep/saveFiles.ts";
import { SheetView } from "../../sheets/SheetView.tsx";
import type { PaperFile } from "../../store/bookStore.ts";

/** A drawing for the table has hairlines; on a screen they are drawn a pixel wide. Only for looking at. */
function thicken(file: PaperFile): PaperFile {
  const style = "<style>path{vector-effect:non-scaling-stroke;stroke-width:1.3px}</style>";
  const text = new TextDecoder().decode(file.bytes).replace("</title>", `</title>${style}`);
  return { path: file.path, bytes: new TextEncoder().encode(text) };
}

/** Rows of a list shown; the file has them all. */
const SHOWN = 500;

function Table({ file }: { file: PaperFile }) {
  const [names = [], ...rows] = listCells(file.bytes, file.path);
  const shown = rows.slice(0, SHOWN).map((cells, row) => ({ row, cells }));
  return (
    <div className="preview list" tabIndex={0} role="group" aria-label={`List ${file.path}`}>
      <table className="things">
        <caption>
          {file.path}
          {rows.length > SHOWN && `, the first ${SHOWN} of ${rows.length} rows`}
        </caption>
        <thead>
          <tr>
            {names.map((cell) => (
              <th key={cell} scope="col">
                {cell}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {shown.map(({ row, cells }) => (
            <tr key={row}>
              {cells.map((cell, k) => (
                <td key={names[k]}>{cell}</td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

/** The paper: drawn, as a table, sheet by sheet, or how to come to see it. */
export function Preview({ file }: { file: PaperFile | undefined }) {
  const url = useMemo(() => (file?.path.endsWith(".svg") ? URL.createObjectURL(blobOf(thicken(file))) : null), [file]);
  useEffect(
    () => () => {
      if (url !== null) URL.revokeObjectURL(url);
    },
    [url],
  );
  if (file === undefined) return <p className="waiting">Choose a paper from the list to look at it.</p>;
  if (url !== null)
    return (
      <div
        className={file.path.startsWith("rolls/") ? "preview roomy" : "preview"}
        tabIndex={0}
        role="group"
        aria-label={`Drawing ${file.path}`}
      >
        <img src={url} alt={`Drawing ${file.path}`} />
      </div>
    );
  if (/\.csv$/.test(file.path)) return <Table file={file} />;
  if (/\.pdf$/.test(file.path)) return <SheetView key={file.path} file={file} />;
  return <p className="waiting">{file.path} is opened by its own program: save it, then open it from there.</p>;
}

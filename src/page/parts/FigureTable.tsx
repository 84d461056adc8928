// Figures of a leaf: what, how much, held against what. A row that speaks of a thing lights it up in the drawings.
import { useBook } from "../store/useBook.ts";
import { keepTogether } from "./figure.ts";
import { pointing } from "./pointing.ts";

export interface FigureRow {
  what: string;
  value: string;
  unit?: string;
  /** Limit or basis, in words. */
  against?: string;
  /** Whether it holds; left out where nothing is judged. */
  holds?: boolean;
  /** The edge, anchor, cable, adjuster it speaks of. */
  id?: string;
}

/** A few words stay on one line; a range of numbers may break. */
const keepShort = (value: string) => (value.length > 16 ? value : value.replaceAll(" ", "\u00a0"));

/** A two-column table of figures with what they are held against underneath. */
export function FigureTable({ caption, rows }: { caption: string; rows: readonly FigureRow[] }) {
  const pointed = useBook((b) => b.pointed);
  const chosen = useBook((b) => b.chosen);
  const look = (r: FigureRow) => {
    if (r.holds === false) return "fails";
    return r.id !== undefined && (r.id === pointed || r.id === chosen) ? "lit" : undefined;
  };
  return (
    <table className="figures">
      <caption>{caption}</caption>
      <tbody>
        {rows.map((r) => (
          <tr key={r.what} className={look(r)} {...(r.id !== undefined && pointing(r.id))}>
            <th scope="row">
              {r.what}
              {r.against !== undefined && <span className="against">{keepTogether(r.against)}</span>}
            </th>
            <td>
              {r.holds === false && <span className="mark">fails </span>}
              {keepShort(r.value)}
              {r.unit !== undefined && <span className="unit">{`\u00a0${r.unit}`}</span>}
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

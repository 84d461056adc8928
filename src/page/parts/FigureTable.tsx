// Figures of a leaf: what, how much, held against what.

export interface FigureRow {
  what: string;
  value: string;
  unit?: string;
  /** Limit or basis, in words. */
  against?: string;
  /** Whether it holds; left out where nothing is judged. */
  holds?: boolean;
}

/** A two-column table of figures with what they are held against underneath. */
export function FigureTable({ caption, rows }: { caption: string; rows: readonly FigureRow[] }) {
  return (
    <table className="figures">
      <caption>{caption}</caption>
      <tbody>
        {rows.map((r) => (
          <tr key={r.what} className={r.holds === false ? "fails" : undefined}>
            <th scope="row">
              {r.what}
              {r.against !== undefined && <span className="against">{r.against}</span>}
            </th>
            <td>
              {r.holds === false && <span className="mark">fails </span>}
              {r.value}
              {r.unit !== undefined && <span className="unit"> {r.unit}</span>}
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

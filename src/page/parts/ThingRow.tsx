// A row of a table that speaks of a thing of the roof: pointed at, it lights the thing up wherever it is drawn; its name chooses it.
import { bookStore } from "../store/bookStore.ts";
import { useBook } from "../store/useBook.ts";
import { pointing } from "./pointing.ts";

/** The row; `children`: its cells after the name. */
export function ThingRow({ id, children }: { id: string; children: React.ReactNode }) {
  const lit = useBook((b) => b.pointed === id || b.chosen === id);
  return (
    <tr className={lit ? "lit" : undefined} {...pointing(id)}>
      <th scope="row">
        <button type="button" className="place" onClick={() => bookStore.setState({ chosen: id })}>
          {id}
        </button>
      </th>
      {children}
    </tr>
  );
}

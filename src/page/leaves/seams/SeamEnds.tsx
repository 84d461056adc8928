// Seams in one's own hands: each end slid along its edge, seams added, removed, evened.
import { useEffect, useState } from "react";
import { addSeam } from "../../actions/seams/addSeam.ts";
import { evenSeams } from "../../actions/seams/evenSeams.ts";
import { layPairs } from "../../actions/seams/layPairs.ts";
import { moveSeamEnd } from "../../actions/seams/moveSeamEnd.ts";
import { removeSeam } from "../../actions/seams/removeSeam.ts";
import { takeSeams } from "../../actions/seams/takeSeams.ts";
import { NumberField } from "../../parts/Fields.tsx";
import { useNextFocus } from "../../parts/nextFocus.ts";
import { act } from "../../store/bookStore.ts";
import { findSeamEnds } from "../../store/seamEnds.ts";
import { useBook } from "../../store/useBook.ts";

/** So many seams' fields are put in at once. */
const AT_ONCE = 4;

/** How many of the fields may stand: those of twenty seams that come at once would block the page. */
function useReady(count: number): number {
  const [ready, setReady] = useState(0);
  useEffect(() => {
    if (ready >= count) return;
    const more = setTimeout(() => setReady(ready + AT_ONCE), 0);
    return () => clearTimeout(more);
  }, [ready, count]);
  return ready;
}

/** The list of pairs, or the way to it. */
export function SeamEnds() {
  const facts = useBook((b) => b.facts);
  const pairs = useBook((b) => b.project?.job.seams?.pairs);
  const ready = useReady(pairs?.length ?? 0);
  // the button goes with its act: Tab leads on to the first of the seams it gives
  const focus = useNextFocus();
  if (pairs === undefined) {
    return (
      <button
        type="button"
        disabled={facts?.seams === undefined || facts.seams.length === 0}
        onClick={() => {
          if (facts === null) return;
          focus.ask("seams");
          act(layPairs, { pairs: findSeamEnds(facts).map((e) => e.places) }, "seams taken in hand");
        }}
      >
        Take these seams in hand
      </button>
    );
  }
  return (
    <div className="group" data-path="seams.pairs">
      <h3 ref={focus.at("seams")} tabIndex={-1}>
        Seams by hand
      </h3>
      {pairs.slice(0, ready).map((pair, i) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: a pair has no name but its place
        <fieldset key={i} className="edge many">
          <legend>Seam {i + 1}</legend>
          {pair.map((p, k) => (
            <NumberField
              key={`${p.edge} ${k === 0 ? "a" : k}`}
              label={`${k === 0 ? "Begins" : k === pair.length - 1 ? "Ends" : "Through"} on ${p.edge}`}
              path={`seams.pairs[${i}][${k}].at`}
              given
              value={Math.round(1e4 * p.at) / 1e4}
              factor={0.01}
              unit="% along"
              onChange={(v) =>
                v !== undefined && act(moveSeamEnd, { seam: i, point: k, edge: p.edge, at: v }, `end of seam ${i + 1}`)
              }
            />
          ))}
          <button type="button" onClick={() => act(addSeam, { after: i }, "seam added")}>
            Add one after
          </button>
          <button type="button" onClick={() => act(removeSeam, { seam: i }, `seam ${i + 1} removed`)}>
            Remove
          </button>
        </fieldset>
      ))}
      <button type="button" disabled={pairs.length < 3} onClick={() => act(evenSeams, {}, "seams evened")}>
        Even them out
      </button>
      <button type="button" onClick={() => act(takeSeams, { pairs: [] }, "seams given back to the plan")}>
        Give back to the plan
      </button>
    </div>
  );
}

// The cautions that stand before any work at the roof: signal word, what can happen, how to avoid it.
import cautions from "../../../templates/cautions.json";

/** Cautions of one paper, the gravest first. */
export function CautionList({ paper }: { paper: "schedule" | "cables" | "hardware" }) {
  const order = ["DANGER", "WARNING", "CAUTION", "NOTICE"];
  const own = cautions.cautions.filter((c) => (c.papers as string[]).includes(paper));
  own.sort((a, b) => order.indexOf(a.signal) - order.indexOf(b.signal));
  return (
    <section className="cautions" aria-label="Cautions">
      <p className="who">
        Local codes and the licensed engineer of the site decide. Nothing here is designed for wind, snow or ponding.
      </p>
      <details>
        <summary>{own.length} cautions to read before anything is tensioned</summary>
        <ul>
          {own.map((c) => (
            <li key={c.id}>
              <strong>{c.signal}</strong> {c.hazard} {c.consequence} <em>{c.avoid}</em>
            </li>
          ))}
        </ul>
      </details>
    </section>
  );
}

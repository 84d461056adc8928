// What the colours of the surface mean, with numbers.
import type { Scale } from "../colour/scales.ts";
import { figure } from "../parts/figure.ts";

/** The scale as a bar with five values. */
export function Legend({ scale }: { scale: Scale }) {
  const ticks = [0, 0.25, 0.5, 0.75, 1].map((s) => scale.min + s * (scale.max - scale.min));
  return (
    <figure className="legend">
      <figcaption>
        {scale.title} {scale.unit !== "" && <span className="unit">{scale.unit}</span>}
      </figcaption>
      <div
        className="bar"
        style={{ backgroundImage: `linear-gradient(to right, ${scale.stops.map((c) => `#${c}`).join(", ")})` }}
      />
      <div className="ticks">
        {ticks.map((t) => (
          <span key={t}>{figure(t)}</span>
        ))}
      </div>
      <p>{scale.against}</p>
    </figure>
  );
}

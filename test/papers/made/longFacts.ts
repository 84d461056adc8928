// The sample ten times as large: lengths of five digits, which in feet, inches and sixteenths are as wide as numbers come.
import type { Facts, Vec2 } from "../../../src/core/records/facts.ts";
import { sampleFacts } from "./sampleFacts.ts";

const TIMES = 9.37;
const far = (p: Vec2): Vec2 => [p[0] * TIMES, p[1] * TIMES];

/** The sample with all that is flat enlarged, allowances left as they are. */
export function longFacts(job: Partial<Facts["job"]>): Facts {
  const facts = sampleFacts({ stop: false });
  facts.job = { ...facts.job, ...job };
  facts.panels = facts.panels!.map((p) => ({
    ...p,
    flat: p.flat.map(far),
    net: p.net.map(far),
    cut: p.cut.map(far),
    marks: p.marks.map((m) => ({
      ...m,
      ...(m.points ? { points: m.points.map(far) } : {}),
      ...(m.at ? { at: far(m.at) } : {}),
    })),
    sides: p.sides.map((s) => ({ ...s, lengthFlat: TIMES * s.lengthFlat, lengthErected: TIMES * s.lengthErected })),
    control: {
      sides: p.control!.sides.map((s) => ({ net: TIMES * s.net, chord: TIMES * s.chord })),
      diagonals: p.control!.diagonals.map((d) => ({ ...d, length: TIMES * d.length })),
      widths: p.control!.widths.map((w) => ({
        share: w.share,
        at: TIMES * w.at,
        net: TIMES * w.net,
        cut: TIMES * w.cut,
      })),
    },
    size: { length: TIMES * p.size.length, width: TIMES * p.size.width },
  }));
  facts.rolls = facts.rolls!.map((r) => ({
    ...r,
    width: TIMES * r.width,
    usableWidth: TIMES * r.usableWidth,
    length: TIMES * r.length,
    used: TIMES * r.used,
    lowerBound: TIMES * r.lowerBound,
    flaws: [],
    placements: r.placements.map((p) => ({ ...p, x: TIMES * p.x, y: TIMES * p.y })),
  }));
  return facts;
}

// A rig for the sample facts, made without any station: four adjusters at the corners, a mast with a stay, two edge cables, three
// stages. Forces and lengths are plausible, not in balance: fit for drawing, not for pulling.
import type { Facts } from "../../../src/core/records/facts.ts";
import type { FactsAdjuster, FactsMove, FactsStage } from "../../../src/core/records/rig.ts";
import type { Vec3 } from "../../../src/core/surface/surface.ts";

export interface RigOptions {
  issuable?: boolean;
  names?: Record<string, string>;
  /** More adjusters than the four corners: rows to overflow a sheet. */
  more?: number;
}

const CORNERS: Vec3[] = [
  [-4, -2.7, 3],
  [4, -2.7, 3],
  [4, 2.7, 3],
  [-4, 2.7, 3],
];

/** The sample's facts with cables, rig, as-built figures and tensioning. */
export function withRig(facts: Facts, options: RigOptions = {}): Facts {
  const name = (id: string) => options.names?.[id] ?? id;
  const corners = [...CORNERS];
  for (let k = 0; k < (options.more ?? 0); k++) {
    const a = (2 * Math.PI * k) / (options.more ?? 1);
    corners.push([6 * Math.cos(a), 5 * Math.sin(a), 3.5]);
  }
  const n = corners.length;
  const nodes: Vec3[] = [
    ...corners,
    ...corners.map(([x, y, z]): Vec3 => [1.2 * x, 1.2 * y, z - 0.3]),
    [0, 8, 6],
    [0, 8, 0],
  ];
  const adjusters = corners.map(
    (_, i): FactsAdjuster => ({
      id: name(`T${i + 1}`),
      nodes: [i, n + i],
      EA: 51450,
      slackLength: 0.999,
      pinLength: 0.9995,
      target: 40 + i,
      capacity: i === 1 ? null : 90,
      range: { shortest: 0.9, longest: 1.1 },
      perTurn: 6,
      anchor: i < 2 ? `A${i + 1}` : name("E1"),
      turnbuckle: "open-body-m24",
      ...(i === 0 ? { thread: 24 } : {}),
    }),
  );
  const cableIds = [name("E1"), "E3", "stay-1"];
  const forcesAt = (share: number) =>
    Object.fromEntries([
      ...adjusters.map((a) => [a.id, a.target * share]),
      ...cableIds.map((id, i) => [id, (30 + i) * share]),
      ["mast-1", -22 * share],
    ]);
  let step = 0;
  let pins = 1.05;
  const stage = (fraction: number, travel: number): FactsStage => {
    const moves: FactsMove[] = [];
    adjusters.forEach((a, i) => {
      if (i % 2 === 0) step++;
      // One adjuster is let out once, so that a lengthening stands on the sheets.
      const way = fraction === 1 && i === 3 ? -1 : 1;
      const expect = a.target * fraction * (fraction < 0.2 && i === 0 ? 0.001 : 1);
      moves.push({
        step,
        adjuster: a.id,
        from: pins,
        to: pins - (way * travel) / 1000,
        pinFrom: pins,
        pinTo: pins - (way * travel) / 1000,
        travel: way * travel,
        turns: (way * travel) / a.perTurn,
        expect,
        low: Math.max(0, expect - 0.05 * a.target),
        high: expect + 0.05 * a.target,
        greatest:
          fraction === 1
            ? { id: name("E1"), kN: 30, share: 0.94 }
            : { id: name("T1"), kN: expect, share: fraction / 2 },
      });
    });
    pins -= travel / 1000;
    return { name: `${100 * fraction} %`, fraction, moves, forces: forcesAt(fraction) };
  };
  const stages = [stage(0.1, 40), stage(0.6, 8), stage(1, 3)];
  return {
    ...facts,
    cables: cableIds.map((id, i) => ({
      id,
      edge: id === "stay-1" ? null : id,
      type: "1x19-stainless-16",
      EA: 19860,
      force: 30 + i,
      erectedLength: 8.4 + i,
      slackLength: 8.39 + i,
      cutLength: 8.37 + i,
      markAt: { force: 30 + i, temperature: 15 },
      minBreakingForce: i === 1 ? null : 58,
      utilisation: i === 1 ? null : 0.52,
      stations:
        i === 0
          ? [
              { at: 2.4321, for: name("S1") },
              { at: 5.1, for: name("S2") },
            ]
          : [],
    })),
    rig: {
      nodes,
      fixed: corners.map((_, i) => n + i),
      cloth: [],
      cables: [{ id: "stay-1", nodes: [2 * n, n], EA: 19860, slackLengths: [8] }],
      struts: [{ id: "mast-1", nodes: [2 * n + 1, 2 * n], EA: 200000, slackLength: 6 }],
      adjusters,
    },
    tensioning: {
      referenceTemperature: 15,
      stages,
      temperatureTable: [-5, 5, 15, 25, 35].map((temperature) => ({
        temperature,
        forces: forcesAt(1 - 0.01 * (temperature - 15)),
      })),
      readingError: 0.05,
      limit: 0.55,
      issuable: options.issuable ?? false,
    },
  };
}

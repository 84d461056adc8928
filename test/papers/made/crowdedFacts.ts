// The sample with more of everything, to see what overflows: many sides, odd shapes and sizes, two dozen findings of many words.

import type { Facts, FactsPanel, Vec2 } from "../../../src/core/records/facts.ts";
import { HOSTILE, sampleFacts } from "./sampleFacts.ts";
import { withControl } from "./withControl.ts";

const longText =
  "A caution of many words that does not end where one would wish it to end, with 12.5 kN/m, and on and on. ".repeat(6);

/** Sides, findings, panels of odd shape and size beyond the sample. */
export function crowded(): Facts {
  const facts = sampleFacts({ names: HOSTILE });
  const many = facts.panels![1]!;
  const side = many.sides[2]!;
  const pieces = Array.from({ length: 12 }, (_, i) => ({
    ...side,
    id: `T${i + 1}`,
    netFrom: side.netFrom + 2 * i,
    netTo: side.netFrom + 2 * (i + 1),
    vertices: side.vertices.slice(2 * i, 2 * i + 3),
    lengthFlat: side.lengthFlat / 12,
    lengthErected: side.lengthErected / 12,
  }));
  many.sides = [many.sides[0]!, many.sides[1]!, ...pieces, many.sides[3]!];
  const gore = (id: string, length: number, width: number): FactsPanel => {
    const net: Vec2[] = [
      [0, 0],
      [length, -width / 2],
      [length, width / 2],
    ];
    const plan = [
      { kind: "seam", id: "S1", vertices: [0, 1], netFrom: 0, netTo: 1 },
      { kind: "clamped", id: "E2", vertices: [1, 2], netFrom: 1, netTo: 2 },
      { kind: "free", id: "E9", vertices: [2, 0], netFrom: 2, netTo: 0 },
    ] as const;
    return {
      ...many,
      id,
      erected: net.map(([x, y]) => [x / 1000, y / 1000 + 9, 0]),
      flat: net,
      triangles: [[0, 1, 2]],
      axis: { from: [0], to: [1, 2], turn: 0 },
      net,
      cut: net,
      sides: plan.map((s) => ({
        ...s,
        vertices: [...s.vertices],
        lengthErected: length / 1000,
        lengthFlat: length,
        allowance: 0,
      })),
      marks: [],
      decompensated: [],
      size: { length, width },
    };
  };
  facts.panels!.push(gore("tiny", 300, 40), gore("huge", 61234.5, 2900), gore("tall", 900, 9000));
  facts.panels = facts.panels!.map(withControl);
  for (let i = 0; i < 24; i++) {
    facts.findings.push({
      code: `code-number-${i}`,
      level: i % 3 === 0 ? "stop" : i % 3 === 1 ? "caution" : "note",
      station: "panels",
      where: i % 2 === 0 ? many.id : Array.from({ length: 40 }, (_, k) => `vertex ${k * 1000}`),
      value: i % 2 === 0 ? 123456.789 : "a value in words that is rather long for its column",
      limit: 0.00001234,
      text: i === 7 ? longText.repeat(8) : longText,
      remedy: "Averylongwordwithoutanyspacethatmustbebrokensomewhereifitisnottoleaveitscolumnentirely ".repeat(2),
      basis: "own argument",
    });
    facts.checks.push({ station: "seams", text: longText.slice(0, 150), value: i, limit: "none", holds: i % 5 > 0 });
  }
  return facts;
}

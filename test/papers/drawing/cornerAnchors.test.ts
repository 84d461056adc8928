import { describe, expect, test } from "vitest";
import { cornerAnchors, patchPlace } from "../../../src/core/papers/drawing/cornerAnchors.ts";
import type { FactsPiece } from "../../../src/core/records/facts.ts";
import { sampleFacts } from "../made/sampleFacts.ts";

describe("corners at anchors", () => {
  const facts = sampleFacts({ stop: false });
  const [first, middle, last] = facts.panels!;

  test("the corner that hangs from an anchor carries its name, all others none, whichever way a side lists its vertices", () => {
    expect(cornerAnchors(facts, first!)).toEqual(["A1", null, null, null]);
    expect(cornerAnchors(facts, middle!)).toEqual([null, null, null, null]);
    expect(cornerAnchors(facts, last!)).toEqual([null, null, null, "A2"]);
    const turned = { ...first!, sides: first!.sides.map((s) => ({ ...s, vertices: [...s.vertices].reverse() })) };
    expect(cornerAnchors(facts, turned)).toEqual(["A1", null, null, null]);
    const { form: _, ...bare } = facts;
    expect(cornerAnchors(bare, first!)).toEqual([null, null, null, null]);
  });

  test("a patch is told by panel and corner; other cloth and one whose panel is not there by nothing", () => {
    const piece: FactsPiece = { ...facts.pieces![0]!, id: "A2-patch-P3", kind: "patch", for: "A2" };
    expect(patchPlace(facts, piece)).toBe("C4 of P3");
    expect(patchPlace(facts, { ...piece, id: "A2-patch-P9" })).toBeNull();
    expect(patchPlace(facts, { ...piece, kind: "strip" })).toBeNull();
  });
});

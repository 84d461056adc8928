// A seam's end slid by keys along the edges of a form, whose lengths are counted by hand; no browser.
import { describe, expect, it } from "vitest";
import type { FactsForm } from "../../src/core/records/facts.ts";
import { slideAlong } from "../../src/page/store/seamEnds.ts";

/** A frame of 6 x 4 m, its north edge drawn the other way round, and a ring of 2 m that meets no other edge. */
const form = {
  edges: [
    { id: "south", vertices: [0, 1], length: 6 },
    { id: "east", vertices: [1, 2], length: 4 },
    { id: "north", vertices: [3, 2], length: 6 },
    { id: "ring", vertices: [7, 8, 9, 7], length: 2 },
    { id: "tail", vertices: [20, 21], length: 1 },
  ],
} as unknown as FactsForm;

describe("slid along", () => {
  it.each([
    ["within an edge", "south", 0.5, 0.6, "south", 0.6],
    ["back within an edge", "south", 0.5, -0.6, "south", 0.4],
    ["it stops where the edge ends", "south", 0.95, 0.6, "south", 1],
    ["and goes on past the corner", "south", 1, 1, "east", 0.25],
    ["from there back where it came from", "east", 0, -0.6, "south", 0.9],
    ["onto an edge that runs the other way", "east", 1, 0.6, "north", 0.9],
    ["and back from that one", "north", 1, 1, "east", 0.75],
    ["no farther than the next edge is long", "south", 1, 99, "east", 1],
    ["round a closed edge", "ring", 1, 0.5, "ring", 0.25],
    ["round a closed edge the other way", "ring", 0, -0.5, "ring", 0.75],
    ["nowhere past an end that meets no edge", "tail", 1, 0.1, "tail", 1],
    ["nowhere on an edge that is not there", "none", 0.3, 0.1, "none", 0.3],
  ])("%s", (_, edge, at, by, to, share) => {
    const place = slideAlong(form, { edge, at }, by);
    expect(place.edge).toBe(to);
    expect(place.at).toBeCloseTo(share, 12);
  });
});

// Where names stand: within the cloth on the flat views, clear of grips, of each other and of the sides over the surface; names too long
// for their place; lines of a chart that bear several; rows of a roll; round numbers on axes.
import { describe, expect, it } from "vitest";
import type { Vec2 } from "../../src/core/records/facts.ts";
import { axisSteps } from "../../src/page/flat/axisSteps.ts";
import { joinTraces } from "../../src/page/flat/joinTraces.ts";
import { namePlace } from "../../src/page/flat/namePlace.ts";
import { rollRows } from "../../src/page/flat/rollRows.ts";
import { keepTogether } from "../../src/page/parts/figure.ts";
import { shortName } from "../../src/page/parts/shortName.ts";
import { findPlaces } from "../../src/page/solid/placeNames.ts";

/** A panel along a hollow edge: a strip of 12 by 2.6 m whose upper side hangs down by 1.6 m in the middle. */
const HOLLOW: Vec2[] = [
  [0, 2600],
  [700, 0],
  [11_300, 0],
  [12_000, 2600],
  ...Array.from({ length: 39 }, (_, i): Vec2 => {
    const t = (i + 1) / 40;
    return [12_000 * (1 - t), 2600 - 4 * 1600 * t * (1 - t)];
  }),
];

describe("names on cloth", () => {
  it("the box's middle of a panel with a hollow edge lies off its cloth, its name on it", () => {
    const { at, room } = namePlace(HOLLOW);
    // at half of its length the cloth reaches from 0 to 1000 mm; the middle of its box is at 1300
    expect(at[0]).toBeCloseTo(6000, 6);
    expect(at[1]).toBeCloseTo(500, 6);
    expect(room).toBeCloseTo(1000, 6);
  });

  it("upside down it is the same place seen from there", () => {
    const turned = HOLLOW.map(([x, y]): Vec2 => [-x, -y]);
    expect(namePlace(turned).at.map(Math.round)).toEqual([-6000, -500]);
  });

  it("gives way to a mark where there is room, and stands in the middle where there is none", () => {
    const arrow: Vec2[] = [
      [5800, 500],
      [6200, 500],
    ];
    const { at } = namePlace(HOLLOW, { runs: [arrow], name: "P1", height: 200 });
    expect(Math.abs(at[1] - 500)).toBeGreaterThan(120);
    expect(at[1]).toBeGreaterThan(0);
    expect(at[1]).toBeLessThan(1000);
    const all: Vec2[] = [
      [0, 0],
      [12_000, 2600],
    ];
    expect(namePlace(HOLLOW, { runs: [all], name: "P1", height: 200 }).at[1]).toBeCloseTo(500, 6);
  });
});

/** Boxes of names as they are drawn, half sizes in px. */
const boxOf = (id: string, { x, y }: { x: number; y: number }) => ({ x, y, w: 3.6 * id.length + 5, h: 9 });

describe("names over the surface", () => {
  it("none lies over a grip or another name, however dense, and each stays near its place", () => {
    const ids = Array.from({ length: 60 }, (_, i) => `anchor-${i}`);
    const names = ids.map((id, i) => ({ id, x: 20 * (i % 12) * 3, y: 25 * Math.floor(i / 12) }));
    const spots = names.filter((_, i) => i % 3 === 0).map(({ x, y }) => ({ x: x + 3, y: y - 2 }));
    const places = findPlaces(names, spots);
    const boxes = places.flatMap((p, i) => (p === null ? [] : [boxOf(ids[i], p)]));
    expect(boxes.length).toBeGreaterThan(10);
    boxes.forEach((a, i) => {
      for (const b of boxes.slice(i + 1))
        expect(Math.abs(a.x - b.x) >= a.w + b.w || Math.abs(a.y - b.y) >= a.h + b.h).toBe(true);
      for (const s of spots) expect(Math.abs(a.x - s.x) >= a.w + 10 || Math.abs(a.y - s.y) >= a.h + 10).toBe(true);
    });
    places.forEach((p, i) => {
      if (p !== null) expect(Math.hypot(p.x - names[i].x, p.y - names[i].y)).toBeLessThan(120);
    });
  });

  it("a name nothing is in the way of stands at its place; under a grip it gives way up", () => {
    expect(findPlaces([{ id: "A1", x: 50, y: 60 }], [])).toEqual([{ x: 50, y: 60 }]);
    expect(findPlaces([{ id: "A1", x: 50, y: 60 }], [{ x: 50, y: 60 }])).toEqual([{ x: 50, y: 40 }]);
  });
});

describe("names too long for their place", () => {
  it("one that would be cut off at a side of the drawing is held in it; one turned out of sight is not brought back", () => {
    const id = "corner-north-west-by-the-";
    const half = 3.6 * id.length + 5;
    expect(findPlaces([{ id, x: 20, y: 60 }], [], 400)).toEqual([{ x: half, y: 60 }]);
    expect(findPlaces([{ id, x: 390, y: 60 }], [], 400)).toEqual([{ x: 400 - half, y: 60 }]);
    expect(findPlaces([{ id, x: 200, y: 60 }], [], 400)).toEqual([{ x: 200, y: 60 }]);
    expect(findPlaces([{ id, x: -30, y: 60 }], [], 400)).toEqual([{ x: -30, y: 60 }]);
    // giving way sideways neither
    const ways = [0, -1, 1].map((v) => ({ x: 390, y: 60 + 20 * v }));
    expect(findPlaces([{ id, x: 390, y: 60 }], ways, 400)).toEqual([{ x: 400 - half - (half + 11), y: 60 }]);
  });

  it("beginning and end stay, letters made of several signs whole", () => {
    expect(shortName("corner-ne", 9)).toBe("corner-ne");
    expect(shortName("T4-north-west-turnbuckle-60", 11)).toBe("T4-no…le-60");
    expect(shortName("T4-north-west-turnbuckle-61", 10)).toBe("T4-no…e-61");
    // e with a combining acute accent is one letter
    expect(shortName("e\u0301e\u0301e\u0301e\u0301", 4)).toBe("e\u0301e\u0301e\u0301e\u0301");
    expect(shortName("e\u0301e\u0301e\u0301e\u0301e\u0301", 4)).toBe("e\u0301e\u0301…e\u0301");
  });
});

describe("lines of a chart", () => {
  it("those nowhere further apart than a line is thick are one; one that leaves another at a single step is not", () => {
    const lines = [
      { id: "T1", ys: [10, 20, 30] },
      { id: "T2", ys: [10, 40, 30] },
      { id: "T3", ys: [11, 21, 31] },
      { id: "T4", ys: [10, 20, 33] },
    ];
    expect(joinTraces(lines)).toEqual([
      { ids: ["T1", "T3"], ys: [10, 20, 30] },
      { ids: ["T2"], ys: [10, 40, 30] },
      { ids: ["T4"], ys: [10, 20, 33] },
    ]);
  });
});

describe("rows of a roll", () => {
  it.each([
    ["a broad roll", 48_000, 2500],
    ["1.9 km of a narrow one", 1_880_000, 420],
  ])("%s: they follow each other without a gap, and the cloth is more than a line", (_, used, width) => {
    const rows = rollRows(used, width, 0.75);
    expect(rows.map((r) => r.from)).toEqual([0, ...rows.slice(0, -1).map((r) => r.to)]);
    expect(rows[0].to * rows.length).toBeGreaterThanOrEqual(used);
    // on a stage 800 px wide and 600 high
    const scale = Math.min(800 / rows[0].to, 600 / (rows.length * 1.3 * width));
    expect(width * scale).toBeGreaterThan(6);
  });
});

describe("numbers", () => {
  it.each([
    [71, [0, 20, 40, 60]],
    [66.9, [0, 20, 40, 60]],
    [6, [0, 1, 2, 3, 4, 5, 6]],
    [0.9, [0, 0.2, 0.4, 0.6, 0.8]],
    [1180, [0, 200, 400, 600, 800, 1000]],
  ])("an axis up to %d is ruled at round numbers", (most, ruled) => {
    expect(axisSteps(most).map((v) => Number(v.toPrecision(12)))).toEqual(ruled);
  });

  it("no number is parted from its unit, and words are left as they are", () => {
    expect(keepTogether("from a ring of 3.6 m down to three piers")).toBe(
      "from a ring of 3.6\u00a0m down to three piers",
    );
    expect(keepTogether("1.0 % off of 5.0 allowed; rms error 0.19")).toBe(
      "1.0\u00a0% off of 5.0 allowed; rms error\u00a00.19",
    );
    expect(keepTogether("x −29.44, y 28.83, z 9.40")).toBe("x\u00a0−29.44, y\u00a028.83, z\u00a09.40");
    expect(keepTogether("13 others need more strips")).toBe("13 others need more strips");
  });
});

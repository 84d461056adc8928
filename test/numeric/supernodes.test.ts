import fc from "fast-check";
import { expect, test } from "vitest";
import { buildNodeGraph } from "../../src/core/numeric/graph.ts";
import { orderNodes } from "../../src/core/numeric/order.ts";
import { buildPattern } from "../../src/core/numeric/pattern.ts";
import { buildRandom, drawInteger } from "../../src/core/numeric/random.ts";
import { buildSupernodes } from "../../src/core/numeric/supernodes.ts";

function analyse(n: number, elements: number[][]) {
  const start = new Uint32Array(elements.length + 1);
  elements.forEach((e, k) => {
    start[k + 1] = start[k] + e.length;
  });
  const { pattern } = buildPattern(n, start, Int32Array.from(elements.flat()));
  const graph = buildNodeGraph(pattern);
  const nodeOrder = orderNodes(graph);
  return { pattern, graph, nodeOrder, supernodes: buildSupernodes(graph, nodeOrder) };
}

/** Rows of every column of the factor by eliminating on sets: the definition. */
function eliminate(n: number, elements: number[][], order: ArrayLike<number>): Set<number>[] {
  const position = new Map(Array.from(order, (v, k) => [v, k]));
  const rows = Array.from({ length: n }, () => new Set<number>());
  for (const e of elements)
    for (const a of e)
      for (const b of e) {
        const [i, j] = [position.get(a) as number, position.get(b) as number];
        if (i > j) rows[j].add(i);
      }
  for (let k = 0; k < n; k++) {
    const below = [...rows[k]].sort((a, b) => a - b);
    for (const i of below.slice(1)) rows[below[0]].add(i);
  }
  return rows;
}

const shape = fc.record({
  seed: fc.integer({ min: 0, max: 1e6 }),
  n: fc.integer({ min: 1, max: 60 }),
  elements: fc.integer({ min: 0, max: 80 }),
  size: fc.integer({ min: 1, max: 5 }),
});

function drawElements(seed: number, n: number, count: number, size: number): number[][] {
  const random = buildRandom(seed);
  return Array.from({ length: count }, () => [
    ...new Set(Array.from({ length: 1 + drawInteger(random, size) }, () => drawInteger(random, n))),
  ]);
}

test("the rows hold every filled entry, ascending; the parent is where the first row lies (fast-check seed 41)", () => {
  fc.assert(
    fc.property(shape, ({ seed, n, elements, size }) => {
      const list = drawElements(seed, n, elements, size);
      const { nS, order, first, parent, row, rowStart } = analyse(n, list).supernodes;
      expect(Array.from(order).sort((a, b) => a - b)).toEqual(Array.from({ length: n }, (_, i) => i));
      expect(first[nS]).toBe(n);
      const filled = eliminate(n, list, order);
      for (let s = 0; s < nS; s++) {
        const own = Array.from(row.subarray(rowStart[s], rowStart[s + 1]));
        expect(own).toEqual([...new Set(own)].sort((a, b) => a - b));
        expect(own.length === 0 || own[0] >= first[s + 1]).toBe(true);
        // nothing below the last column that is not really filled from some column of the supernode
        const reached = new Set<number>();
        for (let k = first[s]; k < first[s + 1]; k++) for (const i of filled[k]) if (i >= first[s + 1]) reached.add(i);
        expect(own).toEqual([...reached].sort((a, b) => a - b));
        if (own.length === 0) expect(parent[s]).toBe(-1);
        else {
          expect(parent[s]).toBeGreaterThan(s);
          expect(own[0]).toBeGreaterThanOrEqual(first[parent[s]]);
          expect(own[0]).toBeLessThan(first[parent[s] + 1]);
        }
      }
    }),
    { seed: 41, numRuns: 300 },
  );
});

test("twins are joined: three unknowns a vertex make one node, exact on random cliques (fast-check seed 42)", () => {
  fc.assert(
    fc.property(shape, ({ seed, n, elements, size }) => {
      const list = drawElements(seed, n, elements, size);
      const { graph } = analyse(
        3 * n,
        list.map((e) => e.flatMap((v) => [3 * v, 3 * v + 1, 3 * v + 2])),
      );
      const single = analyse(n, list).graph;
      const inSome = new Set(list.flat());
      // unknowns in no element have no neighbour, so their three stay apart
      expect(graph.nNodes).toBe(single.nNodes + 2 * (n - inSome.size));
      const near = Array.from({ length: n }, (_, v) => new Set(list.filter((e) => e.includes(v)).flat()).add(v));
      const key = (v: number) => [...near[v]].sort((a, b) => a - b).join(",");
      expect(single.nNodes).toBe(new Set(Array.from({ length: n }, (_, v) => key(v))).size);
    }),
    { seed: 42, numRuns: 200 },
  );
});

test("minimum degree leaves no fill in a tree, whatever its numbering (seeds 0 … 19)", () => {
  // a tree has a perfect elimination order, leaves first (A. George, J. W. Liu 1981, chapter 5, from memory)
  for (let seed = 0; seed < 20; seed++) {
    const random = buildRandom(seed);
    const n = 300;
    const name = Array.from({ length: n }, (_, i) => i);
    for (let i = n - 1; i > 0; i--) {
      const j = drawInteger(random, i + 1);
      [name[i], name[j]] = [name[j], name[i]];
    }
    const list = Array.from({ length: n - 1 }, (_, i) => [name[i + 1], name[drawInteger(random, i + 1)]]);
    const { graph, nodeOrder } = analyse(n, list);
    const order = Array.from(nodeOrder, (v) => graph.member[graph.memberStart[v]]);
    const fill = eliminate(n, list, order).reduce((s, rows) => s + rows.size, 0);
    expect(fill).toBe(n - 1);
  }
});

test("a node that touches all others is eliminated last", () => {
  const n = 2000;
  const chain = Array.from({ length: n - 2 }, (_, i) => [i, i + 1]);
  const { graph, nodeOrder } = analyse(n, [...chain, ...Array.from({ length: n - 1 }, (_, i) => [i, n - 1])]);
  expect(graph.member[graph.memberStart[nodeOrder[graph.nNodes - 1]]]).toBe(n - 1);
});

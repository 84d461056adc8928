// Large plain values in slices: read in one go, a plan of ten thousand triangles would hold the page up.

/** Items that come next into the array at a path. */
export interface Slice {
  path: (string | number)[];
  items: unknown[];
}

/** A value whose large arrays are empty, and what they hold, in the order it is to be put in. */
export interface Carved<T> {
  bones: T;
  slices: Slice[];
}

/** What a slice may hold: numbers and words count one, arrays and records three. */
const FULL = 12_000;

function weigh(value: unknown): number {
  if (typeof value !== "object" || value === null) return 1;
  let sum = 3;
  for (const inner of Object.values(value)) sum += weigh(inner);
  return sum;
}

function carveInto(slices: Slice[], path: Slice["path"], value: unknown, full: number): unknown {
  if (typeof value !== "object" || value === null || weigh(value) <= full) return value;
  if (!Array.isArray(value)) {
    return Object.fromEntries(Object.entries(value).map(([k, v]) => [k, carveInto(slices, [...path, k], v, full)]));
  }
  let open: Slice = { path, items: [] };
  let weight = 0;
  slices.push(open);
  value.forEach((item, i) => {
    const own = weigh(item);
    if (open.items.length > 0 && weight + own > full) {
      open = { path, items: [] };
      weight = 0;
      slices.push(open);
    }
    // what is left out of an item is put in once the item itself is
    open.items.push(carveInto(slices, [...path, i], item, full));
    weight += own;
    if (own > full) weight = Number.POSITIVE_INFINITY;
  });
  return [];
}

/** Takes a plain value (records, arrays, numbers, words) apart. The value itself is left as it is. */
export function carve<T>(value: T, full = FULL): Carved<T> {
  const slices: Slice[] = [];
  return { bones: carveInto(slices, [], value, full) as T, slices };
}

/** Puts a value together again; the bones are its own and are filled. */
export function joinInPlace<T>({ bones, slices }: Carved<T>): T {
  for (const { path, items } of slices) {
    let at: unknown = bones;
    for (const step of path) at = (at as Record<string | number, unknown>)[step];
    for (const item of items) (at as unknown[]).push(item);
  }
  return bones;
}

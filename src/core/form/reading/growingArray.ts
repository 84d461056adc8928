// Typed arrays that grow while a file is read. Nothing else.

/** Reals appended one by one; `take` hands out exactly those. */
export interface GrowingReals {
  data: Float64Array<ArrayBuffer>;
  length: number;
}

/** Indices appended one by one. */
export interface GrowingIndices {
  data: Uint32Array<ArrayBuffer>;
  length: number;
}

/** An empty list of reals. */
export function createReals(): GrowingReals {
  return { data: new Float64Array(1024), length: 0 };
}

/** An empty list of indices. */
export function createIndices(): GrowingIndices {
  return { data: new Uint32Array(1024), length: 0 };
}

/** Appends a real; the room doubles when it is used up. */
export function pushRealInPlace(list: GrowingReals, value: number): void {
  if (list.length === list.data.length) {
    const wider = new Float64Array(2 * list.length);
    wider.set(list.data);
    list.data = wider;
  }
  list.data[list.length++] = value;
}

/** Appends an index. */
export function pushIndexInPlace(list: GrowingIndices, value: number): void {
  if (list.length === list.data.length) {
    const wider = new Uint32Array(2 * list.length);
    wider.set(list.data);
    list.data = wider;
  }
  list.data[list.length++] = value;
}

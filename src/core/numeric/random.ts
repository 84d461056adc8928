// A seeded generator of uniform numbers: the same seed gives the same numbers on every engine. Not for secrets.

/** Draws a number in [0, 1), a multiple of 2^-32. */
export type Random = () => number;

/** The four 32-bit words of a generator's state, not all zero. */
export type RandomState = [number, number, number, number];

/**
 * Generator from a state; the state is copied.
 * @source D. Blackman, S. Vigna, Scrambled linear pseudorandom number generators, ACM Trans. Math. Softw. 47(4), 2021:
 *   xoshiro128** 1.1 (given to the public domain by its authors)
 */
export function buildRandomFromState(state: RandomState): Random {
  let [a, b, c, d] = state;
  return () => {
    const scrambled = Math.imul(b, 5);
    const word = Math.imul((scrambled << 7) | (scrambled >>> 25), 9) >>> 0;
    const t = b << 9;
    c ^= a;
    d ^= b;
    b ^= c;
    a ^= d;
    c ^= t;
    d = (d << 11) | (d >>> 21);
    return word * 2 ** -32;
  };
}

/**
 * Generator from a seed; seeds are taken modulo 2^32. Close seeds give unrelated numbers.
 * @source seed spread over the state by the 32-bit finaliser of MurmurHash3 (A. Appleby, public domain)
 */
export function buildRandom(seed: number): Random {
  let counter = seed >>> 0;
  const nextWord = () => {
    counter = (counter + 0x9e3779b9) >>> 0;
    let h = Math.imul(counter ^ (counter >>> 16), 0x85ebca6b);
    h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
    return (h ^ (h >>> 16)) >>> 0;
  };
  return buildRandomFromState([nextWord(), nextWord(), nextWord(), nextWord()]);
}

/** A whole number 0 … n-1, each alike but for a bias of at most n·2^-32. */
export function drawInteger(random: Random, n: number): number {
  return Math.floor(random() * n);
}

// SHA-256 in plain TypeScript, so that page and command line stamp the same revision. Not for secrets.
// Source: FIPS 180-4, sections 4.1.2, 4.2.2, 5.1.1, 5.3.3 and 6.2; names as there.

const K = buildRoundConstants();

/**
 * SHA-256 of some bytes as 64 hexadecimal digits, lower case.
 * @source FIPS 180-4, 6.2.2
 */
export function measureSha256(bytes: Uint8Array): string {
  const h = new Uint32Array([
    0x6a09e667, 0xbb67ae85, 0x3c6ef372, 0xa54ff53a, 0x510e527f, 0x9b05688c, 0x1f83d9ab, 0x5be0cd19,
  ]);
  const w = new Uint32Array(64);
  const whole = bytes.length - (bytes.length % 64);
  for (let at = 0; at < whole; at += 64) addBlockInPlace(h, w, bytes, at);
  const tail = padTail(bytes, whole);
  for (let at = 0; at < tail.length; at += 64) addBlockInPlace(h, w, tail, at);
  return Array.from(h, (word) => word.toString(16).padStart(8, "0")).join("");
}

/** Cube roots of the first 64 primes, 32 bits of the fraction (4.2.2), in integers so that no engine rounds otherwise. */
function buildRoundConstants(): Uint32Array<ArrayBuffer> {
  const k = new Uint32Array(64);
  let n = 0;
  for (let p = 2n; n < 64; p++) {
    let prime = true;
    for (let d = 2n; d * d <= p; d++) if (p % d === 0n) prime = false;
    if (!prime) continue;
    // Largest r with r³ ≤ p·2⁹⁶, bit by bit from the top.
    let r = 0n;
    for (let bit = 1n << 35n; bit > 0n; bit >>= 1n) if ((r + bit) ** 3n <= p << 96n) r += bit;
    k[n++] = Number(r & 0xffffffffn);
  }
  return k;
}

/** Rest of the message, a one bit, zeros, and the length in bits as 64 bits (5.1.1). */
function padTail(bytes: Uint8Array, whole: number): Uint8Array {
  const rest = bytes.length - whole;
  const tail = new Uint8Array(rest + 9 <= 64 ? 64 : 128);
  tail.set(bytes.subarray(whole));
  tail[rest] = 0x80;
  const view = new DataView(tail.buffer);
  view.setUint32(tail.length - 8, Math.floor(bytes.length / 0x20000000));
  view.setUint32(tail.length - 4, (bytes.length * 8) >>> 0);
  return tail;
}

function rotr(x: number, n: number): number {
  return (x >>> n) | (x << (32 - n));
}

function addBlockInPlace(h: Uint32Array, w: Uint32Array, m: Uint8Array, at: number): void {
  for (let t = 0; t < 16; t++) {
    const i = at + 4 * t;
    w[t] = (m[i] << 24) | (m[i + 1] << 16) | (m[i + 2] << 8) | m[i + 3];
  }
  for (let t = 16; t < 64; t++) {
    const s0 = rotr(w[t - 15], 7) ^ rotr(w[t - 15], 18) ^ (w[t - 15] >>> 3);
    const s1 = rotr(w[t - 2], 17) ^ rotr(w[t - 2], 19) ^ (w[t - 2] >>> 10);
    w[t] = (s1 + w[t - 7] + s0 + w[t - 16]) | 0;
  }
  let [a, b, c, d, e, f, g, last] = h;
  for (let t = 0; t < 64; t++) {
    const S1 = rotr(e, 6) ^ rotr(e, 11) ^ rotr(e, 25);
    const t1 = (last + S1 + ((e & f) ^ (~e & g)) + K[t] + w[t]) | 0;
    const t2 = ((rotr(a, 2) ^ rotr(a, 13) ^ rotr(a, 22)) + ((a & b) ^ (a & c) ^ (b & c))) | 0;
    last = g;
    g = f;
    f = e;
    e = (d + t1) | 0;
    d = c;
    c = b;
    b = a;
    a = (t1 + t2) | 0;
  }
  const sums = [a, b, c, d, e, f, g, last];
  for (let i = 0; i < 8; i++) h[i] = (h[i] + sums[i]) | 0;
}

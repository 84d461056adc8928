// Decimal numbers straight from character codes, rounded as the language's own reader does. Knows no file format.

const POWERS = Array.from({ length: 23 }, (_, i) => 10 ** i);

/** Where reading stands: `at` moves behind what was read. */
export interface TextCursor {
  text: string;
  at: number;
  end: number;
}

/**
 * The number that starts at the cursor, NaN where there is none; the cursor stops behind its last digit.
 * Mantissa below 2^53 and power of ten up to 22: one exact operation, correctly rounded. All else goes through Number().
 * @source W. D. Clinger, How to read floating point numbers accurately, PLDI 1990, section 3 (the fast case)
 */
export function readNumberInPlace(cursor: TextCursor): number {
  const { text, end } = cursor;
  const start = cursor.at;
  let i = start;
  const sign = text.charCodeAt(i);
  if (i < end && (sign === 45 || sign === 43)) i++;
  let mantissa = 0;
  let digits = 0;
  let scale = 0;
  for (let dot = false; i < end; i++) {
    const d = text.charCodeAt(i) - 48;
    if (d >= 0 && d <= 9) {
      mantissa = 10 * mantissa + d;
      digits++;
      if (dot) scale--;
    } else if (d === -2 && !dot) dot = true;
    else break;
  }
  if (digits === 0) return Number.NaN;
  const e = text.charCodeAt(i) | 32;
  if (i < end && e === 101) {
    let k = i + 1;
    const down = text.charCodeAt(k) === 45;
    if (down || text.charCodeAt(k) === 43) k++;
    let power = 0;
    let seen = 0;
    for (; k < end; k++) {
      const d = text.charCodeAt(k) - 48;
      if (d < 0 || d > 9) break;
      power = Math.min(10 * power + d, 100000);
      seen++;
    }
    if (seen > 0) {
      scale += down ? -power : power;
      i = k;
    }
  }
  cursor.at = i;
  if (mantissa > Number.MAX_SAFE_INTEGER || scale > 22 || scale < -22) return Number(text.slice(start, i));
  const value = scale < 0 ? mantissa / POWERS[-scale] : mantissa * POWERS[scale];
  return sign === 45 ? -value : value;
}

// Numbers as a person reads them: as many digits as matter, a real minus sign, powers of ten written out.

const RAISED = "⁰¹²³⁴⁵⁶⁷⁸⁹";

function raise(power: number): string {
  const digits = [...String(Math.abs(power))].map((d) => RAISED[Number(d)]).join("");
  return `${power < 0 ? "⁻" : ""}${digits}`;
}

/** Three significant digits, or as many decimals as are asked for. */
export function figure(value: number, decimals?: number): string {
  if (!Number.isFinite(value)) return "–";
  const size = Math.abs(value);
  if (decimals === undefined && size !== 0 && (size < 1e-3 || size >= 1e6)) {
    const [mantissa, power] = value.toExponential(1).split("e");
    return `${mantissa.replace("-", "−")}·10${raise(Number(power))}`;
  }
  const text = decimals === undefined ? String(Number(value.toPrecision(3))) : value.toFixed(decimals);
  return text.replace("-", "−");
}

/** A line of words in which no number stands parted from its unit or from the letter it belongs to at a line's end. */
export function keepTogether(words: string): string {
  return words
    .replace(/(\d) (?=(?:[a-zA-Zµ]{1,2}|mm2|kN\/m|kg\/m|m\/s|[%°]C?|m[²³])(?![\w/]))/g, "$1\u00a0")
    .replace(/\b([xyz]) (?=[−\d])/g, "$1\u00a0")
    .replace(/(rms error|limit) (?=\d)/g, "$1\u00a0");
}

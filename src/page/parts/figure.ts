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

// How measures stand on the sheets: metric, or feet and inches to the sixteenth, kip and lbf/ft where the job asks for it.
// Converted here and nowhere else; lists as CSV and cut files stay metric, their heads say so.
// Factors: NIST SP 811 (2008), appendix B.8: inch, foot, pound and pound-force are exact by definition.
import type { FactsJob } from "../../records/facts.ts";
import { decimal } from "./decimal.ts";

/** One kind of measure: its unit as it stands in a head, and a value of the facts in it. */
export interface Measure {
  unit: string;
  of: (value: number) => string;
  /** The value with its unit, bound. */
  whole: (value: number) => string;
}

export interface PaperUnits {
  /** For the title block. */
  words: string;
  /** m in: on the form, to the millimetre. */
  span: Measure;
  /** m in: between pins, as a tape reads. */
  pins: Measure;
  /** mm in: on the flat cloth, as a tape reads. */
  flat: Measure;
  /** mm in: the way a screw makes. */
  travel: Measure;
  /** mm in: what two lengths differ by, finer than a tape shows. */
  fine: Measure;
  /** kN in. */
  force: Measure;
  /** kN in: stiffness. */
  stiffness: Measure;
  /** kN/m in. */
  lineForce: Measure;
  /** kN·m in. */
  torque: Measure;
  /** kg in. */
  mass: Measure;
  /** m² in. */
  area: Measure;
  /** degC in. */
  temperature: Measure;
  /** m/s in. */
  speed: Measure;
}

const INCH = 25.4;
/** kN */
const KIP = 4.4482216152605;
const POUND = 0.45359237;
const SQUARE_FOOT = 0.3048 ** 2;
const MILE_PER_HOUR = 0.44704;

/** Never broken over lines. */
const BOUND = "\u00a0";

/** Feet, inches and sixteenths, the fraction in its lowest terms: 3' 4 1/2", its parts bound. @units mm in */
export function feetAndInches(mm: number): string {
  const sixteenths = Math.round((Math.abs(mm) / INCH) * 16);
  const sign = mm < 0 && sixteenths > 0 ? "-" : "";
  const feet = Math.floor(sixteenths / 192);
  const inches = Math.floor((sixteenths % 192) / 16);
  let [part, whole] = [sixteenths % 16, 16];
  while (part > 0 && part % 2 === 0) [part, whole] = [part / 2, whole / 2];
  const inch = part === 0 ? `${inches}` : inches === 0 ? `${part}/${whole}` : `${inches}${BOUND}${part}/${whole}`;
  return `${sign}${feet > 0 ? `${feet}'${BOUND}` : ""}${inch}"`;
}

function measure(unit: string, of: (value: number) => string): Measure {
  return { unit, of, whole: (value) => `${of(value)}${BOUND}${unit}` };
}

function plain(unit: string, decimals: number, factor = 1): Measure {
  return measure(unit, (value) => decimal(value * factor, decimals));
}

/** Feet and inches carry their units in their signs. @units of: m times `scale` in mm */
function tape(scale: number): Measure {
  const of = (value: number) => feetAndInches(value * scale);
  return { unit: "ft-in", of, whole: of };
}

const METRIC: PaperUnits = {
  words: "metric: mm flat, m on the form, kN",
  span: plain("m", 3),
  // Half a millimetre is what an eye takes off a tape.
  pins: measure("mm", (value) => decimal(Math.round(value * 2000) / 2, 1)),
  flat: plain("mm", 0),
  travel: plain("mm", 1),
  fine: plain("mm", 2),
  force: plain("kN", 1),
  stiffness: plain("kN", 0),
  lineForce: plain("kN/m", 2),
  torque: plain("N·m", 0, 1000),
  mass: plain("kg", 1),
  area: plain("m²", 2),
  temperature: plain("°C", 0),
  speed: plain("m/s", 1),
};

const IMPERIAL: PaperUnits = {
  words: "imperial: ft-in to 1/16, kip, lbf/ft",
  span: tape(1000),
  pins: tape(1000),
  flat: tape(1),
  travel: plain("in", 2, 1 / INCH),
  fine: plain("in", 3, 1 / INCH),
  force: plain("kip", 2, 1 / KIP),
  stiffness: plain("kip", 0, 1 / KIP),
  lineForce: plain("lbf/ft", 0, (1000 / KIP) * 0.3048),
  torque: plain("lbf·ft", 0, 1000 / KIP / 0.3048),
  mass: plain("lb", 1, 1 / POUND),
  area: plain("ft²", 1, 1 / SQUARE_FOOT),
  temperature: measure("°F", (value) => decimal(value * 1.8 + 32, 0)),
  speed: plain("mph", 0, 1 / MILE_PER_HOUR),
};

/** What a unit in running text is turned into, with its factor; temperatures have their own rule. */
const IN_TEXT: Readonly<Record<string, readonly [string, number]>> = {
  mm: ["in", 1 / INCH],
  m: ["ft", 1 / 0.3048],
  m2: ["ft²", 1 / SQUARE_FOOT],
  "m²": ["ft²", 1 / SQUARE_FOOT],
  "m/s": ["mph", 1 / MILE_PER_HOUR],
  kN: ["kip", 1 / KIP],
  "kN/m": ["lbf/ft", (1000 / KIP) * 0.3048],
  kg: ["lb", 1 / POUND],
  "kg/m2": ["lb/ft²", SQUARE_FOOT / POUND],
  "1/m²": ["1/ft²", SQUARE_FOOT],
};
const NUMBER = String.raw`[-−]?\d+(?:\.\d+)?`;
const QUANTITY = new RegExp(
  String.raw`(?<![\w.])(${NUMBER})(?:( to | and | or | x | × |/)(${NUMBER}))?[ \u00a0](mm|m2|m²|m/s|m|kN/m|kN|kg/m2|kg|1/m²|°C|degC)(?![\w²/·])`,
  "g",
);

function inText(number: string, unit: string): string {
  const value = Number(number.replace("−", "-"));
  if (unit === "°C" || unit === "degC") return decimal(value * 1.8 + 32, 0);
  const converted = value * IN_TEXT[unit][1];
  // As many figures as were given, three at least.
  const figures = Math.max(3, number.replace(/^[-−0.]+|\./g, "").length);
  return String(Number(converted.toPrecision(Math.min(figures, 12))));
}

/**
 * A sentence of a station as it stands on the sheets of the job. Stations judge in metric: an imperial sheet keeps what they said and
 * adds the imperial value of every quantity behind it, "3.2 mm [0.126 in]".
 */
export function unitsInText(job: FactsJob, text: string): string {
  if (job.units !== "imperial") return text;
  return text.replace(
    QUANTITY,
    (whole, first: string, between: string | undefined, second: string | undefined, unit: string) => {
      const name = unit === "°C" || unit === "degC" ? "°F" : IN_TEXT[unit][0];
      const rest = second === undefined ? "" : `${between}${inText(second, unit)}`;
      return `${whole} [${inText(first, unit)}${rest}${BOUND}${name}]`;
    },
  );
}

/** The measures of a job's sheets. */
export function paperUnits(job: FactsJob): PaperUnits {
  return job.units === "imperial" ? IMPERIAL : METRIC;
}

// The limits the engineer of the site has set, read from the job's papers.site: known keys in their own rows, others as they are.
// Nothing is assumed: what is not given stands as "not given: do not start".
import type { FactsJob } from "../../records/facts.ts";
import { paperUnits } from "./paperUnits.ts";
import { plainText } from "./plainText.ts";

export interface SiteLimit {
  what: string;
  value: string;
  given: boolean;
}

export const NOT_GIVEN = "not given: do not start";

/** Keys of papers.site that are read, each with what it means and the measure it is given in. */
const KNOWN: readonly { key: string; what: string; kind: "speed" | "temperature" | "share" | "text" }[] = [
  { key: "windMean", what: "Greatest mean wind (10 min), at the height of the roof", kind: "speed" },
  { key: "windGust", what: "Greatest gust, measured or forecast", kind: "speed" },
  { key: "temperatureLow", what: "Lowest temperature of air and cloth", kind: "temperature" },
  { key: "temperatureHigh", what: "Highest temperature of air and cloth", kind: "temperature" },
  { key: "gaugeAccuracy", what: "Accuracy of the force gauge, share of the reading", kind: "share" },
  { key: "overnight", what: "State that may be left overnight or unattended", kind: "text" },
  { key: "stormState", what: "Storm state, and how long it takes to reach it", kind: "text" },
];

function valueText(job: FactsJob, kind: "speed" | "temperature" | "share" | "text", value: unknown): string {
  const units = paperUnits(job);
  if (typeof value === "number" && Number.isFinite(value)) {
    if (kind === "speed") return `${units.speed.whole(value)}`;
    if (kind === "temperature") return `${units.temperature.whole(value)}`;
    if (kind === "share") return `± ${Number((100 * value).toPrecision(3))} %`;
  }
  if (typeof value === "boolean") return value ? "yes" : "no";
  return plainText(String(value));
}

/** Every limit a crew needs before it starts, given or not, then whatever else the job says of the site. */
export function siteLimits(job: FactsJob): SiteLimit[] {
  const site = job.site ?? {};
  const has = (key: string) => Object.hasOwn(site, key) && valueText(job, "text", site[key]) !== "";
  const known = KNOWN.map(({ key, what, kind }): SiteLimit => {
    if (has(key)) return { what, value: valueText(job, kind, site[key]), given: true };
    if (key === "overnight") return { what, value: "none: no state is left overnight", given: false };
    return { what, value: NOT_GIVEN, given: false };
  });
  const other = Object.keys(site)
    .filter((key) => has(key) && !KNOWN.some((k) => k.key === key))
    .map((key): SiteLimit => ({ what: plainText(key), value: valueText(job, "text", site[key]), given: true }));
  return [...known, ...other];
}

// The one error class and the finding record. No station invents another way to say that something is wrong.

/** Where in the chain something was said. */
export type Station = "job" | "form" | "seams" | "panels" | "rolls" | "rig" | "papers";

/** A stop keeps papers from being issued, a caution wants a decision, a note tells of a default or a repair. */
export type FindingLevel = "stop" | "caution" | "note";

/** Something a person must know about the plan, repairs and defaults included. */
export interface Finding {
  /** Own code, kebab-case, first word the matter: "roll-width", "mesh-hole". Listed in DEVELOPERS.md. */
  code: string;
  level: FindingLevel;
  station: Station;
  /** Ids or places it speaks of ("P3", "E1", "vertex 14", "seams.count"). */
  where: string | string[];
  value: number | string | null;
  limit: number | string | null;
  /** What is the matter, with value, unit and limit in words. */
  text: string;
  /** What the reader can do about it. */
  remedy: string;
  /** What the limit stands on: standard, paper, "common practice", "from memory", "own argument". */
  basis: string;
}

/** A check made, whether it held or not. */
export interface Check {
  station: Station;
  text: string;
  value: number | string;
  limit: number | string;
  holds: boolean;
}

/**
 * A station cannot go on. The message says what, where, the value with its unit, the limit and the remedy.
 * Crosses a worker as a plain record: see toRecord and fromRecord.
 */
export class PlanError extends Error {
  readonly code: string;
  readonly where: string | string[];
  readonly facts: Readonly<Record<string, number | string>>;

  constructor(
    code: string,
    message: string,
    where: string | string[] = [],
    facts: Record<string, number | string> = {},
  ) {
    super(message);
    this.name = "PlanError";
    this.code = code;
    this.where = where;
    this.facts = facts;
  }
}

/** What every station is given beside its input and options. */
export interface StationContext {
  /** Called with a share 0…1 of the station's work, a short line of words, and figures by name where it has some. */
  onProgress?: (share: number, words: string, figures?: Readonly<Record<string, number>>) => void;
  /** Polled by long work; a station that sees true throws PlanError "cancelled". */
  cancelled?: () => boolean;
  /** Seconds the station has been at work, by the caller's clock; for words only, never for what is decided. */
  elapsed?: () => number;
  /** Works orders side by side where the caller has threads, null for one that was lost; orders and results are plain records. */
  workShares?: (orders: unknown[], stop: () => boolean) => unknown[];
}

/** What every station hands back. */
export interface StationResult<T> {
  output: T;
  findings: Finding[];
  checks: Check[];
}

// What the rolls station takes and hands on. Types only.
import type { Ring } from "./flatPanel.ts";

/** A piece of cloth to be nested. */
export interface NestPiece {
  id: string;
  fabric: string;
  batch: string | null;
  cut: Ring;
  /** True for a patch, strip or test piece: its batch is that of the panels it belongs to. */
  follows?: boolean;
}

/** Zone not to be used: x from the roll's start, y from the inner edge of the selvedge. mm */
export interface Flaw {
  x: number;
  y: number;
  length: number;
  width: number;
}

/** A roll in the store. mm */
export interface StockRoll {
  id: string;
  fabric: string;
  batch: string | null;
  width: number;
  selvedge: number;
  length: number;
  /** Trim at the start. */
  start: number;
  flaws: Flaw[];
  /** Which face the roll shows as it comes off; left out: the outer one. */
  outerFace?: "up" | "down";
  /** Money a m2 of cloth over all its width; none: not given. */
  price?: number | null;
  /** True for a roll that is taken for granted, not listed in the job: as many as needed. */
  assumed: boolean;
}

/** A placed piece: R(rotation)·point + (x, y). mm */
export interface Placement {
  panel: string;
  rotation: 0 | 180;
  x: number;
  y: number;
  /** Place in the roll's cutting order, from 1. */
  order?: number;
}

/** A roll with what lies on it; x along the roll, y = 0 the inner edge of the selvedge, outer face up. mm */
export interface NestedRoll {
  id: string;
  fabric: string;
  batch: string | null;
  width: number;
  usableWidth: number;
  length: number;
  used: number;
  gap: number;
  flaws: Flaw[];
  placements: Placement[];
  /** cut area / (used × width) */
  utilisation: number;
  lowerBound: number;
  /** Length the cutting table takes at once, mm; none where the whole roll can be laid out. */
  bite?: number | null;
  /** Places along the roll fed to the table's beginning, one bite after the other; none without a bite. */
  feeds?: number[];
  /** What is left beyond the used length, mm. */
  remnant?: number;
  /** Trim at the start, mm, which the used length counts in. */
  start?: number;
  /** "down": the roll shows its inner face as it comes off and is turned over along its length; places and flaws are those after it. */
  outerFace?: "up" | "down";
  /** Money of the used cloth over all its width, remnant left out; null: no price is given. */
  cost?: number | null;
  currency?: string | null;
}

/** What all rolls of a plan come to. */
export interface ClothTotal {
  /** Used length of all rolls, m, and the length below which no nest on the widest of them can come. */
  used: number;
  bound: number;
  /** Cloth taken off over all its width, and the cut area on it, m2. */
  taken: number;
  area: number;
  /** area / taken */
  utilisation: number;
  /** Money of the cloth taken off; null where a roll has no price. */
  cost: number | null;
  currency: string | null;
}

// What a leaf shows of the plan: the part of a plan under way that has come as far as the leaf, else the latest whole plan.
import type { Station } from "../../core/problem.ts";
import type { Facts } from "../../core/records/facts.ts";
import type { Grown, SentFields } from "../worker/growingFacts.ts";
import type { Book, Leaf } from "./bookStore.ts";
import { isSameWork } from "./hand.ts";
import { useBook } from "./useBook.ts";

/** Seams stand in the facts together with the panels: both are fitted to each other. */
const OF_LEAF: Record<Leaf, Station> = {
  form: "form",
  seams: "panels",
  panels: "panels",
  rolls: "rolls",
  rig: "papers",
  papers: "papers",
  site: "papers",
};

/** The part of a plan under way that shows all of a leaf, or null. */
function partFor(book: Book, leaf: Leaf): Grown | null {
  return book.soFar[OF_LEAF[leaf]] ?? null;
}

/** Facts for a leaf. */
export function useShownFacts(leaf: Leaf): Facts | null {
  return useBook((b) => (partFor(b, leaf) ?? b).facts);
}

/** Fields of those facts. */
export function useShownFields(leaf: Leaf): SentFields | null {
  return useBook((b) => (partFor(b, leaf) ?? b).fields);
}

/** Whether a leaf shows a plan from before the last change: a new one is under way, or was stopped or failed on the way. */
export function isOlder(book: Book): boolean {
  if (book.facts === null || partFor(book, book.leaf) !== null) return false;
  return book.status === "running" || !isSameWork(book.planned, book.project);
}

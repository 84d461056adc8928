// The store as React sees it.
import { useStore } from "zustand";
import { type Book, bookStore } from "./bookStore.ts";

/** Part of the book; the component is drawn again when that part is another one. */
export function useBook<T>(select: (book: Book) => T): T {
  return useStore(bookStore, select);
}

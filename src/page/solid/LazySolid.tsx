// The solid view, loaded when it is first looked at: it brings the drawing library with it.
import { lazy, Suspense } from "react";
import type { Facts } from "../../core/records/facts.ts";
import type { FieldName } from "../store/bookStore.ts";
import type { SentFields } from "../worker/growingFacts.ts";

const SolidView = lazy(async () => ({ default: (await import("./SolidView.tsx")).SolidView }));

/** As SolidView. */
export function LazySolid(props: {
  facts: Facts;
  fields: SentFields | null;
  field: FieldName;
  words: string;
  grips?: boolean;
}) {
  return (
    <Suspense fallback={<p className="waiting">Drawing the surface…</p>}>
      <SolidView {...props} />
    </Suspense>
  );
}

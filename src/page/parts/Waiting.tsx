// What stands in place of a thing that is not planned yet.
import { useBook } from "../store/useBook.ts";

/** Says why there is nothing to see. */
export function Waiting({ what }: { what: string }) {
  const status = useBook((b) => b.status);
  const words = {
    none: "",
    running: `${what} will stand here as soon as the plan has come that far.`,
    failed: "The plan could not be made. What is wrong stands at the top; correct it and it is planned again.",
    stopped: "The plan was stopped. Plan again to see it here.",
    done: `This plan has no ${what.toLowerCase()}.`,
  }[status];
  return <p className="waiting">{words}</p>;
}

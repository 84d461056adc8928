// An error on its way out of a worker.
import { PlanError } from "../../core/problem.ts";
import type { PlanFault } from "./messages.ts";

/** An error as a record; one that is no PlanError is a fault of the program and says so. */
export function describeFault(error: unknown): PlanFault {
  if (error instanceof PlanError) return { code: error.code, message: error.message, where: [error.where].flat() };
  const words = error instanceof Error ? error.message : String(error);
  return {
    code: "fault",
    message: `a fault of the program, not of the job: ${words}. Please report it with the job`,
    where: [],
  };
}

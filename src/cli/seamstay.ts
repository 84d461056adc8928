// Entry of the command line: connects the verbs with this process. Planning is loaded only by the verbs that plan.
import { runCommand } from "./runCommand.ts";
import { openTerminal } from "./terminal.ts";

// A reader that closes early (seamstay help | head) is no fault.
process.stdout.on("error", (error: NodeJS.ErrnoException) => {
  if (error.code === "EPIPE") process.exit(0);
  throw error;
});

process.exitCode = await runCommand(process.argv.slice(2), {
  terminal: openTerminal(),
  openDoors: async () => {
    const [{ runPlan }, { writePapers }] = await Promise.all([
      import("../core/plan/runPlan.ts"),
      import("../core/papers/writePapers.ts"),
    ]);
    return { runPlan, writePapers };
  },
});

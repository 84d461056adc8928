// Keeps Ctrl-C from cutting through a piece of work that must be whole. The signal is obeyed right after it.

/** Runs synchronous work; a signal that arrives meanwhile ends the process when the work is done. */
export function holdSignals<T>(work: () => T): T {
  const leave = () => process.exit(130);
  process.on("SIGINT", leave);
  process.on("SIGTERM", leave);
  try {
    return work();
  } finally {
    // Signals are delivered between turns of the event loop: stay on for one more.
    setImmediate(() => {
      process.off("SIGINT", leave);
      process.off("SIGTERM", leave);
    });
  }
}

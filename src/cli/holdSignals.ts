// Keeps Ctrl-C from cutting through a piece of work that must be whole. The signal is obeyed right after it.

/** Runs synchronous work; a signal that arrives meanwhile ends the process once the work is done. */
export async function holdSignals<T>(work: () => T): Promise<T> {
  const leave = () => process.exit(130);
  process.on("SIGINT", leave);
  process.on("SIGTERM", leave);
  try {
    return work();
  } finally {
    // Signals are delivered between turns of the event loop: two turns, so that none is lost.
    for (let turn = 0; turn < 2; turn++) await new Promise((next) => setImmediate(next));
    process.off("SIGINT", leave);
    process.off("SIGTERM", leave);
  }
}

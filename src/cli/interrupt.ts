/** Ctrl-C while files are written: the begun ones are removed before the program ends. */

/** Runs an action with a signal that the first SIGINT or SIGTERM raises. */
export async function interruptible<T>(action: (signal: AbortSignal) => Promise<T>): Promise<T> {
  const controller = new AbortController();
  const stop = (): void => controller.abort();
  process.once("SIGINT", stop).once("SIGTERM", stop);
  try {
    return await action(controller.signal);
  } finally {
    process.off("SIGINT", stop).off("SIGTERM", stop);
  }
}

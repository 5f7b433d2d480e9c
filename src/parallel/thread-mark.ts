/**
 * Tells a thread of a pool from the thread that opened it: a module that opens a pool would do so again in each of its
 * threads, without end.
 */

const mark: unique symbol = Symbol.for("fermistate.parallel.thread");

/** In a thread: whether its code has asked for threads. */
interface Mark {
  asked: boolean;
}

const global = globalThis as { [mark]?: Mark };

/** Marks this thread as one of a pool. */
export function markThread(): void {
  global[mark] ??= { asked: false };
}

/** True in a thread of a pool, which remembers the question. */
export function isThread(): boolean {
  if (global[mark] === undefined) return false;
  global[mark].asked = true;
  return true;
}

/** Whether {@link isThread} was asked in this thread of a pool. */
export function hasAskedForThreads(): boolean {
  return global[mark]?.asked ?? false;
}

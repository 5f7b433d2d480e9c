/** Tells a thread of a pool from the thread that opened it: one that opened a pool again would never end. */

const mark: unique symbol = Symbol.for("fermistate.parallel.thread");

/** Marks this thread as one of a pool. */
export function markThread(): void {
  Object.defineProperty(globalThis, mark, { value: true, configurable: true });
}

/** True in a thread of a pool. */
export function isThread(): boolean {
  return Object.hasOwn(globalThis, mark);
}

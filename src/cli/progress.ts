/** One line on standard error that says how far a calculation is; nothing where that is no terminal. */
import type { CommandIo } from "./command.js";

/** Milliseconds between two lines. */
const pause = 100;

/** Reports progress in place; `done()` wipes the line. */
export function progressOn(
  io: CommandIo,
  what: string,
): { report: (done: number, all: number) => void; done: () => void } {
  let last = performance.now();
  let width = 0;
  return {
    report(done, all) {
      const now = performance.now();
      if (!io.isTerminal || now - last < pause) return;
      last = now;
      const line = `${what}: ${done} of ${all} points (${Math.floor((100 * done) / all)} %)`;
      io.err(`\r${line.padEnd(width)}`);
      width = line.length;
    },
    done() {
      if (width > 0) io.err(`\r${" ".repeat(width)}\r`);
      width = 0;
    },
  };
}

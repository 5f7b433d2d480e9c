/** One line on standard error that says how far a calculation is; nothing where that is no terminal. */
import type { CommandIo } from "./command.js";
import { timeText } from "./print.js";

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

/** The same for the strips of a table, with the time that is left at the pace so far. */
export function stripsOn(
  io: CommandIo,
  what: string,
): { report: (progress: { readonly done: number; readonly all: number }) => void; done: () => void } {
  const start = performance.now();
  let first: number | undefined;
  let width = 0;
  return {
    report({ done, all }) {
      first ??= done; // strips of an earlier run do not count for the pace
      if (!io.isTerminal) return;
      const left = ((performance.now() - start) / (done - first)) * (all - done);
      const time = done > first && done < all ? `, about ${timeText(left)} left` : "";
      const line = `${what}: ${done} of ${all} strips (${Math.floor((100 * done) / all)} %)${time}`;
      io.err(`\r${line.padEnd(width)}`);
      width = Math.max(width, line.length);
    },
    done() {
      if (width > 0) io.err(`\r${" ".repeat(width)}\r`);
      width = 0;
    },
  };
}

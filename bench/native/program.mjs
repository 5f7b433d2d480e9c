/** A compiled program that answers letters on its standard input with doubles on its standard output. */
import { spawn } from "node:child_process";

/** Starts it: `ask` sends a letter and gives the doubles that answer, `stop` ends it. */
export function startProgram(program, args) {
  const child = spawn(program, args, { stdio: ["pipe", "pipe", "inherit"] });
  const ask = (letter, expected) =>
    new Promise((resolve, reject) => {
      const bytes = new Uint8Array(8 * expected);
      let filled = 0;
      const ended = () => reject(new Error("the native program has ended"));
      const take = (chunk) => {
        bytes.set(chunk, filled);
        filled += chunk.length;
        if (filled < bytes.length) return;
        child.stdout.off("data", take);
        child.off("exit", ended);
        resolve(new Float64Array(bytes.buffer));
      };
      child.stdout.on("data", take);
      child.once("exit", ended);
      child.stdin.write(letter);
    });
  return { ask, stop: () => child.stdin.end() };
}

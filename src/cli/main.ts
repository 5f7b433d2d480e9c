#!/usr/bin/env node
/** The program: connects `run` with this process. */
import { run } from "./run.js";

/** False once nobody reads the output any more, as after `| head`: that is no error, and files are still written. */
let isRead = true;
for (const stream of [process.stdout, process.stderr]) {
  stream.on("error", (error: NodeJS.ErrnoException) => {
    if (error.code !== "EPIPE") throw error;
    isRead = false;
  });
}

process.exitCode = await run(process.argv.slice(2), {
  out: (text) => {
    if (isRead) process.stdout.write(text);
    return isRead;
  },
  err: (text) => void process.stderr.write(text),
  isTerminal: process.stderr.isTTY === true,
  cwd: process.cwd(),
});

/** `fermistate`: finds the command, runs it, turns every error into one line and an exit code. */
import { type ErrorCode, FermistateError, isFermistateError } from "../errors.js";
import { nearestWord } from "../grids/nearest.js";
import { libraryVersion } from "../version.js";
import { certifyCommand } from "./certify-command.js";
import type { Command, CommandIo } from "./command.js";
import { compareCommand } from "./compare-command.js";
import { demoCommand } from "./demo-command.js";
import { gridCommand } from "./grid-command.js";
import { commandHelp, programHelp, topics } from "./help.js";
import { limitingMassCommand } from "./limiting-mass-command.js";
import { regimeCommand } from "./regime-command.js";
import { stateCommand } from "./state-command.js";
import { tableCommand } from "./table-command.js";

/** All commands, in the order of the help. */
export const commands: readonly Command[] = [
  stateCommand,
  gridCommand,
  regimeCommand,
  compareCommand,
  certifyCommand,
  tableCommand,
  limitingMassCommand,
  demoCommand,
];

/**
 * Runs the program.
 *
 * @param argv - arguments without the program's own name
 * @returns the exit code: 0 done, 1 refused or failed, 2 the request itself is wrong
 */
export async function run(argv: readonly string[], io: CommandIo): Promise<number> {
  try {
    await dispatch(argv, io);
    return 0;
  } catch (error) {
    io.err(`fermistate: ${messageOf(error)}\n`);
    return isFermistateError(error) && wrongRequests.includes(error.code) ? 2 : 1;
  }
}

async function dispatch(argv: readonly string[], io: CommandIo): Promise<void> {
  const [first, ...rest] = argv;
  if (first === undefined || first === "--help" || first === "-h") return void io.out(programHelp(commands));
  if (first === "--version") return void io.out(`fermistate ${libraryVersion}\n`);
  if (first === "help") return void io.out(helpOn(rest));
  const command = commands.find(({ name }) => name === first);
  if (command === undefined) throw unknown("command", first, [...commands.map(({ name }) => name), "help"]);
  if (rest.includes("--help") || rest.includes("-h")) return void io.out(commandHelp(command));
  await command.run(rest, io);
}

function helpOn(words: readonly string[]): string {
  const [word, more] = words;
  if (word === undefined) return programHelp(commands);
  if (more !== undefined) {
    throw new FermistateError("invalid-option", { argument: "help", given: more, allowed: "one word after help" });
  }
  const command = commands.find(({ name }) => name === word);
  if (command !== undefined) return commandHelp(command);
  if (Object.hasOwn(topics, word)) return topics[word]!();
  throw unknown("help", word, [...commands.map(({ name }) => name), ...Object.keys(topics)]);
}

function unknown(argument: string, given: string, known: readonly string[]): FermistateError {
  const near = nearestWord(given, known);
  const allowed = near === undefined ? `one of ${known.join(", ")}` : `perhaps ${near}? (one of ${known.join(", ")})`;
  return new FermistateError("invalid-option", { argument, given, allowed });
}

/** Errors of a request that is wrong whatever the matter, its files and the machine are. */
const wrongRequests: readonly ErrorCode[] = [
  "not-a-number",
  "out-of-range",
  "unknown-nuclide",
  "invalid-composition",
  "length-mismatch",
  "unavailable-quantity",
  "invalid-option",
];

/** One line without a stack. */
function messageOf(error: unknown): string {
  if (!isFermistateError(error)) {
    const words = error instanceof Error ? error.message : String(error);
    return `${words.split("\n")[0]} (unexpected: please report it)`;
  }
  const message = error.given === undefined ? `${error.argument}: not given; allowed: ${error.allowed}` : error.message;
  return `${message.replace(/\s*\n\s*/g, " ")} (${error.code})`;
}

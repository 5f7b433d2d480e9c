/** What a sub-command is, and how its options are read. */
import { parseArgs } from "node:util";
import * as z from "zod/mini";
import { FermistateError, isFermistateError } from "../errors.js";
import { nearestWord } from "../grids/nearest.js";

/** What a command may touch of the world: tests hand in their own. */
export interface CommandIo {
  /** Prints to standard output; false once nobody reads it. */
  readonly out: (text: string) => boolean;
  /** Prints to standard error. */
  readonly err: (text: string) => void;
  /** Whether standard error is a terminal: only then is progress shown. */
  readonly isTerminal: boolean;
  /** Folder that relative paths start from. */
  readonly cwd: string;
}

/** One option of a command, as the help shows it. */
export interface OptionHelp {
  /** What its value is called; absent for a switch. */
  readonly value?: string;
  /** What it does, one or two lines. */
  readonly help: string;
}

/** A command whose options `schema` reads. */
export interface Command {
  readonly name: string;
  /** One line. */
  readonly summary: string;
  /** The line after "fermistate". */
  readonly usage: string;
  readonly options: Readonly<Record<string, OptionHelp>>;
  /** Lines that run as they stand, each with a word on what it does. */
  readonly examples: readonly (readonly [line: string, meaning: string])[];
  /** Text below the options. */
  readonly remarks: string;
  /** Reads the arguments, does the work; throws a FermistateError where it cannot. */
  readonly run: (args: readonly string[], io: CommandIo) => Promise<void>;
}

/** A command with options of known types. */
export function command<Shape extends Record<string, z.ZodMiniType>>(definition: {
  readonly name: string;
  readonly summary: string;
  readonly usage: string;
  readonly options: { readonly [Name in keyof Shape]: OptionHelp & { readonly read: Shape[Name] } };
  readonly examples: readonly (readonly [line: string, meaning: string])[];
  readonly remarks: string;
  readonly run: (options: { readonly [Name in keyof Shape]: z.output<Shape[Name]> }, io: CommandIo) => Promise<void>;
}): Command {
  const { options, run } = definition;
  return {
    ...definition,
    run: (args, io) => run(readOptions(args, definition.name, options), io),
  };
}

/** Values of the options, each read by its schema; the first that is wrong is thrown as `invalid-option`. */
function readOptions<Shape extends Record<string, z.ZodMiniType>>(
  args: readonly string[],
  name: string,
  options: { readonly [Name in keyof Shape]: OptionHelp & { readonly read: Shape[Name] } },
): { readonly [Name in keyof Shape]: z.output<Shape[Name]> } {
  const given = split(args, name, options);
  const values: Record<string, unknown> = {};
  for (const [key, option] of Object.entries(options)) values[key] = readOption(key, option, given[key], name);
  return values as { readonly [Name in keyof Shape]: z.output<Shape[Name]> };
}

function readOption(
  key: string,
  option: OptionHelp & { readonly read: z.ZodMiniType },
  given: string | true | undefined,
  command: string,
): unknown {
  const argument = `--${key}`;
  let result: z.core.util.SafeParseResult<unknown>;
  try {
    result = z.safeParse(option.read, given);
  } catch (error) {
    if (!isFermistateError(error)) throw error;
    const { code, allowed } = error; // from an axis, whose arguments the caller has not named
    throw new FermistateError(code, { argument: `${argument}, ${error.argument}`, given: error.given, allowed });
  }
  if (result.success) return result.data;
  const message = result.error.issues[0]?.message ?? "";
  const allowed = given === undefined ? `${option.value}, which ${command} needs` : message;
  throw new FermistateError("invalid-option", { argument, given, allowed });
}

/** The arguments as texts by option; refuses what is unknown, given twice, or no option. */
function split(
  args: readonly string[],
  name: string,
  options: Readonly<Record<string, OptionHelp>>,
): Record<string, string | true> {
  const types = Object.entries(options).map(([key, { value }]) => [key, { type: value ? "string" : "boolean" }]);
  const { tokens } = parseArgs({
    args: [...args],
    options: Object.fromEntries(types),
    strict: false,
    allowPositionals: true,
    tokens: true,
  });
  const given: Record<string, string | true> = {};
  for (const token of tokens) {
    if (token.kind === "option-terminator") continue;
    if (token.kind === "positional") {
      const allowed = `options only; see fermistate help ${name}`;
      throw new FermistateError("invalid-option", { argument: name, given: token.value, allowed });
    }
    const option = Object.hasOwn(options, token.name) ? options[token.name] : undefined;
    if (option === undefined) throw unknownOption(token.rawName, token.name, name, Object.keys(options));
    const fail = (what: string, allowed: string): never => {
      throw new FermistateError("invalid-option", { argument: token.rawName, given: what, allowed });
    };
    if (Object.hasOwn(given, token.name)) fail("a second time", "once");
    if (option.value === undefined && token.value !== undefined) fail(token.value, "a switch without value");
    if (option.value !== undefined && token.value === undefined) fail("", option.value);
    given[token.name] = token.value ?? true;
  }
  return given;
}

function unknownOption(raw: string, bare: string, command: string, known: readonly string[]): FermistateError {
  const near = nearestWord(bare, known);
  const all = known.map((one) => `--${one}`).join(", ");
  const allowed =
    near === undefined ? `${all} and --help for ${command}` : `perhaps --${near}? (fermistate help ${command})`;
  return new FermistateError("invalid-option", { argument: "option", given: raw, allowed });
}

/**
 * Typed errors: every refusal names what was given and what is allowed.
 *
 * `code` is stable and meant for programs; the message is for people. The ESM and the CommonJS copy of the
 * library are two classes, so `instanceof` is false across them: test with {@link isFermistateError}.
 */

/**
 * Why a call was refused.
 *
 * - `not-a-number`: NaN, an infinity or another type where a finite number is needed
 * - `out-of-range`: a finite number that no choice of physics would allow (negative density)
 * - `outside-domain`: a legal number at which this equation of state does not answer
 * - `unknown-nuclide`: a label that is not in AME2020
 * - `invalid-composition`: empty, negative, not summing to one, or not made by `composition(...)`
 * - `length-mismatch`: columns of a batch that do not fit each other
 * - `unavailable-quantity`: no contribution of this equation of state knows the quantity
 * - `no-solution`: no state of this matter has the quantities given to `solve`
 * - `below-cold`: an energy or pressure below that of cold matter of the given density, which `limit` tells
 * - `unstable`: the sum of contributions has no positive pressure, resists neither compression nor heating, or holds NaN
 * - `dependent-variables`: two variables that do not fix the state at this point
 * - `no-convergence`: an iteration did not reach its promise (a defect of the library: please report)
 * - `integration-failed`: a differential equation could not be integrated: step too small, too many steps, slope not finite
 * - `too-large`: a request beyond the stated size limit
 * - `invalid-option`: an option or a command-line argument that does not exist or cannot be read
 * - `worker-failed`: a thread of `fermistate/parallel` died or could not start, or code of the caller's failed in it
 * - `invalid-file`: a file or bytes that are not what they claim: damaged, truncated, another version
 * - `file-not-written`: the file system refused; no partial file is left
 */
export type ErrorCode =
  | "not-a-number"
  | "out-of-range"
  | "outside-domain"
  | "unknown-nuclide"
  | "invalid-composition"
  | "length-mismatch"
  | "unavailable-quantity"
  | "no-solution"
  | "below-cold"
  | "unstable"
  | "dependent-variables"
  | "no-convergence"
  | "integration-failed"
  | "too-large"
  | "invalid-option"
  | "worker-failed"
  | "invalid-file"
  | "file-not-written";

/** What was refused: the argument's name, its value, what is allowed, and where in a batch it stood. */
export interface ErrorDetails {
  /** Name of the offending argument, as in the signature. */
  readonly argument: string;
  /** The value given. */
  readonly given: unknown;
  /** What is allowed, in words and with units. */
  readonly allowed: string;
  /** Row of a batch, counted from 0. */
  readonly index?: number;
  /** The limiting value that the given one would have to keep, where there is one. */
  readonly limit?: number;
}

/** The only error class this library throws on purpose. */
export class FermistateError extends Error {
  /** Always `"FermistateError"`. */
  override readonly name: string = "FermistateError";
  /** Stable reason, see {@link ErrorCode}. */
  readonly code: ErrorCode;
  /** Name of the offending argument. */
  readonly argument: string;
  /** The value given. */
  readonly given: unknown;
  /** What is allowed, in words and with units. */
  readonly allowed: string;
  /** Row of a batch, counted from 0; undefined for a single call. */
  readonly index: number | undefined;
  /** The limiting value in the units of the argument, for `below-cold` and `no-solution`; else undefined. */
  readonly limit: number | undefined;

  /** Builds the message from the details: "density: given -1, allowed ...". */
  constructor(code: ErrorCode, details: ErrorDetails) {
    const row = details.index === undefined ? "" : ` (row ${details.index})`;
    super(`${details.argument}${row}: given ${printed(details.given)}; allowed: ${details.allowed}`);
    this.code = code;
    this.argument = details.argument;
    this.given = details.given;
    this.allowed = details.allowed;
    this.index = details.index;
    this.limit = details.limit;
  }
}

/** True for a {@link FermistateError} of any copy of the library (ESM or CommonJS). */
export function isFermistateError(error: unknown): error is FermistateError {
  return error instanceof Error && error.name === "FermistateError" && "code" in error && "allowed" in error;
}

/** Throws `not-a-number` unless `value` is a finite number; returns it. */
export function requireFinite(argument: string, value: unknown, allowed: string, index?: number): number {
  if (typeof value === "number" && Number.isFinite(value)) return value;
  throw new FermistateError("not-a-number", withIndex({ argument, given: value, allowed }, index));
}

/** Throws `invalid-option` unless `options` is an object whose keys are all known: a misspelt option must not pass. */
export function requireKnown(argument: string, options: unknown, known: readonly string[]): void {
  const isObject = typeof options === "object" && options !== null && !Array.isArray(options);
  const stranger = isObject ? Object.keys(options).find((name) => !known.includes(name)) : options;
  if (isObject && stranger === undefined) return;
  throw new FermistateError("invalid-option", { argument, given: stranger, allowed: `{ ${known.join(", ")} }` });
}

/** As {@link requireKnown} of `flags` and `others`, where every flag is true, false or left out. */
export function requireFlags(
  argument: string,
  options: unknown,
  flags: readonly string[],
  others: readonly string[] = [],
): void {
  requireKnown(argument, options, [...others, ...flags]);
  for (const name of flags) {
    const given = (options as Readonly<Record<string, unknown>>)[name];
    if (given === undefined || typeof given === "boolean") continue;
    const details = { argument: `${argument}.${name}`, given, allowed: "true or false" };
    throw new FermistateError("invalid-option", details);
  }
}

/** `details` with the row where there is one. */
export function withIndex(details: ErrorDetails, index: number | undefined): ErrorDetails {
  return index === undefined ? details : { ...details, index };
}

/** A value as a message shows it: short, and safe for anything a caller can pass. */
function printed(value: unknown): string {
  if (typeof value === "string") return JSON.stringify(value.length > 80 ? `${value.slice(0, 77)}...` : value);
  if (Array.isArray(value) || ArrayBuffer.isView(value))
    return `an array of length ${(value as ArrayLike<unknown>).length}`;
  if (typeof value === "object" && value !== null) return "an object";
  if (typeof value === "function") return "a function";
  // Digits of the shortest form, but an exponent instead of rows of zeros.
  if (typeof value === "number" && Math.abs(value) >= 1e7 && Number.isFinite(value)) {
    return value.toExponential().replace("e+", "e");
  }
  return String(value);
}

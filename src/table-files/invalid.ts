/** The error of a file that is not what it claims. */
import { FermistateError } from "../errors.js";

/** `invalid-file`: what was found, and what a sound file has in its place. */
export function invalidFile(argument: string, given: unknown, allowed: string): FermistateError {
  return new FermistateError("invalid-file", { argument, given, allowed });
}

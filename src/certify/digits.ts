/** The option `digits` shared by all reference evaluations. */
import { FermistateError } from "../errors.js";

/** Throws `invalid-option` unless `digits` is a whole number from 10 to 60; returns it. */
export function requireDigits(digits: unknown): number {
  if (typeof digits === "number" && Number.isInteger(digits) && digits >= 10 && digits <= 60) return digits;
  throw new FermistateError("invalid-option", { argument: "digits", given: digits, allowed: "whole numbers 10 to 60" });
}

/** Columns of a batch: what is checked before the first row is written. */
import { FermistateError } from "../errors.js";
import { type CompositionSource, compositionSource } from "../matter/composition-rows.js";
import { firstOutside, refusePoint } from "./domain.js";
import type { BatchInput, BatchOutput, EquationOfState } from "./equation-of-state.js";
import { optionalQuantities, type QuantityName, quantities, quantityNames } from "./quantities.js";

/** A checked batch. */
export interface CheckedBatch {
  /** Number of rows. */
  readonly count: number;
  readonly compositions: CompositionSource;
}

/**
 * Checks every column of a batch, every composition and every point.
 *
 * @throws `invalid-option`, `length-mismatch`, `invalid-composition`, `unavailable-quantity`, and as `state`, with the row
 */
export function checkBatch(
  equationOfState: Pick<EquationOfState, "contributions" | "domain">,
  input: BatchInput,
  output: BatchOutput,
): CheckedBatch {
  requireObject("input", input);
  requireObject("output", output);
  const checked = checkInput(input);
  const { count } = checked;
  checkRefused(output.refused, count);
  for (const [name, column] of Object.entries(output)) {
    if (column === undefined || name === "refused") continue;
    if (!Object.hasOwn(quantities, name)) {
      const allowed = `one of ${quantityNames.join(", ")}, refused`;
      throw new FermistateError("unavailable-quantity", { argument: "output", given: name, allowed });
    }
    requireRows(name, column, count);
  }
  if (output.refused === undefined) checkPoints(equationOfState, input);
  return checked;
}

/** Throws unless a column of refusals is a Uint8Array with room for `count` rows, or left out. */
export function checkRefused(refused: unknown, count: number): void {
  if (refused === undefined) return;
  if (!(refused instanceof Uint8Array)) {
    throw new FermistateError("invalid-option", { argument: "refused", given: refused, allowed: "a Uint8Array" });
  }
  if (refused.length >= count) return;
  const allowed = `>= ${count} rows`;
  throw new FermistateError("length-mismatch", { argument: "refused", given: refused.length, allowed });
}

/** Checks the columns of the input and every composition. */
export function checkInput({ density, temperature, composition }: BatchInput): CheckedBatch {
  for (const [argument, column] of Object.entries({ density, temperature })) requireColumn(argument, column);
  const count = density.length;
  const compositions = compositionSource(composition);
  const lengths = { temperature: temperature.length, composition: compositions.rows ?? count };
  for (const [argument, given] of Object.entries(lengths)) {
    if (given !== count) {
      throw new FermistateError("length-mismatch", { argument, given, allowed: `${count} rows, as density has` });
    }
  }
  return { count, compositions };
}

/** Throws for the first row outside the domain. */
export function checkPoints(
  { contributions, domain }: Pick<EquationOfState, "contributions" | "domain">,
  { density, temperature }: BatchInput,
): void {
  const outside = firstOutside(domain, density, temperature);
  if (outside >= 0) refusePoint(contributions, density[outside], temperature[outside], outside);
}

/** Throws `invalid-option` unless `value` is an object. */
export function requireObject(argument: string, value: unknown): void {
  if (typeof value === "object" && value !== null) return;
  throw new FermistateError("invalid-option", { argument, given: value, allowed: "an object of columns" });
}

/** Throws unless `column` is a Float64Array with room for `count` rows. */
export function requireRows(argument: string, column: unknown, count: number): void {
  requireColumn(argument, column);
  const given = (column as Float64Array).length;
  if (given < count) throw new FermistateError("length-mismatch", { argument, given, allowed: `>= ${count} rows` });
}

/** Throws `invalid-option` unless `column` is a Float64Array. */
export function requireColumn(argument: string, column: unknown): void {
  if (column instanceof Float64Array) return;
  throw new FermistateError("invalid-option", { argument, given: column, allowed: "a Float64Array" });
}

/** NaN in the record: a quantity that no contribution provides, or a contribution that broke its contract. */
export function refuseQuantity(name: QuantityName, index: number): never {
  const unknown = optionalQuantities.includes(name);
  throw new FermistateError(unknown ? "unavailable-quantity" : "unstable", {
    argument: "output",
    given: name,
    allowed: unknown
      ? "quantities that a contribution provides (the electron gas for this one)"
      : "a number: a contribution has added NaN",
    index,
  });
}

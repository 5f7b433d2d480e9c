/** Contributions -> an equation of state: adds their members, turns the sum into quantities. */
import { FermistateError, withIndex } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import type { Contribution } from "./contribution.js";
import { commonDomain, firstOutside, holds, refusePoint } from "./domain.js";
import type { BatchInput, BatchOutput, EquationOfState, FreeEnergyDerivatives, State } from "./equation-of-state.js";
import { type Evaluator, evaluatorOf } from "./evaluator.js";
import { MEMBER_COUNT, naturalDerivatives, type Order, SECOND_ORDER_COUNT } from "./free-energy.js";
import {
  FIRST_PLASMA_QUANTITY,
  optionalQuantities,
  QUANTITY_COUNT,
  type QuantityName,
  quantities,
  quantityNames,
} from "./quantities.js";
import { freeEnergyFrom, stateFrom } from "./state.js";

/**
 * An equation of state from contributions: leaving one out switches its physics off.
 *
 * @param contributions - at least one; names must differ
 * @throws `invalid-option` for an empty list, a repeated name or something that is no contribution
 * @example
 * ```ts
 * import { combine, composition, electronPositronGas, radiation } from "fermistate";
 * const hot = combine(electronPositronGas(), radiation());
 * hot.state(1e6, 1e9, composition({ C12: 0.5, O16: 0.5 })).gamma1; // => 1.4737
 * ```
 */
export function combine(...contributions: readonly Contribution[]): EquationOfState {
  checkContributions(contributions);
  const parts = Object.freeze([...contributions]);
  const domain = commonDomain(parts);
  const own = evaluatorOf(parts);
  const { point, members, quantities: record } = own;
  const natural = new Float64Array(MEMBER_COUNT);

  function enter(density: number, temperature: number, composition: Composition): void {
    requireComposition(composition);
    if (typeof density !== "number" || typeof temperature !== "number" || !holds(domain, density, temperature)) {
      refusePoint(parts, density, temperature);
    }
    point[DENSITY] = density;
    point[TEMPERATURE] = temperature;
  }

  function state(density: number, temperature: number, composition: Composition): State {
    enter(density, temperature, composition);
    own.fillMembers(composition, 2);
    own.fillDetail(composition);
    own.fillThermodynamics(composition, -1);
    own.fillPlasma();
    return stateFrom(density, temperature, composition, record);
  }

  function evaluate(input: BatchInput, output: BatchOutput): void {
    const count = checkColumns(input, output);
    const { density, temperature, composition } = input;
    const each = isList(composition) ? composition : undefined;
    const outside = firstOutside(domain, density, temperature);
    if (outside >= 0) refusePoint(parts, density[outside], temperature[outside], outside);
    const slots: number[] = [];
    const columns: Float64Array[] = [];
    for (let slot = 0; slot < QUANTITY_COUNT; slot++) {
      const column = output[quantityNames[slot]!];
      if (column === undefined) continue;
      slots.push(slot);
      columns.push(column);
    }
    const plasma = slots.some((slot) => slot >= FIRST_PLASMA_QUANTITY);
    const detail = output.positronDensity !== undefined;
    for (let i = 0; i < count; i++) {
      const matter = each === undefined ? (composition as Composition) : each[i]!;
      point[DENSITY] = density[i]!;
      point[TEMPERATURE] = temperature[i]!;
      own.fillMembers(matter, 2);
      if (detail) own.fillDetail(matter);
      own.fillThermodynamics(matter, i);
      if (plasma) own.fillPlasma();
      for (let j = 0; j < columns.length; j++) {
        const value = record[slots[j]!]!;
        if (Number.isNaN(value)) refuseQuantity(quantityNames[slots[j]!]!, i);
        columns[j]![i] = value;
      }
    }
  }

  function freeEnergy(
    density: number,
    temperature: number,
    composition: Composition,
    order: Order = 2,
  ): FreeEnergyDerivatives {
    if (order !== 2 && order !== 3) {
      throw new FermistateError("invalid-option", { argument: "order", given: order, allowed: "2 or 3" });
    }
    enter(density, temperature, composition);
    own.fillMembers(composition, order);
    for (let i = 0; i < (order === 2 ? SECOND_ORDER_COUNT : MEMBER_COUNT); i++) {
      if (Number.isFinite(members[i])) continue;
      const allowed = "finite derivatives: a contribution has added something else";
      throw new FermistateError("unstable", { argument: "freeEnergy", given: members[i], allowed });
    }
    naturalDerivatives(members, order, natural);
    return freeEnergyFrom(natural, order);
  }

  const evaluator = (): Evaluator => evaluatorOf(parts);
  const name = parts.map((part) => part.name).join(" + ");
  return Object.freeze({ name, contributions: parts, domain, state, evaluate, freeEnergy, evaluator });
}

function isList(value: Composition | readonly Composition[]): value is readonly Composition[] {
  return Array.isArray(value);
}

function checkContributions(contributions: readonly Contribution[]): void {
  const allowed = "one or more contributions with different names, such as electronPositronGas()";
  const names = new Set<string>();
  if (contributions.length === 0) {
    throw new FermistateError("invalid-option", { argument: "contributions", given: "none", allowed });
  }
  for (const part of contributions) {
    if (typeof part?.add !== "function" || typeof part.name !== "string" || part.domain === undefined) {
      throw new FermistateError("invalid-option", { argument: "contributions", given: part, allowed });
    }
    if (names.has(part.name)) {
      throw new FermistateError("invalid-option", { argument: "contributions", given: `${part.name} twice`, allowed });
    }
    names.add(part.name);
  }
  for (const { name, excludes = [] } of contributions) {
    const stranger = excludes.find((one) => names.has(one));
    if (stranger === undefined) continue;
    const given = `${stranger} beside ${name}`;
    throw new FermistateError("invalid-option", {
      argument: "contributions",
      given,
      allowed: `${name} without ${stranger}`,
    });
  }
}

function requireObject(argument: string, value: unknown): void {
  if (typeof value === "object" && value !== null) return;
  throw new FermistateError("invalid-option", { argument, given: value, allowed: "an object of columns" });
}

/** Checks every column of a batch and every composition; returns the number of rows. */
function checkColumns(input: BatchInput, output: BatchOutput): number {
  requireObject("input", input);
  requireObject("output", output);
  const { density, temperature, composition } = input;
  for (const [argument, column] of Object.entries({ density, temperature })) requireColumn(argument, column);
  const count = density.length;
  const lengths: [string, number][] = [["temperature", temperature.length]];
  if (isList(composition)) {
    lengths.push(["composition", composition.length]);
    for (let i = 0; i < composition.length; i++) requireComposition(composition[i]);
  } else requireComposition(composition);
  for (const [argument, given] of lengths) {
    if (given !== count) {
      throw new FermistateError("length-mismatch", { argument, given, allowed: `${count} rows, as density has` });
    }
  }
  for (const [name, column] of Object.entries(output)) {
    if (column === undefined) continue;
    if (!Object.hasOwn(quantities, name)) {
      const allowed = `one of ${quantityNames.join(", ")}`;
      throw new FermistateError("unavailable-quantity", { argument: "output", given: name, allowed });
    }
    requireColumn(name, column);
    if (column.length < count) {
      throw new FermistateError("length-mismatch", {
        argument: name,
        given: column.length,
        allowed: `>= ${count} rows`,
      });
    }
  }
  return count;
}

function requireColumn(argument: string, column: unknown): void {
  if (column instanceof Float64Array) return;
  throw new FermistateError(
    "invalid-option",
    withIndex({ argument, given: column, allowed: "a Float64Array" }, undefined),
  );
}

/** NaN in the record: a quantity that no contribution provides, or a contribution that broke its contract. */
function refuseQuantity(name: QuantityName, index: number): never {
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

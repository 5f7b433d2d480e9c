/** Contributions -> an equation of state: adds their members, turns the sum into quantities. */
import { FermistateError } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import { checkBatch, refuseQuantity } from "./columns.js";
import type { Contribution } from "./contribution.js";
import { commonDomain, holds, refusePoint } from "./domain.js";
import type { BatchInput, BatchOutput, EquationOfState, FreeEnergyDerivatives, State } from "./equation-of-state.js";
import { type Evaluator, evaluatorOf } from "./evaluator.js";
import { MEMBER_COUNT, naturalDerivatives, type Order, SECOND_ORDER_COUNT } from "./free-energy.js";
import { FIRST_PLASMA_QUANTITY, QUANTITY_COUNT, quantityNames } from "./quantities.js";
import { ANSWERED } from "./refusal-numbers.js";
import { reasonOf, reasonOutside } from "./refusal-reasons.js";
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

  /** Fills the record of quantities of one row; the number of the reason where that fails. */
  function attempt(matter: Composition, detail: boolean): number {
    try {
      own.fillMembers(matter, 2);
      if (detail) own.fillDetail(matter);
      return own.fillWhereStable(matter);
    } catch (error) {
      return reasonOf(error);
    }
  }

  function evaluate(input: BatchInput, output: BatchOutput): void {
    const { count, compositions } = checkBatch({ contributions: parts, domain }, input, output);
    const { density, temperature } = input;
    const { one } = compositions;
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
    const { refused } = output;
    for (let i = 0; i < count; i++) {
      const matter = one ?? compositions.at(i);
      point[DENSITY] = density[i]!;
      point[TEMPERATURE] = temperature[i]!;
      if (refused === undefined) {
        own.fillMembers(matter, 2);
        if (detail) own.fillDetail(matter);
        own.fillThermodynamics(matter, i);
      } else {
        const reason = reasonOutside(domain, point) || attempt(matter, detail);
        refused[i] = reason;
        if (reason !== ANSWERED) continue;
      }
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

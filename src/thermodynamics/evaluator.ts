/**
 * Working space for loops that must not allocate: write a point into a record, read members or quantities from others.
 *
 * The step below `state` and `evaluate`, which are made of it; inverse questions are too. Numbers travel in records
 * because a double that crosses a call which is not inlined is boxed.
 */
import type { Composition } from "../matter/composition.js";
import { fillPlasma, POINT_LENGTH, TEMPERATURE } from "../matter/plasma.js";
import type { Contribution } from "./contribution.js";
import { MEMBER_COUNT, type Order, SECOND_ORDER_COUNT } from "./free-energy.js";
import { fillPlasmaQuantities, fillQuantities, QUANTITY_COUNT } from "./quantities.js";

/** Records of one point and the steps that fill them; nothing is checked and nothing allocated. */
export interface Evaluator {
  /** The record of the point (matter/plasma.ts): its first two slots, density and temperature, are the input. */
  readonly point: Float64Array;
  /** Members of the sum (free-energy.ts), erg/g, after {@link Evaluator.fillMembers}. */
  readonly members: Float64Array;
  /** At T = 0: limits of c_v/T and (dP/dT)/(rho T), and the residual entropy. */
  readonly cold: Float64Array;
  /** Quantities in the order of `quantityNames`, after the two steps that fill them. */
  readonly quantities: Float64Array;
  /** Members of the sum at the point: 6 for order 2, 11 for order 3. */
  fillMembers(composition: Composition, order: Order): void;
  /** What only some callers want and costs extra (the density of positrons); after the members. */
  fillDetail(composition: Composition): void;
  /**
   * Quantities that follow from the members; `row` is for the error message, -1 for none.
   * @throws `unstable`
   */
  fillThermodynamics(composition: Composition, row: number): void;
  /** Quantities that the record of the point holds; after the others. */
  fillPlasma(): void;
}

/** An evaluator for a sum of contributions. */
export function evaluatorOf(parts: readonly Contribution[]): Evaluator {
  const point = new Float64Array(POINT_LENGTH);
  const members = new Float64Array(MEMBER_COUNT);
  const cold = new Float64Array(3);
  const quantities = new Float64Array(QUANTITY_COUNT);
  const terms = [...parts]; // not frozen: V8 does not inline the access to an element of a frozen array
  const detailed = parts.filter((part) => part.addDetail !== undefined);

  function fillMembers(composition: Composition, order: Order): void {
    fillPlasma(point, composition);
    const count = order === 2 ? SECOND_ORDER_COUNT : MEMBER_COUNT;
    for (let i = 0; i < count; i++) members[i] = 0;
    for (let i = 0; i < terms.length; i++) terms[i]!.add(point, composition, order, members);
  }

  function fillDetail(composition: Composition): void {
    for (let i = 0; i < detailed.length; i++) detailed[i]!.addDetail!(point, composition);
  }

  function fillCold(composition: Composition): void {
    cold.fill(0);
    for (const part of parts) {
      part.addColdSlopes?.(point, composition, cold);
      cold[2]! += part.residualEntropy?.(composition) ?? 0;
    }
  }

  function fillThermodynamics(composition: Composition, row: number): void {
    if (point[TEMPERATURE] === 0) fillCold(composition);
    fillQuantities(point, members, cold, quantities, row);
  }

  return Object.freeze({
    point,
    members,
    cold,
    quantities,
    fillMembers,
    fillDetail,
    fillThermodynamics,
    fillPlasma: () => fillPlasmaQuantities(point, quantities),
  });
}

/**
 * Working space for loops that must not allocate: write a point into a record, read members or quantities from others.
 *
 * The step below `state` and `evaluate`, which are made of it; inverse questions are too. Numbers travel in records
 * because a double that crosses a call which is not inlined is boxed.
 */
import { FermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { DENSITY, fillPlasma, POINT_LENGTH, TEMPERATURE } from "../matter/plasma.js";
import { notesOf } from "../matter/species-list.js";
import type { Contribution } from "./contribution.js";
import { commonDomain } from "./domain.js";
import { MEMBER_COUNT, moveMembers, type Order, SECOND_ORDER_COUNT } from "./free-energy.js";
import { fillPlasmaQuantities, fillQuantities, QUANTITY_COUNT } from "./quantities.js";
import { ANSWERED } from "./refusal-numbers.js";
import { addFromElectronDensity, SPECIES_LENGTH } from "./species-members.js";
import { refuseUnstable } from "./stability.js";

/** Records of one point and the steps that fill them; the point is not checked, and nothing is allocated. */
export interface Evaluator {
  /** The record of the point (matter/plasma.ts): its first two slots, density and temperature, are the input. */
  readonly point: Float64Array;
  /** Members of the sum (free-energy.ts), erg/g, after {@link Evaluator.fillMembers}. */
  readonly members: Float64Array;
  /** At T = 0: limits of c_v/T and (dP/dT)/(rho T), and the residual entropy. */
  readonly cold: Float64Array;
  /** Step in ln rho and ln T of {@link Evaluator.move}. */
  readonly step: Float64Array;
  /** Quantities in the order of `quantityNames`, after the two steps that fill them. */
  readonly quantities: Float64Array;
  /** Members of the sum at the point: 6 for order 2, 11 for order 3. */
  fillMembers(composition: Composition, order: Order): void;
  /** What only some callers want and costs extra (the density of positrons); after the members. */
  fillDetail(composition: Composition): void;
  /**
   * Moves point and second-order members by {@link Evaluator.step}, so small that its square does not count; after
   * members of order 3. A solver's last step costs no evaluation.
   */
  move(composition: Composition): void;
  /**
   * Quantities that follow from the members; `row` is for the error message, -1 for none.
   * @throws `unstable`, with the place, and with the temperature and the density from which on the sum is stable
   */
  fillThermodynamics(composition: Composition, row: number): void;
  /**
   * As {@link Evaluator.fillThermodynamics}, but returns a number of `refusalReasons`, 0 where the sum is stable, and
   * throws nothing.
   */
  fillWhereStable(composition: Composition): number;
  /** Quantities that the record of the point holds; after the others. */
  fillPlasma(): void;
  /**
   * Derivatives by the amount of each species (species-members.ts) into `rows`, four numbers per species, in the order of
   * `composition.species`; after the members, of either order. This is the form for networks: two calls per point.
   * @throws `unavailable-quantity` where a contribution does not know them, `length-mismatch`
   */
  fillSpecies(composition: Composition, rows: Float64Array): void;
}

/** An evaluator for a sum of contributions. */
export function evaluatorOf(parts: readonly Contribution[]): Evaluator {
  const point = new Float64Array(POINT_LENGTH);
  const members = new Float64Array(MEMBER_COUNT);
  const cold = new Float64Array(3);
  const step = new Float64Array(2);
  const quantities = new Float64Array(QUANTITY_COUNT);
  const terms = [...parts]; // not frozen: V8 does not inline the access to an element of a frozen array
  const detailed = parts.filter((part) => part.addDetail !== undefined);

  const silent = parts.find((part) => part.addSpecies === undefined && !followsFromMembers(part));
  const perElectron = parts.filter((part) => part.addSpecies === undefined && part.dependsOn === "electron density");
  const own = new Float64Array(MEMBER_COUNT);

  function fillMembers(composition: Composition, order: Order): void {
    fillPlasma(point, composition);
    const count = order === 2 ? SECOND_ORDER_COUNT : MEMBER_COUNT;
    for (let i = 0; i < count; i++) members[i] = 0;
    for (let i = 0; i < terms.length; i++) terms[i]!.add(point, composition, order, members);
  }

  function fillDetail(composition: Composition): void {
    for (let i = 0; i < detailed.length; i++) detailed[i]!.addDetail!(point, composition);
  }

  function move(composition: Composition): void {
    moveMembers(members, step);
    point[DENSITY]! += point[DENSITY]! * step[0]!;
    point[TEMPERATURE]! += point[TEMPERATURE]! * step[1]!;
    fillPlasma(point, composition);
    for (let i = 0; i < parts.length; i++) parts[i]!.rewrite?.(point, composition);
  }

  function fillSpecies(composition: Composition, rows: Float64Array): void {
    if (silent !== undefined) refuseSilent(silent);
    const count = SPECIES_LENGTH * notesOf(composition).list.nuclei.length;
    if (rows.length < count) {
      const allowed = `>= ${count} numbers: ${SPECIES_LENGTH} per species of ${composition.name}`;
      throw new FermistateError("length-mismatch", { argument: "rows", given: rows.length, allowed });
    }
    for (let i = 0; i < count; i++) rows[i] = 0;
    for (let i = 0; i < parts.length; i++) parts[i]!.addSpecies?.(point, composition, rows);
    for (let i = 0; i < perElectron.length; i++) {
      for (let j = 0; j < SECOND_ORDER_COUNT; j++) own[j] = 0;
      perElectron[i]!.add(point, composition, 2, own);
      addFromElectronDensity(own, composition, rows);
    }
  }

  function fillCold(composition: Composition): void {
    cold.fill(0);
    for (const part of parts) {
      part.addColdSlopes?.(point, composition, cold);
      cold[2]! += part.residualEntropy?.(composition) ?? 0;
    }
  }

  function fillWhereStable(composition: Composition): number {
    if (point[TEMPERATURE] === 0) fillCold(composition);
    return fillQuantities(point, members, cold, quantities);
  }

  function fillThermodynamics(composition: Composition, row: number): void {
    const reason = fillWhereStable(composition);
    if (reason !== ANSWERED) refuseUnstable(reason, evaluator, composition, commonDomain(parts), row);
  }

  const evaluator: Evaluator = Object.freeze({
    point,
    members,
    cold,
    step,
    quantities,
    fillMembers,
    move,
    fillDetail,
    fillThermodynamics,
    fillPlasma: () => fillPlasmaQuantities(point, quantities),
    fillWhereStable,
    fillSpecies,
  });
  return evaluator;
}

function followsFromMembers({ dependsOn }: Contribution): boolean {
  return dependsOn === "none" || dependsOn === "electron density";
}

function refuseSilent({ name }: Contribution): never {
  throw new FermistateError("unavailable-quantity", {
    argument: "composition derivatives",
    given: name,
    allowed: "contributions that say how they depend on the composition (dependsOn, addSpecies)",
  });
}

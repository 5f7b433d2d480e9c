/**
 * What each contribution adds to a state: pressure, energy, entropy, heat capacity.
 *
 * A contribution that is a sum itself (the Coulomb plasma) is shown by its terms. Shares add up to the state.
 */
import type { Composition } from "../matter/composition.js";
import { DENSITY, fillPlasma, POINT_LENGTH, TEMPERATURE } from "../matter/plasma.js";
import type { Contribution } from "./contribution.js";
import type { EquationOfState, State } from "./equation-of-state.js";
import { ENERGY, ENTROPY, HEAT, MEMBER_COUNT, PRESSURE } from "./free-energy.js";

/** The share of one contribution, or of one term of it. */
export interface Share {
  /** Name of the contribution or term. */
  readonly name: string;
  /** dyn/cm^2. */
  readonly pressure: number;
  /** erg/g. */
  readonly specificEnergy: number;
  /** erg/(g K). */
  readonly specificEntropy: number;
  /** erg/(g K). */
  readonly heatCapacityV: number;
  /** erg/g. */
  readonly specificFreeEnergy: number;
}

/** A state and who carries what. */
export interface Breakdown {
  /** The whole. */
  readonly state: State;
  /** Contributions in their order, sums by their terms; terms that add nothing are left out. */
  readonly shares: readonly Share[];
}

/**
 * The state at a point with the share of each contribution.
 *
 * @param density - g/cm^3
 * @param temperature - K
 * @throws as the method `state`
 */
export function breakdown(
  equationOfState: EquationOfState,
  density: number,
  temperature: number,
  composition: Composition,
): Breakdown {
  const state = equationOfState.state(density, temperature, composition);
  const point = new Float64Array(POINT_LENGTH);
  const members = new Float64Array(MEMBER_COUNT);
  const shareOf = (part: Contribution): Share => {
    point[DENSITY] = density;
    point[TEMPERATURE] = temperature;
    fillPlasma(point, composition);
    members.fill(0);
    part.add(point, composition, 2, members);
    const left = part.residualEntropy?.(composition) ?? 0;
    return Object.freeze({
      name: part.name,
      pressure: density * members[PRESSURE]!,
      specificEnergy: members[ENERGY]!,
      specificEntropy: temperature === 0 ? left : members[ENTROPY]! / temperature,
      heatCapacityV: temperature === 0 ? 0 : members[HEAT]! / temperature,
      specificFreeEnergy: members[ENERGY]! - members[ENTROPY]!,
    });
  };
  const shares = equationOfState.contributions.flatMap(
    (part) => part.parts?.map(shareOf).filter(adds) ?? [shareOf(part)],
  );
  return Object.freeze({ state, shares: Object.freeze(shares) });
}

function adds({ pressure, specificEnergy, specificEntropy }: Share): boolean {
  return pressure !== 0 || specificEnergy !== 0 || specificEntropy !== 0;
}

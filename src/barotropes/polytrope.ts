/**
 * Polytropes P = K rho^gamma: as a barotrope and as a contribution to the free energy.
 *
 * F = e = K rho^(gamma-1)/(gamma-1): no thermal part, so entropy and heat capacity are zero. The two limits of cold
 * electrons, with x^3 = 3 n_e/n_0 and P_0, n_0 the units of constants.ts (Chandrasekhar 1939, An Introduction to the
 * Study of Stellar Structure, chapter 10):
 *
 *     P = P_0 x^5/15    x << 1    gamma = 5/3, n = 3/2          P = P_0 x^4/12    x >> 1    gamma = 4/3, n = 3
 */
import { electronDensityUnit, electronPressureUnit } from "../constants.js";
import { FermistateError, requireFinite, requireKnown } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import { DENSITY } from "../matter/plasma.js";
import type { Contribution } from "../thermodynamics/contribution.js";
import { ENERGY, type Order, PRESSURE, PRESSURE_R, PRESSURE_RR } from "../thermodynamics/free-energy.js";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_GAMMA,
  BAROTROPE_LENGTH,
  BAROTROPE_PRESSURE,
  type Barotrope,
} from "./barotrope.js";
import { completeBarotrope } from "./from-record.js";
import { requirePositive } from "./options.js";
import { evaluatePieces, type PieceEvaluator } from "./polytropic-pieces.js";

/** A barotrope that is a contribution too: `combine(polytrope(...))` is an equation of state. */
export interface BarotropicContribution extends Barotrope, Contribution {
  /** Where its physics holds, in a sentence or two. */
  readonly validity: string;
}

/** What a polytrope is made from. */
export interface PolytropeOptions {
  /** K in P = K rho^gamma, cgs; > 0. */
  readonly constant: number;
  /** Exponent gamma > 1; either this or `index`. */
  readonly gamma?: number;
  /** Index n > 0, gamma = 1 + 1/n; either this or `gamma`. */
  readonly index?: number;
  /**
   * Highest density at which it answers, g/cm^3.
   * @defaultValue 1e18
   */
  readonly highestDensity?: number;
}

/** K and gamma of cold electrons in their two limits; each is what {@link polytrope} takes. */
export interface DegenerateElectrons {
  /** x << 1: P = K rho^(5/3). */
  readonly nonRelativistic: { readonly constant: number; readonly gamma: number };
  /** x >> 1: P = K rho^(4/3). */
  readonly ultraRelativistic: { readonly constant: number; readonly gamma: number };
}

/**
 * A polytrope, defined from density 0, where P = e = w = 0.
 *
 * Exact: P, e and w to 1 or 2 units of rounding, inversions to 3. As a contribution it ignores composition and
 * temperature. Acausal above some density where gamma > 2: `barotropeFindings` says where.
 *
 * @throws `not-a-number`, `out-of-range`, `invalid-option`
 * @example
 * ```ts
 * import { combine, composition } from "fermistate";
 * import { degenerateElectrons, polytrope } from "fermistate/barotropes";
 * const core = composition({ C12: 0.5, O16: 0.5 });
 * const cold = polytrope(degenerateElectrons(core).nonRelativistic);
 * cold.state(1e4).pressure; // => 1.467266e19
 * combine(cold).state(1e4, 0, core).gamma1; // => 1.666666666666667
 * polytrope({ constant: 1e13, index: 1.5 }).state(8).specificEnergy; // => 6.0e13
 * ```
 */
export function polytrope(options: PolytropeOptions): BarotropicContribution {
  requireKnown("options", options, ["constant", "gamma", "index", "highestDensity"]);
  const constant = requirePositive("constant", options.constant);
  const highest = requirePositive("highestDensity", options.highestDensity ?? 1e18);
  const { gamma: given, index } = options;
  if ((given === undefined) === (index === undefined)) {
    const argument = given === undefined ? "gamma" : "index";
    const allowed = "either gamma or index, and not both";
    throw new FermistateError("invalid-option", { argument, given: given ?? index, allowed });
  }
  const gamma = given ?? 1 + 1 / requirePositive("index", index);
  requireFinite("gamma", gamma, "a finite number > 1");
  if (!(gamma > 1)) {
    const allowed = "> 1; an isothermal gas is barotrope(equationOfState, composition, { temperature })";
    throw new FermistateError("out-of-range", { argument: "gamma", given: gamma, allowed });
  }
  const piece = { start: 0, anchor: 1, pressure: constant, energy: 0, gamma, shift: 0 };
  const name = `polytrope of exponent ${short(gamma)}`;
  const validity = "A polytrope: matter whose exponent is one number at all densities.";
  return contributing(name, validity, [0, highest], evaluatePieces([piece]));
}

/**
 * K and gamma of cold, ideal, uniform electrons of a composition where they are non-relativistic and where they are
 * ultra-relativistic; worked out from the constants, to rounding. Between the limits neither is good: the pressure of
 * the full gas is below both, by 23 % of the smaller one at x = 1.
 *
 * @throws `invalid-composition`; `out-of-range` for matter without electrons
 */
export function degenerateElectrons(composition: Composition): DegenerateElectrons {
  requireComposition(composition);
  const perGram = composition.electronsPerGram;
  if (!(perGram > 0)) {
    const allowed = "matter with electrons";
    throw new FermistateError("out-of-range", { argument: "composition", given: composition.name, allowed });
  }
  const cube = (3 * perGram) / electronDensityUnit; // x^3 at 1 g/cm^3
  const x = Math.cbrt(cube);
  return Object.freeze({
    nonRelativistic: Object.freeze({ constant: (electronPressureUnit / 15) * cube * x * x, gamma: 5 / 3 }),
    ultraRelativistic: Object.freeze({ constant: (electronPressureUnit / 12) * cube * x, gamma: 4 / 3 }),
  });
}

/** A barotrope of pieces with its form as a contribution. */
export function contributing(
  name: string,
  validity: string,
  density: readonly [number, number],
  pieces: PieceEvaluator,
): BarotropicContribution {
  const { fillAtDensity, fillAtPressure, fillAtPotential, curvature } = pieces;
  const record = new Float64Array(BAROTROPE_LENGTH);
  const range = Object.freeze(density);
  const barotrope = completeBarotrope({
    name,
    validity,
    density: range,
    jumps: Object.freeze([]),
    fillAtDensity,
    fillAtPressure,
    fillAtPotential,
  });
  return Object.freeze({
    ...barotrope,
    domain: Object.freeze({
      density: Object.freeze([Math.max(range[0], 1e-20), range[1]] as const),
      temperature: Object.freeze([1, 1e13] as const),
      zeroTemperature: true,
    }),
    add(point: Float64Array, _composition: Composition, order: Order, members: Float64Array): void {
      record[BAROTROPE_DENSITY] = point[DENSITY]!;
      fillAtDensity(record);
      const specific = record[BAROTROPE_PRESSURE]! / record[BAROTROPE_DENSITY]!;
      members[ENERGY]! += record[BAROTROPE_ENERGY]!;
      members[PRESSURE]! += specific;
      members[PRESSURE_R]! += record[BAROTROPE_GAMMA]! * specific;
      if (order === 3) members[PRESSURE_RR]! += curvature(record);
    },
  });
}

const short = (value: number): string => String(Number(value.toPrecision(6)));

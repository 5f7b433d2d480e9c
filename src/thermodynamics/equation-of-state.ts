/**
 * The interface that a solver sees: a state at density, temperature and composition; a batch of them; the derivatives.
 *
 * Conventions: cgs units. Density is baryon mass density rho = n_B m_u with integer mass numbers (conserved; nuclear
 * binding is not in rho c^2). Specific energy excludes the rest mass of ions and of net electrons and includes the
 * 2 m_e c^2 of every electron-positron pair.
 */
import type { Composition } from "../matter/composition.js";
import type { CompositionInput } from "../matter/composition-rows.js";
import type { Contribution, Domain } from "./contribution.js";
import type { Evaluator } from "./evaluator.js";
import type { Order } from "./free-energy.js";
import type { QuantityName } from "./quantities.js";

/** Quantities that are undefined unless a contribution (the electron gas) provides them. */
export type OptionalQuantity =
  | "electronChemicalPotential"
  | "electronDegeneracy"
  | "positronDensity"
  | "crystalFraction";

/**
 * The thermodynamic state at one point; immutable. Every field but the first three is a quantity of
 * {@link quantities}, where its unit and meaning stand.
 */
export type State = {
  /** Baryon mass density, g/cm^3, as given. */
  readonly density: number;
  /** Temperature, K, as given. */
  readonly temperature: number;
  /** Composition, as given. */
  readonly composition: Composition;
} & { readonly [Name in Exclude<QuantityName, OptionalQuantity>]: number } & {
  readonly [Name in OptionalQuantity]: number | undefined;
};

/** Input columns of a batch: the same length, one row per point. */
export interface BatchInput {
  /** Baryon mass density, g/cm^3. */
  readonly density: Float64Array;
  /** Temperature, K. */
  readonly temperature: Float64Array;
  /** One composition for all rows, one per row, or a matrix of nucleon fractions with a row for each. */
  readonly composition: CompositionInput;
}

/** A column of the reasons for which rows are refused. */
export interface RefusedRows {
  /**
   * Where given, a row without an answer gets the number of its reason here (`refusalReasons`; 0 for an answer), its
   * other outputs stay as they were, and nothing is thrown for it: for schemes that repair such rows themselves. Compositions
   * that are none are refused all the same, before the first row.
   */
  readonly refused?: Uint8Array;
}

/** Output columns of a batch, owned by the caller, at least as long as the input; only those given are computed. */
export type BatchOutput = { readonly [Name in QuantityName]?: Float64Array } & RefusedRows;

/** An equation of state: a sum of contributions behind one interface. */
export interface EquationOfState {
  /** What it is made of, in words. */
  readonly name: string;
  /** The terms of its free energy, in the order they are added. */
  readonly contributions: readonly Contribution[];
  /** Where all of them answer. */
  readonly domain: Domain;

  /**
   * The state at one point.
   *
   * @param density - baryon mass density, g/cm^3, > 0 and within {@link EquationOfState.domain}
   * @param temperature - K, within the domain; 0 where the domain says so
   * @param composition - from `composition(...)`
   * @throws `not-a-number`, `out-of-range`, `outside-domain`, `invalid-composition`, `unstable`
   */
  state(density: number, temperature: number, composition: Composition): State;

  /**
   * Many states at once: writes the columns of `output` that are given and allocates nothing per point (a composition where
   * they come as a matrix of fractions).
   *
   * All inputs are checked before the first row is written, and the first row without an answer is refused; with a
   * column `refused` in the output every other row is answered.
   * @throws as {@link EquationOfState.state}, with the row; `length-mismatch`; `unavailable-quantity`
   */
  evaluate(input: BatchInput, output: BatchOutput): void;

  /**
   * The natural derivatives F_ij = rho^i T^j d^(i+j)F/(d rho^i d T^j) of the specific free energy, erg/g.
   *
   * @param order - 2: the six of `naturalOrder` up to second order; 3: all eleven, third order and (2,2)
   */
  freeEnergy(density: number, temperature: number, composition: Composition, order?: Order): FreeEnergyDerivatives;

  /** Working space for a loop of one's own that must neither allocate nor check: see {@link Evaluator}. */
  evaluator(): Evaluator;
}

/** Scaled derivatives rho^i T^j d^(i+j)F/(d rho^i d T^j), erg/g; the third-order ones only at order 3. */
export interface FreeEnergyDerivatives {
  /** F. */
  readonly f00: number;
  /** rho F_rho. */
  readonly f10: number;
  /** T F_T. */
  readonly f01: number;
  /** rho^2 F_rho,rho. */
  readonly f20: number;
  /** rho T F_rho,T. */
  readonly f11: number;
  /** T^2 F_TT. */
  readonly f02: number;
  /** rho^3 F_rho,rho,rho. */
  readonly f30?: number;
  /** rho^2 T F_rho,rho,T. */
  readonly f21?: number;
  /** rho T^2 F_rho,T,T. */
  readonly f12?: number;
  /** T^3 F_TTT. */
  readonly f03?: number;
  /** rho^2 T^2 F_rho,rho,T,T. */
  readonly f22?: number;
}

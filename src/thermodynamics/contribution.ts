/**
 * The contract of a contribution: one term of the Helmholtz free energy of matter.
 *
 * Write one function that adds the term's members (free-energy.ts) and everything else follows: pressure, energy,
 * entropy and all their derivatives, the batch form, grids and comparison. A contribution is stateless to its caller.
 */
import type { Composition } from "../matter/composition.js";
import type { Order } from "./free-energy.js";

/** Where something answers, in density [g/cm^3] and temperature [K], ends included. */
export interface Domain {
  /** Lowest and highest density, g/cm^3. */
  readonly density: readonly [lowest: number, highest: number];
  /** Lowest and highest temperature, K. */
  readonly temperature: readonly [lowest: number, highest: number];
  /** True where T = 0 is legal too. */
  readonly zeroTemperature: boolean;
}

/**
 * The two sides of a contribution whose particles freeze, each smooth, and the boundary between them: what a search needs
 * so as never to step across.
 */
export interface PhasePair {
  /** The contribution with its particles a liquid everywhere. */
  readonly liquid: Contribution;
  /** The contribution with its particles a crystal everywhere. */
  readonly crystal: Contribution;
  /**
   * Reads density [g/cm^3] and temperature [K] from slots 0 and 1 of `boundary`, writes the melting temperature of that
   * density (0: none) to slot 2, the melting density of that temperature (Infinity: none) to slot 3 and the highest
   * density of a crystal to slot 4.
   */
  fillBoundary(composition: Composition, boundary: Float64Array): void;
}

/** What of the composition a free energy depends on where it is not the species one by one; see {@link Contribution.dependsOn}. */
export type CompositionDependence = "none" | "electron density" | "ion density";

/** A model of this library with its options, as plain data: what a certificate or the head of a file says about matter. */
export interface Physics {
  /** Name of the model, such as "Coulomb plasma". */
  readonly model: string;
  /** Its options, defaults filled in. */
  readonly options: Readonly<Record<string, string | number | boolean>>;
}

/** One term of the free energy. */
export interface Contribution {
  /** What it is, in words; unique within one equation of state. */
  readonly name: string;
  /** Where it answers. */
  readonly domain: Domain;
  /** Where its physics holds and what is not in it, in a sentence or two: goes into every file and `state` output. */
  readonly validity?: string;
  /**
   * The formulas it stands for, as plain data: itself, or for an interpolation those it was made from. An independent
   * reference is chosen by it (`certify`); leave out where there is none.
   */
  readonly physics?: readonly Physics[];
  /** True where it treats particles without interactions; a sum of such terms is called an ideal plasma. */
  readonly ideal?: boolean;

  /** Names of contributions that it contains or that may not stand beside it; `combine` refuses such a sum. */
  readonly excludes?: readonly string[];
  /** Names of the contributions whose place it takes, where it is a table of them. */
  readonly standsFor?: readonly string[];
  /** Its terms one by one, where it is a sum itself: for a breakdown. */
  readonly parts?: readonly Contribution[];
  /** Its two sides, where it changes phase within its domain. */
  readonly phases?: PhasePair;

  /**
   * For an interpolation: whether density [g/cm^3] and temperature [K] are one of its nodes within a millionth of a cell.
   * There it repeats what it was made from, so `compare` and `certify` count such points and warn: agreement there tells
   * nothing about the points between. Called where it answers. Leave out where nothing is interpolated.
   */
  isNode?(density: number, temperature: number, composition: Composition): boolean;

  /**
   * Adds its members to `members`, in erg/g.
   *
   * `point` is the record of matter/plasma.ts with density, temperature and the plasma variables; `order` says whether
   * the first 6 members are wanted or all 11. Called millions of times: must allocate nothing, must not keep `point`.
   */
  add(point: Float64Array, composition: Composition, order: Order, members: Float64Array): void;

  /**
   * At T = 0 ratios like gamma_3 - 1 = (dP/dT)/(rho c_v) are 0/0. Adds the limits of c_v/T [erg/(g K^2)] to
   * `slopes[0]` and of (dP/dT)/(rho T) [erg/(g K^2)] to `slopes[1]`. Leave out where both vanish.
   */
  addColdSlopes?(point: Float64Array, composition: Composition, slopes: Float64Array): void;

  /** Entropy left at T = 0, erg/(g K): a random alloy, nuclear spins. Leave out where it is zero. */
  residualEntropy?(composition: Composition): number;

  /**
   * Writes into `point` what costs extra and only some callers want (the density of positrons). Called after `add`
   * at the same point.
   */
  addDetail?(point: Float64Array, composition: Composition): void;

  /**
   * Writes into `point` again what `add` wrote there. Called after `add` of order 3 where a solver has moved density and
   * temperature by a step whose square is below rounding. A contribution that writes nothing leaves it out.
   */
  rewrite?(point: Float64Array, composition: Composition): void;

  /**
   * What of the composition it depends on, at given density and temperature: "none" (photons), "electron density" (on
   * rho Y_e alone), "ion density" (pressure and energy on rho Y_i alone, with {@link Contribution.addSpecies} for the rest).
   * Leave out where it is the species one by one. With "none", and with "electron density" unless the members cancel,
   * `addSpecies` is not needed.
   */
  readonly dependsOn?: CompositionDependence;

  /**
   * Adds its derivatives by the amount of each species to `rows`, slots of species-members.ts; called after `add` at the
   * same point, must allocate nothing. Without it and without `dependsOn`, composition derivatives of the sum are
   * refused: silence would count as zero.
   */
  addSpecies?(point: Float64Array, composition: Composition, rows: Float64Array): void;
}

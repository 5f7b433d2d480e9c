/** Piecewise polytropes: exponents and dividing densities, with P and e continuous, the sound speed too if wanted. */
import { FermistateError, requireFinite, requireKnown } from "../errors.js";
import { BAROTROPE_DENSITY, BAROTROPE_LENGTH } from "./barotrope.js";
import { requirePositive } from "./options.js";
import { type BarotropicContribution, contributing } from "./polytrope.js";
import { evaluatePieces, nextPiece, type PolytropicPiece } from "./polytropic-pieces.js";

/** What a piecewise polytrope is made from. */
export interface PiecewisePolytropeOptions {
  /** Exponents Gamma by rising density, one more than `dividingDensities`; the first > 1, all > 0. */
  readonly gammas: readonly number[];
  /** Densities between the pieces, g/cm^3, rising. */
  readonly dividingDensities: readonly number[];
  /** A density at which the pressure is known, g/cm^3; in any piece. */
  readonly referenceDensity: number;
  /** The pressure there, dyn/cm^2. */
  readonly referencePressure: number;
  /**
   * What stays continuous besides P, e and w: nothing, so that the sound speed jumps at each join, or the slope dP/drho
   * and with it the sound speed, by P = K rho^Gamma + Lambda.
   * @defaultValue "pressure"
   */
  readonly continuous?: "pressure" | "sound speed";
  /**
   * e at density 0, erg/g.
   * @defaultValue 0
   */
  readonly energyAtZeroDensity?: number;
  /**
   * Highest density at which it answers, g/cm^3.
   * @defaultValue 1e18
   */
  readonly highestDensity?: number;
  /**
   * What it is, in words.
   * @defaultValue its number of pieces
   */
  readonly name?: string;
  /** Where its physics holds, in a sentence or two. */
  readonly validity?: string;
}

/** A piecewise polytrope and the numbers that solvers take. */
export interface PiecewisePolytrope extends BarotropicContribution {
  /** Its pieces by rising density. */
  readonly pieces: readonly {
    /** Density from which the piece holds, g/cm^3. */
    readonly density: number;
    /** Gamma. */
    readonly gamma: number;
    /** K in P = K rho^Gamma + Lambda, cgs. */
    readonly constant: number;
    /** Lambda, dyn/cm^2; 0 unless the sound speed is continuous. */
    readonly shift: number;
  }[];
}

/**
 * A piecewise polytrope P = K_i rho^Gamma_i (+ Lambda_i), defined from density 0; only one K is given, the others
 * follow.
 *
 * P, e and w are continuous to rounding: each piece starts from the point where the last one ends (Read, Lackey, Owen &
 * Friedman 2009, Phys. Rev. D 79, 124032; with a continuous sound speed O'Boyle, Markakis, Stergioulas & Read 2020,
 * Phys. Rev. D 102, 083027). P, e, w to 4 units of rounding.
 *
 * @throws `invalid-option`, `length-mismatch`, `not-a-number`, `out-of-range`
 * @example
 * ```ts
 * import { piecewisePolytrope } from "fermistate/barotropes";
 * const soft = piecewisePolytrope({
 *   gammas: [5 / 3, 4 / 3],
 *   dividingDensities: [1e6],
 *   referenceDensity: 1e6,
 *   referencePressure: 2e22,
 * });
 * soft.state(1e9).pressure; // => 2.00000e26
 * soft.state(1e9).gamma1; // => 1.333333333333333
 * ```
 */
export function piecewisePolytrope(options: PiecewisePolytropeOptions): PiecewisePolytrope {
  requireKnown("options", options, [
    "gammas",
    "dividingDensities",
    "referenceDensity",
    "referencePressure",
    "continuous",
    "energyAtZeroDensity",
    "highestDensity",
    "name",
    "validity",
  ]);
  const { gammas, dividingDensities, continuous = "pressure" } = options;
  const smooth = continuous === "sound speed";
  if (!smooth && continuous !== "pressure") {
    const allowed = `"pressure" or "sound speed"`;
    throw new FermistateError("invalid-option", { argument: "continuous", given: continuous, allowed });
  }
  checkLists(gammas, dividingDensities);
  const density = requirePositive("referenceDensity", options.referenceDensity, " g/cm^3");
  const pressure = requirePositive("referencePressure", options.referencePressure, " dyn/cm^2");
  const energy = requireFinite("energyAtZeroDensity", options.energyAtZeroDensity ?? 0, "a finite number, erg/g");
  const highest = requirePositive("highestDensity", options.highestDensity ?? 1e18, " g/cm^3");
  const last = dividingDensities.at(-1) ?? 0;
  if (!(highest > last)) {
    throw new FermistateError("out-of-range", { argument: "highestDensity", given: highest, allowed: `> ${last}` });
  }
  // Every P and e - e(0) is proportional to the first K: join from K = 1 at the first break, then scale to the reference.
  const anchor = dividingDensities[0] ?? density;
  const unscaled = joined(gammas, dividingDensities, anchor, 1, 0, smooth);
  const record = new Float64Array(BAROTROPE_LENGTH);
  record[BAROTROPE_DENSITY] = density;
  evaluatePieces(unscaled).fillAtDensity(record);
  const pieces = joined(gammas, dividingDensities, anchor, pressure / record[1]!, energy, smooth);
  const name = options.name ?? `piecewise polytrope of ${pieces.length} pieces`;
  const validity = options.validity ?? "A piecewise polytrope: as good as what it was fitted to, where it was fitted.";
  return Object.freeze({
    ...contributing(name, validity, [0, highest], evaluatePieces(pieces)),
    kinks: Object.freeze(pieces.slice(1).map((one) => one.energy + one.pressure / one.anchor)),
    pieces: Object.freeze(
      pieces.map(({ start, anchor: at, pressure: p, gamma, shift }) =>
        Object.freeze({ density: start, gamma, constant: (p - shift) / at ** gamma, shift }),
      ),
    ),
  });
}

/** The pieces, the first through `pressure` at `anchor`. */
function joined(
  gammas: readonly number[],
  breaks: readonly number[],
  anchor: number,
  pressure: number,
  energy: number,
  smooth: boolean,
): PolytropicPiece[] {
  const pieces: PolytropicPiece[] = [{ start: 0, anchor, pressure, energy, gamma: gammas[0]!, shift: 0 }];
  const record = new Float64Array(BAROTROPE_LENGTH);
  for (let i = 1; i < gammas.length; i++) {
    record[BAROTROPE_DENSITY] = breaks[i - 1]!;
    evaluatePieces(pieces).fillAtDensity(record);
    pieces.push(nextPiece(record, pieces[i - 1]!, gammas[i]!, smooth));
  }
  return pieces;
}

function checkLists(gammas: unknown, dividingDensities: unknown): void {
  for (const [argument, list] of Object.entries({ gammas, dividingDensities })) {
    if (Array.isArray(list)) continue;
    throw new FermistateError("invalid-option", { argument, given: list, allowed: "an array of numbers" });
  }
  const exponents = gammas as readonly unknown[];
  const breaks = dividingDensities as readonly unknown[];
  if (exponents.length === 0 || exponents.length !== breaks.length + 1) {
    const allowed = `${breaks.length + 1} exponents, one more than dividing densities`;
    throw new FermistateError("length-mismatch", { argument: "gammas", given: exponents.length, allowed });
  }
  for (const [i, gamma] of exponents.entries()) {
    requirePositive(`gammas[${i}]`, gamma);
    if (i === 0 && !((gamma as number) > 1)) {
      const allowed = "> 1, so that the energy at density 0 is finite";
      throw new FermistateError("out-of-range", { argument: "gammas[0]", given: gamma, allowed });
    }
  }
  for (const [i, density] of breaks.entries()) {
    const lower = i === 0 ? 0 : (breaks[i - 1] as number);
    const here = requirePositive(`dividingDensities[${i}]`, density, " g/cm^3");
    if (here > lower) continue;
    throw new FermistateError("out-of-range", {
      argument: `dividingDensities[${i}]`,
      given: here,
      allowed: `> ${lower} g/cm^3: they rise`,
    });
  }
}

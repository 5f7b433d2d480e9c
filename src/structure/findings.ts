/** Findings about a star: what a reader of its numbers should know before using them. */
import type { BarotropeLimit } from "../barotropes/barotrope.js";

/**
 * What was found.
 *
 * - `acausal`: sound is faster than light somewhere in the star
 * - `unstable-matter`: somewhere in the star the pressure falls with rising density
 * - `unstable-star`: the mass falls with central density: the star is unstable against radial collapse or expansion
 * - `relativity-neglected`: a Newtonian star in which general relativity changes more than 1 % of P_c + rho_c c^2
 * - `cut-surface`: the barotrope begins at a pressure above zero; the layers outside are missing from the star
 * - `electron-capture`, `neutron-drip`, `extrapolated`: the centre lies beyond a limit that the barotrope states
 * - `digits-lost`: the potential at the centre is so close to that at the surface that its rounding spoils the star
 */
export type StarFindingCode =
  | "acausal"
  | "unstable-matter"
  | "unstable-star"
  | "relativity-neglected"
  | "cut-surface"
  | "digits-lost"
  | BarotropeLimit["code"];

/** One finding; frozen. */
export interface StarFinding {
  /** What was found. */
  readonly code: StarFindingCode;
  /** The number judged. */
  readonly value: number;
  /** The limit it has crossed. */
  readonly threshold: number;
  /** One plain sentence: what it means for the user. */
  readonly message: string;
}

/** The numbers that are judged. */
export interface Judged {
  /** (c_s/c)^2 at its largest; 0 in Newton's theory. */
  readonly fastest: number;
  /** dP/d ln rho at its smallest, dyn/cm^2. */
  readonly softest: number;
  /** d ln M/d ln rho_c. */
  readonly massSlope: number;
  /** P_c/(rho_c c^2) of a Newtonian star; 0 in Einstein's theory. */
  readonly neglected: number;
  /** P/rho at the surface over G M/R: the share of the radius that is missing, but for a factor of a few. */
  readonly missing: number;
  /** Rounding of the potential over its rise from surface to centre. */
  readonly rounding: number;
  /** The relative error that the star may have. */
  readonly tolerance: number;
  /** g/cm^3. */
  readonly centralDensity: number;
  /** Limits of the matter. */
  readonly limits: readonly BarotropeLimit[];
}

/** Findings about a star. */
export function starFindings(judged: Judged): readonly StarFinding[] {
  const found: StarFinding[] = [];
  const add = (code: StarFindingCode, value: number, threshold: number, message: string): void => {
    found.push(Object.freeze({ code, value, threshold, message }));
  };
  const { fastest, softest, massSlope, neglected, missing, rounding, tolerance, centralDensity } = judged;
  if (fastest > 1) {
    add(
      "acausal",
      Math.sqrt(fastest),
      1,
      "Sound is faster than light in this star: the matter cannot be as it is described.",
    );
  }
  if (softest < 0) {
    const message =
      "Somewhere in this star the pressure falls with rising density: such matter does not stay as it is.";
    add("unstable-matter", softest, 0, message);
  }
  // A star at its maximum, found to rounding, is not called unstable.
  if (massSlope < -1e-6) {
    add("unstable-star", massSlope, 0, "The mass falls with rising central density: this equilibrium does not last.");
  }
  if (neglected > 0.01) {
    add(
      "relativity-neglected",
      neglected,
      0.01,
      "Newton's theory, where general relativity changes the star by per cents.",
    );
  }
  if (missing > 1e-8) {
    const message =
      "The barotrope begins at a pressure above zero, so the star ends there: the layers outside, about this share of the " +
      "radius (up to ten times as much), are missing. A lower lowest density brings them back.";
    add("cut-surface", missing, 1e-8, message);
  }
  for (const { code, density, side, message } of judged.limits) {
    if (side === "above" ? centralDensity > density : centralDensity < density) {
      add(code, centralDensity, density, message);
    }
  }
  if (rounding > tolerance) {
    const message =
      "The zero of energy of this matter is so far off that rounding leaves mass and radius no better than this.";
    add("digits-lost", rounding, tolerance, message);
  }
  return Object.freeze(found);
}

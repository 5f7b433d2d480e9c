/** Findings about a star: what a reader of its numbers should know before using them. */

/**
 * What was found.
 *
 * - `acausal`: sound is faster than light somewhere in the star
 * - `unstable-star`: the mass falls with central density: the star is unstable against radial collapse or expansion
 * - `relativity-neglected`: a Newtonian star in which general relativity changes more than 1 % of P_c + rho_c c^2
 * - `cut-surface`: the matter ends at a pressure above zero; what lies outside is missing
 */
export type StarFindingCode = "acausal" | "unstable-star" | "relativity-neglected" | "cut-surface";

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
  /** d ln M/d ln rho_c. */
  readonly massSlope: number;
  /** P_c/(rho_c c^2) of a Newtonian star; 0 in Einstein's theory. */
  readonly neglected: number;
  /** P/rho at the surface over G M/R: the share of the radius that is missing, but for a factor of a few. */
  readonly missing: number;
}

/** Findings about a star. */
export function starFindings(judged: Judged): readonly StarFinding[] {
  const found: StarFinding[] = [];
  const add = (code: StarFindingCode, value: number, threshold: number, message: string): void => {
    found.push(Object.freeze({ code, value, threshold, message }));
  };
  const { fastest, massSlope, neglected, missing } = judged;
  if (fastest > 1) {
    add(
      "acausal",
      Math.sqrt(fastest),
      1,
      "Sound is faster than light in this star: the matter cannot be as it is described.",
    );
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
      "The matter ends at a pressure above zero: layers are missing, this share of the radius or some times as much.";
    add("cut-surface", missing, 1e-8, message);
  }
  return Object.freeze(found);
}

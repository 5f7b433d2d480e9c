/**
 * The coordinates of the start table: what docs/generators/start-table.ts fits in and start-value.ts looks up with.
 * No imports, so that the bundler inlines the constants.
 */

/** The branch point of the Fermi integrals at e^eta = -1 lies at b = -2.61: logarithms of 2.6 + X see it alike. */
export const BRANCH_POINT = 2.6;
const LARGEST_THETA = 4000;
const SCALE_THETA = 0.3;
const SCALE_U = 2;
const DENSITY_SCALE = 0.7;
/** (2/sqrt(pi/2))^(2/3): makes [theta (1 + alpha theta)]^(3/2) right in both limits of N(theta). */
const ALPHA = 1.3655681265105915;
/** sqrt(pi/2). */
const NORM = 1.2533141373155001;
/** Coefficients per direction of a patch. */
export const PATCH_SIZE = 10;
/** Fermi energy over temperature at u = 1, where the degenerate start takes over. */
const DEGENERATE_START = 39;
/** Patch borders in the temperature coordinate. */
export const PATCHES_T: readonly number[] = [0, 0.25, 0.5, 0.75, 0.92, 1];
/** Patch borders in u. */
export const PATCHES_U: readonly number[] = [0, 0.3, 0.62, 1];

/** X at which the degenerate start takes over: p^3/(3N) at Fermi energy 39 theta. */
export function largestX(theta: number, classical: number): number {
  const energy = DEGENERATE_START * theta;
  const p2 = energy * (energy + 2);
  return (p2 * Math.sqrt(p2)) / (3 * classical);
}

/** t = theta/(theta + s(u)), stretched so that t = 1 at the largest temperature (u = 0). */
export function temperatureCoordinate(theta: number, u: number): number {
  return (theta / (theta + SCALE_THETA / (1 + SCALE_U * u))) * ((LARGEST_THETA + SCALE_THETA) / LARGEST_THETA);
}

/** The temperature at coordinate t; inverse of {@link temperatureCoordinate}. */
export function temperatureAt(t: number, u: number): number {
  const ratio = (t * LARGEST_THETA) / (LARGEST_THETA + SCALE_THETA);
  return ((SCALE_THETA / (1 + SCALE_U * u)) * ratio) / (1 - ratio);
}

/** Coordinate of the density fit, in [-1, 1]. */
export function densityCoordinate(theta: number): number {
  return (2 * theta) / (theta + DENSITY_SCALE) - 1;
}

/** The temperature at a coordinate of the density fit. */
export function densityTemperature(x: number): number {
  return (DENSITY_SCALE * (1 + x)) / (1 - x);
}

/** Both limits of the classical density: sqrt(pi/2) [theta (1 + alpha theta)]^(3/2). */
export function densityLimit(theta: number): number {
  const y = theta * (1 + ALPHA * theta);
  return NORM * y * Math.sqrt(y);
}

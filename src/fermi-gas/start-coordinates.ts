/**
 * The coordinates of the start table, which docs/generators/start-table.ts fits in and start-value.ts looks up with.
 * No imports, so that the bundler inlines the constants.
 *
 *     density:      N = sqrt(pi/2) [theta (1 + alpha theta)]^(3/2) e^(polynomial in s),   s = 2 theta/(theta + 0.7) - 1
 *     X:            u = ln[(2.6 + X)/(2.6 + X_0)] / ln[(2.6 + X_1)/(2.6 + X_0)]
 *     temperature:  t = [theta/(theta + 0.3/(1 + 2u))] (4000.3/4000)
 *
 * X_0 = 2 e^(-1/theta) is the X of no net charge, X_1 = p^3/(3N) that of Fermi energy 39 theta, where the degenerate
 * start takes over. The branch point of the Fermi integrals at e^eta = -1 lies at b = -2.61: logarithms of 2.6 + X see
 * it alike from everywhere.
 */

export const BRANCH_POINT = 2.6;
export const DENSITY_SCALE = 0.7;
export const SCALE_THETA = 0.3;
export const SCALE_U = 2;
/** (4000 + 0.3)/4000: t = 1 at theta = 4000 and u = 0. */
export const STRETCH = 1.000075;
/** (2/sqrt(pi/2))^(2/3): makes N right in both limits. */
export const ALPHA = 1.3655681265105915;
/** sqrt(pi/2). */
export const NORM = 1.2533141373155001;
/** Fermi energy over temperature at u = 1; equal to DEGENERATE_START of accuracy.ts. */
export const LAST_RATIO = 39;
/** Coefficients per direction of a patch. */
export const PATCH_SIZE = 10;

// Scratch of a look-up.

export const TABLE_THETA = 0;
export const TABLE_CLASSICAL = 1;
export const TABLE_X = 2;
export const TABLE_THRESHOLD = 3;
export const TABLE_U = 4;
export const TABLE_T = 5;
export const TABLE_D = 6;
export const TABLE_LENGTH = 8;

/** Patch borders in t. */
export const PATCHES_T: readonly number[] = [0, 0.25, 0.5, 0.75, 0.92, 1];
/** Patch borders in u. */
export const PATCHES_U: readonly number[] = [0, 0.3, 0.62, 1];

/** Writes TABLE_U and TABLE_T from TABLE_THETA, TABLE_CLASSICAL (N), TABLE_X and TABLE_THRESHOLD (e^(-1/theta)). */
export function fillCoordinates(table: Float64Array): void {
  const theta = table[TABLE_THETA]!;
  const lowest = BRANCH_POINT + 2 * table[TABLE_THRESHOLD]!;
  const energy = LAST_RATIO * theta;
  const p2 = energy * (energy + 2);
  const highest = BRANCH_POINT + (p2 * Math.sqrt(p2)) / (3 * table[TABLE_CLASSICAL]!);
  let u = Math.log((BRANCH_POINT + table[TABLE_X]!) / lowest) / Math.log(highest / lowest);
  if (u > 1) u = 1;
  table[TABLE_U] = u;
  table[TABLE_T] = (theta / (theta + SCALE_THETA / (1 + SCALE_U * u))) * STRETCH;
}

/**
 * A derivative from values alone, with an honest error: central differences, extrapolated to zero step.
 *
 * Richardson's extrapolation in the form of Ridders 1982 (Advances in Engineering Software 4, 75): steps are halved, each
 * column of the tableau takes out another even power of the step, and the entry is kept whose distance to its neighbours is
 * least. That distance, and the rounding of the values over the step, are the error. Where a jump lies between the points
 * the entries do not settle, and the error is as large as the derivative: such a place says nothing.
 */

/** Steps of the difference, from large to small; in a logarithm, so of order 1 is the scale of physics. */
export const steps: readonly number[] = [0.04, 0.02, 0.01, 0.005];

/** Rounding of a value: an equation of state is seldom better than some units in the last place. */
const rounding = 4 * 2 ** -52;

/** A derivative and how far it can be trusted. */
export interface Measured {
  readonly value: number;
  readonly error: number;
}

/**
 * The derivative of a function whose values at +steps[i] and -steps[i] are given.
 *
 * @param scale - size of the function near the point, for the rounding of its values
 */
export function derivativeOf(above: readonly number[], below: readonly number[], scale: number): Measured {
  let best: Measured = { value: Number.NaN, error: Number.POSITIVE_INFINITY };
  let previous: number[] = [];
  for (let i = 0; i < steps.length; i++) {
    const row = [(above[i]! - below[i]!) / (2 * steps[i]!)];
    const floor = (2 * rounding * scale) / steps[i]!;
    for (let j = 1; j <= i; j++) {
      const factor = 4 ** j;
      row.push((factor * row[j - 1]! - previous[j - 1]!) / (factor - 1));
      const distance = Math.max(Math.abs(row[j]! - row[j - 1]!), Math.abs(row[j]! - previous[j - 1]!));
      if (distance + floor < best.error) best = { value: row[j]!, error: distance + floor };
    }
    previous = row;
  }
  return best;
}

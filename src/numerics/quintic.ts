/**
 * Quintic Hermite interpolation on [0, 1]: the polynomial of degree five through value, slope and curvature at both ends.
 *
 * Two variables: the tensor product, from nine derivatives f_ij, i, j = 0..2, at each of the four corners. Value, first and
 * second derivatives are continuous from cell to cell (Swesty 1996, J. Comput. Phys. 127, 118, section 3).
 */

/** Numbers of {@link fillBasis}: six basis functions, and as many of their first, second and third derivatives. */
export const BASIS_LENGTH = 24;

/**
 * The basis at t: of value, slope and curvature at 0 (slots 0..2) and at 1 (3..5); slots 6.. first, 12.. second,
 * 18.. third derivatives. `basis[0]` is t on entry.
 */
export function fillBasis(basis: Float64Array): void {
  const t = basis[0]!;
  const r = 1 - t;
  const t2 = t * t;
  const r2 = r * r;
  const tr = t * r;
  // Symmetric forms: each vanishes at its ends to the order it should, without cancellation.
  basis[0] = r2 * r * (1 + 3 * t + 6 * t2);
  basis[1] = r2 * tr * (1 + 3 * t);
  basis[2] = 0.5 * r2 * r * t2;
  basis[3] = t2 * t * (1 + 3 * r + 6 * r2);
  basis[4] = -t2 * tr * (1 + 3 * r);
  basis[5] = 0.5 * t2 * t * r2;
  const slope = 30 * tr * tr;
  basis[6] = -slope;
  basis[7] = r2 * (1 + 2 * t - 15 * t2);
  basis[8] = 0.5 * r * tr * (2 - 5 * t);
  basis[9] = slope;
  basis[10] = t2 * (1 + 2 * r - 15 * r2);
  basis[11] = -0.5 * t * tr * (2 - 5 * r);
  const bend = 60 * tr * (r - t);
  basis[12] = -bend;
  basis[13] = -12 * tr * (3 - 5 * t);
  basis[14] = r * (1 - 8 * t + 10 * t2);
  basis[15] = bend;
  basis[16] = 12 * tr * (3 - 5 * r);
  basis[17] = t * (1 - 8 * r + 10 * r2);
  const twist = 60 * (1 - 6 * tr);
  basis[18] = -twist;
  basis[19] = -12 * (3 - 16 * t + 15 * t2);
  basis[20] = -9 + 36 * t - 30 * t2;
  basis[21] = twist;
  basis[22] = -12 * (3 - 16 * r + 15 * r2);
  basis[23] = 9 - 36 * r + 30 * r2;
}

/**
 * The same polynomial by powers of t: from value, slope and curvature at 0 (slots 0..2 of `ends`) and at 1 (3..5) to the six
 * coefficients, in place. What is not linear is a difference of small numbers before it is multiplied.
 */
export function toPowers(ends: Float64Array): void {
  const bend = 0.5 * ends[2]!;
  const slope = ends[4]! - ends[1]! - ends[2]!;
  const rise = ends[3]! - ends[0]! - ends[1]! - bend;
  const turn = 0.5 * (ends[5]! - ends[2]!);
  ends[2] = bend;
  ends[3] = 10 * rise - 4 * slope + turn;
  ends[4] = 7 * slope - 15 * rise - 2 * turn;
  ends[5] = 6 * rise - 3 * slope + turn;
}

/**
 * The field outside a star in a static tide of order 2: from d ln H/d ln r at the surface to the Love number.
 *
 * H = r^2 (1 - z) E + 2 k_2 R^5 r^-3 (1 - z)^-1 F(1, 3; 6; z), z = 2GM/(r c^2): the growing and the decaying solution of
 * Regge & Wheeler's equation, the associated Legendre functions P_2^2 and Q_2^2 of c^2 r/(G M) - 1 (Hinderer 2008, ApJ 677,
 * 1216). The usual closed form in logarithms (her eq. 23) cancels like (GM/(R c^2))^5, all digits for a white dwarf; the
 * hypergeometric series does not, and its z = 0 is Newton's theory.
 */

/** k_2 from y = d ln H/d ln r just outside the surface and the compactness G M/(R c^2) (0 in Newton's theory). */
export function loveNumber(y: number, compactness: number): number {
  const z = 2 * compactness;
  // F(1, 3; 6; z) and z F'.
  let term = 1;
  let sum = 0;
  let slope = 0;
  for (let k = 0; term > 1e-17 * sum; k++) {
    sum += term;
    slope += k * term;
    term *= ((k + 3) / (k + 6)) * z;
  }
  const growing = (2 * (1 - compactness)) / (1 - z);
  const decaying = -3 - z / (1 - z) - slope / sum; // z falls outwards
  return ((1 - z) ** 2 / (2 * sum)) * ((growing - y) / (y - decaying));
}

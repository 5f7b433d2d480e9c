/**
 * Ideal ions and radiation, erg/g.
 *
 *     ions        sum_j N_j kT [ln(n_j lambda_j^3/g_j) - 1],  lambda_j^2 = 2 pi hbar^2/(M_j kT)    (Sackur 1911, Tetrode 1912)
 *     radiation   -a T^4/(3 rho),  a = 8 pi^5 k^4/(15 h^3 c^3)                                      (Planck 1901)
 */
import * as constants from "./constants.js";
import type { ExactSpecies, Plasma } from "./plasma.js";
import { type Series, sumOf } from "./series.js";

/** The classical gas of some of the species; undefined where there are none. */
export function idealGas({ density, kT, hbar, pi }: Plasma, species: readonly ExactSpecies[]): Series | undefined {
  if (species.length === 0) return undefined;
  const terms = species.map(({ perGram, mass, g }) => {
    const volume = kT.times(mass).pow(-1).times(hbar.pow(2).times(pi).times(2)).pow("1.5");
    return density.times(perGram.div(g)).times(volume).ln().minus(1).times(perGram);
  });
  return sumOf(terms).times(kT);
}

/** Photons. */
export function photons({ D, density, temperature, pi }: Plasma): Series {
  const a = pi
    .pow(5)
    .times(new D(constants.boltzmannConstant).pow(4))
    .times(8)
    .div(new D(constants.planckConstant).times(constants.speedOfLight).pow(3).times(15));
  return temperature.pow(4).div(density).times(a.div(-3));
}

/**
 * Piecewise polytropes of neutron-star matter: one crust of four pieces, a core of three.
 *
 * Read, Lackey, Owen & Friedman 2009, Phys. Rev. D 79, 124032, tables II and III; from memory, confirmed by the maximum
 * masses they give. P/c^2 = K rho^Gamma in the crust (K in g/cc); the core has P(rho_1) = p_1 at rho_1 = 10^14.7 g/cm^3
 * and divides at rho_1 and rho_2 = 10^15. The core's first piece begins where it meets the last piece of the crust. Of
 * the crust's printed K the first is used and the others follow from continuity: they agree to the rounding of the
 * print, 1.2e-4 at most.
 */
import { speedOfLight } from "../constants.js";
import { type PiecewisePolytrope, piecewisePolytrope } from "./piecewise-polytrope.js";

/** Gamma of the crust's pieces. */
const crustGammas = [1.58425, 1.28733, 0.62223, 1.35692] as const;
/** Densities between them, g/cm^3. */
const crustDensities = [2.44034e7, 3.78358e11, 2.6278e12] as const;
/** K of the first one, P/c^2 = K rho^Gamma in g/cm^3. */
const crustConstant = 6.8011e-9;

/** log10 p_1 (dyn/cm^2), Gamma_1, Gamma_2, Gamma_3. */
export const publishedCores: Readonly<Record<string, readonly [number, number, number, number]>> = {
  SLy: [34.384, 3.005, 2.988, 2.851],
  APR3: [34.392, 3.166, 3.573, 3.281],
  APR4: [34.269, 2.83, 3.445, 3.348],
  FPS: [34.283, 2.985, 2.863, 2.6],
  WFF1: [34.031, 2.519, 3.791, 3.66],
  WFF2: [34.233, 2.888, 3.475, 3.517],
  BBB2: [34.331, 3.418, 2.835, 2.832],
  ENG: [34.437, 3.514, 3.13, 3.168],
  MPA1: [34.495, 3.446, 3.572, 2.887],
  MS1: [34.858, 3.224, 3.033, 1.325],
  MS1b: [34.855, 3.456, 3.011, 1.425],
  H4: [34.669, 2.909, 2.246, 2.144],
  GNH3: [34.648, 2.664, 2.194, 2.304],
  ALF2: [34.616, 4.07, 2.411, 1.89],
  PAL6: [34.38, 2.227, 2.189, 2.159],
};

/** The piecewise polytrope of a core on the common crust. */
export function publishedPieces(
  name: string,
  validity: string,
  [logPressure, first, second, third]: readonly [number, number, number, number],
): PiecewisePolytrope {
  const reference = 1e7; // in the first piece of the crust
  const pressure = crustConstant * speedOfLight * speedOfLight * reference ** crustGammas[0];
  const crust = piecewisePolytrope({
    gammas: crustGammas,
    dividingDensities: crustDensities,
    referenceDensity: reference,
    referencePressure: pressure,
  });
  // ln P = ln K + Gamma ln rho of the crust's last piece and of the core's first: where they are equal.
  const rho1 = 10 ** 14.7;
  const last = crust.pieces[3]!;
  const coreConstant = Math.log(10 ** logPressure) - first * Math.log(rho1);
  const join = Math.exp((Math.log(last.constant) - coreConstant) / (first - last.gamma));
  return piecewisePolytrope({
    gammas: [...crustGammas, first, second, third],
    dividingDensities: [...crustDensities, join, rho1, 1e15],
    referenceDensity: reference,
    referencePressure: pressure,
    highestDensity: 1e16,
    name,
    validity,
  });
}

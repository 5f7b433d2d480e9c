/**
 * The true melting point of the rigid classical plasma: where the free energies of liquid and bcc crystal cross.
 *
 *     f_id + f_ii = C_M Gamma + 3 ln theta + 3 <ln omega/omega_p> + f_ah
 *
 * with f_id = 3 ln theta - (3/2) ln Gamma - 1.32351...: theta drops out. With the fits of this library Gamma_m = 175.1729
 * and the entropy jumps by 0.7508 k; an error of 0.001 kT in either free energy moves Gamma_m by 0.23.
 * <ln omega/omega_p> of bcc: independent phonon calculation (test/coulomb/phonons.ts).
 */
import { SINGLE_LENGTH } from "../numerics/natural.js";
import { bcc } from "./lattice.js";
import { addLiquidCorrelation } from "./liquid.js";
import { ION_LENGTH, ION_X, ION_Z53, POINT_GAMMA_E, POINT_LENGTH } from "./slots.js";

/** <ln omega/omega_p> of the bcc crystal. */
const MEAN_LOG_FREQUENCY = -0.83129813542142;
/** ln(3/4 pi) + (3/2) ln(2 pi/3) - 1. */
const IDEAL = -1.3235147916893274;

/** The crossing: its coupling, and the jump of entropy per ion there. */
export interface RigidMelting {
  /** Gamma_m. */
  readonly coupling: number;
  /** (s_liquid - s_crystal)/k per ion. */
  readonly entropyJump: number;
}

/** Melting of the rigid classical one-component plasma, by bisection to rounding. */
export function rigidPlasmaMelting(): RigidMelting {
  let low = 150; // the crystal is unstable here,
  let high = 200; // the liquid there
  while (high - low > 2e-14 * high) {
    const middle = (low + high) / 2;
    if (difference(middle)[0] < 0) low = middle;
    else high = middle;
  }
  const coupling = (low + high) / 2;
  return Object.freeze({ coupling, entropyJump: difference(coupling)[1] });
}

/** f_liquid - f_crystal and (s_liquid - s_crystal)/k at a coupling. */
function difference(gamma: number): readonly [number, number] {
  const point = new Float64Array(POINT_LENGTH);
  const ion = new Float64Array(ION_LENGTH);
  const u = new Float64Array(SINGLE_LENGTH);
  point[POINT_GAMMA_E] = gamma;
  ion[ION_X] = 1;
  ion[ION_Z53] = 1;
  addLiquidCorrelation(u, 2, point, ion);
  const [a1, a2, a3] = bcc.anharmonic;
  const r = 1 / gamma;
  const anharmonic = -(a1 * r + (a2 / 2) * r * r + (a3 / 3) * r ** 3);
  const anharmonicEnergy = a1 * r + a2 * r * r + a3 * r ** 3;
  const free = IDEAL - 1.5 * Math.log(gamma) + u[0]! - (bcc.madelung * gamma + 3 * MEAN_LOG_FREQUENCY + anharmonic);
  // Energies in kT: kinetic 3/2 and u_ii in the liquid, 3 and lattice in the crystal (two of the 3/2 are kinetic).
  const energy = 1.5 + u[1]! - (3 + bcc.madelung * gamma + anharmonicEnergy);
  return [free, energy - free];
}

/**
 * The gas of electrons and positrons from a species table: the sums of fermi-gas/record.ts, which density-derivatives.ts turns into
 * members. Electrons and positrons are the same surface at eta and -eta - 2/theta.
 *
 * Frame of record.ts with the centre at the rest mass (psi = eta), or at zero where pairs rule (psi = nu = mu/kT < 1): at fixed psi
 * the eta of a species moves with ln theta at the rate sigma = 0 and 2/theta, or 1/theta for both. With q_i = d^i P/d eta^i,
 *
 *     D = d/d ln theta + sigma d/d eta,   D sigma = -sigma,
 *     theta N_i0 = q_(i+1),  theta N_i1 = D q - q,  theta N_i2 = D^2 q - 3 D q + 2 q,  Q = D P,  theta M_12 = D^2 P - D P,
 *     theta M_23 = D^3 P - D P
 *
 * with signs (-1)^i for positrons, where psi and eta run against each other.
 */
import { FermistateError } from "../errors.js";
import { MOST_SWEEPS, TAYLOR_RADIUS, TAYLOR_RADIUS_THIRD } from "../fermi-gas/accuracy.js";
import { advance, correct, measureOffset, offset, safeStep } from "../fermi-gas/net-density.js";
import {
  ANTIPARTICLES,
  CENTRE,
  ETA,
  KINETIC_MU,
  LAMBDA,
  M12,
  M23,
  N00,
  N01,
  N02,
  N10,
  N11,
  N12,
  N20,
  N21,
  N30,
  NET_DENSITY,
  NU,
  P00,
  PSI,
  Q,
  REGIME_CLASSICAL,
  REGIME_DEGENERATE,
  ROUGH_THIRD,
  STEP_LENGTH,
  STEP_UNIT,
  THETA,
} from "../fermi-gas/record.js";
import { sommerfeld } from "../fermi-gas/sommerfeld.js";
import { startValue } from "../fermi-gas/start-value.js";
import type { Order } from "../thermodynamics/free-energy.js";
import {
  fillSpeciesSurface,
  L00,
  L01,
  L02,
  L03,
  L10,
  L11,
  L12,
  L20,
  L21,
  L22,
  L30,
  L31,
  L40,
  type SpeciesSurface,
} from "./species-surface.js";

/** nu below which n_- - n_+ comes from the slope: its remainder nu^2/6 meets the rounding of the difference there. */
const smallNu = 1e-5;
/** eta of positrons below which they are less than the smallest number. */
const noPositrons = -740;

/** Solves charge neutrality and fills the record at its NET_DENSITY >= 0, KINETIC_MU = e_F and THETA > 0. */
export function solveSpeciesGas(surface: SpeciesSurface, gas: Float64Array, order: Order): void {
  surface.at[1] = Math.log(gas[THETA]!);
  const regime = startValue(gas, true);
  if (regime === REGIME_CLASSICAL) classicalStart(surface, gas);
  const degenerate = regime === REGIME_DEGENERATE;
  const once = order === 3 && gas[ROUGH_THIRD] === 1;
  let near = false;
  for (let sweeps = 0; sweeps < MOST_SWEEPS; sweeps++) {
    fillGas(surface, gas, degenerate, once || (order === 3 && near) ? 3 : 2);
    if (gas[NET_DENSITY] === 0) {
      if (order === 2 || near || once) return;
      near = true;
      continue;
    }
    measureOffset(gas, degenerate, true);
    const distance = Math.abs(offset[STEP_LENGTH]!);
    const unit = offset[STEP_UNIT]!;
    if (order === 2 || once ? distance <= TAYLOR_RADIUS * unit : near) {
      correct(gas, order);
      return;
    }
    near = distance <= TAYLOR_RADIUS_THIRD * unit;
    if (!(distance <= 0.3 * unit)) safeStep(gas, true);
    advance(gas, degenerate, true);
  }
  throw new FermistateError("no-convergence", {
    argument: "density",
    given: gas[NET_DENSITY],
    allowed: `a net density whose chemical potential is found in ${MOST_SWEEPS} look-ups (please report)`,
  });
}

/** Sets ANTIPARTICLES of a solved gas, from its PSI and CENTRE. */
export function fillPositrons(surface: SpeciesSurface, gas: Float64Array): void {
  const { at, out } = surface;
  const theta = gas[THETA]!;
  const nu = gas[CENTRE] === -1 ? gas[PSI]! : gas[PSI]! + (1 + gas[CENTRE]!) / theta;
  gas[ANTIPARTICLES] = 0;
  const opposite = -nu - 1 / theta;
  if (opposite < noPositrons) return;
  at[0] = opposite;
  at[1] = Math.log(theta);
  fillSpeciesSurface(surface, 2);
  gas[ANTIPARTICLES] = (Math.exp(out[L00]!) * out[L10]!) / theta;
}

/** Classical gas: n_-/n_+ in closed form from the density at the lower edge of the table. */
function classicalStart(surface: SpeciesSurface, gas: Float64Array): void {
  const { at, out } = surface;
  const theta = gas[THETA]!;
  const inverse = 1 / theta;
  at[0] = -60; // e^(-60): the gas is classical to rounding
  fillSpeciesSurface(surface, 2);
  // ln of the density at eta = 0 of a classical gas
  const logarithm = out[L00]! + 60 - at[1]!;
  const n = gas[NET_DENSITY]!;
  const eta = Math.log(n) - logarithm;
  if (eta + inverse > 20) {
    gas[ETA] = eta;
    gas[NU] = eta + inverse;
  } else {
    gas[NU] = Math.asinh(0.5 * n * Math.exp(inverse - logarithm));
    gas[ETA] = gas[NU]! - inverse;
  }
}

/** All sums at the current unknown. */
function fillGas(surface: SpeciesSurface, gas: Float64Array, degenerate: boolean, order: Order): void {
  const { eta, at } = surface;
  const theta = gas[THETA]!;
  const inverse = 1 / theta;
  if (degenerate) {
    gas[ETA] = gas[KINETIC_MU]! * inverse; // 38.8 or more, far above the table
    gas[NU] = (1 + gas[KINETIC_MU]!) * inverse;
  } else {
    gas[KINETIC_MU] = gas[ETA]! * theta;
  }
  if (degenerate || gas[ETA]! > eta.nodes[eta.nodes.length - 1]!) {
    sommerfeld(gas, order); // positrons are below e^(-54) of the electrons
    return;
  }
  const pairFrame = gas[NU]! < 1;
  gas[CENTRE] = pairFrame ? -1 : 0;
  gas[PSI] = pairFrame ? gas[NU]! : gas[ETA]!;
  gas[LAMBDA] = 1;
  for (let slot = N00; slot <= N12; slot++) gas[slot] = 0;
  const opposite = -gas[NU]! - inverse;
  if (opposite > noPositrons) {
    at[0] = opposite;
    fillSpeciesSurface(surface, order);
    at[2] = pairFrame ? inverse : 2 * inverse;
    addSpeciesSums(surface, gas, -1, order);
  }
  at[0] = gas[ETA]!;
  fillSpeciesSurface(surface, order);
  at[2] = pairFrame ? inverse : 0;
  addSpeciesSums(surface, gas, 1, order);
  if (gas[NU]! < smallNu) gas[N00] = gas[NU]! * gas[N10]!;
}

/** Adds one species from the surface's record: electrons (sign 1) or positrons (-1), whose eta moves at the rate in slot 2. */
function addSpeciesSums({ at, out }: SpeciesSurface, gas: Float64Array, sign: number, order: Order): void {
  const sigma = at[2]!;
  const inverse = 1 / gas[THETA]!;
  const p = Math.exp(out[L00]!);
  const a = out[L10]!;
  const b = out[L01]!;
  const l20 = out[L20]!;
  const l11 = out[L11]!;
  // Derivatives of P over P.
  const p20 = l20 + a * a;
  const p11 = l11 + a * b;
  const p02 = out[L02]! + b * b;
  const s2 = sigma * sigma;
  const dp = b + sigma * a;
  const ddp = p02 + sigma * (2 * p11 - a) + s2 * p20;
  const dq1 = p11 + sigma * p20;
  const odd = sign * p * inverse;
  const even = p * inverse;
  gas[P00]! += p;
  gas[Q]! += p * dp;
  gas[N00]! += odd * a;
  gas[N10]! += even * p20;
  gas[N01]! += odd * (dq1 - a);
  gas[M12]! += even * (ddp - dp);
  // For the Taylor step of order 2.
  const p30 = out[L30]! + 3 * a * l20 + a * a * a;
  const p21 = out[L21]! + 2 * a * l11 + b * p20;
  const p12 = out[L12]! + 2 * b * l11 + a * p02;
  const dq2 = p21 + sigma * p30;
  const ddq1 = p12 + sigma * (2 * p21 - p20) + s2 * p30;
  gas[N20]! += odd * p30;
  gas[N11]! += even * (dq2 - p20);
  gas[N02]! += odd * (ddq1 - 3 * dq1 + 2 * a);
  if (order === 2) return;
  const p03 = out[L03]! + 3 * b * out[L02]! + b * b * b;
  const p40 = out[L40]! + 4 * a * out[L30]! + 3 * l20 * l20 + 6 * a * a * l20 + a * a * a * a;
  const p31 = out[L31]! + 3 * a * out[L21]! + 3 * l20 * l11 + 3 * a * a * l11 + b * p30;
  const p22 =
    out[L22]! + 2 * a * out[L12]! + 2 * l11 * l11 + 2 * a * b * l11 + 2 * b * (out[L21]! + a * l11) + p20 * p02;
  const dddp = p03 + sigma * (3 * p12 - 3 * p11 + a) + s2 * (3 * p21 - 3 * p20) + s2 * sigma * p30;
  const dq3 = p31 + sigma * p40;
  const ddq2 = p22 + sigma * (2 * p31 - p30) + s2 * p40;
  gas[M23]! += even * (dddp - dp);
  gas[N30]! += even * p40;
  gas[N21]! += odd * (dq3 - p30);
  gas[N12]! += even * (ddq2 - 3 * dq2 + 2 * p20);
}

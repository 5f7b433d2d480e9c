/**
 * The gas at a given net density (charge neutrality): the record's N_ij, in exactly one sweep over the integrals.
 *
 * The start value is good to 2e-8 (start-value.ts). One sweep measures how far off it is, and a Taylor step in alpha
 * with the derivatives already in hand carries every member to the exact density: the remainders, second order in the
 * offset for the first derivatives and third order for P, e, s, are below 1e-15. Third-order members would need more
 * derivatives, so order 3 takes a cheap sweep, moves, and sweeps again. The classical gas takes none.
 * Behind it all stands a safeguarded iteration, never entered on any grid or random point tried.
 * A species without antiparticles goes the same way from a coarser start: three to five sweeps.
 */
import { FermistateError } from "../errors.js";
import type { Order } from "../thermodynamics/free-energy.js";
import { MOST_SWEEPS, SOMMERFELD_ETA, SOMMERFELD_ETA_THIRD, TAYLOR_RADIUS, TAYLOR_RADIUS_THIRD } from "./accuracy.js";
import { boltzmann } from "./boltzmann.js";
import {
  CENTRE,
  ETA,
  KINETIC_MU,
  LAMBDA,
  M12,
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
  START_ERROR,
  STEP_LENGTH,
  STEP_UNIT,
  SWEEPS,
  THETA,
} from "./record.js";
import { singleSpecies } from "./single-species.js";
import { sommerfeld } from "./sommerfeld.js";
import { startValue } from "./start-value.js";
import { trapezoid } from "./trapezoid.js";

/** Step in alpha and its unit, slots STEP_ of record.ts: the last {@link measureOffset}. */
export const offset: Float64Array = new Float64Array(2);

/**
 * Fills the record at its NET_DENSITY >= 0 (> 0 without `antiparticles`), KINETIC_MU = e_F and THETA > 0. At n = 0
 * nothing is charged: nu = 0. Throws `no-convergence` after 40 sweeps (not seen).
 */
export function solveDensity(gas: Float64Array, antiparticles: boolean, order: Order): void {
  const regime = startValue(gas, antiparticles);
  gas[SWEEPS] = 0;
  gas[START_ERROR] = 0;
  if (regime === REGIME_CLASSICAL) {
    boltzmann(gas, antiparticles, order);
    return;
  }
  const degenerate = regime === REGIME_DEGENERATE;
  // One sweep does where third order may be that of a place 1e-8 beside.
  const once = order === 3 && gas[ROUGH_THIRD] === 1;
  let near = false;
  for (let sweeps = 0; sweeps < MOST_SWEEPS; sweeps++) {
    sweep(gas, degenerate, antiparticles, once || (order === 3 && near) ? 3 : 2);
    gas[SWEEPS] = sweeps + 1;
    measureOffset(gas, degenerate, antiparticles);
    const distance = Math.abs(offset[STEP_LENGTH]!);
    const unit = offset[STEP_UNIT]!;
    if (sweeps === 0) gas[START_ERROR] = unit > 0 ? distance / unit : distance;
    if (order === 2 || once ? distance <= TAYLOR_RADIUS * unit : near) {
      correct(gas, order);
      return;
    }
    near = distance <= TAYLOR_RADIUS_THIRD * unit;
    if (distance <= 0.3 * unit) advance(gas, degenerate, antiparticles);
    else {
      safeStep(gas, antiparticles);
      advance(gas, degenerate, antiparticles);
    }
  }
  throw new FermistateError("no-convergence", {
    argument: "density",
    given: gas[NET_DENSITY],
    allowed: `a net density whose chemical potential is found in ${MOST_SWEEPS} sweeps (please report)`,
  });
}

/** One evaluation of the integrals at the current unknown, by the method that is exact there. */
function sweep(gas: Float64Array, degenerate: boolean, antiparticles: boolean, order: Order): void {
  const limit = order === 3 ? SOMMERFELD_ETA_THIRD : SOMMERFELD_ETA;
  if (degenerate) {
    const theta = gas[THETA]!;
    gas[ETA] = gas[KINETIC_MU]! / theta;
    gas[NU] = (1 + gas[KINETIC_MU]!) / theta;
  }
  if (gas[ETA]! > limit) {
    if (!degenerate) gas[KINETIC_MU] = gas[ETA]! * gas[THETA]!;
    sommerfeld(gas, order);
  } else if (antiparticles) {
    trapezoid(gas, order);
  } else {
    singleSpecies(gas, order);
  }
}

/** Distance in alpha to the density asked for, to second order, and the unit in which it is small. */
export function measureOffset(gas: Float64Array, degenerate: boolean, antiparticles: boolean): void {
  const inverse = 1 / gas[N10]!;
  const first = (gas[NET_DENSITY]! - gas[N00]!) * inverse;
  offset[STEP_LENGTH] = first / (1 + 0.5 * first * gas[N20]! * inverse);
  const eta = gas[ETA]!;
  const nu = gas[NU]!;
  offset[STEP_UNIT] = degenerate ? eta : antiparticles && nu < 1 ? nu : eta > 1 ? eta : 1;
}

/** Replaces the step by one in ln n, capped: for a start value far off. */
export function safeStep(gas: Float64Array, antiparticles: boolean): void {
  const n = gas[N00]!;
  const eta = gas[ETA]!;
  const nu = gas[NU]!;
  const cap = eta > 4 ? 0.5 * eta : 3;
  let step = (Math.log(gas[NET_DENSITY]! / n) * n) / gas[N10]!;
  if (!(step < cap)) step = cap;
  if (step < -cap) step = -cap;
  offset[STEP_LENGTH] = antiparticles && nu + step <= 0 ? -0.5 * nu : step;
}

/** Moves the unknown by the step in alpha: eta and nu keep their difference, whichever is small is the one moved. */
export function advance(gas: Float64Array, degenerate: boolean, antiparticles: boolean): void {
  const step = offset[STEP_LENGTH]!;
  const theta = gas[THETA]!;
  if (degenerate) {
    gas[KINETIC_MU]! += theta * step;
  } else if (antiparticles && gas[NU]! < 0.5 / theta) {
    gas[NU]! += step;
    gas[ETA] = gas[NU]! - 1 / theta;
  } else {
    gas[ETA]! += step;
    gas[NU] = gas[ETA]! + 1 / theta;
  }
}

/** Taylor step of all members in alpha by the measured offset, at fixed theta; order 3 has one more term to give. */
export function correct(gas: Float64Array, order: Order): void {
  const d = offset[STEP_LENGTH]!;
  const theta = gas[THETA]!;
  const lambda = gas[LAMBDA]!;
  const n10 = gas[N10]!;
  const n01 = gas[N01]!;
  const n20 = gas[N20]!;
  const n11 = gas[N11]!;
  const n = gas[N00]!;
  gas[P00]! += theta * d * (n + 0.5 * d * (n10 + (d * n20) / 3));
  gas[Q]! += theta * (d * (lambda * n + n01) + 0.5 * d * d * (lambda * n10 + n11));
  gas[M12]! += d * (gas[N02]! + 2 * lambda * n01);
  gas[N10] = n10 + d * n20;
  gas[N01] = n01 + d * n11;
  if (order === 3) {
    const half = 0.5 * d * d;
    gas[M12]! += half * (gas[N12]! + 2 * lambda * n11);
    gas[N10]! += half * gas[N30]!;
    gas[N01]! += half * gas[N21]!;
  }
  gas[N00] = gas[NET_DENSITY]!;
  if (lambda === 1) gas[PSI]! += d;
  else gas[CENTRE]! += theta * d;
}

/**
 * Ideal cold gas of neutrons, protons and electrons in beta equilibrium, and of neutrons alone.
 *
 *     mu_n = mu_p + mu_e (rest masses in),  n_p = n_e,  w = mu/m_u - c^2 with mu = mu_p + mu_e, the Gibbs energy per baryon
 *
 * Below the onset, mu_p + mu_e < m_n c^2, there are no neutrons (Harrison, Thorne, Wakano & Wheeler 1965, Gravitation
 * Theory and Gravitational Collapse; Shapiro & Teukolsky 1983, Black Holes, White Dwarfs, and Neutron Stars, section
 * 8.2). A proton and an electron of equal momentum p share the kinetic energy K = m_u w + (m_u - m_p - m_e) c^2 like
 * two bodies of one mass W:
 *
 *     p^2 c^2 = K (K + 2 m_e c^2)(K + 2 m_p c^2)(K + 2 (m_p + m_e) c^2)/(4 W^2),    W = K + (m_p + m_e) c^2
 *
 * so everything is a closed form in w. e is measured from m_u c^2 per baryon, masses of the particles included:
 * rho (c^2 + e) is the full density of mass-energy, and e at density 0 is not zero.
 */
import {
  atomicMassConstant,
  electronMass,
  neutronMass,
  protonMass,
  reducedPlanckConstant,
  speedOfLight,
} from "../constants.js";
import { coldPressure } from "../fermi-gas/cold.js";
import { KINETIC_MU, P00, RECORD_LENGTH } from "../fermi-gas/record.js";
import { findRoot } from "../numerics/roots.js";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_GAMMA,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
} from "./barotrope.js";
import { completeBarotrope, requireDensity } from "./from-record.js";

/** A barotrope that knows how many of its baryons are protons. */
export interface NucleonGas extends Barotrope {
  /** Protons per baryon, Y_p = n_p/n_B, at a density. @throws `not-a-number`, `out-of-range`, `outside-domain` */
  protonFraction(density: number): number;
  /** Density at which neutrons appear, g/cm^3; 0 where there is nothing else. */
  readonly neutronOnset: number;
}

const c2 = speedOfLight * speedOfLight;
/** Natural units of one species: energy, and density and pressure without 1/pi^2. */
interface Unit {
  readonly energy: number;
  readonly density: number;
}
const unitOf = (mass: number): Unit => ({
  energy: mass * c2,
  density: ((mass * speedOfLight) / reducedPlanckConstant) ** 3 / Math.PI ** 2,
});
const electron = unitOf(electronMass);
const proton = unitOf(protonMass);
const neutron = unitOf(neutronMass);
/** m_n - m_p - m_e, in m_e c^2; from the masses themselves, whose digits bound it to 1e-8. */
const decayEnergy = (neutronMass - protonMass - electronMass) / electronMass;
const massOver = { pair: (protonMass + electronMass - atomicMassConstant) / atomicMassConstant, neutron: 0 };
massOver.neutron = (neutronMass - atomicMassConstant) / atomicMassConstant;

const BARYONS = 0;
const PROTONS = 1;
const PRESSURE_SUM = 2;
/** dn_B/dmu, per erg. */
const SLOPE = 3;
/** Input: mu - (m_p + m_e) c^2, erg; without protons mu - m_n c^2. */
const KINETIC = 4;

/** Fills baryon density, proton density, pressure and dn_B/dmu from KINETIC. */
function fillSums(sums: Float64Array, gas: Float64Array, protons: boolean): void {
  const kinetic = sums[KINETIC]!;
  sums[BARYONS] = 0;
  sums[PROTONS] = 0;
  sums[PRESSURE_SUM] = 0;
  sums[SLOPE] = 0;
  let ofNeutron = kinetic / neutron.energy;
  if (protons) {
    const k = kinetic / electron.energy; // in m_e c^2, where the pair's rest energy is 1 + M
    const m = protonMass / electronMass;
    const total = k + 1 + m;
    const p2 = (k * (k + 2) * (k + 2 * m) * (k + 2 * (1 + m))) / (4 * total * total); // (p/m_e c)^2
    const p = Math.sqrt(p2);
    const n = (electron.density * p * p2) / 3;
    gas[KINETIC_MU] = p2 / (1 + Math.sqrt(1 + p2));
    coldPressure(gas);
    sums[PRESSURE_SUM] = gas[P00]! * electron.density * electron.energy;
    const q2 = p2 / (m * m);
    gas[KINETIC_MU] = q2 / (1 + Math.sqrt(1 + q2));
    coldPressure(gas);
    sums[PRESSURE_SUM]! += gas[P00]! * proton.density * proton.energy;
    sums[BARYONS] = n;
    sums[PROTONS] = n;
    // dmu/dp = p/E_e + p/E_p in units of c.
    const rate = p / Math.sqrt(1 + p2) + p / Math.sqrt(m * m + p2);
    sums[SLOPE] = (electron.density * p2) / (rate * electron.energy);
    ofNeutron = ((k - decayEnergy) * electronMass) / neutronMass;
  }
  if (!(ofNeutron > 0)) return;
  gas[KINETIC_MU] = ofNeutron;
  coldPressure(gas);
  const x2 = ofNeutron * (ofNeutron + 2);
  const x = Math.sqrt(x2);
  sums[PRESSURE_SUM]! += gas[P00]! * neutron.density * neutron.energy;
  sums[BARYONS]! += (neutron.density * x * x2) / 3;
  sums[SLOPE]! += (neutron.density * x * (1 + ofNeutron)) / neutron.energy;
}

/**
 * The ideal cold gas of neutrons, protons and electrons in beta equilibrium, 1e-10 to 1e20 g/cm^3; m_n, m_p, m_e of
 * CODATA 2022.
 *
 * P, e, w to 1e-14; to 1e-13 from the onset of neutrons to 1e10 g/cm^3, where P is far below mu n. The onset itself is
 * as sharp as the difference of the masses is known, 2e-8. No interactions and no nuclei: a limit to compare with, no
 * model of neutron stars.
 * @example
 * ```ts
 * import { neutronProtonElectronGas } from "fermistate/barotropes";
 * const gas = neutronProtonElectronGas();
 * gas.protonFraction(1e9); // => 0.01269
 * gas.state(1e9).pressure; // => 8.550e24
 * gas.neutronOnset; // => 1.2216e7
 * ```
 */
export function neutronProtonElectronGas(): NucleonGas {
  return gasOf(true);
}

/**
 * The ideal cold gas of neutrons, 1e-10 to 1e20 g/cm^3 (Oppenheimer & Volkoff 1939, Phys. Rev. 55, 374). P, e, w to
 * 1e-14.
 */
export function neutronGas(): NucleonGas {
  return gasOf(false);
}

function gasOf(protons: boolean): NucleonGas {
  const sums = new Float64Array(5);
  const gas = new Float64Array(RECORD_LENGTH);
  const excess = (protons ? massOver.pair : massOver.neutron) * c2; // e at density 0

  /** Fills the record from KINETIC. */
  function fill(record: Float64Array): void {
    fillSums(sums, gas, protons);
    const kinetic = sums[KINETIC]!;
    const density = sums[BARYONS]! * atomicMassConstant;
    const pressure = sums[PRESSURE_SUM]!;
    const potential = kinetic / atomicMassConstant;
    record[BAROTROPE_DENSITY] = density;
    record[BAROTROPE_PRESSURE] = pressure;
    record[BAROTROPE_ENERGY] = excess + (potential - pressure / density);
    record[BAROTROPE_POTENTIAL] = excess + potential;
    record[BAROTROPE_GAMMA] = (sums[BARYONS]! * sums[BARYONS]!) / (pressure * sums[SLOPE]!);
  }

  // ln K at nodes of ln rho and ln P, to start from.
  const count = 2001;
  const [lowest, highest] = [1e-10, 1e20];
  const scratch = new Float64Array(BAROTROPE_LENGTH);
  const densityAt = (log: number): number => {
    sums[KINETIC] = Math.exp(log);
    fillSums(sums, gas, protons);
    return Math.log(sums[BARYONS]! * atomicMassConstant);
  };
  const first = findRoot((log) => densityAt(log) - Math.log(lowest), Math.log(1e-40), Math.log(1e-3)).x;
  const last = findRoot((log) => densityAt(log) - Math.log(highest), Math.log(1e-12), Math.log(1e8)).x;
  const least = Math.exp(first);
  const logs = new Float64Array(count);
  const densities = new Float64Array(count);
  const pressures = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    logs[i] = first + ((last - first) * i) / (count - 1);
    sums[KINETIC] = Math.exp(logs[i]!);
    fill(scratch);
    densities[i] = scratch[BAROTROPE_DENSITY]!;
    pressures[i] = scratch[BAROTROPE_PRESSURE]!;
  }

  /** Newton in ln K within a cell of the nodes: d ln rho/d ln K = K n'/n, d ln P/d ln K = K n/P. */
  function invert(record: Float64Array, slot: number): void {
    const given = record[slot]!;
    const byDensity = slot === BAROTROPE_DENSITY;
    const values = byDensity ? densities : pressures;
    let i = 0;
    for (let width = 1 << 10; width > 0; width >>= 1) {
      if (i + width < count && values[i + width]! <= given) i += width;
    }
    const j = Math.min(i, count - 2);
    let lower = logs[j]!;
    let upper = logs[j + 1]!;
    const wanted = Math.log(given);
    const low = Math.log(values[j]!);
    let log = lower + ((upper - lower) * (wanted - low)) / (Math.log(values[j + 1]!) - low);
    if (i === count - 1 || !(given >= values[0]!)) log = i === 0 ? logs[0]! : logs[count - 1]!;
    let kinetic = Math.exp(log);
    for (let n = 0; n < 60; n++) {
      sums[KINETIC] = kinetic;
      fillSums(sums, gas, protons);
      const baryons = sums[BARYONS]!;
      const value = byDensity ? baryons * atomicMassConstant : sums[PRESSURE_SUM]!;
      const rate = byDensity ? (kinetic * sums[SLOPE]!) / baryons : (kinetic * baryons) / value;
      const residual = given / value - 1;
      if (residual > 0) lower = log;
      else upper = log;
      const move = residual / rate;
      const next = log + move;
      if (Math.abs(move) < 1e-13 || (next > lower && next < upper)) {
        kinetic *= Math.abs(move) < 1e-3 ? 1 + move * (1 + move * (0.5 + move / 6)) : Math.exp(move);
        log = next;
        if (Math.abs(move) < 1e-13) break;
      } else {
        log = 0.5 * (lower + upper);
        kinetic = Math.exp(log);
        if (upper - lower < 1e-15) break;
      }
    }
    sums[KINETIC] = kinetic;
    fill(record);
    record[slot] = given;
  }

  sums[KINETIC] = decayEnergy * electron.energy;
  fillSums(sums, gas, protons);
  const neutronOnset = protons ? sums[BARYONS]! * atomicMassConstant : 0;
  // Above it n_n ~ (mu - mu_onset)^(3/2): no solver should step over that.
  const kinks = protons ? [excess + sums[KINETIC]! / atomicMassConstant] : [];
  const name = protons ? "ideal neutrons, protons and electrons" : "ideal neutrons";
  const identity = { name, density: Object.freeze([lowest, highest] as const), jumps: Object.freeze([]) };
  const parts = completeBarotrope({
    ...identity,
    kinks: Object.freeze(kinks),
    validity:
      "Ideal cold particles without interactions or nuclei: a limit to compare with, no model of neutron stars.",
    fillAtDensity: (record) => invert(record, BAROTROPE_DENSITY),
    fillAtPressure: (record) => invert(record, BAROTROPE_PRESSURE),
    fillAtPotential(record): void {
      const given = record[BAROTROPE_POTENTIAL]!;
      sums[KINETIC] = Math.max((given - excess) * atomicMassConstant, least);
      fill(record);
      record[BAROTROPE_POTENTIAL] = given;
    },
  });
  return Object.freeze({
    ...parts,
    neutronOnset,
    protonFraction(density: number): number {
      requireDensity(identity, density);
      scratch[BAROTROPE_DENSITY] = density;
      invert(scratch, BAROTROPE_DENSITY);
      return sums[PROTONS]! / sums[BARYONS]!;
    },
  });
}

/**
 * A shock tube in dense matter: one-dimensional Newtonian gas dynamics by the finite-volume method.
 *
 * Scheme: MUSCL-Hancock with limited linear reconstruction and HLLC fluxes (Toro 2009, Riemann Solvers and Numerical
 * Methods for Fluid Dynamics, 3rd ed., chapters 10 and 14). Density, velocity, pressure and energy per volume are
 * reconstructed, the last so that no face needs the equation of state (Colella & Glaz 1985, J. Comput. Phys. 59, 264): it
 * is asked once per cell and step, for all cells in one call, with the temperature of the step before as the guess.
 *
 * Degenerate matter has two traps. Nearly all its energy is there at T = 0 too, so a small error of the energy is a large
 * one of the temperature; and an energy below that of cold matter belongs to no temperature at all: `solveColumns` then
 * throws `below-cold` and names the cell, rather than go on with a number that means nothing.
 */
import { type Composition, type EquationOfState, solveColumns } from "fermistate";
import type { Half } from "./riemann.js";

/** A tube and what is in it at first. */
export interface ShockTube {
  readonly eos: EquationOfState;
  readonly matter: Composition;
  /** Matter at a distance from the middle, cm. */
  readonly start: (x: number) => Half;
  /** cm. */
  readonly length: number;
  readonly cells: number;
  /** End of the run, s; no wave may have reached an end of the tube. */
  readonly time: number;
}

/** The cells at the end of the run. */
export interface ShockTubeResult {
  /** Centres of the cells, cm from the membrane. */
  readonly x: Float64Array;
  readonly density: Float64Array;
  readonly velocity: Float64Array;
  readonly pressure: Float64Array;
  readonly temperature: Float64Array;
  /** Relative error of the temperature per relative error of the energy. */
  readonly temperatureConditionNumber: Float64Array;
  /** Mass, momentum and energy in the tube per cm^2 of its section, before and after. */
  readonly totals: { readonly before: readonly number[]; readonly after: readonly number[] };
  readonly steps: number;
}

// Slots of a cell or of a face, in primitive variables.
const DENSITY = 0;
const VELOCITY = 1;
const PRESSURE = 2;
const ENERGY = 3; // rho e
const GAMMA1 = 4; // of the cell: not reconstructed

const ghosts = 2;
const courant = 0.6;

/** Runs the tube to its end. Flow and sound are slow against light, so the mass of heat is left out of the inertia. */
export function runShockTube({ eos, matter, start, length, cells, time }: ShockTube): ShockTubeResult {
  const width = length / cells;
  const size = cells + 2 * ghosts;
  const column = (): Float64Array => new Float64Array(size);
  const [density, momentum, energy] = [column(), column(), column()]; // rho, rho u, rho (e + u^2/2)
  const conserved = [density, momentum, energy];
  const fluxes = conserved.map(column); // through the left face of each cell
  const [velocity, pressure, energyDensity, gamma1] = [column(), column(), column(), column()];
  const primitive = [density, velocity, pressure, energyDensity, gamma1];
  const [lowFace, highFace] = [primitive.map(column), primitive.map(column)]; // of each cell, half a step later
  const [specificEnergy, temperature, temperatureConditionNumber] = [column(), column(), column()];

  for (let i = 0; i < size; i++) {
    const first = start((i - ghosts + 0.5) * width - 0.5 * length);
    const state = eos.state(first.density, first.temperature, matter);
    density[i] = first.density;
    momentum[i] = first.density * first.velocity;
    energy[i] = first.density * (state.specificEnergy + 0.5 * first.velocity ** 2);
    temperature[i] = first.temperature;
  }
  const inside = (all: Float64Array): Float64Array => all.slice(ghosts, size - ghosts);
  const totals = (): number[] => conserved.map((one) => inside(one).reduce((sum, amount) => sum + amount * width, 0));
  const before = totals();

  /** From what is conserved to what the scheme needs: the one place that asks the equation of state. */
  function updatePrimitive(): void {
    for (let i = 0; i < size; i++) {
      velocity[i] = momentum[i]! / density[i]!;
      specificEnergy[i] = energy[i]! / density[i]! - 0.5 * velocity[i]! ** 2;
      energyDensity[i] = density[i]! * specificEnergy[i]!;
    }
    const known = { composition: matter, density, specificEnergy, guess: { temperature } };
    solveColumns(eos, known, { temperature, pressure, gamma1, temperatureConditionNumber });
  }

  updatePrimitive();
  let steps = 0;
  for (let remaining = time; remaining > 0; steps++) {
    let fastest = 0;
    for (let i = 0; i < size; i++) {
      fastest = Math.max(fastest, Math.abs(velocity[i]!) + Math.sqrt((gamma1[i]! * pressure[i]!) / density[i]!));
    }
    const step = Math.min((courant * width) / fastest, remaining);
    const ratio = step / width;
    for (let i = 1; i < size - 1; i++) reconstruct(primitive, i, ratio, lowFace, highFace);
    for (let i = ghosts; i <= size - ghosts; i++) hllc(highFace, i - 1, lowFace, i, fluxes, i);
    for (let k = 0; k < 3; k++) {
      const [amount, flux] = [conserved[k]!, fluxes[k]!];
      for (let i = ghosts; i < size - ghosts; i++) amount[i]! -= ratio * (flux[i + 1]! - flux[i]!);
    }
    updatePrimitive();
    remaining -= step;
  }

  const x = Float64Array.from({ length: cells }, (_, i) => (i + 0.5) * width - 0.5 * length);
  return {
    x,
    density: inside(density),
    velocity: inside(velocity),
    pressure: inside(pressure),
    temperature: inside(temperature),
    temperatureConditionNumber: inside(temperatureConditionNumber),
    totals: { before, after: totals() },
    steps,
  };
}

/** Limited slopes in one cell, and its face values moved on by half a step. */
function reconstruct(
  cell: readonly Float64Array[],
  i: number,
  ratio: number,
  low: readonly Float64Array[],
  high: readonly Float64Array[],
): void {
  const below = (k: number): number => cell[k]![i]! - cell[k]![i - 1]!;
  const above = (k: number): number => cell[k]![i + 1]! - cell[k]![i]!;
  const share = (k: number): number => smoothness(below(k), above(k));
  // Density and energy share the stronger limit: at a contact both then stay on the line that joins its two sides, which lies
  // above the cold energy. Limited on their own they would leave it by more than all the heat of degenerate matter.
  const common = Math.min(share(DENSITY), share(ENERGY));
  const slope = (k: number, limit: number): number => 0.5 * limit * (below(k) + above(k));
  const [dRho, dE] = [slope(DENSITY, common), slope(ENERGY, common)];
  const [dU, dP] = [slope(VELOCITY, share(VELOCITY)), slope(PRESSURE, share(PRESSURE))];
  const [rho, u, P, E, gamma1] = cell.map((column) => column[i]!) as [number, number, number, number, number];
  const change = [u * dRho + rho * dU, u * dU + dP / rho, u * dP + gamma1 * P * dU, u * dE + (E + P) * dU];
  [dRho, dU, dP, dE].forEach((delta, k) => {
    const centre = cell[k]![i]! - 0.5 * ratio * change[k]!;
    low[k]![i] = centre - 0.5 * delta;
    high[k]![i] = centre + 0.5 * delta;
  });
  low[GAMMA1]![i] = gamma1;
  high[GAMMA1]![i] = gamma1;
}

/** Share of the central slope that the limiter of van Leer (1974) leaves, from the differences on both sides. */
function smoothness(a: number, b: number): number {
  return a * b > 0 ? (4 * a * b) / (a + b) ** 2 : 0;
}

/** Flux between two faces: two outer waves and the contact between them (ibid., section 10.4). */
function hllc(
  left: readonly Float64Array[],
  i: number,
  right: readonly Float64Array[],
  j: number,
  flux: readonly Float64Array[],
  at: number,
): void {
  const [rhoL, uL, pL, eL] = [left[DENSITY]![i]!, left[VELOCITY]![i]!, left[PRESSURE]![i]!, left[ENERGY]![i]!];
  const [rhoR, uR, pR, eR] = [right[DENSITY]![j]!, right[VELOCITY]![j]!, right[PRESSURE]![j]!, right[ENERGY]![j]!];
  const cL = Math.sqrt((left[GAMMA1]![i]! * pL) / rhoL);
  const cR = Math.sqrt((right[GAMMA1]![j]! * pR) / rhoR);
  // Speeds of the outer waves from an acoustic guess of the pressure between them, which at a shock is on the safe side.
  const between = 0.5 * (pL + pR) - 0.125 * (uR - uL) * (rhoL + rhoR) * (cL + cR);
  const slowest = uL - cL * strength(between / pL, left[GAMMA1]![i]!);
  const fastest = uR + cR * strength(between / pR, right[GAMMA1]![j]!);
  const [massL, massR] = [rhoL * (slowest - uL), rhoR * (fastest - uR)];
  const contact = (pR - pL + massL * uL - massR * uR) / (massL - massR);
  const [rho, u, p, e, mass, speed] =
    contact >= 0 ? [rhoL, uL, pL, eL, massL, slowest] : [rhoR, uR, pR, eR, massR, fastest];
  const total = e + 0.5 * rho * u * u;
  flux[0]![at] = rho * u;
  flux[1]![at] = rho * u * u + p;
  flux[2]![at] = u * (total + p);
  if (contact >= 0 ? speed >= 0 : speed <= 0) return; // the face lies outside the waves
  const star = mass / (speed - contact); // density between the waves
  flux[0]![at]! += speed * (star - rho);
  flux[1]![at]! += speed * (star * contact - rho * u);
  flux[2]![at]! += speed * (star * (total / rho + (contact - u) * (contact + p / mass)) - total);
}

/** Speed of a wave over that of sound, by the ratio of pressures across it (ibid., section 10.5). */
function strength(ratio: number, gamma1: number): number {
  return ratio > 1 ? Math.sqrt(1 + ((gamma1 + 1) / (2 * gamma1)) * (ratio - 1)) : 1;
}

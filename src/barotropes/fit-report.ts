/** What a fit is worth: errors in P, e and gamma1 at densities it has not seen, and in the numbers it leads to. */

import { FermistateError } from "../errors.js";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_GAMMA,
  BAROTROPE_LENGTH,
  BAROTROPE_PRESSURE,
  type Barotrope,
} from "./barotrope.js";

/** The error of one quantity. */
export interface FitError {
  /** Largest error. */
  readonly max: number;
  /** Root of the mean square. */
  readonly rms: number;
  /** Density of the largest error, g/cm^3. */
  readonly density: number;
}

/** One number that the barotrope leads to. */
export interface FigureError {
  /** With the source; undefined where only the fit has it. */
  readonly source: number | undefined;
  /** With the fit; undefined where only the source has it. */
  readonly fit: number | undefined;
  /** fit/source - 1; undefined unless both have it. */
  readonly relativeError: number | undefined;
}

/** Numbers that a barotrope leads to, by name; `density` is the range of the fit, g/cm^3. */
export type Figures = (
  barotrope: Barotrope,
  density: readonly [lowest: number, highest: number],
) => Readonly<Record<string, number>>;

/** Errors of a fit. */
export interface FitReport {
  /** Relative error of P. */
  readonly pressure: FitError;
  /** Error of e over |e| + P/rho, which is not zero where e is; undefined for columns without e. */
  readonly specificEnergy: FitError | undefined;
  /** Relative error of gamma1; undefined for columns. */
  readonly gamma1: FitError | undefined;
  /** Number of densities compared. */
  readonly densities: number;
  /** The figures asked for, such as maximum mass and radius. */
  readonly figures: Readonly<Record<string, FigureError>>;
}

/** A density at which the exponent of a fit jumps, and the exponent below it. */
export interface Break {
  readonly density: number;
  readonly gammaBelow: number;
}

/** Densities compared, halfway between equal steps in log rho. */
const fresh = 10_000;

/** Collects the error of one quantity. */
class Tally {
  max = 0;
  density = 0;
  #sum = 0;
  #count = 0;

  add(error: number, density: number): void {
    this.#sum += error * error;
    this.#count += 1;
    this.raise(error, density);
  }

  /** For the maximum only. */
  raise(error: number, density: number): void {
    if (Math.abs(error) <= this.max) return;
    this.max = Math.abs(error);
    this.density = density;
  }

  result(): FitError {
    return Object.freeze({ max: this.max, rms: Math.sqrt(this.#sum / this.#count), density: this.density });
  }
}

/**
 * Compares with a barotrope at {@link fresh} densities, at the breaks and at the ends; each maximum is then narrowed
 * down.
 */
export function measureAgainst(
  source: Barotrope,
  fit: Barotrope,
  breaks: readonly Break[],
  [low, high]: readonly [number, number],
): FitReport {
  const truth = new Float64Array(BAROTROPE_LENGTH);
  const record = new Float64Array(BAROTROPE_LENGTH);
  const compare = (density: number): void => {
    truth[BAROTROPE_DENSITY] = density;
    record[BAROTROPE_DENSITY] = density;
    source.fillAtDensity(truth);
    fit.fillAtDensity(record);
  };
  const errors = {
    pressure: () => record[BAROTROPE_PRESSURE]! / truth[BAROTROPE_PRESSURE]! - 1,
    specificEnergy: () => energyError(record, truth),
    gamma1: () => record[BAROTROPE_GAMMA]! / truth[BAROTROPE_GAMMA]! - 1,
  };
  const tallies = { pressure: new Tally(), specificEnergy: new Tally(), gamma1: new Tally() };
  const names = ["pressure", "specificEnergy", "gamma1"] as const;
  const range = Math.log(high / low);
  let count = 0;
  for (let i = 0; i < fresh; i++) {
    const density = low * Math.exp((range * (i + 0.5)) / fresh);
    if (source.jumps.some(({ densities: [below, above] }) => density > below && density < above)) continue;
    compare(density);
    count += 1;
    for (const name of names) tallies[name].add(errors[name](), density);
  }
  for (const { density, gammaBelow } of breaks) {
    if (density <= low || density >= high) continue;
    compare(density);
    for (const name of names) tallies[name].raise(errors[name](), density);
    tallies.gamma1.raise(gammaBelow / truth[BAROTROPE_GAMMA]! - 1, density);
  }
  for (const end of [low, high]) {
    compare(end);
    for (const name of names) tallies[name].raise(errors[name](), end);
  }
  for (const name of names) {
    const tally = tallies[name];
    narrow(tally, Math.exp(range / fresh), [low, high], (density) => {
      compare(density);
      return errors[name]();
    });
  }
  return Object.freeze({
    pressure: tallies.pressure.result(),
    specificEnergy: tallies.specificEnergy.result(),
    gamma1: tallies.gamma1.result(),
    densities: count,
    figures: Object.freeze({}),
  });
}

/** Golden-section search for the largest error between the neighbours of the largest one found. */
function narrow(
  tally: Tally,
  step: number,
  [low, high]: readonly [number, number],
  error: (density: number) => number,
): void {
  const golden = (Math.sqrt(5) - 1) / 2;
  let a = Math.log(Math.max(low, tally.density / step));
  let b = Math.log(Math.min(high, tally.density * step));
  for (let i = 0; i < 40; i++) {
    const [c, d] = [b - golden * (b - a), a + golden * (b - a)];
    const [atC, atD] = [error(Math.exp(c)), error(Math.exp(d))];
    tally.raise(atC, Math.exp(c));
    tally.raise(atD, Math.exp(d));
    if (Math.abs(atC) > Math.abs(atD)) b = d;
    else a = c;
  }
}

/** Compares at the rows themselves. */
export function measureAtRows(
  rows: readonly { readonly density: number; readonly pressure: number; readonly energy: number | undefined }[],
  fit: Barotrope,
): FitReport {
  const record = new Float64Array(BAROTROPE_LENGTH);
  const truth = new Float64Array(BAROTROPE_LENGTH);
  const [pressures, energies] = [new Tally(), new Tally()];
  for (const { density, pressure, energy } of rows) {
    record[BAROTROPE_DENSITY] = density;
    fit.fillAtDensity(record);
    pressures.add(record[BAROTROPE_PRESSURE]! / pressure - 1, density);
    truth[BAROTROPE_DENSITY] = density;
    truth[BAROTROPE_PRESSURE] = pressure;
    truth[BAROTROPE_ENERGY] = energy ?? 0;
    if (energy !== undefined) energies.add(energyError(record, truth), density);
  }
  return Object.freeze({
    pressure: pressures.result(),
    specificEnergy: rows[0]?.energy === undefined ? undefined : energies.result(),
    gamma1: undefined,
    densities: rows.length,
    figures: Object.freeze({}),
  });
}

function energyError(record: Float64Array, truth: Float64Array): number {
  const energy = truth[BAROTROPE_ENERGY]!;
  const scale = Math.abs(energy) + truth[BAROTROPE_PRESSURE]! / truth[BAROTROPE_DENSITY]!;
  return (record[BAROTROPE_ENERGY]! - energy) / scale;
}

/** The report with the figures asked for. */
export function withFigures(
  report: FitReport,
  figures: Figures | undefined,
  source: Barotrope,
  fit: Barotrope,
  density: readonly [number, number],
): FitReport {
  if (figures === undefined) return report;
  if (typeof figures !== "function") {
    const allowed = "a function from a barotrope to named numbers";
    throw new FermistateError("invalid-option", { argument: "figures", given: figures, allowed });
  }
  const [ofSource, ofFit] = [figures(source, density), figures(fit, density)];
  const names = [...new Set([...Object.keys(ofSource), ...Object.keys(ofFit)])];
  const entries = names.map((name): [string, FigureError] => {
    const [a, b] = [ofSource[name], ofFit[name]];
    const relativeError = a === undefined || b === undefined ? undefined : b / a - 1;
    return [name, Object.freeze({ source: a, fit: b, relativeError })];
  });
  return Object.freeze({ ...report, figures: Object.freeze(Object.fromEntries(entries)) });
}

/**
 * A smooth analytic barotrope fitted to cold or isentropic matter: one Chebyshev series for the energy, everything else
 * its derivatives.
 *
 *     e = G - e_s,   ln G = C(t) = sum_k c_k T_k(t),   t linear in ln rho, from -1 to 1
 *     P/rho = G C',   dP/drho = G (C'^2 + C'' + C'),   w = G (1 + C') - e_s          (' = d/d ln rho)
 *
 * so the first law holds exactly whatever the coefficients. They interpolate the source at Chebyshev points, which for
 * a smooth source is as good as the best polynomial but for a factor of 2 or 3 (Trefethen 2013, Approximation Theory
 * and Approximation Practice, chapter 16): the error falls geometrically with the number of terms. e_s makes G positive
 * down to the surface.
 */
import { FermistateError, requireKnown } from "../errors.js";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_GAMMA,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
} from "./barotrope.js";
import { type Figures, type FitReport, measureAgainst, withFigures } from "./fit-report.js";
import { requireDensity } from "./from-record.js";
import { ENERGY_SLOPE, INVERSION_SLOTS, inversionOf, SLOPE } from "./inversion.js";
import { requireBarotrope, requireDensityRange, requirePositive } from "./options.js";
import { type BarotropicContribution, contributing } from "./polytrope.js";

/** Options of {@link fitSmoothBarotrope}: either the number of terms or the error allowed. */
export interface SmoothFitOptions {
  /** Number of terms, 3 to 60. */
  readonly terms?: number;
  /** Largest relative error in P allowed: the fit takes as few terms as it needs, 60 at most. */
  readonly tolerance?: number;
  /** Lowest and highest density of the fit, g/cm^3. */
  readonly density: readonly [lowest: number, highest: number];
  /** As in `fitPiecewisePolytrope`: numbers that a barotrope leads to, compared in the report. */
  readonly figures?: Figures;
}

/** A smooth barotrope: its coefficients are all there is to it. */
export interface SmoothBarotrope extends BarotropicContribution {
  /** c_k of ln G. */
  readonly coefficients: readonly number[];
  /** e_s, erg/g. */
  readonly addedEnergy: number;
}

/** A fit and what it is worth. */
export interface SmoothFit {
  /** The fit, between the densities asked for. */
  readonly barotrope: SmoothBarotrope;
  /** Errors at densities that the fit has not seen. */
  readonly report: FitReport;
}

const [fewest, most] = [3, 60] as const;

/**
 * Fits a smooth analytic barotrope to cold or isentropic matter without a density jump: a fast stand-in with a
 * continuous sound speed.
 *
 * Cold carbon and oxygen from 1e4 to 1e10 g/cm^3 take 16 terms for 1e-4 in P, 23 for 1e-6, 30 for 1e-8; 40 reach 1e-10,
 * more do not. A range that begins at a surface P = 0 has no relative error of P to speak of: begin above it. Where the
 * source has kinks (layers, pieces), fit pieces to it.
 *
 * @throws `invalid-option` (an isotherm; a density jump in the range), `out-of-range`, `outside-domain`, `not-a-number`; `unstable` where
 *   too few terms make matter that does not resist compression
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { barotrope, fitSmoothBarotrope } from "fermistate/barotropes";
 * const cold = barotrope(whiteDwarfMatter(), composition({ C12: 0.5, O16: 0.5 }), { temperature: 0 });
 * const { barotrope: fit, report } = fitSmoothBarotrope(cold, { tolerance: 1e-6, density: [1e4, 1e10] });
 * fit.coefficients.length; // => 23
 * report.pressure.max < 1e-6; // => true
 * ```
 */
export function fitSmoothBarotrope(source: Barotrope, options: SmoothFitOptions): SmoothFit {
  requireBarotrope("source", source);
  requireKnown("options", options, ["terms", "tolerance", "density", "figures"]);
  const { terms, tolerance, figures } = options;
  if ((terms === undefined) === (tolerance === undefined)) {
    const allowed = "either terms or tolerance, and not both";
    throw new FermistateError("invalid-option", { argument: "options", given: terms, allowed });
  }
  if (terms !== undefined && !(Number.isInteger(terms) && terms >= fewest && terms <= most)) {
    throw new FermistateError("out-of-range", { argument: "terms", given: terms, allowed: `${fewest} to ${most}` });
  }
  const range = requireDensityRange(options.density);
  for (const end of range) requireDensity(source, end);
  requireSmooth(source, range);
  const fitted = (count: number): SmoothFit => {
    const fit = smoothBarotrope(source, range, count);
    return Object.freeze({ barotrope: fit, report: measureAgainst(source, fit, [], range) });
  };
  const complete = ({ barotrope: fit, report }: SmoothFit): SmoothFit =>
    Object.freeze({ barotrope: fit, report: withFigures(report, figures, source, fit, range) });
  if (terms !== undefined) return complete(fitted(terms));
  const allowedError = requirePositive("tolerance", tolerance);
  let best = Number.POSITIVE_INFINITY;
  for (let count = fewest; count <= most; count++) {
    if (!isStable(series(source, range, count).coefficients, range)) continue;
    const fit = fitted(count);
    if (fit.report.pressure.max <= allowedError) return complete(fit);
    best = Math.min(best, fit.report.pressure.max);
  }
  const allowed = `>= ${best.toPrecision(3)}, the least error of up to ${most} terms`;
  throw new FermistateError("out-of-range", { argument: "tolerance", given: tolerance, allowed });
}

/** Refuses jumps, and matter whose e is not w - P/rho (an isotherm). */
function requireSmooth(source: Barotrope, [low, high]: readonly [number, number]): void {
  const jump = source.jumps.find(({ densities: [below, above] }) => above > low && below < high);
  if (jump !== undefined) {
    const allowed = `a range without the density jump at ${jump.densities[0]} g/cm^3`;
    throw new FermistateError("invalid-option", { argument: "density", given: [low, high], allowed });
  }
  const { specificEnergy, potential, pressure } = source.state(high);
  if (Math.abs(potential - specificEnergy - pressure / high) <= 1e-9 * Math.abs(potential)) return;
  const allowed = "cold or isentropic matter, whose potential is e + P/rho";
  throw new FermistateError("invalid-option", { argument: "source", given: source.name, allowed });
}

interface Series {
  readonly coefficients: Float64Array;
  readonly addedEnergy: number;
}

/** Coefficients of ln G from the source at Chebyshev points of the first kind. */
function series(source: Barotrope, [low, high]: readonly [number, number], count: number): Series {
  const record = new Float64Array(BAROTROPE_LENGTH);
  const at = (density: number): void => {
    record[BAROTROPE_DENSITY] = density;
    source.fillAtDensity(record);
  };
  at(low);
  // G at the lowest density is dP/drho there: of the size of P/rho, and not zero at a surface.
  const slope = (record[BAROTROPE_PRESSURE]! * record[BAROTROPE_GAMMA]!) / low;
  const addedEnergy = slope - record[BAROTROPE_ENERGY]!;
  const values = Float64Array.from({ length: count }, (_, i) => {
    const t = Math.cos((Math.PI * (i + 0.5)) / count);
    at(Math.sqrt(low * high) * Math.exp(0.5 * t * Math.log(high / low)));
    return Math.log(record[BAROTROPE_ENERGY]! + addedEnergy);
  });
  const coefficients = Float64Array.from({ length: count }, (_, k) => {
    const sum = values.reduce((total, value, i) => total + value * Math.cos((Math.PI * k * (i + 0.5)) / count), 0);
    return ((k === 0 ? 1 : 2) * sum) / count;
  });
  return { coefficients, addedEnergy };
}

/** Coefficients of the derivative in t. */
function derivative(c: Float64Array): Float64Array {
  const d = new Float64Array(c.length);
  for (let k = c.length - 1; k > 0; k--) d[k - 1] = (k + 1 < c.length ? d[k + 1]! : 0) + 2 * k * c[k]!;
  d[0]! *= 0.5;
  return d;
}

/** Slots: ln rho in, then C, C', C'', C''' out. */
const [T, C0, C1, C2, C3] = [0, 1, 2, 3, 4] as const;

/** Fills C and its derivatives in ln rho, to `order`, by Clenshaw's recurrence. */
function evaluator(
  coefficients: Float64Array,
  [low, high]: readonly [number, number],
): (r: Float64Array, order: 2 | 3) => void {
  const stretch = 2 / Math.log(high / low);
  const middle = 0.5 * Math.log(low) + 0.5 * Math.log(high);
  const rows = [coefficients];
  for (let i = 1; i < 4; i++) rows.push(derivative(rows[i - 1]!).map((value) => value * stretch));
  return (r, order) => {
    const t = (r[T]! - middle) * stretch;
    for (let i = 0; i <= order; i++) {
      const c = rows[i]!;
      let b1 = 0;
      let b2 = 0;
      for (let k = c.length - 1; k > 0; k--) {
        const b0 = c[k]! + 2 * t * b1 - b2;
        b2 = b1;
        b1 = b0;
      }
      r[C0 + i] = c[0]! + t * b1 - b2;
    }
  };
}

/** Whether P and dP/drho are positive at 1000 densities of the range. */
function isStable(coefficients: Float64Array, range: readonly [number, number]): boolean {
  const fill = evaluator(coefficients, range);
  const r = new Float64Array(5);
  for (let i = 0; i <= 1000; i++) {
    r[T] = Math.log(range[0]) + (Math.log(range[1] / range[0]) * i) / 1000;
    fill(r, 2);
    if (!(r[C1]! > 0 && r[C1]! * r[C1]! + r[C2]! + r[C1]! > 0)) return false;
  }
  return true;
}

function smoothBarotrope(source: Barotrope, range: readonly [number, number], count: number): SmoothBarotrope {
  const { coefficients, addedEnergy } = series(source, range, count);
  if (!isStable(coefficients, range)) {
    const allowed = "as many terms as make the pressure rise with density";
    throw new FermistateError("unstable", { argument: "terms", given: count, allowed });
  }
  const fill = evaluator(coefficients, range);
  const r = new Float64Array(5);
  const scratch = new Float64Array(INVERSION_SLOTS);

  function fillAtDensity(record: Float64Array): void {
    const density = record[BAROTROPE_DENSITY]!;
    r[T] = Math.log(density);
    fill(r, 2);
    const g = Math.exp(r[C0]!);
    const first = r[C1]!;
    const specific = g * first;
    const slope = g * (first * first + r[C2]! + first);
    record[BAROTROPE_PRESSURE] = density * specific;
    record[BAROTROPE_ENERGY] = g - addedEnergy;
    record[BAROTROPE_POTENTIAL] = g * (1 + first) - addedEnergy;
    record[BAROTROPE_GAMMA] = slope / specific;
    scratch[SLOPE] = slope;
    scratch[ENERGY_SLOPE] = specific;
  }

  const size = Math.ceil(Math.log(range[1] / range[0]) / 0.05) + 2;
  const nodes = {
    density: range,
    logs: new Float64Array(size),
    pressures: new Float64Array(size),
    potentials: new Float64Array(size),
    slopes: new Float64Array(size),
  };
  const record = new Float64Array(BAROTROPE_LENGTH);
  for (let i = 0; i < size; i++) {
    const density = i === size - 1 ? range[1] : range[0] * (range[1] / range[0]) ** (i / (size - 1));
    record[BAROTROPE_DENSITY] = density;
    fillAtDensity(record);
    nodes.logs[i] = Math.log(density);
    nodes.pressures[i] = record[BAROTROPE_PRESSURE]!;
    nodes.potentials[i] = record[BAROTROPE_POTENTIAL]!;
    nodes.slopes[i] = scratch[SLOPE]!;
  }
  const { fillAtPressure, fillAtPotential } = inversionOf(nodes, fillAtDensity, scratch, undefined);
  const name = `smooth fit of ${count} terms`;
  const validity = `A fit of ${source.name} over ${range[0]} to ${range[1]} g/cm^3; its report says how good.`;
  const pieces = {
    fillAtDensity,
    fillAtPressure,
    fillAtPotential,
    curvature(at: Float64Array): number {
      r[T] = Math.log(at[BAROTROPE_DENSITY]!);
      fill(r, 3);
      const [c1, c2, c3] = [r[C1]!, r[C2]!, r[C3]!];
      // d/d ln rho of G (C'^2 + C'' + C').
      return Math.exp(r[C0]!) * (c1 * (c1 * c1 + c2 + c1) + 2 * c1 * c2 + c3 + c2);
    },
  };
  return Object.freeze({
    ...contributing(name, validity, range, pieces),
    limits: Object.freeze((source.limits ?? []).filter(({ side, density }) => side === "above" && density < range[1])),
    coefficients: Object.freeze(Array.from(coefficients)),
    addedEnergy,
  });
}

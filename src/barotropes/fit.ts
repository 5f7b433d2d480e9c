/**
 * A piecewise polytrope fitted to a barotrope or to columns: least squares in log P, continuous, with the best breaks.
 *
 * In ln rho and ln P a piecewise polytrope is a broken line, so broken-line.ts finds it; e follows from P by the first
 * law. What the fit is worth is measured at densities that it has not seen.
 */
import { FermistateError, requireFinite, requireKnown } from "../errors.js";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_LENGTH,
  BAROTROPE_PRESSURE,
  type Barotrope,
  type BarotropeLimit,
} from "./barotrope.js";
import { fitBrokenLine } from "./broken-line.js";
import { type Figures, type FitReport, measureAgainst, measureAtRows, withFigures } from "./fit-report.js";
import { requireDensity } from "./from-record.js";
import { requireDensityRange, requirePositive } from "./options.js";
import { type PiecewisePolytrope, piecewisePolytrope } from "./piecewise-polytrope.js";

/** Rows of a table of cold matter, by rising density. */
export interface BarotropeColumns {
  /** g/cm^3, rising. */
  readonly density: ArrayLike<number>;
  /** dyn/cm^2, rising. */
  readonly pressure: ArrayLike<number>;
  /** erg/g; without it e = 0 at density 0, and no error of e is reported. */
  readonly specificEnergy?: ArrayLike<number>;
}

/** Options of {@link fitPiecewisePolytrope}: either the number of pieces or the error allowed. */
export interface FitOptions {
  /** Number of pieces, 1 to 20. */
  readonly pieces?: number;
  /** Largest relative error in P allowed: the fit takes as few pieces as it needs, 20 at most. */
  readonly tolerance?: number;
  /**
   * Lowest and highest density of the fit, g/cm^3.
   * @defaultValue those of the columns; a barotrope needs them given
   */
  readonly density?: readonly [lowest: number, highest: number];
  /**
   * Numbers that a barotrope leads to, by name, computed with the source and with the fit and compared in the report:
   * `starFigures(...)` of `fermistate/structure` makes them of stars, the largest mass and its radius among them. Needs a
   * barotrope as source.
   */
  readonly figures?: Figures;
}

/** A fit and what it is worth. */
export interface PiecewisePolytropeFit {
  /** The fit; below the lowest density of the fit its first piece goes on to density 0. */
  readonly barotrope: PiecewisePolytrope;
  /** Errors at densities that the fit has not seen. */
  readonly report: FitReport;
}

/**
 * Points in ln rho that the search for breaks sees, those that may be breaks at first, and those of the final search.
 */
const [coarse, candidates, fine] = [500, 60, 4000] as const;
const mostPieces = 20;

/**
 * Fits a piecewise polytrope to a barotrope or to columns: least squares in log P over densities equally spaced in log
 * rho (for columns: over their rows), P and e exactly continuous, the breaks the best there are.
 *
 * e agrees with the source at the lowest density of the fit. gamma1 and the sound speed of a piecewise polytrope jump
 * at each break; the error in P falls like 1/pieces^2, that of gamma1 like 1/pieces.
 *
 * @throws `invalid-option`, `length-mismatch`, `not-a-number`, `out-of-range` (columns that do not rise, with the row; an exponent of the
 *   fit that no matter has), `outside-domain`
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { barotrope, fitPiecewisePolytrope } from "fermistate/barotropes";
 * const cold = barotrope(whiteDwarfMatter(), composition({ C12: 0.5, O16: 0.5 }), { temperature: 0 });
 * const { barotrope: fit, report } = fitPiecewisePolytrope(cold, { pieces: 5, density: [1e4, 1e10] });
 * fit.pieces.map((piece) => piece.gamma); // => [1.680, 1.606, 1.502, 1.403, 1.345]
 * report.pressure.max; // => 0.0176
 * ```
 */
export function fitPiecewisePolytrope(
  source: Barotrope | BarotropeColumns,
  options: FitOptions,
): PiecewisePolytropeFit {
  requireKnown("options", options, ["pieces", "tolerance", "density", "figures"]);
  const { pieces, tolerance } = options;
  if ((pieces === undefined) === (tolerance === undefined)) {
    const allowed = "either pieces or tolerance, and not both";
    throw new FermistateError("invalid-option", { argument: "options", given: pieces, allowed });
  }
  if (pieces !== undefined && !(Number.isInteger(pieces) && pieces >= 1 && pieces <= mostPieces)) {
    throw new FermistateError("out-of-range", { argument: "pieces", given: pieces, allowed: `1 to ${mostPieces}` });
  }
  const fitted = isBarotrope(source) ? ofBarotrope(source, options) : ofColumns(source, options);
  const { barotrope, report } = pieces === undefined ? fewest(fitted, tolerance) : fitted(pieces);
  if (options.figures === undefined || !isBarotrope(source)) return Object.freeze({ barotrope, report });
  const range = requireDensityRange(options.density);
  return Object.freeze({ barotrope, report: withFigures(report, options.figures, source, barotrope, range) });
}

/** The fit of the fewest pieces that keeps the error. */
function fewest(fitted: Fitted, tolerance: number | undefined): PiecewisePolytropeFit {
  const allowedError = requirePositive("tolerance", tolerance);
  let best = Number.POSITIVE_INFINITY;
  for (let count = 1; count <= mostPieces; count++) {
    const fit = fitted(count);
    if (fit.report.pressure.max <= allowedError) return fit;
    best = Math.min(best, fit.report.pressure.max);
  }
  const allowed = `>= ${best.toPrecision(3)}, the error of ${mostPieces} pieces`;
  throw new FermistateError("out-of-range", { argument: "tolerance", given: tolerance, allowed });
}

function isBarotrope(source: Barotrope | BarotropeColumns): source is Barotrope {
  if (typeof source === "object" && source !== null) {
    if ("fillAtDensity" in source) return true;
    if ("density" in source && "pressure" in source) return false;
  }
  const allowed = "a barotrope, or { density, pressure, specificEnergy? }";
  throw new FermistateError("invalid-option", { argument: "source", given: source, allowed });
}

type Fitted = (pieces: number) => PiecewisePolytropeFit;

function ofBarotrope(source: Barotrope, { density }: FitOptions): Fitted {
  const range = requireDensityRange(density);
  for (const end of range) requireDensity(source, end);
  const record = new Float64Array(BAROTROPE_LENGTH);
  const [low, high] = range;
  const sampled = (count: number): readonly [Float64Array, Float64Array] => {
    const x = new Float64Array(count);
    const y = new Float64Array(count);
    for (let i = 0; i < count; i++) {
      x[i] = Math.log(low) + (Math.log(high / low) * i) / (count - 1);
      record[BAROTROPE_DENSITY] = i === 0 ? low : i === count - 1 ? high : Math.exp(x[i]!);
      source.fillAtDensity(record);
      y[i] = Math.log(record[BAROTROPE_PRESSURE]!);
    }
    return [x, y];
  };
  const [x, y] = sampled(coarse);
  const [xFine, yFine] = sampled(fine);
  record[BAROTROPE_DENSITY] = low;
  source.fillAtDensity(record);
  const energy = record[BAROTROPE_ENERGY]!;
  return (pieces) => {
    const line = fitBrokenLine(x, y, xFine, yFine, pieces, candidates);
    const fit = polytropeOf(line, low, energy, high, source.limits ?? []);
    const breaks = fit.pieces
      .slice(1)
      .map((piece, i) => ({ density: piece.density, gammaBelow: fit.pieces[i]!.gamma }));
    return Object.freeze({ barotrope: fit, report: measureAgainst(source, fit, breaks, range) });
  };
}

function ofColumns(source: BarotropeColumns, { density, figures }: FitOptions): Fitted {
  if (figures !== undefined) {
    const allowed = "a barotrope as source; columns lead to no star";
    throw new FermistateError("invalid-option", { argument: "figures", given: figures, allowed });
  }
  const rows = checkedRows(source);
  const [low, high] =
    density === undefined ? [rows[0]!.density, rows[rows.length - 1]!.density] : requireDensityRange(density);
  const chosen = rows.filter((row) => row.density >= low && row.density <= high);
  const x = Float64Array.from(chosen, (row) => Math.log(row.density));
  const y = Float64Array.from(chosen, (row) => Math.log(row.pressure));
  return (pieces) => {
    if (chosen.length < 4 * pieces) {
      const allowed = `>= ${4 * pieces} rows for ${pieces} pieces`;
      throw new FermistateError("length-mismatch", { argument: "source", given: chosen.length, allowed });
    }
    const line = fitBrokenLine(x, y, x, y, pieces, candidates);
    const first = chosen[0]!;
    const fit = polytropeOf(line, first.density, first.energy, chosen[chosen.length - 1]!.density, []);
    return Object.freeze({ barotrope: fit, report: measureAtRows(chosen, fit) });
  };
}

/** The broken line as a piecewise polytrope; e at the lowest density as given. */
function polytropeOf(
  { x, y }: { readonly x: readonly number[]; readonly y: readonly number[] },
  low: number,
  energy: number | undefined,
  high: number,
  limits: readonly BarotropeLimit[],
): PiecewisePolytrope {
  const gammas = x.slice(1).map((end, i) => (y[i + 1]! - y[i]!) / (end - x[i]!));
  const [first, pressure] = [gammas[0]!, Math.exp(y[0]!)];
  const energyAtZeroDensity = energy === undefined || !(first > 1) ? 0 : energy - pressure / low / (first - 1);
  const fit = piecewisePolytrope({
    gammas,
    dividingDensities: x.slice(1, -1).map(Math.exp),
    referenceDensity: low,
    referencePressure: pressure,
    energyAtZeroDensity,
    highestDensity: high,
    name: `fit of ${gammas.length} pieces`,
    validity: `A fit over ${shortest(low)} to ${shortest(high)} g/cm^3; its report says how good. Below, its first piece goes on.`,
  });
  const message = "Below this density nothing was fitted: the first piece of the fit goes on.";
  const own: BarotropeLimit = Object.freeze({ code: "extrapolated", density: low, side: "below", message });
  return Object.freeze({ ...fit, limits: Object.freeze([...limitsWithin(limits, high), own]) });
}

/** Limits that a fit up to a density takes over from its source. */
function limitsWithin(limits: readonly BarotropeLimit[], highest: number): readonly BarotropeLimit[] {
  return limits.filter(({ side, density }) => side === "above" && density < highest);
}

/** Six digits at most. */
const shortest = (value: number): string => String(Number(value.toPrecision(6)));

/** One row of the columns. */
interface Row {
  readonly density: number;
  readonly pressure: number;
  readonly energy: number | undefined;
}

function checkedRows({ density, pressure, specificEnergy }: BarotropeColumns): readonly Row[] {
  const count = density.length;
  for (const [argument, column] of Object.entries({ pressure, specificEnergy: specificEnergy ?? density })) {
    if (column.length === count) continue;
    const allowed = `${count} rows, as density has`;
    throw new FermistateError("length-mismatch", { argument, given: column.length, allowed });
  }
  return Array.from({ length: count }, (_, i): Row => {
    const row = { density: rising("density", density, i), pressure: rising("pressure", pressure, i) };
    if (specificEnergy === undefined) return { ...row, energy: undefined };
    return { ...row, energy: requireFinite("specificEnergy", specificEnergy[i], "a finite number, erg/g", i) };
  });
}

/** Entry i of a column, which must be positive and above the one before. */
function rising(argument: string, column: ArrayLike<number>, i: number): number {
  const value = requireFinite(argument, column[i], "a finite number > 0", i);
  const before = i === 0 ? 0 : column[i - 1]!;
  if (value > before) return value;
  const allowed = i === 0 ? "> 0" : `> ${before}: ${argument} rises from row to row`;
  throw new FermistateError("out-of-range", { argument, given: value, allowed, index: i });
}

/**
 * Two equations of state over a region of density and temperature: how far apart they are, where, and which of them obeys
 * thermodynamics. What one runs before swapping one for the other in a solver.
 */
import { FermistateError } from "../errors.js";
import type { EquationOfState, State } from "../thermodynamics/equation-of-state.js";
import { isNodeOf } from "../thermodynamics/interpolation-nodes.js";
import { type QuantityName, quantities } from "../thermodynamics/quantities.js";
import { libraryVersion } from "../version.js";
import { type Answer, answerAt, isState } from "./answers.js";
import { consistencyMeter } from "./consistency.js";
import { offsetOf, relativeDifference, scaleWords, statisticsOf, type Zeros } from "./difference.js";
import { jumpOf } from "./jumps.js";
import { worstRows } from "./places.js";
import { meltingFinder, regimeAt, regionOf } from "./regions.js";
import { type CompareOptions, type Request, readRequest } from "./request.js";
import type {
  Comparison,
  NodeCounts,
  Offset,
  Place,
  QuantityDifference,
  RefusalCount,
  Region,
  WorstPlace,
} from "./result.js";
import { signCounter } from "./signs.js";

/**
 * Compares two equations of state on a grid of density and temperature.
 *
 * The first is the reference: differences are (b - a) over the size of a. Refusals are no errors here but part of the
 * result, and so are inconsistent derivatives, wrong signs and jumps of a foreign equation of state. A constant between the
 * zeros of energy or entropy is taken out where it explains the difference, and told. About 0.3 ms per point for
 * white-dwarf matter, half of it for the consistency.
 *
 * @throws FermistateError `invalid-option`, `invalid-composition`, `not-a-number`, `out-of-range`, `too-large`;
 * `unavailable-quantity` where one of the two never knows a quantity asked for
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { compare } from "fermistate/compare";
 * const found = compare(whiteDwarfMatter(), whiteDwarfMatter({ coulomb: false }), {
 *   composition: composition({ C12: 0.5, O16: 0.5 }),
 *   density: [1e5, 1e6, 1e7],
 *   temperature: [1e7, 3e7],
 *   quantities: ["pressure"],
 * });
 * found.quantities[0]?.largest; // => 0.0637
 * ```
 */
export function compare(a: EquationOfState, b: EquationOfState, options: CompareOptions): Comparison {
  const request = readRequest(a, b, options);
  const { compositions, density, temperature, names } = request;
  const densities = density.values;
  const temperatures = temperature.values;
  const rows = densities.length * temperatures.length;
  const placeOf = (row: number): Place => ({
    row,
    density: densities[row % densities.length]!,
    temperature: temperatures[Math.floor(row / densities.length)]!,
  });

  const both = [a, b] as const;
  const answers: [Answer[], Answer[]] = [[], []];
  const meters = [0, 1].map((k) =>
    consistencyMeter(both[k]!, compositions[k]!, request.consistency ? rows : 0, placeOf),
  );
  const signs = [signCounter(0), signCounter(1)] as const;
  for (let row = 0; row < rows; row++) {
    const place = placeOf(row);
    for (const k of [0, 1] as const) {
      const answer = answerAt(both[k], place.density, place.temperature, compositions[k]);
      answers[k].push(answer);
      if (!isState(answer)) continue;
      if (request.consistency) meters[k]!.measure(row, answer);
      signs[k].count(answer, request.consistency ? meters[k]!.response : undefined, place);
    }
    if ((row + 1) % densities.length === 0) request.onProgress(row + 1, rows);
  }

  const pairs = answers[0].flatMap((first, row) => {
    const second = answers[1][row]!;
    return isState(first) && isState(second) ? [[first, second] as const] : [];
  });
  const offsets = (["specificEnergy", "specificEntropy"] as const).flatMap((name) => offsetOf(name, pairs) ?? []);
  const zeros = zerosOf(offsets);
  const isMelting = meltingFinder(answers, densities.length);
  const regimes = answers[0].map((first, row) => {
    if (!isState(first) || !isState(answers[1][row]!)) return undefined;
    const { density: rho, temperature: t } = placeOf(row);
    return regimeAt(rho, t, compositions[0]);
  });
  const regions = regimes.map((found, row) => regionOf(found, isMelting(row)));
  const differences = request.quantities.map((name) => {
    const difference = mapOf(name, answers, zeros);
    if (pairs.length > 0) requireKnown(name, difference, names);
    const worst = worstRows(difference, densities.length).map((row): WorstPlace => {
      const [first, second] = [answers[0][row] as State, answers[1][row] as State];
      const { kind = [], findings = [] } = regimes[row] ?? {};
      const codes = [...new Set(findings.map(({ code }) => code))];
      const values = [first[name]!, second[name]!] as const;
      return { ...placeOf(row), difference: difference[row]!, values, region: regions[row]!, kind, findings: codes };
    });
    return differenceOf(name, difference, worst, regions);
  });
  const search = {
    densities,
    temperatures,
    answers,
    ask: (rho: number, t: number) =>
      [answerAt(a, rho, t, compositions[0]), answerAt(b, rho, t, compositions[1])] as const,
    zeros,
  };
  return Object.freeze({
    names,
    equationsOfState: [a.name, b.name] as const,
    compositions: [compositions[0].name, compositions[1].name] as const,
    axes: Object.freeze({ density, temperature }),
    shape: [temperatures.length, densities.length] as const,
    rows,
    quantities: differences,
    offsets,
    refusals: refusalsOf(answers, placeOf),
    nodes: nodesOf(both, answers, compositions, placeOf),
    consistency: request.consistency ? ([meters[0]!.checks(), meters[1]!.checks()] as const) : ([[], []] as const),
    signs: signs.flatMap((counter) => counter.found()),
    jumps: differences.flatMap(({ name, difference }) => jumpOf(name, difference, search) ?? []),
    libraryVersion,
  });
}

function zerosOf(offsets: readonly Offset[]): Zeros {
  const of = (name: Offset["name"]): number => offsets.find((one) => one.name === name)?.value ?? 0;
  return { energy: of("specificEnergy"), entropy: of("specificEntropy") };
}

/** The difference at every point; NaN where one does not answer. */
function mapOf(
  name: QuantityName,
  answers: readonly [readonly Answer[], readonly Answer[]],
  zeros: Zeros,
): Float64Array {
  return Float64Array.from(answers[0], (first, row) => {
    const second = answers[1][row]!;
    return isState(first) && isState(second) ? relativeDifference(name, first, second, zeros) : Number.NaN;
  });
}

function requireKnown(name: QuantityName, difference: Float64Array, names: Request["names"]): void {
  if (difference.some((one) => !Number.isNaN(one))) return;
  const allowed = `quantities that both know; ${names[0]} or ${names[1]} never does`;
  throw new FermistateError("unavailable-quantity", { argument: "quantities", given: name, allowed });
}

function differenceOf(
  name: QuantityName,
  difference: Float64Array,
  worst: readonly WorstPlace[],
  regions: readonly Region[],
): QuantityDifference {
  const byRegion = new Map<Region, number[]>();
  for (const [row, region] of regions.entries()) {
    if (Number.isNaN(difference[row]!)) continue;
    const list = byRegion.get(region);
    if (list === undefined) byRegion.set(region, [difference[row]!]);
    else list.push(difference[row]!);
  }
  const found = [...byRegion].map(([region, list]) => {
    const { points, largest, median } = statisticsOf(list);
    return { region, points, largest, median };
  });
  return {
    name,
    unit: quantities[name].unit,
    scale: scaleWords(name),
    difference,
    ...statisticsOf(difference),
    worst,
    regions: found.sort((p, q) => q.largest - p.largest),
  };
}

/** Which points are nodes of a table, where both answer. */
function nodesOf(
  both: readonly [EquationOfState, EquationOfState],
  answers: readonly [readonly Answer[], readonly Answer[]],
  compositions: Request["compositions"],
  placeOf: (row: number) => Place,
): NodeCounts {
  const points = Uint8Array.from(answers[0], (first, row) => {
    if (!isState(first) || !isState(answers[1][row]!)) return 0;
    const { density, temperature } = placeOf(row);
    const bit = (k: 0 | 1): number => (isNodeOf(both[k], density, temperature, compositions[k]) ? k + 1 : 0);
    return bit(0) + bit(1);
  });
  const count = (has: (one: number) => boolean): number => points.reduce((sum, one) => sum + (has(one) ? 1 : 0), 0);
  return {
    first: count((one) => one === 1 || one === 3),
    second: count((one) => one >= 2),
    any: count((one) => one > 0),
    points,
  };
}

function refusalsOf(
  answers: readonly [readonly Answer[], readonly Answer[]],
  placeOf: (row: number) => Place,
): Comparison["refusals"] {
  const which = Uint8Array.from(answers[0], (first, row) => {
    return (isState(first) ? 1 : 0) + (isState(answers[1][row]!) ? 2 : 0);
  });
  const count = (wanted: number): number => which.reduce((sum, one) => sum + (one === wanted ? 1 : 0), 0);
  const codesOf = (list: readonly Answer[]): RefusalCount[] => {
    const met = new Map<string, { points: number; example: Place }>();
    for (const [row, answer] of list.entries()) {
      if (isState(answer)) continue;
      const known = met.get(answer);
      if (known === undefined) met.set(answer, { points: 1, example: placeOf(row) });
      else known.points += 1;
    }
    return [...met].map(([code, one]) => ({ code, ...one })).sort((p, q) => q.points - p.points);
  };
  return {
    both: count(3),
    onlyFirst: count(1),
    onlySecond: count(2),
    none: count(0),
    answers: which,
    codes: [codesOf(answers[0]), codesOf(answers[1])],
  };
}

/** Relative differences of quantities: their scales, their statistics, and a constant that explains them. */
import { boltzmannConstant } from "../constants.js";
import type { State } from "../thermodynamics/equation-of-state.js";
import { type QuantityName, quantities } from "../thermodynamics/quantities.js";
import type { Offset } from "./result.js";

/** How far b lies above a in zero of energy, erg/g, and of entropy, erg/(g K). */
export interface Zeros {
  readonly energy: number;
  readonly entropy: number;
}

/** Quantities that may pass through zero, and what is then their size. */
const scales: { readonly [Name in QuantityName]?: readonly [words: string, of: (state: State) => number] } = {
  specificEnergy: ["the larger of |a| and P/rho", (state) => state.pressure / state.density],
  specificFreeEnergy: ["the larger of |a| and P/rho", (state) => state.pressure / state.density],
  specificEnthalpy: ["the larger of |a| and P/rho", (state) => state.pressure / state.density],
  energyByDensity: ["the larger of |a| and P/rho^2", (state) => state.pressure / state.density ** 2],
  electronChemicalPotential: ["the larger of |a| and kT", (state) => boltzmannConstant * state.temperature],
  electronDegeneracy: ["the larger of |a| and 1", () => 1],
  crystalFraction: ["1", () => 1],
};

/** What differences of a quantity are divided by, in words. */
export function scaleWords(name: QuantityName): string {
  return scales[name]?.[0] ?? "|a|";
}

/** (b - a)/scale, zeros of energy and entropy taken out; NaN where one does not know the quantity. */
export function relativeDifference(name: QuantityName, a: State, b: State, zeros: Zeros): number {
  const first = a[name];
  const second = b[name];
  if (first === undefined || second === undefined) return Number.NaN;
  if (first === second && zeros.energy === 0 && zeros.entropy === 0) return 0; // two infinities too
  const difference = second - first - shiftOf(name, a.temperature, zeros);
  const scale = sizeOf(name, a) || Math.abs(second);
  return difference === 0 ? 0 : difference / scale;
}

/** Size of a quantity in a state, never less than its natural scale. */
function sizeOf(name: QuantityName, state: State): number {
  return Math.max(Math.abs(state[name]!), scales[name]?.[1](state) ?? 0);
}

/** By how much other zeros of energy and entropy move a quantity. */
function shiftOf(name: QuantityName, temperature: number, { energy, entropy }: Zeros): number {
  if (name === "specificEnergy" || name === "specificEnthalpy") return energy;
  if (name === "specificEntropy") return entropy;
  if (name === "specificFreeEnergy") return energy - (temperature === 0 ? 0 : temperature * entropy);
  return 0;
}

/** Share of the difference that may stay when a constant is to explain it. */
const explained = 0.05;

/**
 * The constant that best explains a difference, if it does: the weighted median of b - a minimises the mean size of the
 * relative difference; it counts where it takes away 95 % of that.
 */
export function offsetOf(name: Offset["name"], pairs: readonly (readonly [State, State])[]): Offset | undefined {
  const rows = pairs
    .map(([a, b]) => ({ difference: b[name] - a[name], weight: 1 / (sizeOf(name, a) || Math.abs(b[name])) }))
    .filter(({ difference, weight }) => Number.isFinite(difference) && Number.isFinite(weight));
  if (rows.length < 5) return undefined; // any constant explains a handful of points
  const sorted = [...rows].sort((x, y) => x.difference - y.difference);
  const half = rows.reduce((sum, { weight }) => sum + weight, 0) / 2;
  let passed = 0;
  const middle = sorted.find(({ weight }) => {
    passed += weight;
    return passed >= half;
  })!;
  const mean = (shift: number): number =>
    rows.reduce((sum, { difference, weight }) => sum + Math.abs(difference - shift) * weight, 0) / rows.length;
  const [before, after] = [mean(0), mean(middle.difference)];
  if (!(before > 1e-14 && after <= explained * before)) return undefined;
  return { name, value: middle.difference, unit: quantities[name].unit, before, after };
}

/** Largest, 99th percentile and median of sizes, NaN left out; zeros where there are none. */
export function statisticsOf(values: ArrayLike<number>): {
  readonly points: number;
  readonly largest: number;
  readonly percentile99: number;
  readonly median: number;
} {
  const sizes = Float64Array.from(values, Math.abs)
    .filter((one) => !Number.isNaN(one))
    .sort();
  const at = (share: number): number => sizes[Math.max(0, Math.ceil(share * sizes.length) - 1)] ?? 0;
  return { points: sizes.length, largest: at(1), percentile99: at(0.99), median: at(0.5) };
}

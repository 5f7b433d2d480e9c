/** Rows -> a mesh of every density at every temperature: as given, or resampled along ln T. */
import { FermistateError } from "../../errors.js";
import { stencilWeights } from "../../numerics/stencil.js";
import { fewestNodes, type SortedRows } from "./columns.js";

/** A mesh of given states; arrays by density, temperature fastest. */
export interface StateMesh {
  /** Densities, g/cm^3, rising. */
  readonly density: Float64Array;
  /** Temperatures, K, rising. */
  readonly temperature: Float64Array;
  /** ln density. */
  readonly u: Float64Array;
  /** ln temperature. */
  readonly v: Float64Array;
  /** P/rho, erg/g. */
  readonly specificPressure: Float64Array;
  /** e, erg/g. */
  readonly energy: Float64Array;
  /** s, erg/(g K), where it is given. */
  readonly entropy: Float64Array | undefined;
  /** True where each density had temperatures of its own. */
  readonly resampled: boolean;
}

/** Nodes of the polynomial that resamples. */
const resamplingWidth = 6;

/**
 * The mesh.
 *
 * @throws `invalid-option` for too few nodes, or rows that are neither a mesh nor sorted by density
 */
export function meshOf(rows: SortedRows): StateMesh {
  const { starts } = rows;
  const count = starts.length - 1;
  const longest = lengths(starts).reduce((most, length) => Math.max(most, length), 0);
  if (count < fewestNodes)
    refuse(`${count} densities`, `at least ${fewestNodes} densities and ${fewestNodes} temperatures`);
  const short = lengths(starts).findIndex((length) => length < fewestNodes);
  if (short >= 0) {
    const given = `${starts[short + 1]! - starts[short]!} temperatures at ${rows.density[starts[short]!]} g/cm^3`;
    refuse(
      given,
      longest < fewestNodes && count > 2 * fewestNodes
        ? `at least ${fewestNodes} temperatures at each density: rows that share no densities are no mesh`
        : `at least ${fewestNodes} temperatures at each density`,
    );
  }
  const density = Float64Array.from({ length: count }, (_, i) => rows.density[starts[i]!]!);
  const resampled = !isRectangular(rows);
  const temperature = resampled ? commonTemperatures(rows) : rows.temperature.slice(0, starts[1]!);
  const v = temperature.map(Math.log);
  const column = (values: Float64Array): Float64Array => (resampled ? resample(rows, values, v) : values);
  const specific = rows.pressure.map((p, i) => p / rows.density[i]!);
  const logarithm = specific.map(Math.log);
  return {
    density,
    temperature,
    u: density.map(Math.log),
    v,
    specificPressure: resampled ? column(logarithm).map(Math.exp) : specific,
    energy: column(rows.energy),
    entropy: rows.entropy === undefined ? undefined : resampledEntropy(rows.entropy, column),
    resampled,
  };
}

const lengths = (starts: readonly number[]): number[] => starts.slice(1).map((end, i) => end - starts[i]!);

function resampledEntropy(entropy: Float64Array, column: (values: Float64Array) => Float64Array): Float64Array {
  return entropy.every((s) => s > 0) ? column(entropy.map(Math.log)).map(Math.exp) : column(entropy);
}

function isRectangular({ starts, temperature }: SortedRows): boolean {
  const length = starts[1]!;
  return starts.every((start, i) => {
    const end = starts[i + 1];
    if (end === undefined) return true;
    if (end - start !== length) return false;
    for (let j = 0; j < length; j++) {
      if (Math.abs(temperature[start + j]! - temperature[j]!) > 1e-10 * temperature[j]!) return false;
    }
    return true;
  });
}

/** Equal steps of ln T over the range that every density has, as many as the density with most temperatures there. */
function commonTemperatures({ starts, temperature, density }: SortedRows): Float64Array {
  let lowest = 0;
  let highest = Number.POSITIVE_INFINITY;
  for (let i = 0; i + 1 < starts.length; i++) {
    lowest = Math.max(lowest, temperature[starts[i]!]!);
    highest = Math.min(highest, temperature[starts[i + 1]! - 1]!);
  }
  let count = 0;
  for (let i = 0; i + 1 < starts.length; i++) {
    const inside = temperature.subarray(starts[i]!, starts[i + 1]!).filter((t) => t >= lowest && t <= highest);
    if (highest > lowest && inside.length < fewestNodes - 2) {
      refuse(
        `${inside.length} temperatures at ${density[starts[i]!]} g/cm^3 between ${lowest} and ${highest} K`,
        `at least ${fewestNodes - 2} in the range that every density has`,
      );
    }
    count = Math.max(count, inside.length);
  }
  if (!(highest > lowest)) {
    refuse("densities whose temperatures have no range in common", "rows that overlap in temperature");
  }
  count = Math.max(count, fewestNodes);
  const step = Math.log(highest / lowest) / (count - 1);
  return Float64Array.from({ length: count }, (_, j) =>
    j === 0 ? lowest : j === count - 1 ? highest : lowest * Math.exp(step * j),
  );
}

function resample({ starts, temperature }: SortedRows, values: Float64Array, v: Float64Array): Float64Array {
  const out = new Float64Array((starts.length - 1) * v.length);
  for (let i = 0; i + 1 < starts.length; i++) {
    const axis = temperature.slice(starts[i]!, starts[i + 1]!).map(Math.log);
    const width = Math.min(resamplingWidth, axis.length);
    let cell = 0;
    for (let j = 0; j < v.length; j++) {
      while (cell + 2 < axis.length && axis[cell + 1]! <= v[j]!) cell += 1;
      const from = Math.min(Math.max(cell + 1 - (width >> 1), 0), axis.length - width);
      const weights = stencilWeights(axis.subarray(from, from + width), v[j]!, 0);
      let sum = 0;
      for (let k = 0; k < width; k++) sum += weights[k]! * values[starts[i]! + from + k]!;
      out[i * v.length + j] = sum;
    }
  }
  return out;
}

function refuse(given: string, allowed: string): never {
  throw new FermistateError("invalid-option", { argument: "columns", given, allowed });
}

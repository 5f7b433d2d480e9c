/** Layers of matter on top of each other as one barotrope; P and w continuous, the density may jump. */
import {
  BAROTROPE_DENSITY,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
  type BarotropeLimit,
  type DensityJump,
} from "./barotrope.js";
import { completeBarotrope } from "./from-record.js";

/** One layer: evaluation and inversion between two densities. */
export interface Layer {
  /** Lowest and highest density, g/cm^3. */
  readonly density: readonly [number, number];
  /** Pressures there, dyn/cm^2. */
  readonly pressure: readonly [number, number];
  /** Potentials there, erg/g. */
  readonly potential: readonly [number, number];
  /** Density jumps inside the layer. */
  readonly jumps?: readonly DensityJump[];
  /** Potentials of the kinks inside the layer. */
  readonly kinks?: readonly number[];
  /** Fills the record from its density. */
  fillAtDensity(record: Float64Array): void;
  /** Fills the record from its pressure. */
  fillAtPressure(record: Float64Array): void;
  /** Fills the record from its potential. */
  fillAtPotential(record: Float64Array): void;
}

/**
 * Layers by rising density; each begins at the pressure and potential at which the one before ends. Where the density
 * does not jump between two, there is a kink.
 */
export function stacked(
  name: string,
  validity: string,
  layers: readonly Layer[],
  limits: readonly BarotropeLimit[] = [],
): Barotrope {
  const last = layers.length - 1;
  const starts = [
    Float64Array.from(layers, (one) => one.density[0]),
    Float64Array.from(layers, (one) => one.pressure[0]),
    Float64Array.from(layers, (one) => one.potential[0]),
  ] as const;

  /** The layer whose start is the last one at or below the value. */
  function pick(column: Float64Array, value: number): Layer {
    let lower = 0;
    let upper = last;
    while (upper > lower) {
      const middle = (lower + upper + 1) >> 1;
      if (value >= column[middle]!) lower = middle;
      else upper = middle - 1;
    }
    return layers[lower]!;
  }

  const jumps: DensityJump[] = [];
  const kinks: number[] = [];
  for (const [i, layer] of layers.entries()) {
    if (i > 0) {
      const [pressure, potential] = [layer.pressure[0], layer.potential[0]];
      const densities = Object.freeze([layers[i - 1]!.density[1], layer.density[0]] as const);
      if (densities[1] > densities[0]) jumps.push(Object.freeze({ pressure, potential, densities }));
      else kinks.push(potential);
    }
    jumps.push(...(layer.jumps ?? []));
    kinks.push(...(layer.kinks ?? []));
  }
  return completeBarotrope({
    name,
    validity,
    density: Object.freeze([layers[0]!.density[0], layers[last]!.density[1]] as const),
    jumps: Object.freeze(jumps),
    kinks: Object.freeze(kinks),
    limits: Object.freeze(limits),
    fillAtDensity: (record) => pick(starts[0], record[BAROTROPE_DENSITY]!).fillAtDensity(record),
    fillAtPressure: (record) => pick(starts[1], record[BAROTROPE_PRESSURE]!).fillAtPressure(record),
    fillAtPotential: (record) => pick(starts[2], record[BAROTROPE_POTENTIAL]!).fillAtPotential(record),
  });
}

/** Layers of matter on top of each other as one barotrope; P and w continuous, the density may jump. */
import {
  BAROTROPE_DENSITY,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
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
  /** Fills the record from its density. */
  fillAtDensity(record: Float64Array): void;
  /** Fills the record from its pressure. */
  fillAtPressure(record: Float64Array): void;
  /** Fills the record from its potential. */
  fillAtPotential(record: Float64Array): void;
}

/** Layers by rising density; each begins at the pressure and potential at which the one before ends. */
export function stacked(name: string, validity: string, layers: readonly Layer[]): Barotrope {
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
  for (const [i, layer] of layers.entries()) {
    const below = i === 0 ? layer : layers[i - 1]!;
    if (layer.density[0] > below.density[1] && i > 0) {
      jumps.push(
        Object.freeze({
          pressure: layer.pressure[0],
          potential: layer.potential[0],
          densities: Object.freeze([below.density[1], layer.density[0]] as const),
        }),
      );
    }
    jumps.push(...(layer.jumps ?? []));
  }
  return completeBarotrope({
    name,
    validity,
    density: Object.freeze([layers[0]!.density[0], layers[last]!.density[1]] as const),
    jumps: Object.freeze(jumps),
    fillAtDensity: (record) => pick(starts[0], record[BAROTROPE_DENSITY]!).fillAtDensity(record),
    fillAtPressure: (record) => pick(starts[1], record[BAROTROPE_PRESSURE]!).fillAtPressure(record),
    fillAtPotential: (record) => pick(starts[2], record[BAROTROPE_POTENTIAL]!).fillAtPotential(record),
  });
}

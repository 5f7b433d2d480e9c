/**
 * The certificate of a species table: its error against the integrals at the places of a low-discrepancy sequence of
 * two dimensions, which leaves no cell out. The bound is twice the largest error.
 */
import { fillSpeciesIntegrals } from "./species-integrals.js";
import {
  fillSpeciesSurface,
  L00,
  L01,
  L02,
  L10,
  L11,
  L20,
  type SpeciesSurface,
  speciesSurface,
} from "./species-surface.js";
import {
  NODE_LENGTH,
  NODE_ORDER,
  type SpeciesCertificate,
  type SpeciesError,
  type SpeciesQuantity,
  type SpeciesTable,
  speciesQuantities,
} from "./species-table.js";

const safety = 2;
/** 1/p and 1/p^2 of the plastic number p, the root of p^3 = p + 1: the golden ratio of two dimensions. */
const plastic: readonly [number, number] = [0.7548776662466927, 0.5698402909980532];

/** Places for each cell; the shortest cells, which are a third of the mean in area, have some five. */
const perCell = 16;

/** Measures the table at places of equal weight in eta and ln theta. */
export function certifySpecies(table: Omit<SpeciesTable, "certificate">): SpeciesCertificate {
  const surface = speciesSurface(table);
  const { degeneracy, logTheta } = table;
  const places = perCell * (degeneracy.length - 1) * (logTheta.length - 1);
  const integrals = new Float64Array(NODE_LENGTH);
  const errors = speciesQuantities.map(() => new Float64Array(places));
  const worst = speciesQuantities.map(() => ({ error: 0, eta: 0, y: 0 }));
  for (let place = 0; place < places; place++) {
    const eta = between(degeneracy, (place * plastic[0]) % 1);
    const y = between(logTheta, (place * plastic[1]) % 1);
    fillSpeciesIntegrals(eta, Math.exp(y), integrals);
    const exact = quantities(integrals, eta);
    const mine = quantities(pressures(surface, eta, y), eta);
    for (let k = 0; k < speciesQuantities.length; k++) {
      const error = Math.abs(mine[k]! / exact[k]! - 1);
      errors[k]![place] = error;
      if (error > worst[k]!.error) worst[k] = { error, eta, y };
    }
  }
  const stated = speciesQuantities.map((name, k): readonly [SpeciesQuantity, SpeciesError] => {
    const { error, eta, y } = worst[k]!;
    const median = errors[k]!.sort()[places >> 1]!;
    return [name, { bound: safety * error, largest: error, median, worst: [eta, table.restTemperature * Math.exp(y)] }];
  });
  return { places, errors: Object.fromEntries(stated) as Record<SpeciesQuantity, SpeciesError> };
}

const between = (nodes: Float64Array, share: number): number => nodes[0]! + share * (nodes.at(-1)! - nodes[0]!);

// Slots of P_ij.
const P01 = 1;
const P02 = 2;
const P10 = NODE_ORDER + 1;
const P11 = P10 + 1;
const P20 = 2 * P10;

/** P and its derivatives from those of L, in the slots of the integrals. */
function pressures(surface: SpeciesSurface, eta: number, y: number): number[] {
  const { at, out } = surface;
  at[0] = eta;
  at[1] = y;
  fillSpeciesSurface(surface, 2);
  const p = Math.exp(out[L00]!);
  const a = out[L10]!;
  const b = out[L01]!;
  const values: number[] = [p, p * b, p * (out[L02]! + b * b)];
  values[P10] = p * a;
  values[P11] = p * (out[L11]! + a * b);
  values[P20] = p * (out[L20]! + a * a);
  return values;
}

/** The seven quantities, each but for powers of theta. */
function quantities(p: ArrayLike<number>, eta: number): readonly number[] {
  const density = p[P10]!;
  const byTemperature = p[P11]! - density; // theta^2 dn/dtheta at fixed eta
  return [
    p[0]!,
    density,
    p[P01]! - eta * density,
    p[P20]!,
    p[P02]! - p[P01]! - (byTemperature * byTemperature) / p[P20]!,
    (density * density) / p[P20]!,
    p[P01]! - (density * byTemperature) / p[P20]!,
  ];
}

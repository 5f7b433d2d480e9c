/**
 * The certificate of a species table: its error measured in every cell against the integrals, at the places of a low-discrepancy
 * sequence. The bound is twice the largest error.
 */
import { fillSpeciesIntegrals, INTEGRALS_LENGTH } from "./species-integrals.js";
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
import type { SpeciesCertificate, SpeciesError, SpeciesQuantity, SpeciesTable } from "./species-table.js";

const names: readonly SpeciesQuantity[] = [
  "pressure",
  "numberDensity",
  "entropy",
  "densityByDegeneracy",
  "heatCapacity",
  "compressibility",
  "pressureByTemperature",
];

const safety = 2;
/** 1/p and 1/p^2 of the plastic number p, the root of p^3 = p + 1: the golden ratio of two dimensions. */
const plastic: readonly [number, number] = [0.7548776662466927, 0.5698402909980532];

/** Measures one place in every cell. */
export function certifySpecies(table: Omit<SpeciesTable, "certificate">): SpeciesCertificate {
  const surface = speciesSurface(table);
  const { degeneracy, logTheta } = table;
  const [rows, cells] = [degeneracy.length - 1, logTheta.length - 1];
  const integrals = new Float64Array(INTEGRALS_LENGTH);
  const errors = names.map(() => new Float64Array(rows * cells));
  const worst = names.map(() => ({ error: 0, eta: 0, y: 0 }));
  for (let i = 0, place = 0; i < rows; i++) {
    for (let j = 0; j < cells; j++, place++) {
      const eta = between(degeneracy, i, (place * plastic[0]) % 1);
      const y = between(logTheta, j, (place * plastic[1]) % 1);
      fillSpeciesIntegrals(eta, Math.exp(y), integrals);
      const exact = quantities(integrals, eta);
      const mine = quantities(pressures(surface, eta, y), eta);
      for (let k = 0; k < names.length; k++) {
        const error = Math.abs(mine[k]! / exact[k]! - 1);
        errors[k]![place] = error;
        if (error > worst[k]!.error) worst[k] = { error, eta, y };
      }
    }
  }
  const stated = names.map((name, k): readonly [SpeciesQuantity, SpeciesError] => {
    const { error, eta, y } = worst[k]!;
    const sorted = errors[k]!.sort();
    const median = sorted[sorted.length >> 1]!;
    return [name, { bound: safety * error, largest: error, median, worst: [eta, table.restTemperature * Math.exp(y)] }];
  });
  return { places: rows * cells, errors: Object.fromEntries(stated) as Record<SpeciesQuantity, SpeciesError> };
}

const between = (nodes: Float64Array, cell: number, share: number): number =>
  nodes[cell]! + share * (nodes[cell + 1]! - nodes[cell]!);

/** P and its derivatives from those of L, in the order of the integrals. */
function pressures(surface: SpeciesSurface, eta: number, y: number): readonly number[] {
  const { at, out } = surface;
  at[0] = eta;
  at[1] = y;
  fillSpeciesSurface(surface, 2);
  const p = Math.exp(out[L00]!);
  const a = out[L10]!;
  const b = out[L01]!;
  return [p, p * b, p * (out[L02]! + b * b), p * a, p * (out[L11]! + a * b), Number.NaN, p * (out[L20]! + a * a)];
}

/** The seven quantities, each but for powers of theta, from P_ij in slot 3 i + j. */
function quantities(p: ArrayLike<number>, eta: number): readonly number[] {
  const byTemperature = p[4]! - p[3]!; // theta^2 dn/dtheta at fixed eta
  return [
    p[0]!,
    p[3]!,
    p[1]! - eta * p[3]!,
    p[6]!,
    p[2]! - p[1]! - (byTemperature * byTemperature) / p[6]!,
    (p[3]! * p[3]!) / p[6]!,
    p[1]! - (p[3]! * byTemperature) / p[6]!,
  ];
}

/** How far columns agree with each other at the nodes of their mesh: three thermodynamic relations, and signs that stable matter has. */
import type { StateMesh } from "./mesh.js";
import { derivative, type MeshStencils, meshStencils, slope, widestStencil } from "./mesh-derivatives.js";
import { type ColumnsResiduals, type ColumnsStability, type Places, type ResidualMap, spreadOf } from "./report.js";

/** Terms of the relations at every node, erg/g. */
interface Terms {
  readonly pressureT: Float64Array;
  readonly energyR: Float64Array;
  readonly energyT: Float64Array;
  /** T ds/d ln rho and T ds/d ln T. */
  readonly entropyR: Float64Array | undefined;
  readonly entropyT: Float64Array | undefined;
}

function termsOf({ temperature, specificPressure, energy, entropy }: StateMesh, stencils: MeshStencils): Terms {
  const n = temperature.length;
  const heat = (along: "u" | "v"): Float64Array | undefined =>
    entropy && slope(stencils, along, entropy).map((value, k) => value * temperature[k % n]!);
  return {
    pressureT: slope(stencils, "v", specificPressure),
    energyR: slope(stencils, "u", energy),
    energyT: slope(stencils, "v", energy),
    entropyR: heat("u"),
    entropyT: heat("v"),
  };
}

/** The three residual maps; `digits` has half a unit of the last digit of each column, relative. */
export function residualsOf(mesh: StateMesh, digits: ColumnDigits): ColumnsResiduals {
  const width = Math.min(widestStencil, mesh.u.length, mesh.v.length);
  const stencils = [width, width - 2].map((widest) => meshStencils(mesh, widest));
  const [fine, coarse] = stencils.map((one) => termsOf(mesh, one));
  const rounding = roundingOf(mesh, stencils[0]!, digits);
  const map = (relation: string, residual: Relation, error: (k: number) => number): ResidualMap =>
    residualMap(mesh, relation, residual(fine!), residual(coarse!), error);
  const p = mesh.specificPressure;
  const isGiven = mesh.entropy !== undefined;
  const { pressureT, energyR, energyT, entropyR, entropyT } = fine!;
  const largest = (...terms: readonly number[]): number => Math.max(...terms.map(Math.abs), Number.MIN_VALUE);
  return {
    maxwell: isGiven
      ? map(
          "T ds/d ln rho = -(T/rho) dP/dT",
          (of) => of.pressureT.map((t, k) => over(of.entropyR![k]! + t, of.entropyR![k]!, t)),
          (k) => (rounding.pressureT(k) + rounding.entropyR(k)) / largest(entropyR![k]!, pressureT[k]!),
        )
      : undefined,
    energy: map(
      "P/rho = de/d ln rho + (T/rho) dP/dT",
      (of) => of.pressureT.map((t, k) => over(p[k]! - of.energyR[k]! - t, p[k]!, of.energyR[k]!, t)),
      (k) =>
        (digits.pressure * p[k]! + rounding.pressureT(k) + rounding.energyR(k)) /
        largest(p[k]!, energyR[k]!, pressureT[k]!),
    ),
    heat: isGiven
      ? map(
          "de/d ln T = T ds/d ln T",
          (of) => of.energyT.map((e, k) => over(e - of.entropyT![k]!, e, of.entropyT![k]!)),
          (k) => (rounding.energyT(k) + rounding.entropyT(k)) / largest(energyT[k]!, entropyT![k]!),
        )
      : undefined,
  };
}

type Relation = (terms: Terms) => Float64Array;

/** Half a unit of the last digit of each column, relative. */
export interface ColumnDigits {
  readonly pressure: number;
  readonly energy: number;
  readonly entropy: number;
}

/** What the last digits may change the terms by, at a node. */
function roundingOf(mesh: StateMesh, { u, v }: MeshStencils, digits: ColumnDigits) {
  const { temperature, specificPressure, energy, entropy } = mesh;
  const n = temperature.length;
  const [alongU, alongV] = [u, v].map(({ count, width, slopes }) =>
    Float64Array.from({ length: count }, (_, i) =>
      slopes.subarray(i * width, (i + 1) * width).reduce((sum, weight) => sum + Math.abs(weight), 0),
    ),
  );
  const byU = (k: number): number => alongU![Math.floor(k / n)]!;
  const byV = (k: number): number => alongV![k % n]!;
  const pressure = (k: number): number => digits.pressure * specificPressure[k]!;
  const ofEnergy = (k: number): number => digits.energy * Math.abs(energy[k]!);
  const heat = (k: number): number => digits.entropy * temperature[k % n]! * Math.abs(entropy![k]!);
  return {
    pressureT: (k: number) => pressure(k) * byV(k),
    energyR: (k: number) => ofEnergy(k) * byU(k),
    energyT: (k: number) => ofEnergy(k) * byV(k),
    entropyR: (k: number) => heat(k) * byU(k),
    entropyT: (k: number) => heat(k) * byV(k),
  };
}

/** From what half of the nodes leave unexplained on, a relation is one that the columns do not obey at all. */
const contradiction = 0.5;

/** Relations that fail by order one over most of the mesh. */
export function contradictionsOf({ maxwell, energy, heat }: ColumnsResiduals): readonly string[] {
  const maps = [maxwell, energy, heat].filter((map) => map !== undefined);
  return maps.filter((map) => map.unexplained >= contradiction).map((map) => map.relation);
}

function over(residual: number, ...terms: readonly number[]): number {
  return residual === 0 ? 0 : residual / Math.max(...terms.map(Math.abs));
}

function residualMap(
  { density, temperature }: StateMesh,
  relation: string,
  residual: Float64Array,
  coarse: Float64Array,
  error: (k: number) => number,
): ResidualMap {
  const n = temperature.length;
  const place = (k: number): readonly [number, number] => [density[Math.floor(k / n)]!, temperature[k % n]!];
  const change = residual.map((r, k) => r - coarse[k]!);
  const digits = residual.map((_, k) => error(k));
  const left = residual.map((r, k) => Math.max(Math.abs(r) - Math.abs(change[k]!) - digits[k]!, 0));
  const sizes = (values: Float64Array): ResidualMap["digits"] => {
    const { max, percentile99, median } = spreadOf(values, place);
    return { max, percentile99, median };
  };
  return {
    relation,
    density: residual.map((_, k) => place(k)[0]),
    temperature: residual.map((_, k) => place(k)[1]),
    residual,
    ...spreadOf(residual, place),
    resolution: sizes(change),
    digits: sizes(digits),
    unexplained: spreadOf(left, place).median,
  };
}

/** Where signs are those of no stable matter. */
export function stabilityOf(mesh: StateMesh): ColumnsStability {
  const { density, temperature, specificPressure, energy, entropy } = mesh;
  const n = temperature.length;
  const stencils = meshStencils(mesh);
  const pressure = specificPressure.map((p, k) => p * density[Math.floor(k / n)]!);
  const chi = derivative(stencils, "u", pressure.map(Math.log));
  const heat = slope(stencils, "v", energy);
  const count = pressure.length;
  const where = (isSo: (k: number) => boolean): Places => placesOf(mesh, count, isSo);
  const hasNext = (k: number): boolean => k % n < n - 1;
  return {
    densityExponent: where((k) => !(chi[k]! > 0)),
    heatCapacityV: where((k) => !(heat[k]! > 0)),
    pressureAlongDensity: where((k) => k + n < count && !(pressure[k + n]! > pressure[k]!)),
    pressureAlongTemperature: where((k) => hasNext(k) && !(pressure[k + 1]! > pressure[k]!)),
    energyAlongTemperature: where((k) => hasNext(k) && !(energy[k + 1]! > energy[k]!)),
    entropyAlongTemperature: where((k) => entropy !== undefined && hasNext(k) && !(entropy[k + 1]! > entropy[k]!)),
  };
}

function placesOf({ density, temperature }: StateMesh, count: number, isSo: (k: number) => boolean): Places {
  const n = temperature.length;
  const found: number[] = [];
  for (let k = 0; k < count; k++) if (isSo(k)) found.push(k);
  return {
    density: Float64Array.from(found, (k) => density[Math.floor(k / n)]!),
    temperature: Float64Array.from(found, (k) => temperature[k % n]!),
  };
}

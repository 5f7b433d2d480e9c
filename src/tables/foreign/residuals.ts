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

/** The three residual maps. */
export function residualsOf(mesh: StateMesh): ColumnsResiduals {
  const width = Math.min(widestStencil, mesh.u.length, mesh.v.length);
  const [fine, coarse] = [width, width - 2].map((widest) => termsOf(mesh, meshStencils(mesh, widest)));
  const map = (relation: string, residual: (terms: Terms) => Float64Array): ResidualMap =>
    residualMap(mesh, relation, residual(fine!), residual(coarse!));
  const p = mesh.specificPressure;
  const isGiven = mesh.entropy !== undefined;
  return {
    maxwell: isGiven
      ? map("T ds/d ln rho = -(T/rho) dP/dT", ({ entropyR, pressureT }) =>
          pressureT.map((t, k) => over(entropyR![k]! + t, entropyR![k]!, t)),
        )
      : undefined,
    energy: map("P/rho = de/d ln rho + (T/rho) dP/dT", ({ energyR, pressureT }) =>
      pressureT.map((t, k) => over(p[k]! - energyR[k]! - t, p[k]!, energyR[k]!, t)),
    ),
    heat: isGiven
      ? map("de/d ln T = T ds/d ln T", ({ energyT, entropyT }) =>
          energyT.map((e, k) => over(e - entropyT![k]!, e, entropyT![k]!)),
        )
      : undefined,
  };
}

function over(residual: number, ...terms: readonly number[]): number {
  return residual === 0 ? 0 : residual / Math.max(...terms.map(Math.abs));
}

function residualMap(
  { density, temperature }: StateMesh,
  relation: string,
  residual: Float64Array,
  coarse: Float64Array,
): ResidualMap {
  const n = temperature.length;
  const place = (k: number): readonly [number, number] => [density[Math.floor(k / n)]!, temperature[k % n]!];
  const { max, percentile99, median } = spreadOf(
    residual.map((r, k) => r - coarse[k]!),
    place,
  );
  return {
    relation,
    density: residual.map((_, k) => place(k)[0]),
    temperature: residual.map((_, k) => place(k)[1]),
    residual,
    ...spreadOf(residual, place),
    resolution: { max, percentile99, median },
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

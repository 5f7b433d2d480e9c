/** The fit beside the columns it was made from: how far from each, and where it is not stable. */

import type { Composition } from "../../matter/composition.js";
import { DENSITY, TEMPERATURE } from "../../matter/point.js";
import type { EquationOfState } from "../../thermodynamics/equation-of-state.js";
import { ENERGY, ENTROPY, HEAT, PRESSURE, PRESSURE_R, PRESSURE_T } from "../../thermodynamics/free-energy.js";
import type { SortedRows } from "./columns.js";
import type { StateMesh } from "./mesh.js";
import { type ColumnsDeviations, type Places, spreadOf } from "./report.js";

/** Deviations at every row within the domain. */
export function deviationsOf(
  equationOfState: EquationOfState,
  composition: Composition,
  rows: SortedRows,
  addedEntropy: number,
): { readonly deviations: ColumnsDeviations; readonly rowsOutside: number } {
  const { point, members, fillMembers } = equationOfState.evaluator();
  const [coldest, hottest] = equationOfState.domain.temperature;
  const inside: number[] = [];
  for (let k = 0; k < rows.density.length; k++) {
    if (rows.temperature[k]! >= coldest && rows.temperature[k]! <= hottest) inside.push(k);
  }
  const [pressure, energy, entropy] = [0, 1, 2].map(() => new Float64Array(inside.length));
  inside.forEach((row, k) => {
    const rho = rows.density[row]!;
    const kelvin = rows.temperature[row]!;
    point[DENSITY] = rho;
    point[TEMPERATURE] = kelvin;
    fillMembers(composition, 2);
    const p = rows.pressure[row]!;
    const e = rows.energy[row]!;
    pressure![k] = (members[PRESSURE]! * rho) / p - 1;
    energy![k] = (members[ENERGY]! - e) / (Math.abs(e) + p / rho);
    if (rows.entropy !== undefined) {
      const s = rows.entropy[row]!;
      entropy![k] = (members[ENTROPY]! / kelvin - s) / Math.abs(s + addedEntropy);
    }
  });
  const place = (k: number): readonly [number, number] => [rows.density[inside[k]!]!, rows.temperature[inside[k]!]!];
  return {
    deviations: {
      pressure: spreadOf(pressure!, place),
      specificEnergy: spreadOf(energy!, place),
      specificEntropy: rows.entropy === undefined ? undefined : spreadOf(entropy!, place),
    },
    rowsOutside: rows.density.length - inside.length,
  };
}

/** Nodes and middles of cells and their sides where the equation of state refuses to answer (quantities.ts has the conditions). */
export function unstablePlaces(
  equationOfState: EquationOfState,
  composition: Composition,
  { density, temperature }: StateMesh,
): Places {
  const { point, members, fillMembers } = equationOfState.evaluator();
  const [rho, kelvin] = [withMiddles(density), withMiddles(temperature)];
  const found: [number, number][] = [];
  for (const d of rho) {
    for (const t of kelvin) {
      point[DENSITY] = d;
      point[TEMPERATURE] = t;
      fillMembers(composition, 2);
      const heat = members[HEAT]!;
      const thermal = members[PRESSURE_T]!;
      const stiffness = members[PRESSURE_R]!;
      const isStable =
        members[PRESSURE]! > 0 && stiffness >= 0 && heat > 0 && stiffness + (thermal * thermal) / heat > 0;
      if (!(isStable && Number.isFinite(members[ENERGY]!))) found.push([d, t]);
    }
  }
  return {
    density: Float64Array.from(found, ([d]) => d),
    temperature: Float64Array.from(found, ([, t]) => t),
  };
}

function withMiddles(axis: Float64Array): number[] {
  return Array.from(axis).flatMap((x, i) => (i + 1 < axis.length ? [x, Math.sqrt(x * axis[i + 1]!)] : [x]));
}

/**
 * Columns on a mesh -> node values of one free energy
 *
 *     F(rho, T) = F_0(rho) - exp L(ln rho, ln T) + c T
 *
 * as in the library's own tables (table.ts): F_0 the energy on the lowest isotherm, exp L what heat takes from it since, found by
 * integrating T s, so that the heat of degenerate matter is never a difference of large numbers. c is zero where all entropies are
 * positive and moves their zero otherwise: L needs a logarithm.
 */
import { cellIntegral, cellIntegrals } from "./cell-integrals.js";
import { closing } from "./least-squares.js";
import type { StateMesh } from "./mesh.js";
import { derivative, meshStencils, slope } from "./mesh-derivatives.js";

/** Node values of the free energy. */
export interface ColumnFit {
  /** F_0 and its first two derivatives in ln rho, three numbers a density, erg/g. */
  readonly cold: Float64Array;
  /** Derivatives of L by ln rho (i) and ln T (j), 3 i + j: nine numbers a node, temperature fastest. */
  readonly nodes: Float64Array;
  /** Powers of two taken out of exp L, by node: L stays small and its differences keep their digits. */
  readonly exponents: Int32Array;
  /** c, erg/(g K). */
  readonly addedEntropy: number;
}

/** Distance of the lowest entropy from the zero of L, over the range of entropies, where that zero is moved. */
const shiftShare = 0.25;

/** What is added to every entropy so that all are positive; 0 where they are. */
export function addedEntropy(entropy: Float64Array): number {
  let [least, most] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (const s of entropy) {
    least = Math.min(least, s);
    most = Math.max(most, s);
  }
  return least > 0 ? 0 : shiftShare * (most - least) - least || 1;
}

/**
 * The fit. `entropy` is that of the mesh or was found from its other columns; `shift` makes it positive. A found one is no better than
 * pressure and energy are, so T s counts with the error of P/rho too.
 */
export function fitColumns(mesh: StateMesh, entropy: Float64Array, shift: number): ColumnFit {
  const { u, v, temperature, specificPressure, energy } = mesh;
  const [m, n] = [u.length, v.length];
  const stencils = meshStencils(mesh);
  const heat = entropy.map((s, k) => temperature[k % n]! * (s + shift));
  const logHeat = heat.map(Math.log);
  const logPressure = specificPressure.map(Math.log);

  // Along isochores: G from T s. Along isotherms: what P takes F up by.
  const alongV = cellIntegrals(v);
  const path = new Float64Array(m * n);
  for (let i = 0; i < m; i++) {
    path[i * n] = heat[i * n]!;
    for (let j = 0; j + 1 < n; j++) {
      path[i * n + j + 1] = path[i * n + j]! + cellIntegral(alongV, j, logHeat, i * n, 1, Math.exp);
    }
  }
  const alongU = cellIntegrals(u);
  const rises = new Float64Array((m - 1) * n);
  for (let i = 0; i + 1 < m; i++) {
    for (let j = 0; j < n; j++) rises[i * n + j] = cellIntegral(alongU, i, logPressure, j, n, Math.exp);
  }
  const scale = mesh.entropy ? heat : heat.map((x, k) => x + specificPressure[k]!);
  const correction = closing(mismatchOf(mesh, scale, path, rises));

  const logThermal = new Float64Array(m * n);
  const exponents = new Int32Array(m * n);
  const whole = new Float64Array(m * n);
  const thermal = new Float64Array(m * n);
  const drift = new Float64Array(m * n); // correction since the lowest isotherm
  for (let k = 0; k < m * n; k++) {
    drift[k] = correction[k]! - correction[k - (k % n)]!;
    const g = path[k]! - drift[k]!;
    // A correction that eats all of G belongs to columns that fit nothing; what is refused later must be finite now.
    thermal[k] = g > 0 ? g : path[k]!;
    exponents[k] = Math.round(Math.log2(thermal[k]!));
    logThermal[k] = Math.log(thermal[k]! / 2 ** exponents[k]!);
    whole[k] = Math.log(thermal[k]!);
  }
  const driftV = derivative(stencils, "v", drift);
  const lv = heat.map((x, k) => (x - driftV[k]!) / thermal[k]!);
  const lvv = derivative(stencils, "v", lv);
  const columns = [
    logThermal,
    lv,
    lvv,
    derivative(stencils, "u", whole),
    derivative(stencils, "u", lv),
    derivative(stencils, "u", lvv),
    derivative(stencils, "u", whole, true),
    derivative(stencils, "u", lv, true),
    derivative(stencils, "u", lvv, true),
  ];
  const nodes = new Float64Array(9 * m * n);
  columns.forEach((column, i) => {
    for (let k = 0; k < m * n; k++) nodes[9 * k + i] = column[k]!;
  });
  return { cold: coldNodes(), nodes, exponents, addedEntropy: shift };

  /** F_0 = F + exp L on the lowest isotherm; F' = P/rho there, but for the correction. */
  function coldNodes(): Float64Array {
    const correctionU = derivative(stencils, "u", correction);
    const correctionUu = derivative(stencils, "u", correction, true);
    const pressureU = slope(stencils, "u", specificPressure);
    const cold = new Float64Array(3 * m);
    // e = F + T s at the node of lowest density and temperature; the moved zero cancels.
    let rise = energy[0]! - thermal[0]!;
    for (let i = 0; i < m; i++) {
      const k = i * n;
      if (i > 0) rise += rises[k - n]!;
      const g = thermal[k]!;
      const [lu, luu] = [nodes[9 * k + 3]!, nodes[9 * k + 6]!];
      cold[3 * i] = rise + correction[k]! + g;
      cold[3 * i + 1] = specificPressure[k]! + correctionU[k]! + g * lu;
      cold[3 * i + 2] = pressureU[k]! + correctionUu[k]! + g * (luu + lu * lu);
    }
    return cold;
  }
}

function mismatchOf(
  { u, v }: StateMesh,
  scale: Float64Array,
  path: Float64Array,
  rises: Float64Array,
): Parameters<typeof closing>[0] {
  const [m, n] = [u.length, v.length];
  const open = new Float64Array((m - 1) * n);
  for (let i = 0; i + 1 < m; i++) {
    const k = i * n;
    for (let j = 0; j < n; j++) {
      const taken = path[k + n + j]! - path[k + n]! - (path[k + j]! - path[k]!);
      open[k + j] = rises[k + j]! - rises[k]! + taken;
    }
  }
  const isochoreScale = new Float64Array(m * (n - 1));
  for (let i = 0; i < m; i++) {
    for (let j = 0; j + 1 < n; j++) {
      isochoreScale[i * (n - 1) + j] = 0.5 * (v[j + 1]! - v[j]!) * (scale[i * n + j]! + scale[i * n + j + 1]!);
    }
  }
  return { densities: m, temperatures: n, open, isothermScale: rises, isochoreScale };
}

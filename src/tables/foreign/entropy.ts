/**
 * The entropy of columns that do not hold it: T ds = de along each isochore, Maxwell's relation T ds = -(dP/dT) T d rho/rho^2 along
 * the lowest isotherm. No energy is differentiated: with x = e - e(T_0),
 *
 *     s = s_0 + x/T + integral of x/T d ln T,    x = q (T - T_0)
 *
 * and q, a mean heat capacity, is smooth and positive.
 */
import { FermistateError } from "../../errors.js";
import { stencilWeights } from "../../numerics/stencil.js";
import { cellIntegral, cellIntegrals } from "./cell-integrals.js";
import type { StateMesh } from "./mesh.js";
import { meshStencils, slope } from "./mesh-derivatives.js";

/** Nodes from which q is continued to the lowest isotherm. */
const continuation = 4;

/**
 * s at every node, erg/(g K), from `corner` at the lowest density and temperature; where that is undefined, from 0 at the node
 * that has least.
 *
 * @throws `unstable` where e does not rise from the lowest temperature on: its digits do not hold the heat
 */
export function entropyFromEnergy(mesh: StateMesh, corner: number | undefined): Float64Array {
  const { u, v, temperature, energy } = mesh;
  const n = v.length;
  const coldest = temperature[0]!;
  const start = coldEntropy(mesh);
  const integrals = cellIntegrals(v);
  const out = new Float64Array(energy.length);
  const q = new Float64Array(n);
  const head = v.subarray(1, 1 + continuation);
  const towards = stencilWeights(head, v[0]!, 0);
  const share = (value: number, x: number): number => -Math.exp(value) * Math.expm1(v[0]! - x);
  for (let i = 0; i < u.length; i++) {
    q[0] = 0;
    for (let j = 1; j < n; j++) {
      const rise = energy[i * n + j]! - energy[i * n]!;
      if (!(rise > 0)) refuseEnergy(mesh, i, j, rise);
      q[j] = Math.log(rise / (temperature[j]! - coldest));
    }
    for (let k = 0; k < head.length; k++) q[0]! += towards[k]! * q[k + 1]!;
    let sum = start[i]!;
    out[i * n] = sum;
    for (let j = 1; j < n; j++) {
      sum += cellIntegral(integrals, j - 1, q, 0, 1, share);
      out[i * n + j] = sum + (energy[i * n + j]! - energy[i * n]!) / temperature[j]!;
    }
  }
  const zero = corner ?? -out.reduce((least, s) => Math.min(least, s), Number.POSITIVE_INFINITY);
  return out.map((s) => s + zero);
}

/** s along the lowest isotherm, 0 at the lowest density. */
function coldEntropy(mesh: StateMesh): Float64Array {
  const { u, v, temperature, specificPressure } = mesh;
  const thermal = slope(meshStencils(mesh), "v", specificPressure);
  const line = Float64Array.from(u, (_, i) => thermal[i * v.length]!);
  const isPositive = line.every((value) => value > 0);
  const values = isPositive ? line.map(Math.log) : line;
  const change = isPositive ? Math.exp : (value: number): number => value;
  const integrals = cellIntegrals(u);
  const out = new Float64Array(u.length);
  for (let i = 1; i < u.length; i++) {
    out[i] = out[i - 1]! - cellIntegral(integrals, i - 1, values, 0, 1, change) / temperature[0]!;
  }
  return out;
}

function refuseEnergy({ density, temperature }: StateMesh, i: number, j: number, rise: number): never {
  throw new FermistateError("unstable", {
    argument: "specificEnergy",
    given: `a change of ${rise} erg/g from ${temperature[0]} to ${temperature[j]} K at ${density[i]} g/cm^3`,
    allowed:
      "energies that rise with temperature and have the digits for it; a wrong entry in one of these two rows, or too few digits: " +
      "mend it, or give specificEntropy",
  });
}

/**
 * Makes src/fermi-gas/start-table.ts: the start value of charge neutrality (see start-value.ts for what it is).
 *
 * Chebyshev interpolation of the exact solution in 5 x 3 patches of 10 x 10 nodes, written as monomials.
 * Run from the root: npx tsx docs/generators/start-table.ts
 */
import { writeFileSync } from "node:fs";
import { ETA, KINETIC_MU, N00, N10, NU, RECORD_LENGTH, THETA } from "../../src/fermi-gas/record.js";
import { sommerfeld } from "../../src/fermi-gas/sommerfeld.js";
import {
  ALPHA,
  BRANCH_POINT,
  DENSITY_SCALE,
  fillCoordinates,
  LAST_RATIO,
  NORM,
  PATCH_SIZE,
  PATCHES_T,
  PATCHES_U,
  SCALE_THETA,
  SCALE_U,
  STRETCH,
  TABLE_CLASSICAL,
  TABLE_LENGTH,
  TABLE_T,
  TABLE_THETA,
  TABLE_THRESHOLD,
  TABLE_U,
  TABLE_X,
} from "../../src/fermi-gas/start-coordinates.js";
import { trapezoid } from "../../src/fermi-gas/trapezoid.js";

const gas = new Float64Array(RECORD_LENGTH);

/** int p^2 e^(-(E-1)/theta) dp by the trapezoidal rule in u = asinh p (entire, doubly exponential decay). */
function classicalDensity(theta: number): number {
  const end = 2 * Math.asinh(Math.sqrt(60 * theta));
  const h = Math.min(0.1, 0.25 * Math.sqrt(theta));
  let sum = 0;
  for (let k = 1; k * h < end; k++) {
    const p = Math.sinh(k * h);
    const energy = 2 * Math.sinh((k * h) / 2) ** 2;
    sum += p * p * (1 + energy) * Math.exp(-energy / theta);
  }
  return sum * h;
}

// The coordinates of start-coordinates.ts, inverted.
const densityTemperature = (x: number): number => (DENSITY_SCALE * (1 + x)) / (1 - x);
const densityCoordinate = (theta: number): number => (2 * theta) / (theta + DENSITY_SCALE) - 1;
const densityLimit = (theta: number): number => NORM * (theta * (1 + ALPHA * theta)) ** 1.5;
function temperatureAt(t: number, u: number): number {
  const ratio = t / STRETCH;
  return ((SCALE_THETA / (1 + SCALE_U * u)) * ratio) / (1 - ratio);
}

const nodes = (m: number): number[] => Array.from({ length: m }, (_, k) => Math.cos((Math.PI * (k + 0.5)) / m));

/** Coefficients of the Chebyshev polynomials T_0 ... T_(m-1) as monomials. */
function chebyshevMonomials(m: number): number[][] {
  const all = [[1], [0, 1]];
  for (let k = 2; k < m; k++) {
    const next = new Array<number>(k + 1).fill(0);
    for (const [i, c] of all[k - 1]!.entries()) next[i + 1]! += 2 * c;
    for (const [i, c] of all[k - 2]!.entries()) next[i]! -= c;
    all.push(next);
  }
  return all;
}

/** Monomial coefficients of the polynomial through `values` at the Chebyshev nodes. */
function interpolate(values: readonly number[]): number[] {
  const m = values.length;
  const monomials = chebyshevMonomials(m);
  const out = new Array<number>(m).fill(0);
  for (let p = 0; p < m; p++) {
    let sum = 0;
    for (let i = 0; i < m; i++) sum += values[i]! * Math.cos((Math.PI * p * (i + 0.5)) / m);
    const coefficient = (sum * (p === 0 ? 1 : 2)) / m;
    for (const [i, c] of monomials[p]!.entries()) out[i]! += coefficient * c;
  }
  return out;
}

const densityTerms = 18;
const densityFit = interpolate(
  nodes(densityTerms).map((x) => {
    const theta = Math.max(1e-9, densityTemperature(x));
    return Math.log(classicalDensity(theta) / densityLimit(theta));
  }),
);
function fittedDensity(theta: number): number {
  const x = densityCoordinate(theta);
  let sum = 0;
  for (let k = densityTerms - 1; k >= 0; k--) sum = sum * x + densityFit[k]!;
  return densityLimit(theta) * Math.exp(sum);
}

/** nu at net density n, by Newton in ln n. */
function solveNu(n: number, theta: number, start: number): number {
  let nu = start;
  for (let i = 0; i < 200; i++) {
    gas[THETA] = theta;
    gas[ETA] = nu - 1 / theta;
    gas[NU] = nu;
    if (gas[ETA]! > 38.5) {
      gas[KINETIC_MU] = gas[ETA]! * theta;
      sommerfeld(gas, 2);
    } else trapezoid(gas, 2);
    let step = (-Math.log(gas[N00]! / n) * gas[N00]!) / gas[N10]!;
    if (Math.abs(step) > 2) step = 2 * Math.sign(step);
    if (nu + step <= 0) step = -nu / 2;
    nu += step;
    if (Math.abs(step) < 1e-14 * Math.min(Math.max(1, nu), 1e9) || Math.abs(step) < 1e-15 * nu) return nu;
  }
  return nu;
}

const table = new Float64Array(TABLE_LENGTH);

/** The look-up must find the node where it was made. */
function checkCoordinates(theta: number, classical: number, x: number, threshold: number, u: number, t: number): void {
  table[TABLE_THETA] = theta;
  table[TABLE_CLASSICAL] = classical;
  table[TABLE_X] = x;
  table[TABLE_THRESHOLD] = threshold;
  fillCoordinates(table);
  const off = Math.abs(table[TABLE_U]! - u) + (theta > 1e-8 ? Math.abs(table[TABLE_T]! - t) : 0);
  if (!(off < 1e-9)) throw new Error(`coordinates of u ${u}, t ${t} come back ${off} off`);
}

/** D at the table's coordinates. */
function tableEntry(u: number, t: number): number {
  const theta = Math.max(1e-9, temperatureAt(t, u));
  const inverse = 1 / theta;
  const classical = fittedDensity(theta);
  const threshold = Math.exp(-inverse);
  const low = Math.log(BRANCH_POINT + 2 * threshold);
  const energy = LAST_RATIO * theta;
  const high = Math.log(BRANCH_POINT + (energy * (energy + 2)) ** 1.5 / (3 * classical));
  const x = Math.exp(low + (high - low) * u) - BRANCH_POINT;
  checkCoordinates(theta, classical, x, threshold, u, t);
  // At u = 0 the net density vanishes: take the limit a little above (D is even in Qc).
  const b = Math.max(
    Math.sqrt(Math.max(0, (x - 2 * threshold) * (x + 2 * threshold))),
    2 * threshold * Math.sinh(1e-3),
    1e-300,
  );
  const far = inverse > 300;
  const logarithm = far ? Math.log(b) : Math.asinh((0.5 * b) / threshold) - inverse;
  const nu = solveNu(b * classical, theta, logarithm + inverse);
  return (nu - inverse - logarithm) / Math.tanh(logarithm + inverse);
}

const xs = nodes(PATCH_SIZE);
const monomials = chebyshevMonomials(PATCH_SIZE);
const coefficients: number[] = [];
for (let i = 0; i + 1 < PATCHES_T.length; i++) {
  for (let j = 0; j + 1 < PATCHES_U.length; j++) {
    const values = xs.map((y) =>
      xs.map((x) => {
        const u = PATCHES_U[j]! + ((PATCHES_U[j + 1]! - PATCHES_U[j]!) * (x + 1)) / 2;
        const t = PATCHES_T[i]! + ((PATCHES_T[i + 1]! - PATCHES_T[i]!) * (y + 1)) / 2;
        return tableEntry(u, t);
      }),
    );
    const inX = values.map((row) => interpolate(row)); // [node in t][power of x]
    const inBoth = monomials.map((_, p) => interpolate(inX.map((row) => row[p]!))); // [power of x][power of y]
    for (let q = 0; q < PATCH_SIZE; q++) for (let p = 0; p < PATCH_SIZE; p++) coefficients.push(inBoth[p]![q]!);
  }
}

const lines = (numbers: readonly string[]): string => {
  const out: string[] = [];
  let line = " ";
  for (const n of numbers) {
    if (line.length + n.length + 2 > 120) {
      out.push(line);
      line = " ";
    }
    line += ` ${n},`;
  }
  out.push(line);
  return out.join("\n");
};
const source = `/**
 * Coefficients of the start value of charge neutrality. Generated by docs/generators/start-table.ts: do not edit.
 * What they mean stands in start-value.ts. 10 decimals: the start is good to 2e-8, and nothing else depends on them.
 */

/** ln(N/limit) as a polynomial in the density coordinate. */
export const densityCoefficients: Float64Array = /* @__PURE__ */ new Float64Array([
${lines(densityFit.map((c) => String(Number(c.toPrecision(14)))))}
]);

/** D: per patch (temperature outer, u inner) 10 x 10 monomials, powers of u fastest. */
export const tableCoefficients: Float64Array = /* @__PURE__ */ new Float64Array([
${lines(coefficients.map((c) => String(Number(c.toFixed(10)))))}
]);
`;
writeFileSync("src/fermi-gas/start-table.ts", source);
process.stdout.write(`${coefficients.length} coefficients, ${source.length} bytes\n`);

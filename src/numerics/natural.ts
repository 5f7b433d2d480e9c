/**
 * Algebra of natural derivatives: functions of two variables (rho, y), y = T or 1/T, carried as scaled derivatives
 *
 *     f_ij = rho^i y^j d^(i+j)f/(d rho^i d y^j),    order 00 10 01 20 11 02 | 30 21 12 03 22
 *
 * and functions of one variable as u[k] = v^k d^k u/dv^k, k = 0..2 (order 2) or 0..4 (order 3). The eleven are closed
 * under products, quotients and composition, so order 3 with (2,2) needs no fourth-order numbers in two variables.
 * Nothing here is a difference of logarithmic derivatives, and results go into the caller's arrays. What is called at
 * order 2 takes its numbers from records (`scale`): a double that crosses a call may be boxed.
 */

/** Numbers of a function of two variables. */
export const NATURAL_LENGTH = 11;
/** Numbers of a function of one variable; slot 5 is free for a member that the caller keeps apart. */
export const SINGLE_LENGTH = 6;

/** Order of derivatives, as in thermodynamics/free-energy.ts. */
type Order = 2 | 3;

/** out = 0, the first six (order 2) or all; written out because `fill` is a call. */
export function clear(out: Float64Array, order: Order): void {
  out[0] = 0;
  out[1] = 0;
  out[2] = 0;
  out[3] = 0;
  out[4] = 0;
  out[5] = 0;
  if (order === 3) for (let i = 6; i < NATURAL_LENGTH; i++) out[i] = 0;
}

/** One variable: out = 0. */
export function clearSingle(out: Float64Array): void {
  out[0] = 0;
  out[1] = 0;
  out[2] = 0;
  out[3] = 0;
  out[4] = 0;
  out[5] = 0;
}

/** out = value rho^p y^q; value, p and q stand in its first three slots. */
export function setPower(out: Float64Array, order: Order): void {
  const value = out[0]!;
  const p = out[1]!;
  const q = out[2]!;
  const p2 = p * (p - 1);
  const q2 = q * (q - 1);
  out[1] = value * p;
  out[2] = value * q;
  out[3] = value * p2;
  out[4] = value * p * q;
  out[5] = value * q2;
  if (order === 2) return;
  out[6] = value * p2 * (p - 2);
  out[7] = value * p2 * q;
  out[8] = value * p * q2;
  out[9] = value * q2 * (q - 2);
  out[10] = value * p2 * q2;
}

/** out = u(v) for v proportional to rho^a y. */
export function lift(out: Float64Array, order: Order, a: number, u: Float64Array): void {
  const a1 = a * (a - 1);
  const aa = a * a;
  const u1 = u[1]!;
  const u2 = u[2]!;
  out[0] = u[0]!;
  out[1] = a * u1;
  out[2] = u1;
  out[3] = aa * u2 + a1 * u1;
  out[4] = a * (u1 + u2);
  out[5] = u2;
  if (order === 2) return;
  const u3 = u[3]!;
  const twice = 2 * u2 + u3;
  out[6] = aa * a * u3 + 3 * a * a1 * u2 + a1 * (a - 2) * u1;
  out[7] = aa * twice + a1 * (u1 + u2);
  out[8] = a * twice;
  out[9] = u3;
  out[10] = aa * (2 * u2 + 4 * u3 + u[4]!) + a1 * twice;
}

/** out = a b by Leibniz' rule; out may be a or b. */
export function multiply(out: Float64Array, order: Order, a: Float64Array, b: Float64Array): void {
  const a0 = a[0]!;
  const a1 = a[1]!;
  const a2 = a[2]!;
  const a3 = a[3]!;
  const a4 = a[4]!;
  const a5 = a[5]!;
  const b0 = b[0]!;
  const b1 = b[1]!;
  const b2 = b[2]!;
  const b3 = b[3]!;
  const b4 = b[4]!;
  const b5 = b[5]!;
  if (order === 3) {
    const a6 = a[6]!;
    const a7 = a[7]!;
    const a8 = a[8]!;
    const a9 = a[9]!;
    const b6 = b[6]!;
    const b7 = b[7]!;
    const b8 = b[8]!;
    const b9 = b[9]!;
    out[10] = a0 * b[10]! + a[10]! * b0 + 2 * (a1 * b8 + a8 * b1 + a2 * b7 + a7 * b2) + a3 * b5 + a5 * b3 + 4 * a4 * b4;
    out[6] = a0 * b6 + 3 * (a1 * b3 + a3 * b1) + a6 * b0;
    out[7] = a0 * b7 + 2 * (a1 * b4 + a4 * b1) + a2 * b3 + a3 * b2 + a7 * b0;
    out[8] = a0 * b8 + 2 * (a2 * b4 + a4 * b2) + a1 * b5 + a5 * b1 + a8 * b0;
    out[9] = a0 * b9 + 3 * (a2 * b5 + a5 * b2) + a9 * b0;
  }
  out[0] = a0 * b0;
  out[1] = a0 * b1 + a1 * b0;
  out[2] = a0 * b2 + a2 * b0;
  out[3] = a0 * b3 + 2 * a1 * b1 + a3 * b0;
  out[4] = a0 * b4 + a1 * b2 + a2 * b1 + a4 * b0;
  out[5] = a0 * b5 + 2 * a2 * b2 + a5 * b0;
}

/** out = a/b: the product rule solved term by term; out may be a or b. */
export function divide(out: Float64Array, order: Order, a: Float64Array, b: Float64Array): void {
  const r = 1 / b[0]!;
  const b1 = b[1]!;
  const b2 = b[2]!;
  const b3 = b[3]!;
  const b4 = b[4]!;
  const b5 = b[5]!;
  const q0 = a[0]! * r;
  const q1 = (a[1]! - q0 * b1) * r;
  const q2 = (a[2]! - q0 * b2) * r;
  const q3 = (a[3]! - q0 * b3 - 2 * q1 * b1) * r;
  const q4 = (a[4]! - q0 * b4 - q1 * b2 - q2 * b1) * r;
  const q5 = (a[5]! - q0 * b5 - 2 * q2 * b2) * r;
  if (order === 3) {
    const b6 = b[6]!;
    const b7 = b[7]!;
    const b8 = b[8]!;
    const b9 = b[9]!;
    const q6 = (a[6]! - q0 * b6 - 3 * (q1 * b3 + q3 * b1)) * r;
    const q7 = (a[7]! - q0 * b7 - 2 * (q1 * b4 + q4 * b1) - q2 * b3 - q3 * b2) * r;
    const q8 = (a[8]! - q0 * b8 - 2 * (q2 * b4 + q4 * b2) - q1 * b5 - q5 * b1) * r;
    const q9 = (a[9]! - q0 * b9 - 3 * (q2 * b5 + q5 * b2)) * r;
    const mixed = 2 * (q1 * b8 + q8 * b1 + q2 * b7 + q7 * b2) + q3 * b5 + q5 * b3 + 4 * q4 * b4;
    out[10] = (a[10]! - q0 * b[10]! - mixed) * r;
    out[6] = q6;
    out[7] = q7;
    out[8] = q8;
    out[9] = q9;
  }
  out[0] = q0;
  out[1] = q1;
  out[2] = q2;
  out[3] = q3;
  out[4] = q4;
  out[5] = q5;
}

/** out = r(rho) a, r a function of density alone with r[i] = rho^i d^i r/d rho^i; out may be a. */
export function multiplyDensity(out: Float64Array, order: Order, r: Float64Array, a: Float64Array): void {
  const r0 = r[0]!;
  const r1 = r[1]!;
  const r2 = r[2]!;
  const a0 = a[0]!;
  const a1 = a[1]!;
  const a2 = a[2]!;
  const a4 = a[4]!;
  const a5 = a[5]!;
  if (order === 3) {
    const a3 = a[3]!;
    const a8 = a[8]!;
    out[10] = r0 * a[10]! + 2 * r1 * a8 + r2 * a5;
    out[6] = r0 * a[6]! + 3 * (r1 * a3 + r2 * a1) + r[3]! * a0;
    out[7] = r0 * a[7]! + 2 * r1 * a4 + r2 * a2;
    out[8] = r0 * a8 + r1 * a5;
    out[9] = r0 * a[9]!;
  }
  out[3] = r0 * a[3]! + 2 * r1 * a1 + r2 * a0;
  out[0] = r0 * a0;
  out[1] = r0 * a1 + r1 * a0;
  out[2] = r0 * a2;
  out[4] = r0 * a4 + r1 * a2;
  out[5] = r0 * a5;
}

/** out += s a. */
export function addScaled(out: Float64Array, order: Order, s: number, a: Float64Array): void {
  const count = order === 2 ? 6 : NATURAL_LENGTH;
  for (let i = 0; i < count; i++) out[i]! += s * a[i]!;
}

/**
 * Free energy kT u(v), kT = scale[0], with v proportional to rho^a/T, added to the natural derivatives of F in (rho, T).
 * u[5] is v u' - u, the entropy over k: the one member that would cancel, so the caller hands it over.
 */
export function addThermal(out: Float64Array, order: Order, scale: Float64Array, a: number, u: Float64Array): void {
  const kT = scale[0]!;
  const a1 = a * (a - 1);
  const aa = a * a;
  const u1 = u[1]!;
  const u2 = u[2]!;
  out[0]! += kT * u[0]!;
  out[1]! += kT * a * u1;
  out[2]! -= kT * u[5]!;
  out[3]! += kT * (aa * u2 + a1 * u1);
  out[4]! -= kT * a * u2;
  out[5]! += kT * u2;
  if (order === 2) return;
  const u3 = u[3]!;
  const twice = 2 * u2 + u3;
  out[6]! += kT * (aa * a * u3 + 3 * a * a1 * u2 + a1 * (a - 2) * u1);
  out[7]! -= kT * (aa * (u2 + u3) + a1 * u2);
  out[8]! += kT * a * twice;
  out[9]! -= kT * (3 * u2 + u3);
  out[10]! += kT * (aa * (2 * u2 + 4 * u3 + u[4]!) + a1 * twice);
}

/** Free energy kT f(rho, 1/T), kT = scale[0], added to the natural derivatives of F in (rho, T). */
export function addInverseThermal(out: Float64Array, order: Order, scale: Float64Array, f: Float64Array): void {
  const kT = scale[0]!;
  out[0]! += kT * f[0]!;
  out[1]! += kT * f[1]!;
  out[2]! += kT * (f[0]! - f[2]!);
  out[3]! += kT * f[3]!;
  out[4]! += kT * (f[1]! - f[4]!);
  out[5]! += kT * f[5]!;
  if (order === 2) return;
  out[6]! += kT * f[6]!;
  out[7]! += kT * (f[3]! - f[7]!);
  out[8]! += kT * f[8]!;
  out[9]! -= kT * (f[9]! + 3 * f[5]!);
  out[10]! += kT * f[10]!;
}

/** Energy scale[0] = e rho^p, independent of temperature, added to the natural derivatives of F. */
export function addGround(out: Float64Array, order: Order, scale: Float64Array, p: number): void {
  const energy = scale[0]!;
  const p2 = p * (p - 1);
  out[0]! += energy;
  out[1]! += energy * p;
  out[3]! += energy * p2;
  if (order === 3) out[6]! += energy * p2 * (p - 2);
}

/** One variable: out = a b; out may be a or b. */
export function multiplySingle(out: Float64Array, order: Order, a: Float64Array, b: Float64Array): void {
  const a0 = a[0]!;
  const a1 = a[1]!;
  const a2 = a[2]!;
  const b0 = b[0]!;
  const b1 = b[1]!;
  const b2 = b[2]!;
  if (order === 3) {
    const a3 = a[3]!;
    const b3 = b[3]!;
    out[4] = a0 * b[4]! + 4 * (a1 * b3 + a3 * b1) + 6 * a2 * b2 + a[4]! * b0;
    out[3] = a0 * b3 + 3 * (a1 * b2 + a2 * b1) + a3 * b0;
  }
  out[0] = a0 * b0;
  out[1] = a0 * b1 + a1 * b0;
  out[2] = a0 * b2 + 2 * a1 * b1 + a2 * b0;
}

/** One variable: out = a/b; out may be a or b. */
export function divideSingle(out: Float64Array, order: Order, a: Float64Array, b: Float64Array): void {
  const r = 1 / b[0]!;
  const b1 = b[1]!;
  const b2 = b[2]!;
  const q0 = a[0]! * r;
  const q1 = (a[1]! - q0 * b1) * r;
  const q2 = (a[2]! - q0 * b2 - 2 * q1 * b1) * r;
  if (order === 3) {
    const b3 = b[3]!;
    const q3 = (a[3]! - q0 * b3 - 3 * (q1 * b2 + q2 * b1)) * r;
    out[4] = (a[4]! - q0 * b[4]! - 4 * (q1 * b3 + q3 * b1) - 6 * q2 * b2) * r;
    out[3] = q3;
  }
  out[0] = q0;
  out[1] = q1;
  out[2] = q2;
}

/** One variable: out = a^p, given value = a[0]^p; from a g' = p a' g, differentiated. out may be a. */
export function raiseSingle(out: Float64Array, order: Order, a: Float64Array, p: number, value: number): void {
  const r = 1 / a[0]!;
  const a1 = a[1]!;
  const a2 = a[2]!;
  const g1 = p * a1 * value * r;
  const g2 = (p * (a2 * value + a1 * g1) - a1 * g1) * r;
  if (order === 3) {
    const a3 = a[3]!;
    const g3 = (p * (a3 * value + 2 * a2 * g1 + a1 * g2) - a2 * g1 - 2 * a1 * g2) * r;
    out[4] = (p * (a[4]! * value + 3 * a3 * g1 + 3 * a2 * g2 + a1 * g3) - a3 * g1 - 3 * a2 * g2 - 3 * a1 * g3) * r;
    out[3] = g3;
  }
  out[0] = value;
  out[1] = g1;
  out[2] = g2;
}

/** One variable: out = value v^p; value and p stand in its first two slots. */
export function setSinglePower(out: Float64Array): void {
  const p = out[1]!;
  out[1] = out[0]! * p;
  out[2] = out[1]! * (p - 1);
  out[3] = out[2]! * (p - 2);
  out[4] = out[3]! * (p - 3);
}

/** x[1] = sum c[n] x[0]^n. */
export function horner(coefficients: readonly number[], x: Float64Array): void {
  const at = x[0]!;
  let sum = coefficients[coefficients.length - 1]!;
  for (let n = coefficients.length - 2; n >= 0; n--) sum = sum * at + coefficients[n]!;
  x[1] = sum;
}

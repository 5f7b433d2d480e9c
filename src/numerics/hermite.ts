/**
 * Hermite interpolation of order m on [0, 1]: the polynomial of degree 2m + 1 through the derivatives 0..m at both
 * ends.
 *
 * Its basis functions of the lower end,
 *
 *     H_i(t) = t^i/i! (1 - t)^(m+1) sum_(k=0)^(m-i) C(m+k, k) t^k
 *
 * (two-point Taylor expansion; Davis 1975, Interpolation and Approximation, section 2.5), are sums of positive terms;
 * those of the upper end are (-1)^i H_i(1 - t). With p = t (1 - t) and the order as an upper index,
 *
 *     dH_i^m/dt = H_(i-1)^(m-1) + c_i^m p^m,     c_i^m = C(2m-i, m-1)/(i-1)! - (m+1) C(2m+1-i, m)/i!
 *
 * because both sides agree in all derivatives at the ends that they share and in the coefficient of t^m; without the
 * terms in i - 1 at i = 0. Repeated, it gives every derivative in closed form.
 */

/** Derivatives of the basis functions there are: 0..4. */
const DEPTH = 5;

/** An order made ready. */
export interface HermiteBasis {
  /** m, 4 at least. */
  readonly order: number;
  /**
   * Slot d (2m+2) + i: d-th derivative of H_i, from i = m + 1 on of the functions of the upper end. Slot 0: t on entry.
   */
  readonly values: Float64Array;
  /** C(M+k, k) of M = m - d in slot d (m+1) + k. */
  readonly binomials: Float64Array;
  /** c_i of M = m - d in slot d (m+1) + i. */
  readonly coefficients: Float64Array;
  /** 1/i!. */
  readonly inverseFactorials: Float64Array;
  /** Powers of t, from m + 2 on of 1 - t. */
  readonly powers: Float64Array;
  /** q-th derivative of p^(m-e) in slot DEPTH q + e. */
  readonly bubbles: Float64Array;
}

/** Makes an order ready. */
export function hermiteBasis(order: number): HermiteBasis {
  const width = order + 1;
  const binomials = new Float64Array(DEPTH * width);
  const coefficients = new Float64Array(DEPTH * width);
  for (let d = 0; d < DEPTH; d++) {
    const m = order - d;
    for (let i = 0; i <= m; i++) {
      binomials[d * width + i] = binomial(m + i, i);
      const shared = i === 0 ? 0 : binomial(2 * m - i, m - 1) / factorial(i - 1);
      coefficients[d * width + i] = shared - ((m + 1) * binomial(2 * m + 1 - i, m)) / factorial(i);
    }
  }
  return {
    order,
    values: new Float64Array(2 * DEPTH * width),
    binomials,
    coefficients,
    inverseFactorials: Float64Array.from({ length: width }, (_, i) => 1 / factorial(i)),
    powers: new Float64Array(2 * width + 2),
    bubbles: new Float64Array(DEPTH * DEPTH),
  };
}

function factorial(n: number): number {
  return n < 2 ? 1 : n * factorial(n - 1);
}

function binomial(n: number, k: number): number {
  return k === 0 ? 1 : (binomial(n - 1, k - 1) * n) / k;
}

/** Fills `values` at the t in its slot 0 with the derivatives below `depth`, 1 to 5. */
export function fillHermiteBasis(basis: HermiteBasis, depth: number): void {
  const { order, values, binomials, coefficients, inverseFactorials, powers, bubbles } = basis;
  const width = order + 1;
  powers[0] = powers[width + 1] = 1;
  powers[1] = values[0]!;
  powers[width + 2] = 1 - values[0]!;
  for (let k = 2; k <= width; k++) {
    powers[k] = powers[k - 1]! * powers[1]!;
    powers[width + 1 + k] = powers[width + k]! * powers[width + 2]!;
  }
  for (let end = 0; end < 2; end++) {
    const near = end * (width + 1); // powers of the distance from this end
    const far = (1 - end) * (width + 1);
    fillBubbles(basis, near, far, depth);
    for (let d = 0; d < depth; d++) {
      const from = (2 * d + end) * width;
      for (let i = 0; i <= order; i++) {
        let sum = 0;
        for (let e = 0; e < d && e <= i; e++)
          sum += coefficients[e * width + i - e]! * bubbles[DEPTH * (d - 1 - e) + e]!;
        values[from + i] = sum;
      }
      const m = order - d;
      let sum = 0;
      for (let i = m; i >= 0; i--) {
        sum += binomials[d * width + m - i]! * powers[near + m - i]!;
        values[from + i + d]! += inverseFactorials[i]! * powers[near + i]! * powers[far + m + 1]! * sum;
      }
      if (end === 1) for (let i = 1 - (d & 1); i <= order; i += 2) values[from + i] = -values[from + i]!;
    }
  }
}

/** Derivatives of p^(m-e) by the distance from an end. */
function fillBubbles({ order, powers, bubbles }: HermiteBasis, near: number, far: number, depth: number): void {
  const x = powers[near + 1]!;
  const s = 1 - 2 * x;
  for (let e = 0; e < depth - 1; e++) {
    const n = order - e;
    bubbles[e] = powers[near + n]! * powers[far + n]!;
    bubbles[DEPTH + e] = n * s * powers[near + n - 1]! * powers[far + n - 1]!;
    if (e > depth - 4) continue;
    const p = x * (1 - x);
    const second = n * powers[near + n - 2]! * powers[far + n - 2]!;
    bubbles[2 * DEPTH + e] = second * ((n - 1) * s * s - 2 * p);
    if (e > depth - 5) continue;
    const third = n * (n - 1) * s * powers[near + n - 3]! * powers[far + n - 3]!;
    bubbles[3 * DEPTH + e] = third * ((n - 2) * s * s - 6 * p);
  }
}

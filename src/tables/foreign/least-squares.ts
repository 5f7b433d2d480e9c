/**
 * One free energy from two columns that may not belong together: pressure fixes its differences along isotherms, entropy those
 * along isochores, and around a cell the four need not close. Least squares with one relative error for P and for T s.
 *
 * Unknown are corrections y of the differences along isochores and z of those along the lowest isotherm, each in units of its own
 * error; what they leave of the other isotherms, r, counts too: |y|^2 + |z|^2 + |r|^2 least, by conjugate gradients on the normal
 * equations scaled by their diagonal (Hestenes & Stiefel 1952, J. Res. Natl. Bur. Stand. 49, 409). In these unknowns degenerate matter, whose T s is
 * a millionth of P/rho, is as easy as any. Columns that close to rounding stay as they are.
 */

/** The mismatch. */
export interface Mismatch {
  /** Densities and temperatures. */
  readonly densities: number;
  readonly temperatures: number;
  /** What closes each step along an isotherm, erg/g: (densities - 1) by temperatures, 0 on the lowest. */
  readonly open: Float64Array;
  /** Error scale of a step along an isotherm, P/rho times its length. */
  readonly isothermScale: Float64Array;
  /** Error scale of a step along an isochore, T s times its length: densities by (temperatures - 1). */
  readonly isochoreScale: Float64Array;
}

/** Iterations at most: each one fits better, none is needed for consistency. */
const mostIterations = 1000;
/** Fall of the gradient at which they end, and its size (squared, in units of relative errors) below which none are worth it. */
const tolerance = 1e-8;
const negligible = 1e-24;

/** Corrections of F, erg/g, by density and temperature, relative to the node of lowest density and temperature. */
export function closing(mismatch: Mismatch): Float64Array {
  const { densities, temperatures, isothermScale, isochoreScale, open } = mismatch;
  const [m, n] = [densities, temperatures];
  const steps = m * (n - 1);
  const size = steps + m - 1;
  /** Corrections of F from unknowns x: y, then z. */
  const potential = new Float64Array(m * n);
  const fillPotential = (x: Float64Array): void => {
    let cold = 0;
    for (let i = 0; i < m; i++) {
      if (i > 0) cold += x[steps + i - 1]! * isothermScale[(i - 1) * n]!;
      let sum = cold;
      potential[i * n] = sum;
      for (let j = 0; j + 1 < n; j++) {
        sum += x[i * (n - 1) + j]! * isochoreScale[i * (n - 1) + j]!;
        potential[i * n + j + 1] = sum;
      }
    }
  };
  /** Residuals of the upper isotherms from the potential; the lowest one is z itself. */
  const residual = new Float64Array((m - 1) * n);
  const fillResidual = (target: number): void => {
    for (let i = 0; i + 1 < m; i++) {
      residual[i * n] = 0;
      for (let j = 1; j < n; j++) {
        const k = i * n + j;
        residual[k] = (potential[k + n]! - potential[k]! - target * open[k]!) / isothermScale[k]!;
      }
    }
  };
  /** x plus the transposed of the operator on the residual. */
  const fillNormal = (x: Float64Array, out: Float64Array): void => {
    for (let k = 0; k < size; k++) out[k] = x[k]!;
    // The pull on each node, summed from the hot end down; what reaches the cold end pulls on all densities above.
    let pull = 0;
    for (let i = m - 1; i >= 0; i--) {
      let sum = 0;
      for (let j = n - 1; j >= 1; j--) {
        if (i > 0) sum += residual[(i - 1) * n + j]! / isothermScale[(i - 1) * n + j]!;
        if (i + 1 < m) sum -= residual[i * n + j]! / isothermScale[i * n + j]!;
        out[i * (n - 1) + j - 1]! += sum * isochoreScale[i * (n - 1) + j - 1]!;
      }
      pull += sum;
      if (i > 0) out[steps + i - 1]! += pull * isothermScale[(i - 1) * n]!;
    }
  };

  const x = new Float64Array(size);
  const gradient = new Float64Array(size);
  fillPotential(x);
  fillResidual(1);
  fillNormal(x, gradient);
  for (let k = 0; k < size; k++) gradient[k] = -gradient[k]!;
  const diagonal = diagonalOf(mismatch);
  const scaled = gradient.map((g, k) => g / diagonal[k]!);
  const direction = scaled.slice();
  const image = new Float64Array(size);
  let norm = dot(gradient, scaled);
  const goal = Math.max(norm * tolerance * tolerance, negligible);
  for (let round = 0; round < mostIterations && norm > goal; round++) {
    fillPotential(direction);
    fillResidual(0);
    fillNormal(direction, image);
    const step = norm / dot(direction, image);
    for (let k = 0; k < size; k++) {
      x[k]! += step * direction[k]!;
      gradient[k]! -= step * image[k]!;
      scaled[k] = gradient[k]! / diagonal[k]!;
    }
    const next = dot(gradient, scaled);
    const share = next / norm;
    for (let k = 0; k < size; k++) direction[k] = scaled[k]! + share * direction[k]!;
    norm = next;
  }
  fillPotential(x);
  return potential;
}

/** The diagonal of the normal equations: how much of the upper isotherms each unknown moves. */
function diagonalOf({ densities: m, temperatures: n, isothermScale, isochoreScale }: Mismatch): Float64Array {
  const out = new Float64Array(m * (n - 1) + m - 1).fill(1);
  const stiffness = (i: number, j: number): number =>
    i >= 0 && i + 1 < m ? 1 / (isothermScale[i * n + j]! * isothermScale[i * n + j]!) : 0;
  for (let i = 0; i < m; i++) {
    let above = 0;
    let across = 0;
    for (let j = n - 1; j >= 1; j--) {
      above += stiffness(i - 1, j) + stiffness(i, j);
      across += stiffness(i, j);
      const scale = isochoreScale[i * (n - 1) + j - 1]!;
      out[i * (n - 1) + j - 1]! += scale * scale * above;
    }
    if (i + 1 < m) out[m * (n - 1) + i]! += isothermScale[i * n]! * isothermScale[i * n]! * across;
  }
  return out;
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let k = 0; k < a.length; k++) sum += a[k]! * b[k]!;
  return sum;
}

/**
 * Harmonic phonons of a one-component Coulomb crystal (bcc, fcc; rigid background), in units of the plasma frequency.
 *
 * Dynamical matrix by Ewald's sum, lengths in a, 4 pi n = 3:
 *
 *     D(k) = sum_G (k+G)(k+G)/|k+G|^2 e^(-|k+G|^2/4 kappa^2) - sum_{G != 0} GG/G^2 e^(-G^2/4 kappa^2)
 *            + (1/3) sum_{R != 0} (1 - cos k.R) grad grad [erfc(kappa R)/R],
 *
 * eigenvalues (omega/omega_p)^2, sum 1 at every k (Kohn's rule). Source: Clark 1958, Phys. Rev. 109, 1133; Cohen &
 * Keffer 1955, Phys. Rev. 99, 1128 (both from memory); the trace follows from Poisson's summation.
 *
 * Averages over the Brillouin zone: the irreducible wedge in tetrahedra with one corner at the zone centre, k = s x
 * (point of the zone's face). Along a ray the sums over the three modes are analytic in s, so Gauss rules converge
 * exponentially; the face carries a Gauss rule collapsed into one corner. Panels of s halve towards the centre. Two
 * modes vanish like s there: s^2/omega and s^2/omega^2 are still analytic; a sum with ln omega in it is 2 ln s plus an
 * analytic function, and what the rule misses of the mean of 2 ln s (-2/3) is one number for all such sums. So these
 * averages converge like the others.
 *
 * Accuracy with the default grid, relative, measured: <omega^p>, p > 0, 2e-13; <ln omega> 4e-13; <1/omega> 6e-13;
 * <1/omega^2> 5e-11; thermal functions 3e-12 for theta <= 10, 2e-10 up to theta = 300, 6e-8 at 1000 (9 panels: 4e-9;
 * beyond, the rounding of omega^2, 1e-16 absolute, takes over). A spectrum takes 0.2 to 0.9 s.
 */
import { complementaryError } from "./error-function.js";
import { gaussLegendre, type Rule } from "./gauss-legendre.js";
import {
  bodyCentredCubic,
  cross,
  dot,
  faceCentredCubic,
  type Lattice,
  reciprocal,
  scale,
  type Vector,
  vectorsWithin,
} from "./lattices.js";

export type Crystal = "bcc" | "fcc";

/** Frequencies omega/omega_p over the Brillouin zone: three to a weight; the weights sum to 1. */
export interface Spectrum {
  readonly frequencies: Float64Array;
  readonly weights: Float64Array;
  /** Exact mean of 2 ln s less that by these weights: add it to the mode sum of what goes like ln omega. */
  readonly logDefect: number;
  /** The largest |omega_1^2 + omega_2^2 + omega_3^2 - 1| met. */
  readonly traceError: number;
}

export interface GridSize {
  /** Gauss points along each side of a face triangle. */
  readonly across: number;
  /** Gauss points in each radial panel. */
  readonly along: number;
  /** Radial panels [0, 2^(1-panels)], ..., [1/4, 1/2], [1/2, 1]. */
  readonly panels: number;
}

/** Large enough for the accuracies stated above. */
export const gridSize: Readonly<Record<Crystal, GridSize>> = {
  bcc: { across: 26, along: 8, panels: 7 },
  fcc: { across: 14, along: 8, panels: 7 },
};

/** Symmetric matrix as xx, yy, zz, yz, xz, xy. */
type Symmetric = Float64Array;

/** Corners of the tetrahedra that make 1/48 of the zone, in 2 pi/side; the first corner is the collapsed one. */
const wedges: Readonly<Record<Crystal, { lattice: Lattice; faces: readonly (readonly [Vector, Vector, Vector])[] }>> = {
  // P, N, H: a rule collapsed into P or H converges faster than into N, next to which the lowest mode is soft.
  bcc: {
    lattice: bodyCentredCubic,
    faces: [
      [
        [0.5, 0.5, 0.5],
        [0.5, 0.5, 0],
        [1, 0, 0],
      ],
    ],
  },
  // K, L, W on the hexagon; U, L, W on the hexagon; U, X, W on the square.
  fcc: {
    lattice: faceCentredCubic,
    faces: [
      [
        [0.75, 0.75, 0],
        [0.5, 0.5, 0.5],
        [1, 0.5, 0],
      ],
      [
        [1, 0.25, 0.25],
        [0.5, 0.5, 0.5],
        [1, 0.5, 0],
      ],
      [
        [1, 0.25, 0.25],
        [1, 0, 0],
        [1, 0.5, 0],
      ],
    ],
  },
};

/** Frequencies and weights over the zone. */
export function phononSpectrum(crystal: Crystal, size = gridSize[crystal], splitting = 0.9): Spectrum {
  const { lattice, faces } = wedges[crystal];
  const matrixAt = dynamicalMatrix(lattice, splitting);
  const across = gaussLegendre(size.across);
  const along = radialRule(size);
  const frequencies: number[] = [];
  const weights: number[] = [];
  let volume = 0;
  let traceError = 0;
  let logDefect = -2 / 3;
  for (let k = 0; k < along.nodes.length; k++) {
    logDefect -= along.weights[k]! * 3 * along.nodes[k]! ** 2 * 2 * Math.log(along.nodes[k]!);
  }
  const eigenvalues = new Float64Array(3);
  for (const corners of faces) {
    const [first, second, third] = corners.map((corner) => scale((2 * Math.PI) / lattice.side, corner));
    const determinant = Math.abs(dot(first!, cross(second!, third!)));
    volume += determinant / 6;
    across.nodes.forEach((u, i) => {
      across.nodes.forEach((v, j) => {
        const face = [0, 1, 2].map(
          (axis) => (1 - u) * first![axis]! + u * ((1 - v) * second![axis]! + v * third![axis]!),
        );
        along.nodes.forEach((s, k) => {
          const matrix = matrixAt(s * face[0]!, s * face[1]!, s * face[2]!);
          const trace = matrix[0]! + matrix[1]! + matrix[2]!;
          traceError = Math.max(traceError, Math.abs(trace - 1));
          diagonalise(matrix, eigenvalues);
          for (const square of eigenvalues) frequencies.push(Math.sqrt(square));
          weights.push(across.weights[i]! * across.weights[j]! * u * along.weights[k]! * s * s * determinant);
        });
      });
    });
  }
  return {
    frequencies: Float64Array.from(frequencies),
    weights: Float64Array.from(weights, (weight) => weight / volume),
    logDefect,
    traceError,
  };
}

/** Mean over the zone and the three modes of a function of omega/omega_p. */
export function modeAverage({ frequencies, weights }: Spectrum, of: (frequency: number) => number): number {
  let sum = 0;
  for (let i = 0; i < weights.length; i++) {
    sum += weights[i]! * (of(frequencies[3 * i]!) + of(frequencies[3 * i + 1]!) + of(frequencies[3 * i + 2]!));
  }
  return sum / 3;
}

/** <ln(omega/omega_p)>. */
export function meanLogFrequency(spectrum: Spectrum): number {
  return modeAverage(spectrum, Math.log) + spectrum.logDefect / 3;
}

/** Thermal part per ion at theta = hbar omega_p/kT: f and u in kT, c_v in k; zero-point energy not included. */
export function thermalHarmonic(spectrum: Spectrum, theta: number): { f: number; u: number; heat: number } {
  return {
    f: 3 * modeAverage(spectrum, (omega) => Math.log(-Math.expm1(-omega * theta))) + spectrum.logDefect,
    u: 3 * modeAverage(spectrum, (omega) => (omega * theta) / Math.expm1(omega * theta)),
    heat: 3 * modeAverage(spectrum, (omega) => ((omega * theta) / 2 / Math.sinh((omega * theta) / 2)) ** 2),
  };
}

/** Squares of the frequencies at one wave vector (units 1/a), ascending. */
export function squaredFrequencies(crystal: Crystal, wave: Vector, splitting = 0.9): [number, number, number] {
  const eigenvalues = new Float64Array(3);
  diagonalise(dynamicalMatrix(wedges[crystal].lattice, splitting)(...wave), eigenvalues);
  const [first, second, third] = eigenvalues.sort();
  return [first!, second!, third!];
}

/** Nodes of s on [0, 1], without the weight s^2. */
function radialRule({ along, panels }: GridSize): Rule {
  const nodes: number[] = [];
  const weights: number[] = [];
  for (let panel = 0; panel < panels; panel++) {
    const to = 2 ** -panel;
    const rule = gaussLegendre(along, panel === panels - 1 ? 0 : to / 2, to);
    nodes.push(...rule.nodes);
    weights.push(...rule.weights);
  }
  return { nodes: Float64Array.from(nodes), weights: Float64Array.from(weights) };
}

/** D as a function of k; the returned matrix is overwritten by the next call. Both sums stop at e^(-37). */
function dynamicalMatrix(lattice: Lattice, splitting: number): (x: number, y: number, z: number) => Symmetric {
  const reach = Math.sqrt(37);
  const falloff = -1 / (4 * splitting * splitting);
  const gauss = (square: number) => Math.exp(falloff * square) / square;
  // No k of the zone is longer than 2 pi/side.
  const waves = vectorsWithin(reciprocal(lattice.primitive), 2 * splitting * reach + (2 * Math.PI) / lattice.side);
  const still = new Float64Array(6);
  for (const wave of waves) {
    const square = dot(wave, wave);
    if (square > 0) addDyad(still, -gauss(square), ...wave);
  }
  const [near, springs] = realSpace(lattice, splitting, reach);
  const far = Float64Array.from(waves.flat());
  const matrix = new Float64Array(6);
  return (x, y, z) => {
    matrix.set(still);
    for (let i = 0; i < far.length; i += 3) {
      const [px, py, pz] = [x + far[i]!, y + far[i + 1]!, z + far[i + 2]!];
      const square = px * px + py * py + pz * pz;
      if (falloff * square > -37) addDyad(matrix, gauss(square), px, py, pz);
    }
    for (let i = 0, at = 0; i < near.length; i += 3) {
      const factor = Math.sin((x * near[i]! + y * near[i + 1]! + z * near[i + 2]!) / 2) ** 2;
      for (let part = 0; part < 6; part++) matrix[part]! += factor * springs[at++]!;
    }
    return matrix;
  };
}

/**
 * Neighbours, one of each pair R and -R (both give the same), and (4/3) grad grad [erfc(kappa R)/R] of each: 1/3 by the
 * units, 2 for the pair, 2 because 1 - cos k.R = 2 sin^2(k.R/2).
 */
function realSpace(
  { primitive }: Lattice,
  splitting: number,
  reach: number,
): [near: Float64Array, springs: Float64Array] {
  const half = vectorsWithin(primitive, reach / splitting).filter(
    ([x, y, z]) => x > 1e-9 || (x > -1e-9 && (y > 1e-9 || (y > -1e-9 && z > 1e-9))),
  );
  const springs = half.flatMap((vector) => {
    const r = Math.hypot(...vector);
    const error = complementaryError(splitting * r);
    const bell = ((2 * splitting) / Math.sqrt(Math.PI)) * Math.exp(-((splitting * r) ** 2));
    const slopeByRadius = -(error / r + bell) / (r * r);
    const curvature = (2 * (error / r + bell)) / (r * r) + 2 * splitting ** 2 * bell;
    const spring = new Float64Array(6);
    addDyad(spring, (curvature - slopeByRadius) / (r * r), ...vector);
    for (let axis = 0; axis < 3; axis++) spring[axis]! += slopeByRadius;
    return Array.from(spring, (component) => (4 / 3) * component);
  });
  return [Float64Array.from(half.flat()), Float64Array.from(springs)];
}

function addDyad(matrix: Symmetric, factor: number, x: number, y: number, z: number): void {
  matrix[0]! += factor * x * x;
  matrix[1]! += factor * y * y;
  matrix[2]! += factor * z * z;
  matrix[3]! += factor * y * z;
  matrix[4]! += factor * x * z;
  matrix[5]! += factor * x * y;
}

/** Eigenvalues of a symmetric 3 x 3 matrix by Jacobi's cyclic rotations (Jacobi 1846); the matrix is used up. */
function diagonalise(matrix: Symmetric, eigenvalues: Float64Array): void {
  const [offDiagonal, diagonal] = [matrix.subarray(3), matrix.subarray(0, 3)];
  for (let sweep = 0; sweep < 30; sweep++) {
    if (Math.abs(offDiagonal[0]!) + Math.abs(offDiagonal[1]!) + Math.abs(offDiagonal[2]!) < 1e-300) break;
    for (let third = 0; third < 3; third++) {
      // Rotation in the plane of the two axes other than `third`.
      const [p, q] = [(third + 1) % 3, (third + 2) % 3];
      const element = offDiagonal[third]!;
      if (element === 0) continue;
      const half = (diagonal[q]! - diagonal[p]!) / (2 * element);
      const tangent = (half < 0 ? -1 : 1) / (Math.abs(half) + Math.hypot(half, 1));
      const cosine = 1 / Math.hypot(tangent, 1);
      const sine = tangent * cosine;
      diagonal[p]! -= tangent * element;
      diagonal[q]! += tangent * element;
      offDiagonal[third] = 0;
      // The two other elements couple `third` with q and with p.
      const [withQ, withP] = [offDiagonal[p]!, offDiagonal[q]!];
      offDiagonal[q] = cosine * withP - sine * withQ;
      offDiagonal[p] = sine * withP + cosine * withQ;
    }
  }
  eigenvalues.set(diagonal);
}

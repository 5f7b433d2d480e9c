/**
 * Bravais lattices with a basis, in units of the ion-sphere radius a: one ion per volume 4 pi/3 in every lattice.
 *
 * Textbook definitions: Ashcroft & Mermin 1976, Solid State Physics, chapters 4 and 5 (hcp with the ideal c/a =
 * sqrt(8/3)).
 */

export type Vector = readonly [number, number, number];

export interface Lattice {
  /** Side of the conventional cube (cubic lattices) or of the hexagon (hcp), in units of a. */
  readonly side: number;
  /** Primitive vectors. */
  readonly primitive: readonly [Vector, Vector, Vector];
  /** Positions of the ions in one primitive cell. */
  readonly basis: readonly Vector[];
}

const ionVolume = (4 * Math.PI) / 3;

export const simpleCubic: Lattice = cubic(1, [
  [1, 0, 0],
  [0, 1, 0],
  [0, 0, 1],
]);

export const bodyCentredCubic: Lattice = cubic(2, [
  [-0.5, 0.5, 0.5],
  [0.5, -0.5, 0.5],
  [0.5, 0.5, -0.5],
]);

export const faceCentredCubic: Lattice = cubic(4, [
  [0, 0.5, 0.5],
  [0.5, 0, 0.5],
  [0.5, 0.5, 0],
]);

export const hexagonalClosePacked: Lattice = hexagonal();

export function dot(p: Vector, q: Vector): number {
  return p[0] * q[0] + p[1] * q[1] + p[2] * q[2];
}

export function cross(p: Vector, q: Vector): Vector {
  return [p[1] * q[2] - p[2] * q[1], p[2] * q[0] - p[0] * q[2], p[0] * q[1] - p[1] * q[0]];
}

export function scale(factor: number, p: Vector): Vector {
  return [factor * p[0], factor * p[1], factor * p[2]];
}

/** Primitive vectors of the reciprocal lattice, b_i . a_j = 2 pi delta_ij. */
export function reciprocal([p, q, r]: Lattice["primitive"]): [Vector, Vector, Vector] {
  const factor = (2 * Math.PI) / dot(p, cross(q, r));
  return [scale(factor, cross(q, r)), scale(factor, cross(r, p)), scale(factor, cross(p, q))];
}

/** Every lattice vector l p + m q + n r with |vector - centre| <= radius, farthest first: small terms add up first. */
export function vectorsWithin(primitive: Lattice["primitive"], radius: number, centre: Vector = [0, 0, 0]): Vector[] {
  const [p, q, r] = primitive;
  // |l| <= |vector| |b|/(2 pi), because l = vector . b/(2 pi).
  const reach = radius + Math.hypot(...centre);
  const [lMax, mMax, nMax] = reciprocal(primitive).map((b) => Math.ceil((reach * Math.hypot(...b)) / (2 * Math.PI)));
  const found: { vector: Vector; distance: number }[] = [];
  for (let l = -lMax!; l <= lMax!; l++) {
    for (let m = -mMax!; m <= mMax!; m++) {
      for (let n = -nMax!; n <= nMax!; n++) {
        const vector: Vector = [
          l * p[0] + m * q[0] + n * r[0],
          l * p[1] + m * q[1] + n * r[1],
          l * p[2] + m * q[2] + n * r[2],
        ];
        const distance = Math.hypot(vector[0] - centre[0], vector[1] - centre[1], vector[2] - centre[2]);
        if (distance <= radius) found.push({ vector, distance });
      }
    }
  }
  return found.sort((a, b) => b.distance - a.distance).map(({ vector }) => vector);
}

function cubic(ionsPerCube: number, primitive: Lattice["primitive"]): Lattice {
  const side = Math.cbrt(ionsPerCube * ionVolume);
  const [p, q, r] = primitive;
  return { side, primitive: [scale(side, p), scale(side, q), scale(side, r)], basis: [[0, 0, 0]] };
}

function hexagonal(): Lattice {
  const height = Math.sqrt(8 / 3);
  // Two ions in the cell of volume side^3 height sqrt(3)/2.
  const side = Math.cbrt((2 * ionVolume) / ((height * Math.sqrt(3)) / 2));
  return {
    side,
    primitive: [
      [side, 0, 0],
      [-side / 2, (side * Math.sqrt(3)) / 2, 0],
      [0, 0, side * height],
    ],
    basis: [
      [0, 0, 0],
      [0, side / Math.sqrt(3), (side * height) / 2],
    ],
  };
}

/**
 * The Fermi function and its derivatives at one node.
 *
 *     f = 1/(e^z + 1),   g = f (1 - f) = -f',   t = g (1 - 2 f) = -g',   u = g (1 - 6 f (1 - f)) = -t'
 *
 * with z = (E - mu)/kT. The products with powers of z are those that the derivatives of the density and of the
 * pressure at fixed temperature or fixed chemical potential need (see moments.ts).
 */
import type { Decimal } from "decimal.js";

/** f, g, z g, t, z t, z^2 t, u, z u, z^2 u, z^3 u. */
export type Kernels = readonly [
  f: Decimal,
  g: Decimal,
  zg: Decimal,
  t: Decimal,
  zt: Decimal,
  zzt: Decimal,
  u: Decimal,
  zu: Decimal,
  zzu: Decimal,
  zzzu: Decimal,
];

/** The two kernels that the density and its slope need. */
export type Occupation = readonly [f: Decimal, g: Decimal, ...others: Decimal[]];

/** f and g at z, from q = e^-z: no cancellation where q <= 1 (z >= 0). */
export function occupation(q: Decimal): Occupation {
  const hole = new (q.constructor as Decimal.Constructor)(1).div(q.plus(1)); // 1 - f
  const f = q.times(hole);
  return [f, f.times(hole)];
}

/** All kernels at z, from q = e^-z; for z < 0 take {@link mirrored} of those at -z. */
export function kernels(z: Decimal, q: Decimal): Kernels {
  const [f, g] = occupation(q);
  const t = g.minus(g.times(f).times(2));
  const u = g.minus(g.times(g).times(6));
  const zt = z.times(t);
  const zu = z.times(u);
  const zzu = z.times(zu);
  return [f, g, z.times(g), t, zt, z.times(zt), u, zu, zzu, z.times(zzu)];
}

/** The kernels at -z: f -> 1 - f, g and u are even, t is odd. */
export function mirrored([f, g, zg, t, zt, zzt, u, zu, zzu, zzzu]: Kernels): Kernels {
  return [f.neg().plus(1), g, zg.neg(), t.neg(), zt, zzt.neg(), u, zu.neg(), zzu, zzzu.neg()];
}

/** f and g at -z. */
export function mirroredOccupation([f, g]: Occupation): Occupation {
  return [f.neg().plus(1), g];
}

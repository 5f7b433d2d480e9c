/**
 * A sheet beyond its blocks: a search for a state tries matter in a phase where it is not stable, and must not fall off.
 *
 * From the nearest point of the sheet on, L is continued linearly in ln rho and ln T: heat and entropy stay positive powers of T.
 * No state that is returned is read there.
 */
import { fillSurface, type Surface } from "./surface.js";

/** How far outside its blocks a point of the stable phase may lie by rounding, in ln rho or ln T. */
const roundingStep = 1e-9;

/** By block, the nearest block that the sheet has: its own number where it has one. */
export function nearestBlocks(surface: Surface): Int32Array {
  const [across, up] = [surface.u.blocks, surface.v.blocks];
  const has = (p: number, q: number): boolean => surface.blocks[4 * (p * up + q)]! >= 0;
  const strips = Array.from({ length: across }, (_, p) =>
    Array.from({ length: up }, (_, q) => q).filter((q) => has(p, q)),
  );
  const nearest = new Int32Array(across * up);
  for (let p = 0; p < across; p++) {
    const filled = strips.flatMap((blocks, k) => (blocks.length > 0 ? [k] : []));
    const strip = closest(filled, p);
    for (let q = 0; q < up; q++) nearest[p * up + q] = strip * up + closest(strips[strip]!, q);
  }
  return nearest;
}

function closest(from: readonly number[], to: number): number {
  return from.reduce((best, one) => (Math.abs(one - to) < Math.abs(best - to) ? one : best), from[0]!);
}

/**
 * Fills `surface.out` at `surface.at`, which lies in no block of the sheet. False where it lies farther off than rounding
 * explains and `far` is false.
 */
export function fillBeyond(surface: Surface, nearest: Int32Array, order: number, far: boolean): boolean {
  const { u, v, at, out } = surface;
  const [x, y] = [at[0]!, at[1]!];
  const index = (value: number, { start, perUnit, blocks }: Surface["u"]): number =>
    Math.min(Math.max(Math.floor((value - start) * perUnit), 0), blocks - 1);
  const block = nearest[index(x, u) * v.blocks + index(y, v)]!;
  const inside = (value: number, { start, perUnit }: Surface["u"], k: number): number => {
    const low = start + (k + 1e-12) / perUnit;
    const high = start + (k + 1 - 1e-12) / perUnit;
    return Math.min(Math.max(value, low), high);
  };
  at[0] = inside(x, u, Math.floor(block / v.blocks));
  at[1] = inside(y, v, block % v.blocks);
  const du = x - at[0]!;
  const dv = y - at[1]!;
  if (!far && Math.max(Math.abs(du), Math.abs(dv)) > roundingStep) return false;
  if (!fillSurface(surface, 3)) return false;
  const mixed = out[4]!;
  out[0]! += out[1]! * du + out[2]! * dv + mixed * du * dv;
  out[1]! += mixed * dv;
  out[2]! += mixed * du;
  out[3] = du === 0 ? out[3]! + out[7]! * dv : 0;
  out[5] = dv === 0 ? out[5]! + out[8]! * du : 0;
  if (order === 3) {
    out[6] = du === 0 ? out[6]! : 0;
    out[7] = du === 0 ? out[7]! : 0;
    out[8] = dv === 0 ? out[8]! : 0;
    out[9] = dv === 0 ? out[9]! : 0;
    out[10] = 0;
  }
  return true;
}

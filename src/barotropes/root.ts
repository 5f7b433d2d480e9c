/** The root of a continuous function in a bracket, for the few places that are not in a hot loop. */
import { FermistateError } from "../errors.js";

/**
 * The argument in [low, high] at which `f` changes sign from negative to positive (or is 0), to the last digit.
 *
 * Secant steps kept inside the bracket by bisection: Illinois rule (Dowell & Jarratt 1971, BIT 11, 168), with a halving
 * whenever three steps did not halve the bracket. `f(low)` must not be positive and `f(high)` not negative.
 */
export function bracketedRoot(f: (x: number) => number, low: number, high: number): number {
  let [a, b] = [low, high];
  let [fa, fb] = [f(a), f(b)];
  if (fa === 0) return a;
  if (fb === 0) return b;
  if (!(fa < 0 && fb > 0)) {
    const allowed = "a bracket with a change of sign: please report this";
    throw new FermistateError("no-convergence", { argument: "root", given: [low, high], allowed });
  }
  let side = 0;
  let width = b - a;
  for (let i = 1; i <= 200; i++) {
    const secant = (a * fb - b * fa) / (fb - fa);
    const slow = i % 3 === 0 && b - a > 0.5 * width;
    if (i % 3 === 0) width = b - a;
    const middle = a + 0.5 * (b - a);
    const x = !slow && secant > a && secant < b ? secant : middle;
    if (x <= a || x >= b) break; // neighbouring doubles
    const fx = f(x);
    if (fx === 0) return x;
    if (fx > 0) {
      b = x;
      fb = fx;
      if (side === 1) fa *= 0.5;
      side = 1;
    } else {
      a = x;
      fa = fx;
      if (side === -1) fb *= 0.5;
      side = -1;
    }
    if (b - a <= Number.EPSILON * 2 * Math.abs(b)) break;
  }
  return b;
}

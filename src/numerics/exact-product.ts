/** Error-free transformation of a square (Veltkamp 1968, Dekker 1971): where half an ulp of p^2 decides. */

/** a*a - square exactly, for square = the rounded a*a; no overflow for |a| < 1e146. */
export function squareError(a: number, square: number): number {
  const scaled = 134217729 * a; // 2^27 + 1 splits a into two halves of 26 bits
  const high = scaled - (scaled - a);
  const low = a - high;
  return high * high - square + 2 * high * low + low * low;
}

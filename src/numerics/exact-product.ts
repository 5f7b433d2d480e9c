/** Error-free transformation of squares (Veltkamp 1968, Dekker 1971): where half an ulp of p^2 decides. */

/**
 * For i < count: record[count + i] = a*a - fl(a*a) exactly, a = record[i]; no overflow for |a| < 1e146.
 * In and out through a record, because numbers that cross a call may be boxed.
 */
export function squareErrors(record: Float64Array, count: number): void {
  for (let i = 0; i < count; i++) {
    const a = record[i]!;
    const scaled = 134217729 * a; // 2^27 + 1 splits a into two halves of 26 bits
    const high = scaled - (scaled - a);
    const low = a - high;
    record[count + i] = high * high - a * a + 2 * high * low + low * low;
  }
}

/**
 * The exponential function for inner loops: exp(-x) = table[k] exp(r + low[k]), k = round(16 x), r = k/16 - x.
 *
 * |r| <= 1/32, so the Taylor polynomial of degree 7 ends 1e-17 below 1. The table holds the nearest doubles, and `low`
 * what they lost (relative), so that the result can be right to half an ulp: in less than half the time of Math.exp.
 * The polynomial is meant to be written out where it is used, in one loop: as a function called once per node, V8
 * inlines it in some processes and not in others. No imports, so that the bundler inlines the constants.
 */

/** Entries of the table per unit of x. */
export const EXPONENTIAL_STEPS = 16;
/** Smallest admissible argument is -EXPONENTIAL_OFFSET/16 = -42. */
export const EXPONENTIAL_OFFSET = 672;
/** Entries: the largest admissible argument is 62. */
const EXPONENTIAL_SIZE = 1665;
/** Bits behind the point of the fixed-point numbers that fill the tables. */
const FIXED_BITS = 256;

/** `exponentialTable[k] = exp((EXPONENTIAL_OFFSET - k)/16)`, rounded to nearest. */
export const exponentialTable: Float64Array = new Float64Array(EXPONENTIAL_SIZE);
/** ln of the exact value over the rounded one, |low| <= 1.1e-16. */
export const exponentialLow: Float64Array = new Float64Array(EXPONENTIAL_SIZE);
{
  const one = 1n << BigInt(FIXED_BITS);
  const scale = 2 ** FIXED_BITS;
  let ratio = 0n; // e^(-1/16) by its series
  for (let n = 0n, term = one; term !== 0n; n++, term /= -16n * n) ratio += term;
  let start = 0n; // e^42 = 1/(e^(-1/16))^672
  {
    let power = one;
    for (let k = 0; k < EXPONENTIAL_OFFSET; k++) power = (power * ratio) >> BigInt(FIXED_BITS);
    start = (one << BigInt(FIXED_BITS)) / power;
  }
  for (let k = 0, value = start; k < EXPONENTIAL_SIZE; k++, value = (value * ratio) >> BigInt(FIXED_BITS)) {
    const rounded = Number(value);
    exponentialTable[k] = rounded / scale;
    exponentialLow[k] = Number(value - BigInt(rounded)) / rounded;
  }
}

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
/** e^42 and e^(-1/16) as the nearest double and the rest (40 digits of the series of e, rounded). */
const START = 1.739274941520501e18;
const START_LOW = 55.394681303611236;
const RATIO = 0.9394130628134758;
const RATIO_LOW = -2.152447043447057e-17;
/** 2^27 + 1, which splits a double into two halves of 26 bits. */
const SPLIT = 134217729;

/** `exponentialTable[k] = exp((EXPONENTIAL_OFFSET - k)/16)`, rounded to nearest. */
export const exponentialTable: Float64Array = new Float64Array(EXPONENTIAL_SIZE);
/** ln of the exact value over the rounded one, |low| <= 1.1e-16. */
export const exponentialLow: Float64Array = new Float64Array(EXPONENTIAL_SIZE);
{
  // Powers of e^(-1/16) in double-double arithmetic (Dekker 1971): 1665 steps lose 1e-29.
  const ratioHigh = SPLIT * RATIO - (SPLIT * RATIO - RATIO);
  const ratioRest = RATIO - ratioHigh;
  let value = START;
  let rest = START_LOW;
  for (let k = 0; k < EXPONENTIAL_SIZE; k++) {
    exponentialTable[k] = value;
    exponentialLow[k] = rest / value;
    const high = SPLIT * value - (SPLIT * value - value);
    const low = value - high;
    const product = value * RATIO;
    const lost = high * ratioHigh - product + high * ratioRest + low * ratioHigh + low * ratioRest;
    const small = lost + (value * RATIO_LOW + rest * RATIO);
    value = product + small;
    rest = product - value + small;
  }
}

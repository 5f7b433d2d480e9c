/**
 * The exponential function for inner loops: exp(-x) = table[k] * exp(r), k = round(16 x), r = k/16 - x.
 *
 * |r| <= 1/32, so the Taylor polynomial of degree 7 ends 1e-17 below 1; the result is within 2 ulp of exp(-x),
 * in less than half the time of Math.exp. The polynomial is meant to be written out where it is used, in one
 * loop: as a function called once per node, V8 inlines it in some processes and not in others.
 */

/** Entries of the table per unit of x. */
export const EXPONENTIAL_STEPS = 16;
/** Smallest admissible argument is -EXPONENTIAL_OFFSET/16 = -50. */
export const EXPONENTIAL_OFFSET = 800;
/** Largest admissible argument: table[k] must exist. */
export const EXPONENTIAL_LIMIT = 80;

const size = EXPONENTIAL_OFFSET + EXPONENTIAL_STEPS * (EXPONENTIAL_LIMIT + 1);

/** `table[k] = exp((EXPONENTIAL_OFFSET - k) / 16)`. */
export const exponentialTable: Float64Array = /* @__PURE__ */ Float64Array.from({ length: size }, (_, k) =>
  Math.exp((EXPONENTIAL_OFFSET - k) / EXPONENTIAL_STEPS),
);

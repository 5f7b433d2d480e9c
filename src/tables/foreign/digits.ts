/** How many digits a column was printed with. */

/** Values looked at, at most. */
const sample = 2000;
/** Share of the values that need no more digits: a wrong entry may have more. */
const share = 0.9;

/** A unit of the last digit over the smallest value that has so many: 1e-5 for six digits. */
export function lastDigit(values: Float64Array): number {
  const stride = Math.ceil(values.length / sample);
  const counts: number[] = [];
  for (let k = 0; k < values.length; k += stride) {
    counts.push(values[k]!.toExponential().replace(/^-|e.*$|\./g, "").length);
  }
  counts.sort((a, b) => a - b);
  return 10 ** (1 - counts[Math.ceil(share * counts.length) - 1]!);
}

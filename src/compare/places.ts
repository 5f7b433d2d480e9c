/** The worst places of a map: local maxima, well apart. */

/** Most places told. */
const most = 3;
/** Least distance of two places, as a share of the longer side of the grid. */
const apart = 0.12;

/** Rows of the locally largest sizes, the worst first; equal neighbours count once. NaN and zeros are no places. */
export function worstRows(values: Float64Array, densities: number): number[] {
  const temperatures = values.length / densities;
  const size = (row: number): number => Math.abs(values[row]!);
  const isTop = (row: number): boolean => {
    const [i, j] = [row % densities, Math.floor(row / densities)];
    for (let y = Math.max(0, j - 1); y <= Math.min(temperatures - 1, j + 1); y++) {
      for (let x = Math.max(0, i - 1); x <= Math.min(densities - 1, i + 1); x++) {
        if (size(y * densities + x) > size(row)) return false;
      }
    }
    return true;
  };
  const tops: number[] = [];
  for (let row = 0; row < values.length; row++) if (size(row) > 0 && isTop(row)) tops.push(row);
  tops.sort((p, q) => size(q) - size(p) || p - q);
  const distance = Math.max(1, apart * Math.max(densities, temperatures));
  const chosen: number[] = [];
  for (const row of tops) {
    const isNear = chosen.some((other) => {
      const across = Math.abs((row % densities) - (other % densities));
      return Math.max(across, Math.abs(Math.floor(row / densities) - Math.floor(other / densities))) <= distance;
    });
    if (!isNear) chosen.push(row);
    if (chosen.length === most) break;
  }
  return chosen;
}

/**
 * Cells of one class as outlines: a map of a smooth quantity is then some kilobytes, not a rectangle per cell.
 *
 * Every side of a cell that has no cell of its class beyond it becomes a directed edge, the class on its right; edges are
 * chained into closed loops, and straight runs become one stroke. Holes run the other way round, so the default rule of
 * SVG (nonzero) leaves them open.
 */

/** Path data of one class, absolute pixels with at most one decimal. */
export function outlines(
  classes: Int16Array,
  wanted: number,
  columns: number,
  xs: readonly number[],
  ys: readonly number[],
): string {
  const rows = classes.length / columns;
  const inside = (i: number, j: number): boolean =>
    i >= 0 && i < columns && j >= 0 && j < rows && classes[j * columns + i] === wanted;
  const width = columns + 1;
  /** Ends of the edges that start at a corner: two where cells touch in it. */
  const next = new Map<number, number[]>();
  const edge = (from: number, to: number): void => {
    const others = next.get(from);
    if (others === undefined) next.set(from, [to]);
    else others.push(to);
  };
  for (let j = 0; j < rows; j++) {
    for (let i = 0; i < columns; i++) {
      if (!inside(i, j)) continue;
      const corner = j * width + i;
      if (!inside(i, j - 1)) edge(corner, corner + 1);
      if (!inside(i + 1, j)) edge(corner + 1, corner + 1 + width);
      if (!inside(i, j + 1)) edge(corner + 1 + width, corner + width);
      if (!inside(i - 1, j)) edge(corner + width, corner);
    }
  }
  let path = "";
  for (const start of next.keys()) {
    while ((next.get(start)?.length ?? 0) > 0) path += loop(next, start, width, xs, ys);
  }
  return path;
}

/** One closed loop from a corner, whose edges are taken out of `next`. */
function loop(
  next: Map<number, number[]>,
  start: number,
  width: number,
  xs: readonly number[],
  ys: readonly number[],
): string {
  const x = (corner: number): string => pixels(xs[corner % width]!);
  const y = (corner: number): string => pixels(ys[Math.floor(corner / width)]!);
  let path = `M${x(start)},${y(start)}`;
  let corner = start;
  let direction = 0;
  do {
    const to = next.get(corner)!.pop()!;
    const step = to - corner;
    if (direction !== 0 && step !== direction) path += Math.abs(direction) === 1 ? `H${x(corner)}` : `V${y(corner)}`;
    direction = step;
    corner = to;
  } while (corner !== start);
  return `${path}${Math.abs(direction) === 1 ? `H${x(corner)}` : `V${y(corner)}`}z`;
}

/** One decimal, none where it is zero. */
function pixels(value: number): string {
  return String(Math.round(value * 10) / 10);
}

/** A whole integration kept as the dense output of its steps: the unknowns anywhere, and where one of them has a value. */
import { fillDense, type OdeStep } from "./ode.js";
import { findRoot } from "./roots.js";

/** The solution over the range of the steps it was given. */
export interface DenseSolution {
  /** Keeps a step; give it to an integration as `onStep`. Steps follow each other in one direction. */
  readonly add: (step: OdeStep) => void;
  /** Fills point[1 ... size] at x = point[0]; outside the range the polynomial of the end is continued. */
  fill(point: Float64Array): void;
  /**
   * Fills the point at which the unknown of this slot, which grows from step to step, has the value given; at the
   * nearer end where it is outside the range.
   */
  fillWhere(slot: number, value: number, point: Float64Array): void;
  /** Values of x between the steps, the ends included. */
  readonly bounds: readonly number[];
}

/** A solution of `size` unknowns without steps yet. */
export function denseSolution(size: number): DenseSolution {
  const width = 8 * size;
  const bounds: number[] = [];
  const pieces: Float64Array[] = [];

  /** Fills the point from step i. */
  function fillFrom(i: number, point: Float64Array): void {
    fillDense(pieces[i]!, 0, bounds[i]!, bounds[i + 1]!, point);
  }

  /** The last step for which `isBefore(step)` holds, or the first step. */
  function search(isBefore: (i: number) => boolean): number {
    let low = 0;
    let high = pieces.length;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (isBefore(middle)) low = middle;
      else high = middle;
    }
    return low;
  }

  return {
    bounds,
    add(step) {
      if (bounds.length === 0) bounds.push(step.start);
      bounds.push(step.end);
      pieces.push(step.coefficients.slice(0, width));
    },
    fill(point) {
      const sign = Math.sign(bounds.at(-1)! - bounds[0]!);
      fillFrom(
        search((i) => sign * (point[0]! - bounds[i]!) >= 0),
        point,
      );
    },
    fillWhere(slot, value, point) {
      const first = 8 * (slot - 1); // the coefficient that is the value at the start of a step
      const i = search((k) => pieces[k]![first]! <= value);
      const difference = (x: number): number => {
        point[0] = x;
        fillFrom(i, point);
        return point[slot]! - value;
      };
      const [start, end] = [bounds[i]!, bounds[i + 1]!];
      const values = [difference(start), difference(end)] as const;
      if (values[0] >= 0) difference(start);
      else if (values[1] > 0) difference(findRoot(difference, start, end, { values }).x);
    },
  };
}

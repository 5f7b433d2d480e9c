/** Nodes of an interpolation among the points of a comparison: there it repeats what it was made from, and shows no error. */
import type { Composition } from "../matter/composition.js";
import type { EquationOfState } from "./equation-of-state.js";

/**
 * Share of a cell within which a point is a node. The error of a second derivative grows with the first power of the distance, that
 * of the free energy with the third: what is left of any is below some 1e-5 of its largest in the cell.
 */
const nodeTolerance = 1e-6;

/** Whether a place along an axis, counted in cells, is that of a node. */
export function isNodePlace(x: number): boolean {
  return Math.abs(x - Math.round(x)) <= nodeTolerance;
}

/** Whether all that is interpolated in an equation of state has a node at a point that it answers; false where nothing is. */
export function isNodeOf(
  equationOfState: EquationOfState,
  density: number,
  temperature: number,
  composition: Composition,
): boolean {
  // A foreign object may have no contributions to ask.
  const { contributions = [] } = equationOfState as Partial<EquationOfState>;
  const interpolated = contributions.filter((one) => one.isNode !== undefined);
  return interpolated.length > 0 && interpolated.every((one) => one.isNode!(density, temperature, composition));
}

/** The warning: how many of the points compared are nodes of a table, and of whose; undefined where none is. */
export function nodeWarning(count: number, all: number, owner?: string): string | undefined {
  if (count === 0) return undefined;
  const table = owner === undefined ? "the table" : `the table in ${owner}`;
  const are = count === 1 ? "is a node" : "are nodes";
  const points = all === 1 ? "The point is a node" : `${count} of ${all} points ${are}`;
  return (
    `${points} of ${table}, where it agrees with what it was made from by construction: that tells nothing about the table ` +
    `between its nodes. Choose other ${all === 1 ? "values" : "points"}.`
  );
}

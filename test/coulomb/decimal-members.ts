/**
 * Natural members of a function of one variable from the formula alone, in decimal arithmetic: central differences of
 * seven points a relative 1e-9 apart, whose error is 1e-35 of the function (coefficients: Fornberg 1988, Math. Comput.
 * 51, 699, table 1), at 110 digits, of which the fourth difference takes 36.
 */
import { Decimal } from "decimal.js";

/** Decimal numbers of 110 digits. */
export const Exact: typeof Decimal = Decimal.clone({ precision: 110, defaults: true });

const stencils: readonly (readonly [denominator: number, ...numerators: number[]])[] = [
  [60, -1, 9, -45, 0, 45, -9, 1],
  [180, 2, -27, 270, -490, 270, -27, 2],
  [8, 1, -8, 13, 0, -13, 8, -1],
  [6, -1, 12, -39, 56, -39, 12, -1],
];

/** f, v f', v^2 f'', v^3 f''', v^4 f'''' and v f' - f at v. */
export function decimalMembers(f: (v: Decimal) => Decimal, v: number): number[] {
  const step = new Exact("1e-9");
  const values = [-3, -2, -1, 0, 1, 2, 3].map((j) => f(step.times(j).plus(1).times(v)));
  const members = stencils.map(([denominator, ...numerators], order) =>
    numerators
      .reduce((sum, numerator, i) => sum.plus(values[i]!.times(numerator)), new Exact(0))
      .div(step.pow(order + 1).times(denominator)),
  );
  const value = values[3]!;
  return [value, ...members, members[0]!.minus(value)].map(Number);
}

/** Names of the six. */
export const memberNames: readonly string[] = ["f", "first", "second", "third", "fourth", "entropy"];

/** Gauss-Legendre rules on [0, 1], computed once by Newton's method on the Legendre recurrence. */

/** Nodes and weights of a rule. */
export interface GaussRule {
  readonly nodes: readonly number[];
  readonly weights: readonly number[];
}

/** The rule of `count` nodes. */
export function gaussRule(count: number): GaussRule {
  const nodes: number[] = [];
  const weights: number[] = [];
  for (let i = 0; i < count; i++) {
    let x = Math.cos((Math.PI * (i + 0.75)) / (count + 0.5));
    let slope = 1;
    for (let round = 0; round < 8; round++) {
      let [before, now] = [1, x];
      for (let n = 2; n <= count; n++) [before, now] = [now, ((2 * n - 1) * x * now - (n - 1) * before) / n];
      slope = (count * (x * now - before)) / (x * x - 1);
      x -= now / slope;
    }
    nodes.push((1 - x) / 2);
    weights.push(1 / ((1 - x * x) * slope * slope));
  }
  return { nodes, weights };
}

/**
 * The continuous broken line of k pieces that fits points best in the sense of least squares, breaks free.
 *
 * First the global optimum with breaks on a grid of candidates, by dynamic programming: the least sum of squares of the
 * points left of a candidate, as a function of the line's value v there, is the lower envelope of quadratic functions
 * of v, which is carried from candidate to candidate and from piece to piece (functional pruning; Maidstone, Hocking,
 * Rigaill & Fearnhead 2017, Stat. Comput. 27, 519, for changes in mean; Fearnhead, Maidstone & Letchford 2019, J.
 * Comput. Graph. Stat. 28, 265, for changes in slope; from memory). Then a quasi-Newton search from there with the
 * breaks free.
 */

/** A broken line: ends and breaks by rising x, with its values there. */
export interface BrokenLine {
  /** First point, breaks, last point. */
  readonly x: readonly number[];
  /** The line's values there. */
  readonly y: readonly number[];
}

/** a v^2 + b v + c with where it came from. */
interface Quadratic {
  readonly a: number;
  readonly b: number;
  readonly c: number;
  /** Candidate of the break before; -1 for the first piece. */
  readonly from: number;
  /** The quadratic of that break that was continued. */
  readonly parent: Quadratic | undefined;
  /** Value there as a function of v: p v + q. */
  readonly p: number;
  readonly q: number;
}

/**
 * Fits points with rising x.
 *
 * @param x - few points for the search on a grid; `candidates` of them at most, equally spaced by index, may be breaks
 * @param xFine - many points of the same curve for the search from there: the more, the smoother the sum in the breaks
 */
export function fitBrokenLine(
  x: Float64Array,
  y: Float64Array,
  xFine: Float64Array,
  yFine: Float64Array,
  pieces: number,
  candidates: number,
): BrokenLine {
  return polish(xFine, yFine, optimum(x, y, pieces, candidates));
}

/** Sums over the points of a piece between two candidates, with t from 0 to 1: the cost in the end values u, v. */
interface PieceCost {
  readonly uu: number;
  readonly uv: number;
  readonly vv: number;
  readonly u: number;
  readonly v: number;
  readonly one: number;
}

function pieceCost(x: Float64Array, y: Float64Array, from: number, to: number): PieceCost {
  let [uu, uv, vv, u, v, one] = [0, 0, 0, 0, 0, 0];
  const width = x[to]! - x[from]!;
  for (let i = from === 0 ? 0 : from + 1; i <= to; i++) {
    const t = (x[i]! - x[from]!) / width;
    const s = 1 - t;
    const value = y[i]!;
    uu += s * s;
    uv += 2 * s * t;
    vv += t * t;
    u -= 2 * s * value;
    v -= 2 * t * value;
    one += value * value;
  }
  return { uu, uv, vv, u, v, one };
}

/** The best line with breaks on the candidates. */
function optimum(x: Float64Array, given: Float64Array, pieces: number, limit: number): BrokenLine {
  const last = x.length - 1;
  const count = Math.min(limit, x.length);
  const place = Array.from({ length: count }, (_, i) => Math.round((i * last) / (count - 1)));
  // Without its chord the data is small, and sums of squares keep their digits.
  const slope = (given[last]! - given[0]!) / (x[last]! - x[0]!);
  const chord = (i: number): number => given[0]! + slope * (x[i]! - x[0]!);
  const y = given.map((value, i) => value - chord(i));
  const [least, most] = [Math.min(...y), Math.max(...y)];
  const room = 0.5 * (most - least) + 1e-12;
  const range = [least - room, most + room] as const;

  let level: (readonly Quadratic[])[] = place.map((to, j) => {
    if (j === 0) return [];
    const { uu, uv, vv, u, v, one } = pieceCost(x, y, 0, to);
    // The least over u: u = -(uv v + u)/(2 uu).
    const from = { from: -1, parent: undefined, p: -uv / (2 * uu), q: -u / (2 * uu) };
    return [{ a: vv - (uv * uv) / (4 * uu), b: v - (uv * u) / (2 * uu), c: one - (u * u) / (4 * uu), ...from }];
  });
  const costs = new Map<number, PieceCost>();
  for (let k = 1; k < pieces; k++) {
    const next: (readonly Quadratic[])[] = place.map((to, j) => {
      const all: Quadratic[] = [];
      for (let i = k; i < j; i++) {
        if (k + 1 === pieces && j !== count - 1) break; // the last piece ends at the last point only
        let cost = costs.get(i * count + j);
        if (cost === undefined) {
          cost = pieceCost(x, y, place[i]!, to);
          costs.set(i * count + j, cost);
        }
        for (const parent of level[i]!) all.push(continued(parent, cost, i));
      }
      return lowerEnvelope(all, range);
    });
    level = next;
  }
  return trace(level[count - 1]!, x, chord, place);
}

/** The cost of a parent and one more piece, least over the value u at the break. */
function continued(parent: Quadratic, cost: PieceCost, from: number): Quadratic {
  const a = parent.a + cost.uu;
  const b = parent.b + cost.u;
  return {
    a: cost.vv - (cost.uv * cost.uv) / (4 * a),
    b: cost.v - (cost.uv * b) / (2 * a),
    c: parent.c + cost.one - (b * b) / (4 * a),
    from,
    parent,
    p: -cost.uv / (2 * a),
    q: -b / (2 * a),
  };
}

const at = ({ a, b, c }: Quadratic, v: number): number => c + v * (b + v * a);

/** Those that are the least of all somewhere in the range, found by walking along the envelope. */
function lowerEnvelope(all: readonly Quadratic[], [low, high]: readonly [number, number]): readonly Quadratic[] {
  if (all.length < 2) return all;
  const kept: Quadratic[] = [];
  let v = low;
  let current = all.reduce((best, one) => (at(one, v) < at(best, v) ? one : best));
  while (kept.length < 200) {
    kept.push(current);
    let nearest = high;
    let next: Quadratic | undefined;
    for (const one of all) {
      if (one === current) continue;
      // Where `one` falls below `current`, beyond v.
      const [a, b, c] = [one.a - current.a, one.b - current.b, one.c - current.c];
      const root = b * b - 4 * a * c;
      if (root <= 0) continue;
      const s = Math.sqrt(root);
      const h = -0.5 * (b + (b >= 0 ? s : -s));
      for (const crossing of [h / a, c / h]) {
        if (crossing > v && crossing < nearest && 2 * a * crossing + b < 0) {
          nearest = crossing;
          next = one;
        }
      }
    }
    if (next === undefined) break;
    v = nearest;
    current = next;
  }
  return kept;
}

/** The line of the least cost, back from its last point. */
function trace(
  final: readonly Quadratic[],
  x: Float64Array,
  chord: (i: number) => number,
  place: readonly number[],
): BrokenLine {
  const least = (one: Quadratic): number => at(one, -one.b / (2 * one.a));
  let one: Quadratic | undefined = final.reduce((best, other) => (least(other) < least(best) ? other : best));
  let v = -one.b / (2 * one.a);
  let here = x.length - 1;
  const xs = [x[here]!];
  const ys = [v + chord(here)];
  while (one !== undefined) {
    v = one.p * v + one.q;
    here = one.from < 0 ? 0 : place[one.from]!;
    xs.unshift(x[here]!);
    ys.unshift(v + chord(here));
    one = one.parent;
  }
  return { x: xs, y: ys };
}

/**
 * The best values at given knots, by the tridiagonal normal equations, with the sum of squares and its slope in each
 * break.
 */
function bestValues(x: Float64Array, y: Float64Array, knots: readonly number[]): Projection {
  const count = knots.length;
  const diagonal = new Float64Array(count);
  const beside = new Float64Array(count);
  const right = new Float64Array(count);
  let k = 0;
  for (let i = 0; i < x.length; i++) {
    while (k < count - 2 && x[i]! > knots[k + 1]!) k++;
    const t = (x[i]! - knots[k]!) / (knots[k + 1]! - knots[k]!);
    const s = 1 - t;
    diagonal[k]! += s * s;
    diagonal[k + 1]! += t * t;
    beside[k]! += s * t;
    right[k]! += s * y[i]!;
    right[k + 1]! += t * y[i]!;
  }
  for (let i = 1; i < count; i++) {
    const factor = beside[i - 1]! / diagonal[i - 1]!;
    diagonal[i]! -= factor * beside[i - 1]!;
    right[i]! -= factor * right[i - 1]!;
  }
  for (let i = count - 1; i >= 0; i--) {
    right[i] = (right[i]! - (i < count - 1 ? beside[i]! * right[i + 1]! : 0)) / diagonal[i]!;
  }
  const slopes = new Float64Array(count - 2);
  let sum = 0;
  k = 0;
  for (let i = 0; i < x.length; i++) {
    while (k < count - 2 && x[i]! > knots[k + 1]!) k++;
    const width = knots[k + 1]! - knots[k]!;
    const t = (x[i]! - knots[k]!) / width;
    const rise = (right[k + 1]! - right[k]!) / width;
    const residual = y[i]! - (right[k]! + t * (right[k + 1]! - right[k]!));
    sum += residual * residual;
    // The values are optimal, so only the places count: d(line)/d(knot) = -rise times the share of the knot.
    if (k > 0) slopes[k - 1]! += 2 * residual * rise * (1 - t);
    if (k < count - 2) slopes[k]! += 2 * residual * rise * t;
  }
  return { values: right, slopes, sum };
}

interface Projection {
  readonly values: Float64Array;
  readonly slopes: Float64Array;
  readonly sum: number;
}

/**
 * Quasi-Newton (Broyden, Fletcher, Goldfarb, Shanno 1970) on the breaks, the values being optimal for each choice of
 * them.
 */
function polish(x: Float64Array, y: Float64Array, start: BrokenLine): BrokenLine {
  let knots = start.x;
  let here = bestValues(x, y, knots);
  const free = knots.length - 2;
  const scale = (x[x.length - 1]! - x[0]!) / knots.length;
  const fresh = (): number[][] =>
    Array.from({ length: free }, (_, i) => Array.from({ length: free }, (_, j) => +(i === j)));
  let inverse = fresh();
  let trust = 0.1 * scale;
  for (let round = 0; round < 300 && free > 0; round++) {
    let step = inverse.map((row) => -row.reduce((sum, value, j) => sum + value * here.slopes[j]!, 0));
    let downhill = step.reduce((sum, value, i) => sum + value * here.slopes[i]!, 0);
    if (!(downhill < 0)) {
      inverse = fresh();
      step = Array.from(here.slopes, (value) => -value);
      downhill = -step.reduce((sum, value) => sum + value * value, 0);
    }
    const longest = Math.max(...step.map(Math.abs));
    if (longest === 0 || -downhill < 1e-15 * here.sum) break;
    let length = Math.min(1, trust / longest);
    let moved: Projection | undefined;
    let next = knots;
    for (let attempt = 0; attempt < 30 && moved === undefined; attempt++, length *= 0.5) {
      next = knots.map((value, i) => (i === 0 || i > free ? value : value + length * step[i - 1]!));
      // Each piece keeps three points at least: below that the sums do not fix its line.
      if (next.some((value, i) => i > 0 && value - next[i - 1]! < 3 * ((scale * knots.length) / x.length))) continue;
      const trial = bestValues(x, y, next);
      if (trial.sum < here.sum + 1e-4 * length * downhill) moved = trial;
    }
    if (moved === undefined) break;
    const change = step.map((_, i) => next[i + 1]! - knots[i + 1]!);
    const bend = step.map((_, i) => moved.slopes[i]! - here.slopes[i]!);
    inverse = updated(inverse, change, bend);
    trust = Math.max(trust, 2 * Math.max(...change.map(Math.abs)));
    knots = next;
    here = moved;
  }
  return { x: knots, y: Array.from(here.values) };
}

/** The inverse Hessian after a step `s` that changed the gradient by `g`. */
function updated(inverse: readonly number[][], s: readonly number[], g: readonly number[]): number[][] {
  const dot = (a: readonly number[], b: readonly number[]): number =>
    a.reduce((sum, value, i) => sum + value * b[i]!, 0);
  const curvature = dot(s, g);
  if (!(curvature > 0)) return inverse.map((row) => [...row]);
  // The first update sets the scale.
  const isFresh = inverse.every((row, i) => row.every((value, j) => value === +(i === j)));
  const base = isFresh ? inverse.map((row) => row.map((value) => (value * curvature) / dot(g, g))) : inverse;
  const hg = base.map((row) => dot(row, g));
  const factor = (1 + dot(g, hg) / curvature) / curvature;
  return base.map((row, i) =>
    row.map((value, j) => value + factor * s[i]! * s[j]! - (hg[i]! * s[j]! + s[i]! * hg[j]!) / curvature),
  );
}

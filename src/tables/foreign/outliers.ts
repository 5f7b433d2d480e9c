/**
 * Entries of columns that stand out: far from what their neighbours say, along density and along temperature alike, where the mesh
 * explains no such distance.
 *
 * At each node the value is compared with the polynomial through its neighbours on a line, itself left out: the difference is a
 * divided difference D times a known factor. A wrong entry changes the D of its own two lines only, so the lines beside measure
 * what smooth matter, steps of the mesh, phase boundaries and rounding make of D there.
 */

import type { SortedRows } from "./columns.js";
import { lastDigit } from "./digits.js";
import type { StateMesh } from "./mesh.js";
import type { ColumnsOutlier } from "./report.js";

/** Times what the lines beside and the digits explain, from which on an entry is named. */
export const outlierFactor = 8;
/** Nodes of the two stencils tried along each line: cubic and quintic through the neighbours. */
const widths = [5, 7] as const;
/** Nodes to each side along the line, and the lines beside, that say what is usual. */
const reach = 2;
const linesBeside = 4;
/** Share by which both directions may disagree on the error. */
const agreement = 0.25;
/** Each pass mends what it found, so that what an error hid from the lines beside it shows in the next. */
const passes = 6;

/** Stencils that leave their node out, along one axis. */
interface LeftOut {
  readonly width: number;
  readonly first: Int32Array;
  /** Weights of the divided difference, by first node. */
  readonly weights: Float64Array;
  /** D times this is the difference at the node: 1/weight of its own value. */
  readonly factor: Float64Array;
  /** Sum of |weights|. */
  readonly noise: Float64Array;
}

/** One column made smooth: its logarithm where all of it is positive. */
interface Field {
  readonly column: ColumnsOutlier["column"];
  readonly values: Float64Array;
  readonly isLogarithm: boolean;
  /** Half a unit of the last digit, relative. */
  readonly digit: number;
}

/** Entries that stand out, the worst first, of rows that are the nodes of their mesh. */
export function outliersOf(mesh: StateMesh, rows: SortedRows): readonly ColumnsOutlier[] {
  const found: ColumnsOutlier[] = [];
  const add = (column: ColumnsOutlier["column"], values: Float64Array): void => {
    const isLogarithm = values.every((value) => value > 0);
    const digit = lastDigit(values) / 2;
    found.push(
      ...outliersOfField(mesh, rows.index, {
        column,
        values: isLogarithm ? values.map(Math.log) : values.slice(),
        isLogarithm,
        digit,
      }),
    );
  };
  add("pressure", rows.pressure);
  add("specificEnergy", rows.energy);
  if (rows.entropy !== undefined) add("specificEntropy", rows.entropy);
  return found.sort((a, b) => b.factor - a.factor);
}

function outliersOfField(mesh: StateMesh, index: Uint32Array, field: Field): ColumnsOutlier[] {
  const { u, v, density, temperature } = mesh;
  const [m, n] = [u.length, v.length];
  const { values } = field;
  const given = values.slice();
  const stencils = widths.map((width) => [leftOut(u, width), leftOut(v, width)] as const);
  const found = new Map<number, number>();
  for (let pass = 0; pass < passes; pass++) {
    const { score, shift, rank } = scoresOf(field, stencils, m, n);
    const peaks: number[] = [];
    for (let k = 0; k < m * n; k++) if (score[k]! > outlierFactor && isPeak(rank, k, m, n)) peaks.push(k);
    if (peaks.length === 0) break;
    for (const k of peaks) {
      values[k]! -= shift[k]!;
      found.set(k, Math.max(found.get(k) ?? 0, score[k]!));
    }
  }
  return [...found].map(([k, factor]) => {
    const off = given[k]! - values[k]!;
    return Object.freeze({
      row: index[k]!,
      density: density[Math.floor(k / n)]!,
      temperature: temperature[k % n]!,
      column: field.column,
      deviation: field.isLogarithm ? Math.expm1(off) : off / Math.abs(values[k]!),
      factor,
    });
  });
}

/** What each stencil says of each node: the difference, and what is usual there. */
interface Said {
  readonly difference: Float64Array;
  readonly usual: Float64Array;
}

/** The likely error of each entry and how far it stands out: 0 where the stencils do not agree on one. */
function scoresOf(field: Field, stencils: readonly (readonly [LeftOut, LeftOut])[], m: number, n: number) {
  const said = stencils.flatMap(([u, v]) => [saidBy(field, u, m, n, n, 1), saidBy(field, v, n, m, 1, n)]);
  const score = new Float64Array(m * n);
  const shift = new Float64Array(m * n);
  // An error hides what is usual from its neighbours on a line: they may score as high, but one direction alone speaks for them.
  const rank = new Float64Array(m * n);
  for (let k = 0; k < m * n; k++) {
    for (let pair = 0; pair < said.length; pair += 2) {
      const [a, b] = [said[pair]!, said[pair + 1]!];
      const [wa, wb] = [1 / a.usual[k]! ** 2, 1 / b.usual[k]! ** 2];
      const mean = (a.difference[k]! * wa + b.difference[k]! * wb) / (wa + wb);
      const size = Math.abs(mean) * Math.sqrt(wa + wb);
      if (!(size > score[k]!)) continue;
      if (!said.every((one) => Math.abs(one.difference[k]! - mean) <= agreement * Math.abs(mean) + 2 * one.usual[k]!))
        continue;
      score[k] = size;
      shift[k] = mean;
      rank[k] = size + Math.min(Math.abs(a.difference[k]!) / a.usual[k]!, Math.abs(b.difference[k]!) / b.usual[k]!);
    }
  }
  return { score, shift, rank };
}

function saidBy(
  { values, isLogarithm, digit }: Field,
  stencil: LeftOut,
  count: number,
  lines: number,
  stride: number,
  step: number,
): Said {
  const difference = differences(values, stencil, count, lines, stride, step);
  const most = usual(difference, count, lines, stride, step);
  for (let i = 0; i < count; i++) {
    const factor = stencil.factor[i]!;
    for (let j = 0; j < lines; j++) {
      const k = i * stride + j * step;
      const size = Math.abs(values[k]!);
      const rounding = isLogarithm ? digit + Number.EPSILON * (1 + size) : (digit + Number.EPSILON) * size;
      difference[k]! *= factor;
      most[k] = Math.max(most[k]!, rounding * stencil.noise[i]!) * Math.abs(factor) || Number.MIN_VALUE;
    }
  }
  return { difference, usual: most };
}

/** D at each node: `count` nodes a line in steps of `stride`, `lines` lines in steps of `step`. */
function differences(
  values: Float64Array,
  { width, first, weights }: LeftOut,
  count: number,
  lines: number,
  stride: number,
  step: number,
): Float64Array {
  const out = new Float64Array(count * lines);
  for (let i = 0; i < count; i++) {
    for (let j = 0; j < lines; j++) {
      let sum = 0;
      for (let k = 0; k < width; k++) sum += weights[i * width + k]! * values[(first[i]! + k) * stride + j * step]!;
      out[i * stride + j * step] = sum;
    }
  }
  return out;
}

/** The largest |D| near a node on the lines beside it. */
function usual(d: Float64Array, count: number, lines: number, stride: number, step: number): Float64Array {
  const near = new Float64Array(d.length);
  for (let j = 0; j < lines; j++) {
    for (let i = 0; i < count; i++) {
      let most = 0;
      for (let k = Math.max(i - reach, 0); k <= Math.min(i + reach, count - 1); k++) {
        most = Math.max(most, Math.abs(d[k * stride + j * step]!));
      }
      near[i * stride + j * step] = most;
    }
  }
  const out = new Float64Array(d.length);
  for (let j = 0; j < lines; j++) {
    const from = Math.min(Math.max(j - linesBeside / 2, 0), lines - 1 - linesBeside);
    for (let i = 0; i < count; i++) {
      let most = 0;
      for (let k = from; k <= from + linesBeside; k++) {
        if (k !== j) most = Math.max(most, near[i * stride + k * step]!);
      }
      out[i * stride + j * step] = most;
    }
  }
  return out;
}

function leftOut(axis: Float64Array, widest: number): LeftOut {
  const count = axis.length;
  const width = Math.min(widest, count);
  const first = new Int32Array(count);
  const weights = new Float64Array(count * width);
  const factor = new Float64Array(count);
  const noise = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const start = Math.min(Math.max(i - (width >> 1), 0), count - width);
    first[i] = start;
    for (let a = 0; a < width; a++) {
      let product = 1;
      for (let b = 0; b < width; b++) if (b !== a) product *= axis[start + a]! - axis[start + b]!;
      weights[i * width + a] = 1 / product;
      noise[i]! += Math.abs(1 / product);
    }
    factor[i] = 1 / weights[i * width + i - start]!;
  }
  return { width, first, weights, factor, noise };
}

/** True where no node of the same lines within a stencil ranks higher: an error shows at its neighbours too. */
function isPeak(rank: Float64Array, k: number, m: number, n: number): boolean {
  const [i, j] = [Math.floor(k / n), k % n];
  const wide = widths[1] - 1;
  for (let a = Math.max(i - wide, 0); a <= Math.min(i + wide, m - 1); a++) {
    if (rank[a * n + j]! > rank[k]!) return false;
  }
  for (let b = Math.max(j - wide, 0); b <= Math.min(j + wide, n - 1); b++) {
    if (rank[i * n + b]! > rank[k]!) return false;
  }
  return true;
}

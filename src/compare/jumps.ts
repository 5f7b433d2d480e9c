/**
 * Discontinuities: steps of the grid across which the difference of the two does not shrink when the step is halved.
 *
 * Along every row and column, steps where the difference bends more than next to them, and steps across which a phase
 * changes, are halved towards the place that is least like a straight line. A smooth function loses half of its change
 * each time; a jump keeps it. A jump smaller than the bends of a smooth difference on the grid may stay unseen.
 */
import type { QuantityName } from "../thermodynamics/quantities.js";
import { type Answer, isState } from "./answers.js";
import { relativeDifference, type Zeros } from "./difference.js";
import type { Jump } from "./result.js";

/** Steps looked at per quantity and direction: the most suspicious. */
const mostSteps = 24;
/** Halvings: the step shrinks by a factor of 1.7e7. */
const halvings = 24;
/** Jumps below are rounding, and what an inverse step leaves. */
const least = 1e-9;

/** What jumps are sought in. */
export interface JumpSearch {
  readonly densities: readonly number[];
  readonly temperatures: readonly number[];
  readonly answers: readonly [readonly Answer[], readonly Answer[]];
  /** Both answers at any point. */
  readonly ask: (density: number, temperature: number) => readonly [Answer, Answer];
  readonly zeros: Zeros;
}

/** A step of the grid and how suspicious it is. */
interface Step {
  readonly from: number;
  readonly to: number;
  readonly bend: number;
}

/** The jumps of a quantity; undefined where none was found. */
export function jumpOf(name: QuantityName, difference: Float64Array, search: JumpSearch): Jump | undefined {
  const { densities, temperatures } = search;
  const suspects = [
    ...linesOf(densities.length, temperatures.length, 1),
    ...linesOf(temperatures.length, densities.length, densities.length),
  ].map((line) => suspectsOf(line, difference, search));
  let found: (Jump & { readonly steps: number }) | undefined;
  let steps = 0;
  for (const { from, to } of suspects
    .flat()
    .sort((a, b) => b.bend - a.bend)
    .slice(0, 2 * mostSteps)) {
    const jump = halve(name, from, to, search);
    if (jump === undefined) continue;
    steps += 1;
    if (found === undefined || jump.size > found.size) found = jump;
  }
  return found === undefined ? undefined : { ...found, steps };
}

/** Rows of the grid along each line of one direction. */
function linesOf(length: number, lines: number, stride: number): number[][] {
  const between = stride === 1 ? length : 1;
  return Array.from({ length: lines }, (_, k) => Array.from({ length }, (_, i) => k * between + i * stride));
}

function suspectsOf(line: readonly number[], difference: Float64Array, search: JumpSearch): Step[] {
  const changes = line.slice(1).map((row, i) => difference[row]! - difference[line[i]!]!);
  const bends = changes.map((change, i) => {
    const beside = [changes[i - 1], changes[i + 1]].filter(
      (one): one is number => one !== undefined && !Number.isNaN(one),
    );
    const mean = beside.reduce((sum, one) => sum + one, 0) / beside.length;
    return beside.length === 0 ? Number.NaN : (Math.abs(change - mean) * beside.length) / 2; // at an end, half a bend
  });
  const sorted = bends.filter((one) => !Number.isNaN(one)).sort((a, b) => a - b);
  const typical = sorted[Math.floor(sorted.length / 4)] ?? 0; // a jump bends three steps of a short line
  return bends.flatMap((bend, i) => {
    const [from, to] = [line[i]!, line[i + 1]!];
    if (search.temperatures[Math.floor(from / search.densities.length)] === 0) return [];
    const isTop =
      bend >= 0.99 * (bends[i - 1] || 0) && bend >= 0.99 * (bends[i + 1] || 0) && bend > 4 * typical && bend > least;
    const isPhase = search.answers.some((list) => phaseOf(list[from]!) !== phaseOf(list[to]!));
    const isKnown = !Number.isNaN(changes[i]!);
    return isKnown && (isTop || isPhase) ? [{ from, to, bend: Math.max(bend || 0, Math.abs(changes[i]!)) }] : [];
  });
}

const phaseOf = (answer: Answer): number | undefined => (isState(answer) ? answer.crystalFraction : undefined);

/** A point as a share of the step, and what is there. */
interface Sample {
  readonly share: number;
  readonly density: number;
  readonly temperature: number;
  readonly difference: number;
  readonly answers: readonly [Answer, Answer];
}

/** Halves a step towards a jump; undefined where there is none. */
function halve(name: QuantityName, from: number, to: number, search: JumpSearch): Jump | undefined {
  const { densities, temperatures, ask, zeros } = search;
  const endsOf = (row: number): readonly [number, number] => [
    densities[row % densities.length]!,
    temperatures[Math.floor(row / densities.length)]!,
  ];
  const [start, end] = [endsOf(from), endsOf(to)];
  const at = (share: number): Sample => {
    const [density, temperature] = [0, 1].map((k) => partWay(start[k]!, end[k]!, share)) as [number, number];
    const answers = ask(density, temperature);
    const [a, b] = answers;
    const difference = isState(a) && isState(b) ? relativeDifference(name, a, b, zeros) : Number.NaN;
    return { share, density, temperature, difference, answers };
  };
  const between = (p: Sample, q: Sample): Sample => at((p.share + q.share) / 2);
  /** How unlike a straight line. */
  const bend = (p: Sample, m: Sample, q: Sample): number => Math.abs(m.difference - (p.difference + q.difference) / 2);

  const ends = [at(0), at(1)] as const;
  let [low, high] = ends;
  const whole = Math.abs(high.difference - low.difference);
  let middle = between(low, high);
  for (let i = 0; i < halvings; i++) {
    const [left, right] = [between(low, middle), between(middle, high)];
    const isLeft = bend(low, left, middle) >= bend(middle, right, high);
    if (isLeft) [high, middle] = [middle, left];
    else [low, middle] = [middle, right];
    if (Number.isNaN(middle.difference)) return undefined;
  }
  const size = Math.abs(high.difference - low.difference);
  const smooth = 100 * whole * 2 ** -halvings;
  if (!(size > Math.max(least, smooth))) return undefined;
  const [first, second] = ([0, 1] as const).map((k) => changeOf(name, low.answers[k], high.answers[k])) as [
    number,
    number,
  ];
  const jumps = ([0, 1] as const).map((k) => {
    const smoothly = 100 * changeOf(name, ends[0].answers[k], ends[1].answers[k]) * 2 ** -halvings;
    return (k === 0 ? first : second) > Math.max(least, smoothly);
  });
  const of = jumps[0] && jumps[1] ? "both" : first > second ? "first" : "second";
  return { quantity: name, of, size, density: low.density, temperature: low.temperature, steps: 1 };
}

/** Relative change of a quantity of one of the two. */
function changeOf(name: QuantityName, from: Answer, to: Answer): number {
  if (!isState(from) || !isState(to)) return Number.NaN;
  return Math.abs(relativeDifference(name, from, to, { energy: 0, entropy: 0 }));
}

/** Between two numbers at equal ratios; exact where they are one, and at the ends. */
function partWay(from: number, to: number, share: number): number {
  if (from === to || share === 0) return from;
  return share === 1 ? to : from * (to / from) ** share;
}

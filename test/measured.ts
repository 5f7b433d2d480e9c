/** Collects errors by name and place, and states bounds on them: a failure prints the worst place and its error. */
import { expect } from "vitest";

export class Measured {
  private readonly all = new Map<string, { error: number; where: string }[]>();

  /** Records one error; NaN counts as infinite. */
  add(name: string, error: number, where: string): void {
    const list = this.all.get(name) ?? [];
    list.push({ error: Number.isNaN(error) ? Number.POSITIVE_INFINITY : error, where });
    this.all.set(name, list);
  }

  /** Records |actual - expected| / scale, scale |expected| by default. */
  compare(name: string, actual: number, expected: number, where: string, scale: number = Math.abs(expected)): void {
    const difference = Math.abs(actual - expected);
    this.add(name, difference === 0 ? 0 : difference / scale, `${where}: ${actual} for ${expected}`);
  }

  /** Names under which something is recorded. */
  names(): string[] {
    return [...this.all.keys()];
  }

  /** Number of errors recorded under a name. */
  count(name: string): number {
    return this.all.get(name)?.length ?? 0;
  }

  /** The largest error of a name and its place. */
  worst(name: string): { error: number; where: string } {
    const list = this.all.get(name);
    if (list === undefined) throw new Error(`nothing measured under ${name}`);
    return list.reduce((a, b) => (b.error > a.error ? b : a));
  }

  /** The median error of a name. */
  median(name: string): number {
    const errors = (this.all.get(name) ?? []).map(({ error }) => error).sort((a, b) => a - b);
    return errors[errors.length >> 1] ?? Number.NaN;
  }

  /** Asserts the largest and, if given, the median error. */
  expectBelow(name: string, max: number, median?: number): void {
    const { error, where } = this.worst(name);
    expect(error, `${name} worst at ${where}`).toBeLessThanOrEqual(max);
    if (median !== undefined) expect(this.median(name), `${name}, median`).toBeLessThanOrEqual(median);
  }

  /** One line per name: max, median, count, worst place. */
  table(): string {
    const rows = [...this.all.keys()].map((name) => {
      const { error, where } = this.worst(name);
      return `${name}: max ${error.toExponential(1)}, median ${this.median(name).toExponential(1)}, ${this.count(name)} values; worst ${where}`;
    });
    return rows.join("\n");
  }
}

/** Deterministic uniform numbers in (0, 1): Park & Miller 1988, Commun. ACM 31, 1192 (multiplier 48271). */
export function uniform(seed: number): () => number {
  let state = seed % 2147483647;
  return () => {
    state = (state * 48271) % 2147483647;
    return state / 2147483647;
  };
}

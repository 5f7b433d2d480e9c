/**
 * Truncated Taylor series in two variables over decimal numbers: derivatives of a formula without deriving it.
 *
 * A formula F(rho, T) is evaluated at rho (1 + u), T (1 + v); the coefficient of u^i v^j times i! j! is then
 * rho^i T^j d^(i+j)F/(d rho^i d T^j). Kept are i + j <= 2 (6 coefficients), or i + j <= 3 and (2,2) (11): sets with every
 * power below each of theirs, so products need nothing outside. Functions of a series go by their own Taylor
 * coefficients. (Automatic differentiation; Griewank & Walther 2008, Evaluating Derivatives, chapter 13.)
 */
import type { Decimal } from "decimal.js";
import { type Arithmetic, positivePower } from "./exact.js";

/** Powers of u and v of the coefficients, in their order. */
const powers: readonly (readonly [u: number, v: number])[] = [
  ...([[0, 0], [1, 0], [0, 1], [2, 0], [1, 1], [0, 2]] as const), // biome-ignore format: one order a line
  ...([[3, 0], [2, 1], [1, 2], [0, 3], [2, 2]] as const), // biome-ignore format: one order a line
];

/** Number of coefficients: 6 up to second order, 11 with the third and (2,2). */
export type SeriesLength = 6 | 11;

/** For each coefficient of a product the pairs of coefficients that make it. */
const pairs: readonly (readonly (readonly [number, number])[])[] = powers.map(([u, v]) =>
  powers.flatMap(([a, b], i): [number, number][] => {
    const j = powers.findIndex(([c, d]) => a + c === u && b + d === v);
    return j < 0 ? [] : [[i, j]];
  }),
);

/** A number without derivatives: what a series may be combined with. */
type Scalar = Decimal | number | string;

/** Taylor coefficients f, f', f''/2, f'''/6, f''''/24 of a function of one variable. */
type Coefficients = readonly [Decimal, Decimal, Decimal, Decimal, Decimal];

/** A truncated series; immutable. */
export class Series {
  readonly D: Arithmetic;
  /** Coefficients in the order of {@link powers}. */
  readonly c: readonly Decimal[];

  constructor(D: Arithmetic, c: readonly Decimal[]) {
    this.D = D;
    this.c = c;
  }

  plus(other: Series | Scalar): Series {
    if (!(other instanceof Series)) return this.with(this.c[0]!.plus(other));
    return new Series(
      this.D,
      this.c.map((one, i) => one.plus(other.c[i]!)),
    );
  }

  minus(other: Series | Scalar): Series {
    return this.plus(other instanceof Series ? other.neg() : new this.D(other).neg());
  }

  neg(): Series {
    return new Series(
      this.D,
      this.c.map((one) => one.neg()),
    );
  }

  times(other: Series | Scalar): Series {
    if (!(other instanceof Series)) {
      const factor = new this.D(other);
      return new Series(
        this.D,
        this.c.map((one) => (one.isZero() ? one : one.times(factor))),
      );
    }
    const zero = new this.D(0);
    const product = this.c.map((_, k) => {
      let sum = zero;
      for (const [i, j] of pairs[k]!) {
        const a = this.c[i]!;
        const b = other.c[j]!;
        if (!a.isZero() && !b.isZero()) sum = sum.plus(a.times(b));
      }
      return sum;
    });
    return new Series(this.D, product);
  }

  div(other: Series | Scalar): Series {
    return other instanceof Series ? this.times(other.pow(-1)) : this.times(new this.D(1).div(other));
  }

  /** this^power; the value must be positive unless the power is a whole number. */
  pow(power: Scalar): Series {
    const [D, x] = [this.D, this.c[0]!];
    const p = new D(power);
    const out = [positivePower(x, p)];
    for (let k = 1; k <= 4; k++) out.push(out[k - 1]!.times(p.minus(k - 1)).div(x.times(k)));
    return this.through(out as unknown as Coefficients);
  }

  sqrt(): Series {
    return this.pow("0.5");
  }

  exp(): Series {
    const f = this.c[0]!.exp();
    return this.through([f, f, f.div(2), f.div(6), f.div(24)]);
  }

  ln(): Series {
    const inverse = new this.D(1).div(this.c[0]!);
    return this.through(this.integral(this.c[0]!.ln(), reciprocals(inverse)));
  }

  /** d/dx = (1 + x^2)^(-1). */
  atan(): Series {
    return this.through(this.integral(this.c[0]!.atan(), this.powerOfCircle(-1)));
  }

  /** d/dx = (1 + x^2)^(-1/2). */
  asinh(): Series {
    return this.through(this.integral(this.c[0]!.asinh(), this.powerOfCircle("-0.5")));
  }

  /** (1 - e^(-2x))/(1 + e^(-2x)). */
  tanh(): Series {
    const decay = this.times(-2).exp();
    return decay.neg().plus(1).div(decay.plus(1));
  }

  /** A function of this series from its Taylor coefficients at the value. */
  private through(f: Coefficients): Series {
    const step = this.with(new this.D(0));
    const highest = this.c.length === 6 ? 2 : 4; // step^5 has no coefficient that is kept
    let sum = this.constant(f[highest]!);
    for (let k = highest - 1; k >= 0; k--) sum = sum.times(step).plus(f[k]!);
    return sum;
  }

  /** Taylor coefficients of a function from its value and those of its derivative. */
  private integral(value: Decimal, derivative: readonly Decimal[]): Coefficients {
    return [value, ...[1, 2, 3, 4].map((k) => derivative[k - 1]!.div(k))] as unknown as Coefficients;
  }

  /** First four Taylor coefficients in e of (1 + (x + e)^2)^p, by the recurrence for a power of a polynomial. */
  private powerOfCircle(power: Scalar): Decimal[] {
    const [D, x] = [this.D, this.c[0]!];
    const p = new D(power);
    const polynomial = [x.times(x).plus(1), x.times(2), new D(1)];
    const out = [positivePower(polynomial[0]!, p)];
    for (let n = 1; n < 4; n++) {
      let sum = new D(0);
      for (let k = 1; k <= Math.min(n, 2); k++) {
        sum = sum.plus(
          p
            .times(k)
            .minus(n - k)
            .times(polynomial[k]!)
            .times(out[n - k]!),
        );
      }
      out.push(sum.div(polynomial[0]!.times(n)));
    }
    return out;
  }

  /** The same with another value. */
  private with(value: Decimal): Series {
    return new Series(this.D, [value, ...this.c.slice(1)]);
  }

  private constant(value: Decimal): Series {
    const zero = new this.D(0);
    return new Series(
      this.D,
      this.c.map((_, i) => (i === 0 ? value : zero)),
    );
  }
}

/** First four Taylor coefficients of 1/x from 1/x. */
function reciprocals(inverse: Decimal): Decimal[] {
  const out = [inverse];
  for (let k = 1; k < 4; k++) out.push(out[k - 1]!.times(inverse).neg());
  return out;
}

/** density (1 + u) and temperature (1 + v). */
export function variables(
  D: Arithmetic,
  length: SeriesLength,
  density: Decimal,
  temperature: Decimal,
): readonly [Series, Series] {
  const zero = new D(0);
  const variable = (value: Decimal, slot: number): Series =>
    new Series(
      D,
      powers.slice(0, length).map((_, i) => (i === 0 || i === slot ? value : zero)),
    );
  return [variable(density, 1), variable(temperature, 2)];
}

/** Coefficients times i! j!: the natural derivatives rho^i T^j d^(i+j)F/(d rho^i d T^j). */
export function naturalDerivatives({ c }: Series): readonly Decimal[] {
  const factorial = [1, 1, 2, 6];
  return c.map((one, k) => one.times(factorial[powers[k]![0]]! * factorial[powers[k]![1]]!));
}

/** The sum of at least one series. */
export function sumOf(series: readonly Series[]): Series {
  return series.reduce((sum, one) => sum.plus(one));
}

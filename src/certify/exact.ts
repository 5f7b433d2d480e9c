/**
 * Inputs of the reference evaluation, taken exactly.
 *
 * An IEEE double means its exact binary value, not its shortest decimal print: at eta = -550 the difference between
 * the two would look like an error of 5e-14. A string means the decimal it shows, or a fraction "26/56".
 */
import { Decimal } from "decimal.js";
import { FermistateError } from "../errors.js";

/** A number without rounding: an IEEE double, a decimal string ("0.7", "1e-15"), a fraction ("26/56") or a Decimal. */
export type ExactNumber = number | string | Decimal;

/** decimal.js at one working precision. */
export type Arithmetic = Decimal.Constructor;

const arithmetics = new Map<number, Arithmetic>();

/** decimal.js with `precision` significant digits, rounding half even, shared by all callers of that precision. */
export function arithmetic(precision: number): Arithmetic {
  let found = arithmetics.get(precision);
  if (found === undefined) {
    found = Decimal.clone({ precision, rounding: Decimal.ROUND_HALF_EVEN, defaults: true });
    arithmetics.set(precision, found);
  }
  return found;
}

const decimalPattern = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d{1,6})?$/i;

/**
 * `value` in the arithmetic `D`, rounded once to its precision.
 *
 * @throws FermistateError `not-a-number` for NaN, infinities and strings that are no decimal number or fraction.
 */
export function exactDecimal(D: Arithmetic, argument: string, value: ExactNumber): Decimal {
  if (typeof value === "number" && Number.isFinite(value)) return fromDouble(D, value);
  if (typeof value === "string") return fromText(D, argument, value);
  if (Decimal.isDecimal(value) && value.isFinite()) return new D(value).toSignificantDigits(D.precision);
  throw notANumber(argument, value);
}

/** Scaling by two is exact, so the loop ends with an integer mantissa. */
function fromDouble(D: Arithmetic, value: number): Decimal {
  let mantissa = value;
  let halvings = 0;
  while (!Number.isInteger(mantissa)) {
    mantissa *= 2;
    halvings += 1;
  }
  return new D(BigInt(mantissa).toString()).div(D.pow(2, halvings));
}

/**
 * sqrt(value) by Newton's method from the double, s <- s + (value - s^2)/(2 s_0): sixteen more digits each step and no
 * division, a third of the time of decimal.js, whose last digit may differ. Falls back to it beyond the range of doubles.
 */
export function squareRoot(value: Decimal): Decimal {
  const D = value.constructor as Arithmetic;
  const near = Math.sqrt(Number(value));
  if (!(near > 1e-150 && near < 1e150)) return value.sqrt();
  const half = new D(0.5 / near);
  let root = new D(near);
  for (let digits = 15; digits < D.precision; digits += 15) root = root.plus(value.minus(root.times(root)).times(half));
  return root;
}

/** value^power for a positive value; halves of whole numbers go by {@link squareRoot}, ten times as fast as a logarithm. */
export function positivePower(value: Decimal, power: Decimal): Decimal {
  const twice = power.times(2);
  if (power.isInteger() || !twice.isInteger()) return value.pow(power);
  return value.pow(power.minus("0.5")).times(squareRoot(value));
}

function fromText(D: Arithmetic, argument: string, text: string): Decimal {
  const parts = text.trim().split("/");
  if (parts.length > 2 || !parts.every((part) => decimalPattern.test(part))) throw notANumber(argument, text);
  const numerator = new D(parts[0]!);
  if (parts.length === 1) return numerator.toSignificantDigits(D.precision);
  const denominator = new D(parts[1]!);
  if (denominator.isZero()) throw notANumber(argument, text);
  return numerator.div(denominator);
}

function notANumber(argument: string, given: unknown): FermistateError {
  return new FermistateError("not-a-number", {
    argument,
    given,
    allowed: 'a finite number, a decimal string such as "0.7" or "1e-15", or a fraction such as "26/56"',
  });
}

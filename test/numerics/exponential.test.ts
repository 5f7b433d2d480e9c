/** The inner-loop exponential against decimal.js at 150 digits. */
import { Decimal } from "decimal.js";
import { expect, test } from "vitest";
import { squareErrors } from "../../src/numerics/exact-product.js";
import {
  EXPONENTIAL_OFFSET,
  EXPONENTIAL_STEPS,
  exponentialLow,
  exponentialTable,
} from "../../src/numerics/exponential.js";
import { COSINE, cosineAndSine, SINE, TURN } from "../../src/numerics/turn.js";
import { uniform } from "../measured.js";

const Precise = Decimal.clone({ precision: 150 });

/** The exact binary value of a double (new Decimal(number) takes its shortest decimal form). */
function exactly(value: number): Decimal {
  const bits = new DataView(new ArrayBuffer(8));
  bits.setFloat64(0, Math.abs(value));
  const word = bits.getBigUint64(0);
  const mantissa = (word & 0xfffffffffffffn) | 0x10000000000000n;
  const magnitude = new Precise(mantissa.toString()).times(new Precise(2).pow(Number(word >> 52n) - 1075));
  return value === 0 ? new Precise(0) : value < 0 ? magnitude.neg() : magnitude;
}

test("the table is rounded to nearest, and its low part says what was lost", () => {
  for (let k = 0; k < exponentialTable.length; k += 13) {
    const exact = new Precise(EXPONENTIAL_OFFSET - k).div(EXPONENTIAL_STEPS).exp();
    expect(exponentialTable[k]).toBe(exact.toNumber());
    const lost = exact.div(exactly(exponentialTable[k]!)).minus(1).toNumber();
    expect(Math.abs(exponentialLow[k]! - lost)).toBeLessThan(1e-28);
  }
});

const turnAngle = Precise.acos(-1).times(2);

test("cos and sin of a turn: 1 ulp of 1, and full relative accuracy of the sine near zero", () => {
  const random = uniform(3);
  const record = new Float64Array(3);
  for (let i = 0; i < 300; i++) {
    const turn = i % 2 === 0 ? random() - 0.5 : (random() - 0.5) * 10 ** (-20 * random());
    record[TURN] = turn;
    cosineAndSine(record);
    const angle = exactly(turn).times(turnAngle);
    expect(Math.abs(record[COSINE]! - angle.cos().toNumber())).toBeLessThan(4e-16);
    const sine = angle.sin().toNumber();
    // Where the table's direction is not 0 the error is one of the whole vector, 1.5 ulp of 1.
    const bound = Math.abs(turn) < 1 / 128 ? 4e-16 * Math.abs(sine) : 4e-16;
    expect(Math.abs(record[SINE]! - sine)).toBeLessThanOrEqual(bound);
  }
  record[TURN] = 0;
  cosineAndSine(record);
  expect([...record]).toEqual([0, 1, 0]);
});

test("the error of a square is exact", () => {
  const random = uniform(4);
  for (let i = 0; i < 500; i++) {
    const a = (random() - 0.5) * 10 ** (20 * (random() - 0.5));
    const record = Float64Array.of(a, 0);
    squareErrors(record, 1);
    const exact = exactly(a)
      .pow(2)
      .minus(exactly(a * a));
    expect(record[1]).toBe(exact.toNumber());
  }
});

/** Inputs are taken exactly: IEEE 754 doubles by their binary value, decimals and fractions as written. */
import { describe, expect, test } from "vitest";
import { arithmetic, exactDecimal } from "../../src/certify/exact.js";
import { isFermistateError } from "../../src/errors.js";

const D = arithmetic(800);
const value = (input: number | string): string => exactDecimal(D, "x", input).toFixed();

describe("exactDecimal", () => {
  test("a double is its binary value (IEEE 754-2019, binary64)", () => {
    // 0.1 = 3602879701896397/2^55 and the smallest subnormal 2^-1074
    expect(value(0.1)).toBe("0.1000000000000000055511151231257827021181583404541015625");
    expect(value(-0.1)).toBe("-0.1000000000000000055511151231257827021181583404541015625");
    expect(exactDecimal(D, "x", 5e-324).eq(D.pow(2, -1074))).toBe(true);
    expect(value(1e23)).toBe("99999999999999991611392");
    expect(value(0)).toBe("0");
  });

  test("a string is the decimal or the fraction it shows", () => {
    expect(value("0.1")).toBe("0.1");
    expect(value(" 1e-15 ")).toBe("0.000000000000001");
    expect(exactDecimal(arithmetic(20), "x", "26/56").toString()).toBe("0.46428571428571428571");
  });

  test.each([Number.NaN, Number.POSITIVE_INFINITY, "", "abc", "1/2/3", "1/0", "0x10", "1e", "Infinity"])(
    "%j is refused",
    (given) => {
      try {
        exactDecimal(D, "x", given);
        expect.unreachable();
      } catch (error) {
        expect(isFermistateError(error) && error.code).toBe("not-a-number");
      }
    },
  );
});

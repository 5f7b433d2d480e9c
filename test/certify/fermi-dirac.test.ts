/**
 * Generalised Fermi-Dirac integrals against closed forms and against values computed independently.
 *
 * fermi-dirac-and-pair-gas.json: float128 tanh-sinh quadrature, 30 digits, 30 of its values confirmed by mpmath
 * Gauss-Legendre at 40 digits. All 248 values agree with referenceFermiDirac at 30 digits to 4.2e-30; eight rows
 * are run here.
 */
import { readFileSync } from "node:fs";
import { Decimal } from "decimal.js";
import { describe, expect, test } from "vitest";
import { referenceFermiDirac } from "../../src/certify/index.js";
import { isFermistateError } from "../../src/errors.js";
import { Measured } from "../measured.js";

const fixture = JSON.parse(
  readFileSync(new URL("../fixtures/fermi-dirac-and-pair-gas.json", import.meta.url), "utf8"),
) as { readonly F: readonly Record<string, string>[] };
const D = Decimal.clone({ precision: 60 });
const orders = { "F_-1/2": -0.5, "F_1/2": 0.5, "F_3/2": 1.5, "F_5/2": 2.5 };

test("eight rows of 62: eta -700 to 3e6, beta 0 to 5000", () => {
  // the last two bring the branch point x = -2/beta close to x = 0, where x^(-1/2) needs finer rules
  const places = ["-36 0", "-36 1e-2", "0 1e-2", "0.5 100", "35 0", "300 1", "-700 5000", "3e6 1000"];
  const rows = fixture.F.filter((row) => places.includes(`${row["eta"]} ${row["beta"]}`));
  const measured = new Measured();
  for (const row of rows) {
    for (const [name, k] of Object.entries(orders)) {
      const { value, relativeError } = referenceFermiDirac(k, row["eta"]!, row["beta"]!, 30);
      const where = `${name}(${row["eta"]}, ${row["beta"]})`;
      measured.add("difference", value.div(row[name]!).minus(1).abs().toNumber(), where);
      measured.add("estimate", relativeError, where);
    }
  }
  expect(measured.count("difference")).toBe(32);
  measured.expectBelow("difference", 5e-30); // the last printed digit
  measured.expectBelow("estimate", 1e-30);
});

describe("closed forms", () => {
  test("F_0(eta, 0) = ln(1 + e^eta) (elementary)", () => {
    for (const eta of [-40, -1, 0, 0.125, 3, 50]) {
      const { value } = referenceFermiDirac(0, eta, 0, 30);
      const exact = new D(eta).exp().plus(1).ln();
      expect(value.div(exact).minus(1).abs().toNumber()).toBeLessThan(3e-30);
    }
  });

  test("F_1(0, 0) = pi^2/12 and F_3(0, 0) = 7 pi^4/120 (DLMF 25.12.11 with 25.5.3: eta function at 2 and 4)", () => {
    const square = D.acos(-1).pow(2);
    const first = new D(referenceFermiDirac(1, 0, 0, 40).value);
    const third = new D(referenceFermiDirac(3, 0, 0, 40).value);
    expect(first.times(12).div(square).minus(1).abs().toNumber()).toBeLessThan(1e-40);
    expect(third.times(120).div(7).div(square.pow(2)).minus(1).abs().toNumber()).toBeLessThan(1e-40);
  });
});

test.each([
  [0.25, 0, 0, 25, "out-of-range"],
  [-1, 0, 0, 25, "out-of-range"],
  [0.5, 2e12, 0, 25, "out-of-range"],
  [0.5, 0, -1, 25, "out-of-range"],
  [0.5, Number.NaN, 0, 25, "not-a-number"],
  [0.5, 0, 0, 61, "invalid-option"],
])("F_%d(%d, %d) at %d digits: %s", (k, eta, beta, digits, code) => {
  try {
    referenceFermiDirac(k, eta, beta, digits);
    expect.unreachable();
  } catch (error) {
    expect(isFermistateError(error) && error.code).toBe(code);
  }
});

/** Polytropes and piecewise polytropes: constants, closed forms, continuity, inversion, refusals. */
import { describe, expect, test } from "vitest";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
} from "../../src/barotropes/barotrope.js";
import { type PiecewisePolytropeOptions, piecewisePolytrope } from "../../src/barotropes/piecewise-polytrope.js";
import { degenerateElectrons, polytrope } from "../../src/barotropes/polytrope.js";
import { atomicMassConstant, electronMass, planckConstant, speedOfLight } from "../../src/constants.js";
import { isFermistateError } from "../../src/errors.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { composition } from "../../src/matter/composition.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { Measured } from "../measured.js";

const core = composition({ C12: 0.5, O16: 0.5 });

const codeOf = (action: () => unknown): string => {
  try {
    action();
  } catch (error) {
    return isFermistateError(error) ? `${error.code} ${error.argument}` : String(error);
  }
  return "none";
};

/** Inverts P and w at densities over a range; errors as those of P and w. */
function invert(measured: Measured, name: string, matter: Barotrope, densities: readonly number[]): void {
  const record = new Float64Array(BAROTROPE_LENGTH);
  const back = new Float64Array(BAROTROPE_LENGTH);
  for (const density of densities) {
    record[BAROTROPE_DENSITY] = density;
    matter.fillAtDensity(record);
    back[BAROTROPE_PRESSURE] = record[BAROTROPE_PRESSURE]!;
    matter.fillAtPressure(back);
    measured.compare(`${name}: P`, back[BAROTROPE_DENSITY]!, density, String(density));
    back[BAROTROPE_POTENTIAL] = record[BAROTROPE_POTENTIAL]!;
    matter.fillAtPotential(back);
    measured.compare(`${name}: w`, back[BAROTROPE_DENSITY]!, density, String(density));
    measured.compare(`${name}: e`, back[BAROTROPE_ENERGY]!, record[BAROTROPE_ENERGY]!, String(density));
  }
}

const decades = (low: number, high: number): number[] =>
  Array.from({ length: Math.round((high - low) * 7.3) }, (_, i) => 10 ** (low + i / 7.3));

describe("the two limits of cold electrons", () => {
  test("the constants are the textbook ones", () => {
    // Shapiro & Teukolsky 1983, section 2.3 (1.0036e13, 1.2435e15, from memory), recomputed with CODATA 2022 outside this library.
    const { nonRelativistic, ultraRelativistic } = degenerateElectrons(composition({ H1: 1 }));
    expect(Math.abs(nonRelativistic.constant / 10035957762882.13 - 1)).toBeLessThan(4e-16);
    expect(Math.abs(ultraRelativistic.constant / 1243497954702101.0 - 1)).toBeLessThan(4e-16);
    // (3/pi)^(2/3) h^2/(20 m_e m_u^(5/3)) and (3/pi)^(1/3) h c/(8 m_u^(4/3)): Chandrasekhar 1939, chapter 10.
    const k1 = ((3 / Math.PI) ** (2 / 3) * planckConstant ** 2) / (20 * electronMass * atomicMassConstant ** (5 / 3));
    const k2 = ((3 / Math.PI) ** (1 / 3) * planckConstant * speedOfLight) / (8 * atomicMassConstant ** (4 / 3));
    expect(Math.abs(nonRelativistic.constant / k1 - 1)).toBeLessThan(2e-14); // powers of tiny numbers
    expect(Math.abs(ultraRelativistic.constant / k2 - 1)).toBeLessThan(2e-14);
  });

  test("they are the limits of the gas, from above", () => {
    const gas = combine(electronPositronGas());
    const { nonRelativistic, ultraRelativistic } = degenerateElectrons(core);
    const thin = gas.state(1e-6, 0, core);
    const x2 = thin.relativityParameter ** 2;
    const low = polytrope(nonRelativistic).state(1e-6).pressure * (1 - (5 / 14) * x2);
    expect(Math.abs(thin.pressure / low - 1)).toBeLessThan(3e-15);
    const dense = gas.state(1e14, 0, core);
    const high = polytrope(ultraRelativistic).state(1e14).pressure * (1 - 1 / dense.relativityParameter ** 2);
    expect(Math.abs(dense.pressure / high - 1)).toBeLessThan(1e-8);
    // At x = 1 by the closed form: (15/24)(3 asinh 1 - 2^(1/2)) of the non-relativistic one, which is the smaller.
    const middle = 2 * 973932.1720105553;
    const share = gas.state(middle, 0, core).pressure / polytrope(nonRelativistic).state(middle).pressure;
    expect(share).toBeCloseTo((15 / 24) * (3 * Math.asinh(1) - Math.SQRT2), 13);
  });

  test("matter without electrons has none", () => {
    expect(codeOf(() => degenerateElectrons(composition({ n: 1 })))).toBe("out-of-range composition");
  });
});

describe("a polytrope", () => {
  test("closed forms", () => {
    const matter = polytrope({ constant: 3.7e11, gamma: 2.4 });
    for (const density of decades(-10, 17)) {
      const { pressure, specificEnergy, potential, gamma1, soundSpeed } = matter.state(density);
      const expected = 3.7e11 * density ** 2.4;
      expect(Math.abs(pressure / expected - 1)).toBeLessThan(5e-16);
      expect(Math.abs((specificEnergy * 1.4 * density) / expected - 1)).toBeLessThan(8e-16);
      expect(Math.abs(potential / (specificEnergy + pressure / density) - 1)).toBeLessThan(5e-16);
      expect(gamma1).toBe(2.4);
      const inertia = density * speedOfLight ** 2 + density * specificEnergy + pressure;
      expect(Math.abs(soundSpeed / (speedOfLight * Math.sqrt((2.4 * pressure) / inertia)) - 1)).toBeLessThan(1e-15);
    }
    expect(matter.state(0)).toEqual({
      density: 0,
      pressure: 0,
      specificEnergy: 0,
      potential: 0,
      gamma1: 2.4,
      soundSpeed: 0,
    });
  });

  test("index and exponent say the same", () => {
    expect(polytrope({ constant: 1, index: 3 }).state(8).pressure).toBe(
      polytrope({ constant: 1, gamma: 4 / 3 }).state(8).pressure,
    );
  });

  test("inversion over 27 decades", () => {
    const measured = new Measured();
    for (const gamma of [1.05, 4 / 3, 5 / 3, 3]) {
      invert(measured, "polytrope", polytrope({ constant: 1e12, gamma }), decades(-10, 17));
    }
    measured.expectBelow("polytrope: P", 4e-15); // measured 2.2e-15
    measured.expectBelow("polytrope: w", 2e-14); // measured 1.2e-14 at gamma = 1.05, where rho ~ w^20
    measured.expectBelow("polytrope: e", 2e-15);
  });

  test("as a contribution: a state, third order, and no thermal part", () => {
    const matter = polytrope({ constant: 1e13, gamma: 5 / 3 });
    const eos = combine(matter);
    for (const temperature of [0, 1e7]) {
      const state = eos.state(1e6, temperature, core);
      expect(state.pressure).toBe(matter.state(1e6).pressure);
      expect(state.specificEnergy).toBe(matter.state(1e6).specificEnergy);
      expect(state.gamma1).toBeCloseTo(5 / 3, 15);
      expect([state.specificEntropy, state.heatCapacityV].every((value) => value === 0)).toBe(true);
    }
    // F = (3/2) K rho^(2/3): each scaled derivative is a falling factorial of 2/3.
    const f = 1.5e13 * 1e4;
    const found = eos.freeEnergy(1e6, 1e7, core, 3);
    const expected = { f00: f, f10: (2 / 3) * f, f20: (-2 / 9) * f, f30: (8 / 27) * f };
    for (const [name, value] of Object.entries(expected)) {
      expect(Math.abs(found[name as keyof typeof expected]! / value - 1), name).toBeLessThan(1e-14);
    }
    expect([found.f01, found.f11, found.f02, found.f21].every((value) => value === 0)).toBe(true);
  });

  test.each([
    ["no exponent", { constant: 1 }, "invalid-option gamma"],
    ["two exponents", { constant: 1, gamma: 2, index: 1 }, "invalid-option index"],
    ["gamma 1", { constant: 1, gamma: 1 }, "out-of-range gamma"],
    ["index 0", { constant: 1, index: 0 }, "out-of-range index"],
    ["negative K", { constant: -1, gamma: 2 }, "out-of-range constant"],
    ["NaN", { constant: Number.NaN, gamma: 2 }, "not-a-number constant"],
    ["a stranger", { constant: 1, gamma: 2, mass: 1 }, "invalid-option options"],
    ["infinite gamma", { constant: 1, gamma: Number.POSITIVE_INFINITY }, "not-a-number gamma"],
  ])("refuses %s", (_, options, code) => {
    expect(codeOf(() => polytrope(options as Parameters<typeof polytrope>[0]))).toBe(code);
  });

  test("refuses densities", () => {
    const matter = polytrope({ constant: 1, gamma: 2, highestDensity: 10 });
    expect(codeOf(() => matter.state(11))).toBe("outside-domain density");
    expect(codeOf(() => matter.state(-1))).toBe("out-of-range density");
    expect(codeOf(() => matter.state(Number.NaN))).toBe("not-a-number density");
  });
});

describe("a piecewise polytrope", () => {
  const options = {
    gammas: [1.6, 1.3, 0.6, 1.4, 3, 2.8],
    dividingDensities: [2e7, 4e11, 3e12, 1e14, 1e15],
    referenceDensity: 1e10,
    referencePressure: 6e27,
  } satisfies PiecewisePolytropeOptions;

  test("the constants of the pieces by the printed recurrences", () => {
    const { pieces, state } = piecewisePolytrope(options);
    let a = 0;
    for (const [i, { density, gamma, constant, shift }] of pieces.entries()) {
      expect(shift).toBe(0);
      if (i > 0) {
        const below = pieces[i - 1]!;
        // Read et al. 2009, eqs. 4-7: K_(i+1) = P/rho^Gamma and a_i = e_(i-1)/rho - 1 - K_i rho^(Gamma_i-1)/(Gamma_i-1).
        expect(Math.abs((constant * density ** gamma) / (below.constant * density ** below.gamma) - 1)).toBeLessThan(
          2e-14,
        );
        a +=
          (below.constant * density ** (below.gamma - 1)) / (below.gamma - 1) -
          (constant * density ** (gamma - 1)) / (gamma - 1);
      }
      const top = 0.999 * (options.dividingDensities[i] ?? 3e15);
      const expected = a + (constant * top ** (gamma - 1)) / (gamma - 1);
      expect(Math.abs(state(top).specificEnergy / expected - 1), `piece ${i}`).toBeLessThan(3e-14);
      expect(Math.abs(state(top).pressure / (constant * top ** gamma) - 1), `piece ${i}`).toBeLessThan(3e-14);
    }
  });

  test("with a continuous sound speed: the published recurrences", () => {
    const { pieces, state } = piecewisePolytrope({ ...options, continuous: "sound speed" });
    for (let i = 1; i < pieces.length; i++) {
      const [below, piece] = [pieces[i - 1]!, pieces[i]!];
      const rho = piece.density;
      // O'Boyle et al. 2020, from memory, derived anew: K_(i+1) = K_i (Gamma_i/Gamma_(i+1)) rho^(Gamma_i - Gamma_(i+1)),
      // Lambda_(i+1) = Lambda_i + (1 - Gamma_i/Gamma_(i+1)) K_i rho^Gamma_i.
      const constant = ((below.constant * below.gamma) / piece.gamma) * rho ** (below.gamma - piece.gamma);
      expect(Math.abs(piece.constant / constant - 1)).toBeLessThan(2e-14);
      const growth = (1 - below.gamma / piece.gamma) * below.constant * rho ** below.gamma;
      expect(Math.abs(piece.shift - below.shift - growth) / Math.abs(growth)).toBeLessThan(2e-13);
      const [under, over] = [state(rho * (1 - 1e-12)), state(rho)];
      expect(Math.abs(under.soundSpeed / over.soundSpeed - 1)).toBeLessThan(1e-11);
    }
  });

  test.each(["pressure", "sound speed"] as const)(
    "P, e and w are continuous, and the first law holds: %s",
    (continuous) => {
      const matter = piecewisePolytrope({ ...options, continuous });
      expect(Math.abs(matter.state(1e10).pressure / 6e27 - 1)).toBeLessThan(1e-14);
      for (const rho of options.dividingDensities) {
        const [under, over] = [matter.state(rho * (1 - 1e-15)), matter.state(rho)];
        for (const name of ["pressure", "specificEnergy", "potential"] as const) {
          expect(Math.abs(under[name] / over[name] - 1), `${name} at ${rho}`).toBeLessThan(5e-15);
        }
      }
      // de = P d rho/rho^2, by Simpson's rule over steps that stay in one piece: error of order 5 in the step.
      for (const density of [1e6, 1e9, 1e12, 3e13, 5e14, 2e15]) {
        const h = 0.02;
        const [low, middle, high] = [1, 1 + h / 2, 1 + h].map((factor) => matter.state(density * factor));
        const g = (s: typeof low): number => s!.pressure / s!.density ** 2;
        const integral = (density * h * (g(low) + 4 * g(middle) + g(high))) / 6;
        expect(Math.abs((high!.specificEnergy - low!.specificEnergy) / integral - 1)).toBeLessThan(5e-9);
      }
      const measured = new Measured();
      invert(measured, "pieces", matter, decades(-5, 17));
      measured.expectBelow("pieces: P", 5e-15); // measured 1.6e-15
      measured.expectBelow("pieces: w", 5e-15); // measured 2.1e-15
    },
  );

  test("an exponent of 1 is a logarithm", () => {
    const matter = piecewisePolytrope({
      gammas: [2, 1],
      dividingDensities: [10],
      referenceDensity: 10,
      referencePressure: 1000,
    });
    expect(matter.state(100).specificEnergy).toBeCloseTo(100 + 100 * Math.LN10, 12);
    expect(matter.state(100).potential).toBeCloseTo(200 + 100 * Math.LN10, 12);
  });

  test.each([
    ["no exponents", { gammas: [] }, "length-mismatch gammas"],
    ["too few exponents", { gammas: [2] }, "length-mismatch gammas"],
    ["a first exponent of 1", { gammas: [1, 2, 2, 2, 2, 2] }, "out-of-range gammas[0]"],
    ["a negative exponent", { gammas: [2, 2, -1, 2, 2, 2] }, "out-of-range gammas[2]"],
    ["falling densities", { dividingDensities: [2, 1, 3, 4, 5] }, "out-of-range dividingDensities[1]"],
    ["a highest density below a break", { highestDensity: 1e3 }, "out-of-range highestDensity"],
    ["another continuity", { continuous: "all" }, "invalid-option continuous"],
    ["text for a list", { gammas: "2" }, "invalid-option gammas"],
    ["a stranger", { colour: 1 }, "invalid-option options"],
  ])("refuses %s", (_, change, code) => {
    expect(codeOf(() => piecewisePolytrope({ ...options, ...change } as PiecewisePolytropeOptions))).toBe(code);
  });
});

/** Adiabats through freezing: against `solve`, whose search knows nothing of barotropes, and against the laws of mechanics. */
import { describe, expect, test } from "vitest";
import { barotrope } from "../../src/barotropes/from-equation-of-state.js";
import { solve } from "../../src/inverse/solve.js";
import { composition } from "../../src/matter/composition.js";
import { hydrostaticStar } from "../../src/structure/star.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { Measured } from "../measured.js";

const full = whiteDwarfMatter();
const core = composition({ C12: 0.5, O16: 0.5 });
const helium = composition({ He4: 1 });

describe.each([
  // Inwards an adiabat melts: T ~ rho^(1/2) in a crystal, T_m ~ rho^(1/3).
  ["carbon and oxygen", core, 3e7, [1e3, 1e9]],
  ["carbon and oxygen, warmer", core, 5e7, [1e2, 1e9]],
  ["helium, up to densities where it never freezes", helium, 3e7, [1e3, 1e9]],
] as const)("%s", (_, matter, specificEntropy, density) => {
  const adiabat = barotrope(full, matter, { specificEntropy, density });
  const [crystalEnds, liquidBegins] = adiabat.kinks as readonly [number, number];
  const [lowest, highest] = adiabat.density;
  const densities = Array.from({ length: 60 }, (_unused, i) => lowest * (highest / lowest) ** ((i + 0.5) / 60));

  test("crystal, mixture, liquid: P and e of solve to rounding", () => {
    const measured = new Measured();
    const frozen = new Set<string>();
    for (const rho of densities) {
      const { state } = solve(full, matter, { density: rho, specificEntropy });
      const here = adiabat.state(rho);
      measured.compare("P", here.pressure, state.pressure, `${rho}`);
      measured.compare("e", here.specificEnergy, state.specificEnergy, `${rho}`);
      const share = state.crystalFraction;
      frozen.add(share === 1 ? "crystal" : share === 0 ? "liquid" : "mixture");
      const expected = here.potential < crystalEnds ? 1 : here.potential > liquidBegins ? 0 : share;
      expect(share, `${rho}`).toBe(expected);
    }
    expect(frozen).toEqual(new Set(["crystal", "mixture", "liquid"]));
    expect(adiabat.kinks).toHaveLength(2);
    expect(adiabat.jumps).toEqual([]);
    measured.expectBelow("P", 1e-14);
    measured.expectBelow("e", 1e-14);
  });

  test("gamma1 is the slope of P, and dw = dP/rho, in every part", () => {
    const measured = new Measured();
    for (const rho of densities) {
      // Steps across a kink have no slope.
      const h = 1e-3;
      const [a, b, c, d, e] = [-2, -1, 0, 1, 2].map((i) => adiabat.state(rho * Math.exp(i * h)));
      const crossed = adiabat.kinks!.some((kink) => kink > a!.potential && kink < e!.potential);
      if (crossed) continue;
      const slope = (Math.log(a!.pressure / e!.pressure) + 8 * Math.log(d!.pressure / b!.pressure)) / (12 * h);
      measured.add("gamma", Math.abs(slope / c!.gamma1 - 1), `${rho}`);
      const rate = (s: typeof a): number => (s!.gamma1 * s!.pressure) / s!.density; // dw/d ln rho
      // Boole's rule.
      const work = ((2 * h) / 45) * (7 * rate(a) + 32 * rate(b) + 12 * rate(c) + 32 * rate(d) + 7 * rate(e));
      measured.add("w", Math.abs((e!.potential - a!.potential) / work - 1), `${rho}`);
    }
    measured.expectBelow("gamma", 1e-10);
    measured.expectBelow("w", 1e-11); // the rounding of w over the step
  });

  test("P, e and w are continuous, and inversions come back", () => {
    const record = new Float64Array(5);
    for (const kink of adiabat.kinks!) {
      const sides = [-1e-13, 1e-13].map((part) => {
        record[3] = kink * (1 + part);
        adiabat.fillAtPotential(record);
        return record.slice();
      });
      for (const slot of [0, 1, 2]) expect(Math.abs(sides[0]![slot]! / sides[1]![slot]! - 1)).toBeLessThan(2e-12);
    }
    for (const rho of densities) {
      const { pressure, potential, gamma1 } = adiabat.state(rho);
      record[1] = pressure;
      adiabat.fillAtPressure(record);
      expect(Math.abs(record[0]! / rho - 1)).toBeLessThan(1e-14);
      record[3] = potential;
      adiabat.fillAtPotential(record);
      const rate = (gamma1 * pressure) / rho; // w itself may be near zero
      expect((Math.abs(record[0]! / rho - 1) * rate) / Math.max(rate, Math.abs(potential))).toBeLessThan(1e-14);
    }
  });
});

test("a star through all three keeps its tolerance", () => {
  const adiabat = barotrope(full, core, { specificEntropy: 3e7, density: [1e3, 1e9] });
  const make = (tolerance: number) => hydrostaticStar(adiabat, { centralDensity: 5e8, tolerance });
  const exact = make(1e-14);
  for (const tolerance of [1e-8, 1e-10]) {
    expect(Math.abs(make(tolerance).mass / exact.mass - 1)).toBeLessThan(tolerance);
    expect(Math.abs(make(tolerance).radius / exact.radius - 1)).toBeLessThan(tolerance);
  }
});

test("one phase by force goes on as before", () => {
  const liquid = whiteDwarfMatter({ coulomb: { phase: "liquid" } });
  const adiabat = barotrope(liquid, core, { specificEntropy: 1e8, density: [1e3, 1e9] });
  expect(adiabat.kinks).toEqual([]);
  const free = barotrope(full, core, { specificEntropy: 1e8, density: [1e3, 1e9] });
  for (const rho of [1e4, 1e6, 1e8]) expect(free.state(rho)).toEqual(adiabat.state(rho));
});

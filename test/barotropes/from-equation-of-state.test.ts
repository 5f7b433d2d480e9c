/** Any equation of state along T = 0, an isotherm, an adiabat. */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_GAMMA,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
} from "../../src/barotropes/barotrope.js";
import { type BarotropeOptions, barotrope } from "../../src/barotropes/from-equation-of-state.js";
import { coldCorrections } from "../../src/coulomb/cold-corrections.js";
import { meltingDensity } from "../../src/coulomb/phase.js";
import { transition, withPhase } from "../../src/coulomb/transition.js";
import { isFermistateError } from "../../src/errors.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { composition } from "../../src/matter/composition.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { Measured, uniform } from "../measured.js";

const core = composition({ C12: 0.5, O16: 0.5 });
const full = whiteDwarfMatter();
const ideal = combine(electronPositronGas());
const lattice = combine(
  electronPositronGas(),
  coldCorrections({ thomasFermi: false, exchange: false, correlation: false }),
);

interface Row {
  readonly rows: readonly [string, string, number, number, number, number][];
}
const fixture = JSON.parse(readFileSync(new URL("../fixtures/cold-matter.json", import.meta.url), "utf8")) as Row;

test("cold electrons, with and without lattice: P, e and the surface against 95-digit arithmetic", () => {
  const measured = new Measured();
  for (const [label, model, density, pressure, energy, surface] of fixture.rows) {
    const matter = barotrope(model === "ideal" ? ideal : lattice, composition({ [label]: 1 }), { temperature: 0 });
    const state = matter.state(density);
    const where = `${label} ${model} ${density}`;
    measured.compare("P", state.pressure, pressure, where);
    measured.compare("e", state.specificEnergy, energy, where);
    if (surface > 0) measured.compare("surface", matter.density[0], surface, where);
    else expect(matter.density[0]).toBe(1e-20);
  }
  measured.expectBelow("P", 1.5e-15);
  measured.expectBelow("e", 1.5e-15);
  // P is a difference of two terms there: a rounding of either moves the density by 3e-15.
  measured.expectBelow("surface", 1e-14);
});

test("at the surface P is the least positive one, and the sound speed is finite", () => {
  const matter = barotrope(lattice, composition({ Fe56: 1 }), { temperature: 0 });
  const { pressure, soundSpeed, potential } = matter.state(matter.density[0]);
  const above = matter.state(300);
  expect(pressure).toBeGreaterThan(0);
  expect(pressure).toBeLessThan(1e-12 * above.pressure);
  expect(soundSpeed).toBeGreaterThan(1e6);
  expect(soundSpeed).toBeLessThan(above.soundSpeed);
  expect(potential).toBeLessThan(0); // the lattice binds
});

/** Inversions at random densities, in the units of rounding of P and of w, away from the surface. */
function measureInversion(matter: Barotrope, seed: number): Measured {
  const measured = new Measured();
  const random = uniform(seed);
  const record = new Float64Array(BAROTROPE_LENGTH);
  const back = new Float64Array(BAROTROPE_LENGTH);
  const [low, high] = [Math.max(matter.density[0] * 1.5, 1e-10), matter.density[1]];
  for (let i = 0; i < 500; i++) {
    const density = low * (high / low) ** random();
    if (matter.jumps.some(({ densities: [a, b] }) => density > a && density < b)) continue;
    record[BAROTROPE_DENSITY] = density;
    matter.fillAtDensity(record);
    const gamma = record[BAROTROPE_GAMMA]!;
    back[BAROTROPE_PRESSURE] = record[BAROTROPE_PRESSURE]!;
    matter.fillAtPressure(back);
    measured.add("P", Math.abs(back[BAROTROPE_DENSITY]! / density - 1) * gamma, `${density}`);
    measured.add("its w", Math.abs(back[BAROTROPE_POTENTIAL]! / record[BAROTROPE_POTENTIAL]! - 1), `${density}`);
    back[BAROTROPE_POTENTIAL] = record[BAROTROPE_POTENTIAL]!;
    matter.fillAtPotential(back);
    const slope = (gamma * record[BAROTROPE_PRESSURE]!) / density;
    const scale = Math.max(Math.abs(record[BAROTROPE_POTENTIAL]!), slope);
    measured.add("w", (Math.abs(back[BAROTROPE_DENSITY]! / density - 1) * slope) / scale, `${density}`);
  }
  return measured;
}

describe("inversion", () => {
  test.each<[string, () => Barotrope, number]>([
    ["ideal electrons", () => barotrope(ideal, core, { temperature: 0 }), 1],
    ["cold white-dwarf matter", () => barotrope(full, core, { temperature: 0 }), 2],
    ["an isotherm", () => barotrope(full, core, { temperature: 1e7, density: [1, 1e10] }), 3],
    ["an adiabat", () => barotrope(full, core, { specificEntropy: 2e8, density: [1, 1e9] }), 4],
  ])("from P and from w: %s", (_, make, seed) => {
    const measured = measureInversion(make(), seed);
    measured.expectBelow("P", 3e-14); // measured 1e-14 next to the surface, 3e-15 elsewhere
    measured.expectBelow("w", 1e-14); // measured 4e-15
  });

  test("beyond the ends it gives the end", () => {
    const matter = barotrope(full, core, { temperature: 0, density: [1e3, 1e9] });
    const record = new Float64Array(BAROTROPE_LENGTH);
    for (const [slot, low, high] of [
      [BAROTROPE_PRESSURE, 1, 1e40],
      [BAROTROPE_POTENTIAL, -1e30, 1e30],
    ] as const) {
      record[slot] = low;
      (slot === BAROTROPE_PRESSURE ? matter.fillAtPressure : matter.fillAtPotential)(record);
      expect(record[BAROTROPE_DENSITY]).toBe(1e3);
      record[slot] = high;
      (slot === BAROTROPE_PRESSURE ? matter.fillAtPressure : matter.fillAtPotential)(record);
      expect(record[BAROTROPE_DENSITY]).toBe(1e9);
    }
  });
});

describe("paths", () => {
  test("T = 0 is the equation of state at T = 0", () => {
    const matter = barotrope(full, core, { temperature: 0 });
    for (const density of [1e2, 1e5, 1e9]) {
      const [a, b] = [matter.state(density), full.state(density, 0, core)];
      expect([a.pressure, a.specificEnergy, a.potential]).toEqual([b.pressure, b.specificEnergy, b.specificEnthalpy]);
      expect(Math.abs(a.soundSpeed / b.soundSpeed - 1)).toBeLessThan(1e-14);
    }
  });

  test("an isotherm: w = F + P/rho below the boundary, the exponent is chi_rho", () => {
    const matter = barotrope(full, core, { temperature: 1e7, density: [1, 1e6] });
    expect(matter.jumps).toEqual([]);
    for (const density of [1e1, 1e3, 1e6]) {
      const [a, b] = [matter.state(density), full.state(density, 1e7, core)];
      expect(Math.abs(a.potential / (b.specificFreeEnergy + b.pressure / density) - 1)).toBeLessThan(1e-14);
      expect(a.gamma1).toBeCloseTo(b.densityExponent, 13);
    }
  });

  test("an isotherm crosses into the crystal with a density jump at equal P and w", () => {
    const matter = barotrope(full, core, { temperature: 1e7, density: [1, 1e10] });
    const [jump] = matter.jumps;
    expect(matter.jumps).toHaveLength(1);
    const [below, above] = jump!.densities;
    expect(below).toBe(meltingDensity(1e7, core));
    expect(above / below - 1).toBeGreaterThan(2e-5);
    expect(above / below - 1).toBeLessThan(1e-4);
    const [liquid, crystal] = [matter.state(below), matter.state(above)];
    expect(Math.abs(jump!.potential / liquid.potential - 1)).toBeLessThan(1e-14);
    expect(Math.abs(liquid.pressure / crystal.pressure - 1)).toBeLessThan(1e-14);
    expect(Math.abs(liquid.potential / crystal.potential - 1)).toBeLessThan(1e-14);
    expect(crystal.pressure).toBeCloseTo(withPhase(full, "crystal").state(above, 1e7, core).pressure, 10);
    expect(() => matter.state((below + above) / 2)).toThrow(/jumps there at constant pressure/);
    // dw = dP/rho on the far side, by Simpson's rule.
    const [a, b, c] = [above, above * Math.sqrt(1.01), above * 1.01].map((density) => matter.state(density));
    const g = (s: typeof a): number => (s!.gamma1 * s!.pressure) / s!.density;
    const integral = (Math.log(1.01) * (g(a) + 4 * g(b) + g(c))) / 6;
    expect(Math.abs((c!.potential - a!.potential) / integral - 1)).toBeLessThan(1e-9);
  });

  test("an adiabat has the entropy, gamma1 and dw = dP/rho", () => {
    const start = full.state(1e6, 1e8, core);
    const matter = barotrope(full, core, { specificEntropy: start.specificEntropy, density: [1e3, 1e9] });
    const here = matter.state(1e6);
    expect(Math.abs(here.pressure / start.pressure - 1)).toBeLessThan(1e-14);
    expect(here.gamma1).toBeCloseTo(start.gamma1, 12);
    expect(Math.abs(here.potential / start.specificEnthalpy - 1)).toBeLessThan(1e-14);
    for (const density of [1e4, 1e7, 1e8]) {
      const [a, b, c] = [1, 1.01, 1.02].map((factor) => matter.state(density * factor));
      const g = (s: typeof a): number => s!.pressure / s!.density ** 2;
      const work = (density * 0.02 * (g(a) + 4 * g(b) + g(c))) / 6;
      expect(Math.abs((c!.specificEnergy - a!.specificEnergy) / work - 1), `${density}`).toBeLessThan(1e-9);
    }
  });
});

test.each<[string, () => Barotrope, string]>([
  ["no path", () => barotrope(full, core, {} as BarotropeOptions), "invalid-option options"],
  ["two paths", () => barotrope(full, core, { temperature: 0, specificEntropy: 1 } as never), "invalid-option options"],
  [
    "an adiabat without densities",
    () => barotrope(full, core, { specificEntropy: 1e8 } as never),
    "invalid-option density",
  ],
  ["NaN", () => barotrope(full, core, { temperature: Number.NaN }), "not-a-number temperature"],
  ["a temperature outside", () => barotrope(full, core, { temperature: 1e14 }), "outside-domain temperature"],
  [
    "ideal ions at T = 0",
    () => barotrope(combine(electronPositronGas(), idealIons()), core, { temperature: 0 }),
    "outside-domain temperature",
  ],
  [
    "a composition of one's own making",
    () => barotrope(full, { ...core }, { temperature: 0 }),
    "invalid-composition composition",
  ],
  ["falling densities", () => barotrope(full, core, { temperature: 0, density: [2, 1] }), "out-of-range density[1]"],
  ["a density of zero", () => barotrope(full, core, { temperature: 0, density: [0, 1] }), "out-of-range density[0]"],
  [
    "a density beyond the domain",
    () => barotrope(full, core, { temperature: 0, density: [1e3, 1e19] }),
    "outside-domain density",
  ],
  [
    "a cold crystal that zero-point motion melts",
    () => barotrope(full, composition({ He4: 1 }), { temperature: 0, density: [1e3, 1e9] }),
    "outside-domain density[1]",
  ],
  ["cool matter too thin to resist compression", () => barotrope(full, core, { temperature: 1e4 }), "unstable density"],
  [
    "an adiabat of cold helium to where zero-point motion melts it",
    () => barotrope(full, composition({ He4: 1 }), { specificEntropy: 1e7, density: [1e3, 1e9] }),
    "outside-domain density[1]",
  ],
  [
    "an adiabat where the crystal has the larger entropy (thin iron, beyond linear response)",
    () => {
      const iron = composition({ Fe56: 1 });
      const { liquid, crystal } = transition(full, 1e4, iron)!;
      const specificEntropy = 0.5 * (liquid.specificEntropy + crystal.specificEntropy);
      return barotrope(full, iron, { specificEntropy, density: [9e3, 1.1e4] });
    },
    "unstable density",
  ],
  [
    "radiation alone",
    () => barotrope(full, core, { temperature: 1e9, density: [1e-10, 1e9] }),
    "outside-domain density[0]",
  ],
])("refuses %s", (_, action, code) => {
  try {
    action();
  } catch (error) {
    if (!isFermistateError(error)) throw error;
    expect(`${error.code} ${error.argument}`).toBe(code);
    return;
  }
  expect.fail("it did not throw");
});

/**
 * Derivatives by the amount of each species, term by term, against central differences of the formulas as printed in
 * decimal arithmetic (decimal-free-energy.ts): relative steps of 1e-9 at 44 digits, error 1e-17 of a term.
 */
import type { Decimal } from "decimal.js";
import { describe, expect, test } from "vitest";
import { coldCorrections } from "../../src/coulomb/cold-corrections.js";
import { coulombPlasma } from "../../src/coulomb/coulomb-plasma.js";
import { bcc, fcc } from "../../src/coulomb/lattice.js";
import type { CoulombPlasmaOptions } from "../../src/coulomb/options.js";
import { type Composition, composition } from "../../src/matter/composition.js";
import { DENSITY, TEMPERATURE } from "../../src/matter/plasma.js";
import type { Contribution } from "../../src/thermodynamics/contribution.js";
import { evaluatorOf } from "../../src/thermodynamics/evaluator.js";
import { SPECIES_LENGTH } from "../../src/thermodynamics/species-members.js";
import { Measured } from "../measured.js";
import { cold, crystal, Exact, type Form, type FreeEnergy, liquid } from "./decimal-free-energy.js";

const print = (measured: Measured): void => {
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
};

const quantities = ["F", "P", "e", "s"] as const;

/** dF, dP/rho, de and T ds by Y of every species: by the hook. */
function rowsOf(part: Contribution, density: number, temperature: number, matter: Composition): number[][] {
  const evaluator = evaluatorOf([part]);
  evaluator.point[DENSITY] = density;
  evaluator.point[TEMPERATURE] = temperature;
  evaluator.fillMembers(matter, 2);
  const rows = new Float64Array(SPECIES_LENGTH * matter.species.length);
  evaluator.fillSpecies(matter, rows);
  return matter.species.map((_, i) => {
    const [energy, heat, pressure] = rows.subarray(SPECIES_LENGTH * i) as unknown as [number, number, number];
    return [energy - heat, pressure, energy, heat];
  });
}

const step = new Exact("1e-9");

/** The same by central differences of F: its value, rho d/drho and T d/dT, each by Y. */
function differences(
  free: FreeEnergy,
  density: number,
  temperature: number,
  matter: Composition,
): Record<string, number[]>[] {
  const amounts = matter.species.map((one) => new Exact(one.nucleonFraction).div(one.massNumber));
  const up = step.plus(1);
  const down = new Exact(1).minus(step);
  return matter.species.map((_, a) => {
    const slopes = (rho: Decimal, t: Decimal): Record<string, Decimal> => {
      const [high, low] = [up, down].map((factor) =>
        free(
          rho,
          t,
          amounts.map((y, i) => (i === a ? y.times(factor) : y)),
        ),
      ) as [Record<string, Decimal>, Record<string, Decimal>];
      return Object.fromEntries(
        Object.keys(high).map((name) => [name, high[name]!.minus(low[name]!).div(step.times(2).times(amounts[a]!))]),
      );
    };
    const [rho, t] = [new Exact(density), new Exact(temperature)];
    const centre = slopes(rho, t);
    const [denser, thinner] = [slopes(rho.times(up), t), slopes(rho.times(down), t)];
    const [hotter, colder] = [slopes(rho, t.times(up)), slopes(rho, t.times(down))];
    return Object.fromEntries(
      Object.entries(centre).map(([name, value]) => {
        const pressure = denser[name]!.minus(thinner[name]!).div(step.times(2));
        const thermal = hotter[name]!.minus(colder[name]!).div(step.times(2));
        return [name, [value, pressure, value.minus(thermal), thermal.neg()].map(Number)];
      }),
    );
  });
}

/** Measured in all cases together: 7.1e-16 of the largest term. */
const ofLargest = 1.5e-15;
/**
 * Of the own value. Measured: F 4.7e-14, e 2.5e-13, s 4.5e-14 (mixture correction, a difference of averages), P 3.0e-13
 * (exchange, whose derivative changes sign near there); medians 3e-16.
 */
const ofOwn: Readonly<Record<(typeof quantities)[number], number>> = { F: 1e-13, P: 6e-13, e: 5e-13, s: 1e-13 };

/** Compares every part; `nameOf` is the name of a part's term in the reference. */
function compare(
  measured: Measured,
  parts: readonly Contribution[],
  nameOf: (part: Contribution) => string,
  free: FreeEnergy,
  [density, temperature, matter]: readonly [number, number, Composition],
): void {
  const expected = differences(free, density, temperature, matter);
  const named = parts.filter((part) => Object.hasOwn(expected[0]!, nameOf(part)));
  const actual = named.map((part) => rowsOf(part, density, temperature, matter));
  matter.species.forEach((one, a) => {
    quantities.forEach((quantity, q) => {
      const largest = Math.max(...Object.values(expected[a]!).map((values) => Math.abs(values[q]!)));
      named.forEach((part, p) => {
        const [value, wanted] = [actual[p]![a]![q]!, expected[a]![nameOf(part)]![q]!];
        const where = `${part.name}, ${one.label} in ${matter.name}, rho ${density} T ${temperature}`;
        measured.compare(`${quantity}, of the largest term`, value, wanted, where, largest);
        // Members that vanish exactly (T ds of what has no temperature) come out of the differences as 1e-20. In
        // nearly pure matter the solvent's mixture terms are of second order in the trace: differences, no digits.
        if (Math.abs(wanted) < 1e-15 * largest || matter === dilute) return;
        measured.compare(`${quantity}, own value`, value, wanted, where);
      });
    });
  });
}

function expectSmall(measured: Measured): void {
  for (const quantity of quantities) {
    measured.expectBelow(`${quantity}, of the largest term`, ofLargest);
    if (measured.count(`${quantity}, own value`) > 0) measured.expectBelow(`${quantity}, own value`, ofOwn[quantity]);
  }
}

const carbonOxygenNeon = composition({ C12: 0.4, O16: 0.5, Ne20: 0.1 });
const hydrogenHelium = composition({ H1: 0.7, He4: 0.3 });
const carbonOxygenIron = composition({ C12: 0.45, O16: 0.5, Fe56: 0.05 });
const isotopes = composition({ C12: 0.3, C13: 0.2, O16: 0.5 });
const dilute = composition({ O16: 1 - 1e-6, Fe56: 1e-6 });
const neutronRich = composition({ n: 0.1, O16: 0.4, Fe56: 0.5 });
const pure = composition({ Mg25: 1 });

/** What the library's parts are called in the reference. */
const nameOf =
  (options: CoulombPlasmaOptions) =>
  ({ name }: Contribution): string =>
    name === "quantum correction" ? String(options.quantum ?? "two-oscillators") : name;

interface Case {
  readonly title: string;
  readonly options: CoulombPlasmaOptions;
  readonly form: Form;
  readonly points: readonly (readonly [density: number, temperature: number, matter: Composition])[];
}

const bccForm: Form = { lattice: bcc, polarisable: true };
const cases: readonly Case[] = [
  {
    title: "liquid",
    options: { phase: "liquid" },
    form: bccForm,
    points: [
      [1e6, 1e7, carbonOxygenNeon],
      [1e9, 3e8, carbonOxygenNeon],
      [150, 1.5e7, hydrogenHelium],
      [1e4, 3e6, hydrogenHelium],
      [1e8, 1e8, carbonOxygenIron],
      [1e3, 1e8, carbonOxygenIron],
      [1e7, 5e7, isotopes],
      [1e7, 5e7, dilute],
      [1e8, 3e8, neutronRich],
      [1e6, 2e7, pure],
    ],
  },
  {
    title: "crystal",
    options: { phase: "crystal" },
    form: bccForm,
    points: [
      [1e6, 3e6, carbonOxygenNeon],
      [1e9, 1e6, carbonOxygenNeon],
      [1e8, 2e7, carbonOxygenIron],
      [1e7, 1e5, carbonOxygenIron],
      [1e7, 5e6, isotopes],
      [1e7, 5e6, dilute],
      [1e10, 1e8, neutronRich],
      [1e6, 3e6, pure],
    ],
  },
  {
    title: "liquid with other forms",
    options: { phase: "liquid", quantum: "baiko-yakovlev", polarisation: false },
    form: { lattice: bcc, polarisable: false },
    points: [
      [1e8, 1e8, carbonOxygenIron],
      [1e3, 3e7, hydrogenHelium],
    ],
  },
  {
    title: "liquid with first order in hbar^2",
    options: { phase: "liquid", quantum: "wigner-kirkwood", mixture: false },
    form: bccForm,
    points: [[1e8, 1e8, carbonOxygenIron]],
  },
  {
    title: "fcc crystal",
    options: { phase: "crystal", lattice: "fcc" },
    form: { lattice: fcc, polarisable: true },
    points: [[1e8, 5e6, carbonOxygenIron]],
  },
];

describe("every term is the difference of the printed formula", () => {
  for (const { title, options, form, points } of cases) {
    test(title, { timeout: 120_000 }, () => {
      const measured = new Measured();
      const reference = options.phase === "liquid" ? liquid : crystal;
      const { parts } = coulombPlasma(options);
      for (const point of points) compare(measured, parts, nameOf(options), reference(point[2], form), point);
      print(measured);
      expectSmall(measured);
    });
  }

  test("cold corrections", () => {
    const measured = new Measured();
    for (const point of [
      [1e6, 1e6, carbonOxygenNeon],
      [1e9, 1e6, carbonOxygenIron],
      [1e11, 1e6, neutronRich],
    ] as const) {
      compare(measured, [coldCorrections()], ({ name }) => name, cold(point[2], bccForm), point);
    }
    print(measured);
    expectSmall(measured);
    expect(measured.count("F, own value")).toBe(9);
  });
});

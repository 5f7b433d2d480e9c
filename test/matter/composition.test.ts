/** Compositions against mpmath (40 digits), exact fractions, and the free energy of ions worked out independently. */
import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { atomicMassConstant, boltzmannConstant, electronMass, reducedPlanckConstant } from "../../src/constants.js";
import { type FermistateError, isFermistateError } from "../../src/errors.js";
import { type Composition, composition, requireComposition } from "../../src/matter/composition.js";
import { nuclide, nuclides } from "../../src/matter/nuclides.js";

function refusal(call: () => unknown): FermistateError {
  try {
    call();
  } catch (error) {
    if (isFermistateError(error)) return error;
    throw error;
  }
  throw new Error("accepted");
}

const any = (value: unknown) => value as Record<string, number>;

/** All numbers of a composition by name, charge moments included. */
function numbers(made: Composition): Record<string, number> {
  const { species: _, name: __, chargeMoments, ...rest } = made;
  return { ...rest, ...chargeMoments };
}

describe("sums against mpmath", () => {
  /**
   * The defining sums of the docstrings evaluated by mpmath with 40 digits: nucleon fractions as exact decimals, CODATA
   * 2022 m_u and m_e, AME2020 masses, g = 2 for n, H1, He3 and 4 for Na23. Order: as `columns`.
   */
  const columns =
    "ionsPerNucleon electronsPerNucleon meanMassNumber meanCharge ionsPerGram electronsPerGram twoThirds fourThirds " +
    "fiveThirds squared sevenThirds fiveHalves ionEntropyConstant chargedIonsPerGram chargedIonEntropyConstant " +
    "plasmaFrequencySum couplingMoment";
  const rows: readonly [Record<string, number>, string][] = [
    [
      { C12: 0.5, O16: 0.5 },
      `0.07291666666666666666667 0.5 13.71428571428571428571 6.857142857142857142857 4.391144299549123231518e+22
       3.011070376833684501612e+23 3.601101285082643819357 13.08727060399590740191 25.03517913906729148757 48.0
       92.23790933826115869719 127.96921870172087784 -4.594590651273797711754 4.391144299549123231518e+22
       -4.594590651273797711754 2.065628872040403693895e+24 25.03517913906729148757`,
    ],
    [
      { H1: 0.7, He4: 0.28, Na23: 0.01, Fe56: 0.01 },
      `0.7706133540372670807453 0.8494254658385093167702 1.297667623797289809078 1.102271925847564354441
       4.640742084668126633657e+23 5.115359715028976499742e+23 1.057385981455239369802 1.16891280798350369082
       1.280329279546809642022 1.49662989270061961614 1.982049979433823832093 2.447385047506041083622
       -1.144634759035777329549 4.640742084668126633657e+23 -1.144634759035777329549 6.012381719842744157021e+23 1.280329279546809642022`,
    ],
    [
      { n: 0.125, H1: 0.25, He3: 0.0625, Fe56: 0.5625 },
      `0.4058779761904761904762 0.552827380952380952381 2.463794683776351970669 1.362053162236480293309
       2.444254301432700737544e+23 3.329204300576529143896e+23 0.9146258466582086325091 2.651497156379651596281
       6.426040103081105385596 17.55087076076993583868 50.43602250755983328433 86.21089642535937855968
       -1.826183254583135141877 1.691486707224279612141e+23 -1.432397467706658721019 5.894264567197021373236e+23 9.285840731737067517463`,
    ],
  ];
  test.each(rows)("%o", (fractions, text) => {
    const made = numbers(composition(fractions));
    const names = columns.split(" ");
    const worst = text.split(/\s+/).map((figure, index): [string, number] => {
      const name = names[index] ?? "";
      return [name, Math.abs((made[name] ?? Number.NaN) / Number(figure) - 1) / Number.EPSILON];
    });
    expect(Object.keys(made).sort()).toEqual([...names].sort());
    // Measured: 2 eps at most.
    for (const [name, error] of worst) expect(error, `${name}: error in eps`).toBeLessThanOrEqual(3);
  });

  /**
   * Free energy of the ideal ions, erg/g: figures of a separate 20-digit calculation (mpmath; ln(x_j rho .../g_j)
   * summed per species). rho and T are the doubles of the decimals.
   */
  test.each([
    [{ He4: 1 }, 1e-8, 10e3, -5951118761674.3065814],
    [{ C12: 0.5, O16: 0.5 }, 2e-8, 15e10, -51352702964402299820],
    [{ Fe56: 1 }, 5e-8, 30e6, -2032229941320542.9586],
    [{ H1: 0.7, He4: 0.3 }, 3e-8, 20e5, -4307332666825902.893],
  ])("%o: free energy of the ideal gas from ionsPerGram and ionEntropyConstant", (fractions, rho, T, figure) => {
    const { ionsPerGram: N, ionEntropyConstant } = composition(any(fractions));
    const kT = boltzmannConstant * T;
    const wavelength = Math.sqrt((2 * Math.PI * reducedPlanckConstant ** 2) / (atomicMassConstant * kT));
    const free = N * kT * (Math.log(N * rho * wavelength ** 3) + ionEntropyConstant - 1);
    expect(Math.abs(free / figure - 1)).toBeLessThanOrEqual(4 * Number.EPSILON);
  });

  test("every one-nuclide composition has its exact integers", () => {
    for (const label of nuclides()) {
      const { chargeNumber: Z, massNumber: A, nuclearMass } = nuclide(label);
      const made = composition({ [label]: 1 });
      expect(made.electronsPerNucleon).toBe(Z / A);
      expect(made.meanCharge).toBe(Z);
      expect(made.chargeMoments.squared).toBe(Z ** 2);
      expect(Math.abs(made.meanMassNumber / A - 1)).toBeLessThanOrEqual(Number.EPSILON);
      expect(made.species).toHaveLength(1);
      expect(made.species[0]).toMatchObject({ label, numberFraction: 1, nucleonFraction: 1, ionMass: nuclearMass });
      expect(made.plasmaFrequencySum).toBe(Z ** 2 / nuclearMass);
    }
  });

  test("Y_e of N = Z nuclei is 0.5 exactly, whatever the mixture", () => {
    expect(composition({ C12: 0.3, O16: 0.7 }).electronsPerNucleon).toBe(0.5);
    expect(composition({ He4: 0.02, C12: 0.48, O16: 0.5 }).electronsPerNucleon).toBe(0.5);
  });

  test("random mixtures: Jensen's inequality, number fractions sum to one, splitting a species changes nothing", () => {
    const label = fc.constantFrom("n", "H1", "He4", "C12", "O16", "Ne22", "Fe56", "Pb208");
    const mixture = fc.dictionary(label, fc.double({ min: 1e-6, max: 1, noNaN: true }), {
      minKeys: 1,
      noNullPrototype: true,
    });
    fc.assert(
      fc.property(mixture, (fractions) => {
        const made = composition(fractions, { normalise: true });
        const slack = 1 + 8 * Number.EPSILON;
        expect(made.chargeMoments.squared * slack).toBeGreaterThanOrEqual(made.meanCharge ** 2);
        expect(made.chargeMoments.fiveThirds ** (6 / 5)).toBeLessThanOrEqual(made.chargeMoments.squared * slack);
        const sum = made.species.reduce((total, one) => total + one.numberFraction, 0);
        expect(Math.abs(sum - 1)).toBeLessThanOrEqual(4 * Number.EPSILON);
        expect(Math.abs(made.meanCharge / made.meanMassNumber - made.electronsPerNucleon)).toBeLessThanOrEqual(
          4 * Number.EPSILON,
        );
        expect(made.chargedIonsPerGram).toBeLessThanOrEqual(made.ionsPerGram * slack);
        expect(Object.values(numbers(made)).every(Number.isFinite)).toBe(true);
      }),
      { seed: 20260101, numRuns: 300 },
    );
  });
});

describe("species", () => {
  test("sorted by charge then mass number, with masses, spins and what is not known", () => {
    const made = composition({ Fe61: 0.25, O16: 0.25, C13: 0.25, C12: 0.25, Ne20: 0 });
    expect(made.species.map(({ label }) => label)).toEqual(["C12", "C13", "O16", "Fe61"]);
    expect(made.species.map(({ spinDegeneracy }) => spinDegeneracy)).toEqual([1, 2, 1, 1]);
    expect(made.species.map(({ spinKnown }) => spinKnown)).toEqual([true, true, true, false]);
    expect(made.species[1]?.ionMass).toBe(nuclide("C13").nuclearMass);
  });

  test("frozen throughout", () => {
    const made = composition({ C12: 0.5, O16: 0.5 });
    expect([made, made.species, made.chargeMoments, ...made.species].every(Object.isFrozen)).toBe(true);
  });

  test("names", () => {
    expect(composition({ O16: 0.5, C12: 0.5 }).name).toBe("C12 0.5, O16 0.5");
    expect(composition({ He4: 1 }).name).toBe("He4");
    expect(composition({ C12: 1, O16: 2 }, { normalise: true }).name).toBe("C12 0.333333, O16 0.666667");
    expect(composition({ meanMassNumber: 13.5, meanCharge: 6.75 }).name).toBe("mean A 13.5, Z 6.75");
    const many = { H1: 0.1, He4: 0.1, C12: 0.1, N14: 0.1, O16: 0.1, Ne20: 0.1, Mg24: 0.1, Fe56: 0.3 };
    expect(composition(many).name).toBe("H1 0.1, He4 0.1, C12 0.1, N14 0.1, O16 0.1, Fe56 0.3, and 2 more");
  });

  test("free neutrons count as ions but not as charged ones; neutrons alone leave nothing charged", () => {
    const made = composition({ n: 0.5, Fe56: 0.5 });
    const iron = composition({ Fe56: 1 });
    expect(made.chargedIonsPerGram).toBe(iron.ionsPerGram / 2);
    expect(made.chargedIonEntropyConstant).toBe(iron.ionEntropyConstant);
    const neutrons = composition({ n: 1 });
    expect(neutrons).toMatchObject({ chargedIonsPerGram: 0, chargedIonEntropyConstant: 0, electronsPerGram: 0 });
    expect(neutrons.ionsPerGram).toBe(1 / atomicMassConstant);
  });

  test("zero fractions and traces below the smallest double are dropped", () => {
    expect(composition({ C12: 1, O16: 0, Fe56: -0 }).species).toHaveLength(1);
    expect(composition({ C12: 1, Fe56: 5e-324 }).species).toHaveLength(1);
    expect(composition({ C12: 1, Fe56: 1e-300 }).species).toHaveLength(2);
    expect(composition({ C12: 5e-324 }, { normalise: true }).electronsPerNucleon).toBe(0.5);
  });
});

describe("the sum of fractions", () => {
  test("inside 1e-10 the fractions stay as given", () => {
    const made = composition({ C12: 0.5, O16: 0.5 + 9e-11 });
    expect(made.species[1]?.nucleonFraction).toBe(0.5 + 9e-11);
    expect(made.electronsPerNucleon).toBe(0.5 + 4.5e-11);
  });

  test.each([0.5 + 1.1e-10, 0.5 - 1.1e-10, 0.4, 1])("0.5 + %d is refused and the sum is told", (other) => {
    const error = refusal(() => composition({ C12: 0.5, O16: other }));
    expect(error).toMatchObject({ code: "invalid-composition", argument: "sum of fractions", given: 0.5 + other });
    expect(error.message).toContain(String(0.5 + other));
    expect(error.allowed).toContain("1e-10");
  });

  test("normalise scales any positive finite sum", () => {
    const made = composition({ C12: 3, O16: 1 }, { normalise: true });
    expect(made.species.map(({ nucleonFraction }) => nucleonFraction)).toEqual([0.75, 0.25]);
    expect(composition({ C12: 0.5, O16: 0.5 }, { normalise: false }).name).toBe("C12 0.5, O16 0.5");
  });
});

describe("a mean nucleus", () => {
  test("one fictitious species", () => {
    const made = composition({ meanMassNumber: 14, meanCharge: 7 });
    const ionMass = 14 * atomicMassConstant - 7 * electronMass;
    expect(made.species).toEqual([
      {
        label: "mean",
        massNumber: 14,
        chargeNumber: 7,
        nucleonFraction: 1,
        numberFraction: 1,
        ionMass,
        spinDegeneracy: 1,
        spinKnown: true,
      },
    ]);
    expect(made).toMatchObject({ electronsPerNucleon: 0.5, meanCharge: 7, meanMassNumber: 14 });
    expect(made.ionEntropyConstant).toBe(1.5 * Math.log(atomicMassConstant / ionMass));
  });

  test("limits: A = 1, Z = A, Z = 0, A = 10000", () => {
    expect(composition({ meanMassNumber: 1, meanCharge: 1 }).electronsPerNucleon).toBe(1);
    expect(composition({ meanMassNumber: 1e4, meanCharge: 1e4 }).chargeMoments.squared).toBe(1e8);
    expect(composition({ meanMassNumber: 2, meanCharge: 0 })).toMatchObject({ chargedIonsPerGram: 0, meanCharge: 0 });
  });

  test.each([
    [{ meanMassNumber: 0.99, meanCharge: 0.5 }, "out-of-range", "meanMassNumber"],
    [{ meanMassNumber: 10001, meanCharge: 0.5 }, "out-of-range", "meanMassNumber"],
    [{ meanMassNumber: 12, meanCharge: -1 }, "out-of-range", "meanCharge"],
    [{ meanMassNumber: 12, meanCharge: 12.5 }, "out-of-range", "meanCharge"],
    [{ meanMassNumber: Number.NaN, meanCharge: 6 }, "not-a-number", "meanMassNumber"],
    [{ meanMassNumber: Number.POSITIVE_INFINITY, meanCharge: 6 }, "not-a-number", "meanMassNumber"],
    [{ meanMassNumber: 12, meanCharge: "6" }, "not-a-number", "meanCharge"],
    [{ meanMassNumber: 12 }, "not-a-number", "meanCharge"],
    [{ meanCharge: 6 }, "not-a-number", "meanMassNumber"],
    [{ meanMassNumber: 12, meanCharge: 6, C12: 1 }, "invalid-composition", "fractions"],
  ])("%o is refused", (given, code, argument) => {
    expect(refusal(() => composition(any(given)))).toMatchObject({ code, argument });
  });
});

describe("refusals", () => {
  test.each([
    [{}, "invalid-composition", "number of fractions"],
    [{ C12: 0, O16: 0 }, "invalid-composition", "sum of fractions"],
    [{ C12: -0.5, O16: 1.5 }, "invalid-composition", "fractions.C12"],
    [{ C12: Number.NaN }, "not-a-number", "fractions.C12"],
    [{ C12: Number.POSITIVE_INFINITY }, "not-a-number", "fractions.C12"],
    [{ C12: "1" }, "not-a-number", "fractions.C12"],
    [{ C12: undefined, O16: 1 }, "not-a-number", "fractions.C12"],
    [{ c12: 1 }, "unknown-nuclide", "nuclide"],
    [{ C12: 1, Xx9: 0 }, "unknown-nuclide", "nuclide"],
    [{ constructor: 1 }, "unknown-nuclide", "nuclide"],
    [JSON.parse('{ "__proto__": 1 }'), "unknown-nuclide", "nuclide"],
    [Object.create({ C12: 1 }), "invalid-composition", "number of fractions"],
    [null, "invalid-composition", "fractions"],
    [undefined, "invalid-composition", "fractions"],
    ["C12", "invalid-composition", "fractions"],
    [[1], "invalid-composition", "fractions"],
  ])("%o: %s", (given, code, argument) => {
    expect(refusal(() => composition(any(given)))).toMatchObject({ code, argument });
  });

  test.each([
    [{ C12: 0, O16: 0 }, 0],
    [{ C12: 1e308, O16: 1e308 }, Number.POSITIVE_INFINITY],
  ])("%o cannot be normalised", (given, sum) => {
    const error = refusal(() => composition(any(given), { normalise: true }));
    expect(error).toMatchObject({ code: "invalid-composition", argument: "sum of fractions", given: sum });
  });

  test.each([[{ normalize: true }], [{ normalise: 1 }], ["normalise"], [true]])(
    "options %o: invalid-option",
    (options) => {
      expect(refusal(() => composition({ C12: 1 }, options as object)).code).toBe("invalid-option");
    },
  );
});

describe("requireComposition", () => {
  const made = composition({ C12: 0.5, O16: 0.5 });

  test("passes what composition() made", () => {
    expect(requireComposition(made)).toBe(made);
  });

  test.each([
    ["a spread copy", { ...made, electronsPerNucleon: 1 }],
    [
      "an open copy of all members, brand included",
      Object.defineProperties({}, Object.getOwnPropertyDescriptors(made)),
    ],
    ["an heir", Object.freeze(Object.create(made))],
    ["a structured clone", structuredClone(made)],
    ["fractions", { C12: 1 }],
    ["null", null],
    ["undefined", undefined],
    ["a label", "C12"],
    ["a number", 1],
  ])("refuses %s", (_, value) => {
    expect(refusal(() => requireComposition(value))).toMatchObject({
      code: "invalid-composition",
      argument: "composition",
    });
  });

  test("passes a composition of another copy of the library", async () => {
    const { vi } = await import("vitest");
    vi.resetModules();
    const copy = await import("../../src/matter/composition.js");
    expect(copy.composition).not.toBe(composition);
    const other = copy.composition({ He4: 1 });
    expect(requireComposition(other)).toBe(other);
  });
});

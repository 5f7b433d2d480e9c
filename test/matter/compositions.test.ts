/** Many compositions at once are those that composition() makes one by one, to the bit, also in a batch. */
import { inspect } from "node:util";
import { describe, expect, test } from "vitest";
import {
  type CompositionRows,
  composition,
  compositions,
  derivativesEvaluator,
  type FermistateError,
  isFermistateError,
  requireComposition,
  solveColumns,
  whiteDwarfMatter,
} from "../../src/index.js";

function refusal(call: () => unknown): FermistateError {
  try {
    call();
  } catch (error) {
    if (isFermistateError(error)) return error;
    throw error;
  }
  throw new Error("accepted");
}

describe("compositions", () => {
  const labels = ["O16", "n", "He4", "C13", "C12", "H1"];
  const rows = 40;
  const fractions = new Float64Array(rows * labels.length);
  let seed = 1;
  for (let row = 0; row < rows; row++) {
    const shares = labels.map(() => {
      seed = (seed * 48271) % 2147483647;
      return seed % 5 === 0 ? 0 : seed / 2147483647; // some are zero
    });
    const sum = shares.reduce((a, b) => a + b);
    for (const [i, share] of shares.entries()) fractions[row * labels.length + i] = share / sum;
  }
  const columns = labels.map((_, i) =>
    Float64Array.from({ length: rows }, (_, row) => fractions[row * 6 + i] as number),
  );
  const row = (i: number) => Object.fromEntries(labels.map((label, j) => [label, columns[j]?.[i] as number]));
  /** Every member, name and species included. */
  const all = (made: ReturnType<typeof composition>) => JSON.parse(JSON.stringify(made)) as object;

  test("row by row and column by column: those of composition(), to the bit", () => {
    const byRow = compositions(labels, fractions);
    const byColumn = compositions(labels, columns);
    expect(byRow).toHaveLength(rows);
    for (let i = 0; i < rows; i++) {
      const one = composition(row(i));
      expect(all(byRow[i]!)).toEqual(all(one));
      expect(all(byColumn[i]!)).toEqual(all(one));
      expect(requireComposition(byRow[i])).toBe(byRow[i]);
    }
    expect(compositions(["C12"], new Float64Array(0))).toEqual([]);
    const scaled = compositions(["C12", "O16"], Float64Array.of(1, 3), { normalise: true });
    expect(scaled[0]?.name).toBe("C12 0.25, O16 0.75");
  });

  test("in a batch: the numbers of single compositions to the bit, in any order, with the right one for each row", () => {
    const matter = whiteDwarfMatter();
    const made = compositions(labels, columns);
    const order = Array.from({ length: 3 * rows }, (_, i) => (i * 7) % rows);
    const density = Float64Array.from(order, (i) => 10 ** (5 + (i % 3)));
    const temperature = Float64Array.from(order, (i) => 10 ** (7 + (i % 3)));
    const output = { pressure: new Float64Array(order.length), specificEntropy: new Float64Array(order.length) };
    matter.evaluate({ density, temperature, composition: order.map((i) => made[i]!) }, output);
    for (const [k, i] of order.entries()) {
      // An equation of state of its own: nothing kept of another composition.
      const state = whiteDwarfMatter().state(density[k] as number, temperature[k] as number, composition(row(i)));
      expect(output.pressure[k]).toBe(state.pressure);
      expect(output.specificEntropy[k]).toBe(state.specificEntropy);
    }
  });

  test.each([
    ["a fraction below zero", ["C12", "O16"], Float64Array.of(0.5, 0.5, 1.5, -0.5), "invalid-composition", 1],
    ["NaN", ["C12", "O16"], Float64Array.of(0.5, 0.5, Number.NaN, 1), "not-a-number", 1],
    ["infinity", ["C12", "O16"], Float64Array.of(Number.POSITIVE_INFINITY, 0.5), "not-a-number", 0],
    ["a wrong sum", ["C12", "O16"], Float64Array.of(0.5, 0.5, 0.5, 0.4), "invalid-composition", 1],
    ["half a row", ["C12", "O16"], Float64Array.of(0.5, 0.5, 1), "length-mismatch", undefined],
    ["too few columns", ["C12", "O16"], [Float64Array.of(1)], "length-mismatch", undefined],
    ["uneven columns", ["C12", "O16"], [Float64Array.of(1), new Float64Array(2)], "length-mismatch", undefined],
    ["no columns", ["C12"], [[1]], "invalid-option", undefined],
    ["an unknown nuclide", ["C12", "Xx9"], Float64Array.of(1, 0), "unknown-nuclide", undefined],
    ["a nuclide twice", ["C12", "C12"], Float64Array.of(1, 0), "invalid-composition", undefined],
    ["no label", [], Float64Array.of(1), "invalid-composition", undefined],
  ])("%s is refused", (_name, names, given, code, index) => {
    expect(refusal(() => compositions(names, given as Float64Array))).toMatchObject({ code, index });
  });

  test("an option that does not exist", () => {
    expect(refusal(() => compositions(["C12"], Float64Array.of(1), { normalize: true } as object)).code).toBe(
      "invalid-option",
    );
  });
});

describe("a matrix of fractions in a batch", () => {
  const nuclides = ["O16", "He4", "C12", "n", "C13"];
  const rows = 60;
  let seed = 7;
  const random = (): number => {
    seed = (seed * 48271) % 2147483647;
    return seed / 2147483647;
  };
  const shares = Float64Array.from({ length: rows * nuclides.length }, () => (random() < 0.3 ? 0 : random()));
  for (let row = 0; row < rows; row++) shares[row * nuclides.length] = 0.1 + random(); // no row is empty
  const columns = nuclides.map((_, i) =>
    Float64Array.from({ length: rows }, (_, row) => shares[row * nuclides.length + i] as number),
  );
  const density = Float64Array.from({ length: rows }, () => 10 ** (4 + 5 * random()));
  const temperature = Float64Array.from({ length: rows }, () => 10 ** (7 + 2 * random()));
  const list = compositions(nuclides, shares, { normalise: true });
  const matrices = [
    { nuclides, fractions: shares, normalise: true },
    { nuclides, fractions: columns, normalise: true },
  ] as const;

  test("states, derivatives and inverse questions of the same compositions as objects, to the bit", () => {
    const matter = whiteDwarfMatter();
    const column = () => new Float64Array(rows);
    const wanted = () => ({ pressure: column(), specificEnergy: column(), gamma1: column(), ionCoupling: column() });
    const derivatives = derivativesEvaluator(matter, { of: ["pressure"], by: ["specificEnergy", "density"] });
    const [states, found] = [wanted(), wanted()];
    matter.evaluate({ density, temperature, composition: list }, states);
    const slope = { pressure: { specificEnergy: column(), density: column() } };
    derivatives.evaluate({ density, temperature, composition: list }, slope);
    const answer = { temperature: column() };
    const { specificEnergy } = states;
    solveColumns(matter, { density, specificEnergy, composition: list }, answer);
    for (const composition of matrices) {
      matter.evaluate({ density, temperature, composition }, found);
      expect(found).toEqual(states);
      const other = { pressure: { specificEnergy: column(), density: column() } };
      derivatives.evaluate({ density, temperature, composition }, other);
      expect(other).toEqual(slope);
      const again = { temperature: column() };
      solveColumns(matter, { density, specificEnergy, composition }, again);
      expect(again).toEqual(answer);
    }
  });

  test.each([
    ["a row that does not sum to one", { nuclides: ["C12", "O16"], fractions: Float64Array.of(0.5, 0.5, 0.5, 0.4) }, 1],
    ["NaN", { nuclides: ["C12"], fractions: [Float64Array.of(1, Number.NaN)] }, 1],
    ["another number of rows", { nuclides: ["C12"], fractions: Float64Array.of(1) }, undefined],
    [
      "an option that does not exist",
      { nuclides: ["C12"], fractions: Float64Array.of(1, 1), normalize: true },
      undefined,
    ],
    ["no fractions", { nuclides: ["C12"] }, undefined],
    ["columns with a gap", { nuclides: ["C12", "O16"], fractions: new Array(2) }, undefined],
    ["a nuclide twice", { nuclides: ["C12", "C12"], fractions: new Float64Array(4).fill(0.5) }, undefined],
    ["a copy of a composition in a list", [composition({ C12: 1 }), { ...composition({ C12: 1 }) }], 1],
  ])("%s is refused before the first row is written", (_name, composition, index) => {
    const output = { pressure: Float64Array.of(-7, -7) };
    const two = Float64Array.of(1e6, 1e6);
    const codes = ["invalid-composition", "not-a-number", "length-mismatch", "invalid-option"];
    const input = { density: two, temperature: two, composition: composition as object as CompositionRows };
    for (const call of [
      () => whiteDwarfMatter().evaluate(input, output),
      () => solveColumns(whiteDwarfMatter(), { density: two, pressure: two, composition: input.composition }, {}),
    ]) {
      const error = refusal(call);
      expect(codes).toContain(error.code);
      expect(error.index).toBe(index);
    }
    expect([...output.pressure]).toEqual([-7, -7]);
  });
});

test("JSON and Node's console show all members, those made on demand too", () => {
  const made = composition({ C12: 0.25, O16: 0.75 });
  const shown = JSON.parse(JSON.stringify(made)) as Record<string, unknown>;
  expect(Object.keys(shown).sort()).toEqual(
    [
      "chargeMoments",
      "chargedIonEntropyConstant",
      "chargedIonsPerGram",
      "couplingMoment",
      "electronsPerGram",
      "electronsPerNucleon",
      "ionEntropyConstant",
      "ionsPerGram",
      "ionsPerNucleon",
      "meanCharge",
      "meanMassNumber",
      "name",
      "plasmaFrequencySum",
      "species",
    ].sort(),
  );
  expect(shown).toMatchObject({ name: made.name, meanCharge: made.meanCharge, species: [{ label: "C12" }, {}] });
  expect(inspect(made)).toContain("nucleonFraction: 0.25");
});

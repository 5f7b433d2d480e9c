/** The pairs that TypeScript lets through are those that `solve` answers; `npm run types` is the test of the first half. */
import { expect, test } from "vitest";
import { composition, type Given, type GivenName, type SolveInput, solve, whiteDwarfMatter } from "../../src/index.js";
import { pairs } from "./pairs.js";

const core = composition({ C12: 0.5, O16: 0.5 });
const column = Float64Array.of(1);

/** The names of the pair that a given object holds, sorted. */
type NamesOf<One> = One extends unknown
  ? { [Name in keyof One]-?: undefined extends One[Name] ? never : Name }[keyof One]
  : never;
type Listed = (typeof pairs)[number][number];
/** True where the types are the same. */
type Same<A, B> = [A] extends [B] ? ([B] extends [A] ? true : false) : false;

test("pairs that contradict each other or are not whole do not compile", () => {
  const accepted: Given[] = [
    { density: 1, temperature: 1 },
    { density: 1, specificEnergy: 1 },
    { specificEntropy: 1, pressure: 1, density: undefined },
  ];
  const refused: Given[] = [
    // @ts-expect-error: one quantity
    { density: 1 },
    // @ts-expect-error: three quantities
    { density: 1, temperature: 1, pressure: 1 },
    // @ts-expect-error: energy is not one-valued in density at given temperature
    { temperature: 1, specificEnergy: 1 },
    // @ts-expect-error: energy and enthalpy
    { specificEnergy: 1, specificEnthalpy: 1 },
    // @ts-expect-error: no such quantity
    { density: 1, specificEnergie: 1 },
    // @ts-expect-error: a column
    { density: 1, pressure: column },
  ];
  const columns: SolveInput[] = [
    { composition: core, density: column, pressure: column, guess: { temperature: column } },
    // @ts-expect-error: one quantity
    { composition: core, density: column },
    // @ts-expect-error: three quantities
    { composition: core, density: column, pressure: column, temperature: column },
    // @ts-expect-error: numbers
    { composition: core, density: 1, pressure: 1 },
  ];
  expect([accepted.length, refused.length, columns.length]).toEqual([3, 6, 4]);
  const everyName: Same<NamesOf<Given>, GivenName> & Same<Listed, GivenName> = true;
  expect(everyName).toBe(true);
});

test("every pair of names: answered or refused with invalid-option, as the types say", () => {
  const matter = whiteDwarfMatter();
  const { density, temperature, pressure, specificEnergy, specificEntropy, specificEnthalpy } = matter.state(
    1e5,
    1e8,
    core,
  );
  const values = { density, temperature, pressure, specificEnergy, specificEntropy, specificEnthalpy };
  const names = Object.keys(values) as GivenName[];
  const answered: string[] = [];
  for (const [i, first] of names.entries()) {
    for (const second of names.slice(i + 1)) {
      const given = { [first]: values[first], [second]: values[second] } as object as Given;
      try {
        expect(solve(matter, core, given).state.temperature / temperature).toBeCloseTo(1, 6);
        answered.push([first, second].sort().join());
      } catch (error) {
        expect(error).toMatchObject({ code: "invalid-option", argument: "given" });
      }
    }
  }
  const listed = [["density", "temperature"], ...pairs].map((pair) => [...pair].sort().join());
  expect(answered.sort()).toEqual(listed.sort());
});

/** A column `refused`: each row the reason for which a single call throws, others as without the column, to the bit. */
import fc from "fast-check";
import { describe, expect, test } from "vitest";
import {
  type Contribution,
  combine,
  composition,
  electronPositronGas,
  FermistateError,
  type Given,
  idealIons,
  isFermistateError,
  type QuantityName,
  refusalReasons,
  type SolveInput,
  solve,
  solveColumns,
  whiteDwarfMatter,
  withPhase,
} from "../../src/index.js";
import { pairs } from "../inverse/pairs.js";

const matter = whiteDwarfMatter();
const core = composition({ C12: 0.5, O16: 0.5 });
const names: readonly QuantityName[] = ["pressure", "specificEnergy", "heatCapacityV", "positronDensity"];

function codeOf(call: () => unknown): string | undefined {
  try {
    call();
    return undefined;
  } catch (error) {
    if (isFermistateError(error)) return error.code;
    throw error;
  }
}

/** Anything a caller can put into a column, ordinary values often. */
const wild = (low: number, high: number) =>
  fc.oneof(
    { weight: 6, arbitrary: fc.double({ min: low, max: high, noNaN: true }).map((x) => 10 ** x) },
    { weight: 1, arbitrary: fc.constantFrom(0, -1, Number.NaN, Number.POSITIVE_INFINITY, 1e-300, 1e300) },
  );

describe("evaluate", () => {
  test.each([
    ["the full plasma", matter],
    ["a liquid, refused at T = 0", withPhase(matter, "liquid")],
    ["an ideal plasma, whose domain has no T = 0", whiteDwarfMatter({ coulomb: false })],
  ])("%s: the code of `state`, row by row", (_name, eos) => {
    const seen = new Set<number>();
    const row = fc.tuple(wild(-8, 14), wild(1, 12));
    fc.assert(
      fc.property(fc.array(row, { minLength: 1, maxLength: 20 }), (rows) => {
        const density = Float64Array.from(rows, ([rho]) => rho);
        const temperature = Float64Array.from(rows, ([, t]) => t);
        const output = Object.fromEntries(names.map((name) => [name, new Float64Array(rows.length).fill(-7)]));
        const refused = new Uint8Array(rows.length).fill(99);
        eos.evaluate({ density, temperature, composition: core }, { ...output, refused });
        for (const [i, [rho, t]] of rows.entries()) {
          const reason = refused[i] as number;
          seen.add(reason);
          expect(refusalReasons[reason]?.code, `${rho} ${t}`).toBe(codeOf(() => eos.state(rho, t, core)));
          const state = reason === 0 ? eos.state(rho, t, core) : undefined;
          for (const name of names) expect(output[name]?.[i]).toBe(state === undefined ? -7 : state[name]);
        }
      }),
      { seed: 3, numRuns: 150 },
    );
    for (const reason of [0, 1, 2, 3, 4, 5, 6, 7, 8]) expect([...seen], `reason ${reason}`).toContain(reason);
  });

  test("each broken condition of stability has its number", () => {
    const reasons: number[] = [];
    for (const [rho, t] of [
      [1, 1e4],
      [30, 1e5],
    ] as const) {
      const refused = new Uint8Array(1);
      const input = { density: Float64Array.of(rho), temperature: Float64Array.of(t), composition: core };
      matter.evaluate(input, { refused });
      reasons.push(refused[0] as number);
    }
    expect(reasons.map((reason) => refusalReasons[reason]?.meaning)).toEqual([
      "pressure is not positive",
      expect.any(String),
    ]);
    const domain = { density: [1e-10, 1e15], temperature: [1, 1e12], zeroTemperature: false } as const;
    const bad = (code: "no-convergence" | "unstable" | "invalid-composition" | "out-of-range"): Contribution => ({
      name: "refusing",
      domain,
      add: () => {
        throw new FermistateError(code, { argument: "density", given: 1, allowed: "nothing" });
      },
    });
    const input = { density: Float64Array.of(1), temperature: Float64Array.of(1e7), composition: core };
    const refused = new Uint8Array(1);
    for (const code of ["no-convergence", "unstable", "invalid-composition"] as const) {
      combine(electronPositronGas(), bad(code)).evaluate(input, { refused });
      expect(refusalReasons[refused[0] as number]?.code).toBe(code);
    }
    // What is not about the row is no refusal of a row.
    expect(codeOf(() => combine(bad("out-of-range")).evaluate(input, { refused }))).toBe("out-of-range");
  });

  test("the column is checked before a row is written", () => {
    const input = { density: Float64Array.of(1, 1), temperature: Float64Array.of(1e7, 1e7), composition: core };
    expect(codeOf(() => matter.evaluate(input, { refused: new Float64Array(2) as never }))).toBe("invalid-option");
    expect(codeOf(() => matter.evaluate(input, { refused: new Uint8Array(1) }))).toBe("length-mismatch");
    const gas = combine(idealIons());
    const output = { positronDensity: new Float64Array(2), refused: new Uint8Array(2) };
    expect(codeOf(() => gas.evaluate(input, output))).toBe("unavailable-quantity");
  });
});

describe("solveColumns", () => {
  test.each([["density", "temperature"] as const, ...pairs])("%s and %s: the code of `solve`", (first, second) => {
    const range = {
      density: wild(-4, 12),
      temperature: wild(3, 11),
      pressure: wild(5, 35),
      specificEnergy: wild(12, 22),
      specificEntropy: wild(5, 11),
      specificEnthalpy: wild(12, 22),
    };
    fc.assert(
      // One row at a time: where matter is unstable, what a search meets first depends on where it starts.
      fc.property(range[first], range[second], (a, b) => {
        const columns = { [first]: Float64Array.of(a), [second]: Float64Array.of(b) };
        const refused = new Uint8Array(1);
        const density = new Float64Array(1).fill(-7);
        solveColumns(matter, { composition: core, ...columns } as object as SolveInput, { density, refused });
        const code = refusalReasons[refused[0] as number]?.code;
        const given = { [first]: a, [second]: b } as object as Given;
        expect(code, `${a} ${b}`).toBe(codeOf(() => solve(matter, core, given)));
        expect(density[0] === -7).toBe(code !== undefined);
      }),
      { seed: 5, numRuns: 150 },
    );
  });

  test("too low, too high and below cold are told apart", () => {
    const cold = matter.state(1e6, 0, core).specificEnergy;
    const specificEnergy = Float64Array.of(0.9 * cold, 1e40, 1.1 * cold);
    const refused = new Uint8Array(3);
    const density = new Float64Array(3).fill(1e6);
    solveColumns(matter, { composition: core, density, specificEnergy }, { refused });
    expect([...refused].map((reason) => refusalReasons[reason]?.meaning)).toEqual([
      "a given quantity is below its value at T = 0 and this density",
      "a given quantity is above all that matter has there",
      "answered",
    ]);
  });
});

describe("the message of an unstable sum", () => {
  test.each([
    [1e-3, 1e4],
    [1, 1e4],
    [10, 1e5],
  ])("%f g/cm^3, %f K: names the place, and from where on it is stable, which is so", (rho, t) => {
    let error: FermistateError | undefined;
    try {
      matter.state(rho, t, core);
    } catch (thrown) {
      if (isFermistateError(thrown)) error = thrown;
    }
    expect(error?.code).toBe("unstable");
    expect(error?.message).toContain(`density ${rho} g/cm^3 and temperature ${t} K`);
    const [, hotter, denser] = /stable from about (\S+) K at this density or about (\S+) g\/cm/.exec(
      error?.message ?? "",
    ) as unknown as string[];
    // Six halvings of a factor 4 (10) and two printed digits: within 8 %.
    expect(codeOf(() => matter.state(rho, 1.08 * Number(hotter), core))).toBeUndefined();
    expect(codeOf(() => matter.state(rho, Number(hotter) / 1.08, core))).toBe("unstable");
    expect(codeOf(() => matter.state(1.08 * Number(denser), t, core))).toBeUndefined();
    expect(codeOf(() => matter.state(Number(denser) / 1.08, t, core))).toBe("unstable");
  });
});

/**
 * Certificates: the library against the reference on points with a fixed seed, a wrong coefficient found and located, and
 * what has no reference named.
 */
import {
  type Contribution,
  combine,
  composition,
  coulombPlasma,
  type EquationOfState,
  electronPositronGas,
  fermionGas,
  idealIons,
  isFermistateError,
  radiation,
  whiteDwarfMatter,
} from "fermistate";
import {
  certificateCsv,
  certificateText,
  certify,
  certifyState,
  errorMaps,
  stateCertificateText,
} from "fermistate/certify";
import { describe, expect, test } from "vitest";
import { referenceState } from "../../src/certify/reference-state.js";

const core = composition({ C12: 0.5, O16: 0.5 });
const region = { density: [1e4, 1e10], temperature: [1e6, 1e9], points: 6, seed: 3 } as const;

/** A contribution under another name or with something added. */
function changed(one: Contribution, more: Partial<Contribution>): Contribution {
  const { phases: _, ...rest } = one;
  return { ...rest, ...more };
}

describe("the library", () => {
  // Twice the largest error measured on these points; wider regions stand in docs/guide/certify.md.
  const bounds = {
    pressure: 1.9e-15,
    specificEnergy: 0.9e-15,
    specificEntropy: 1.4e-15,
    heatCapacityV: 1e-14,
    densityExponent: 1.2e-15,
    temperatureExponent: 1.2e-14,
    gamma1: 1.3e-15,
    adiabaticGradient: 3.4e-15,
    electronDegeneracy: 2.2e-15,
    f21: 4.2e-14,
    f22: 4e-13, // carbon and oxygen alone
  } as const;
  const quantities = Object.keys(bounds) as (keyof typeof bounds)[];

  test.each([
    ["carbon and oxygen", core, region],
    [
      "hydrogen and helium",
      composition({ H1: 0.7, He4: 0.3 }),
      { ...region, density: [1e-2, 1e5], points: 3 } as const,
    ],
    ["with iron", composition({ C12: 0.3, Fe56: 0.7 }), { ...region, density: [1e6, 1e10], points: 3 } as const],
  ])("%s: every error is rounding", (_, matter, where) => {
    // third order, which takes twice the time, for one of them
    const asked = matter === core ? quantities : quantities.filter((name) => !/^f(2[0-2]|30)$/.test(name));
    const certificate = certify(whiteDwarfMatter(), matter, { region: where, quantities: asked });
    expect(certificate.compared).toBe(where.points);
    expect([certificate.refused, certificate.unknown, certificate.uncertified]).toEqual([[], [], []]);
    expect(certificate.referenceError).toBeLessThan(1e-20);
    for (const { name, relative } of certificate.quantities) {
      const { density, temperature } = relative.at;
      const where = `${name} at ${density} g/cm^3, ${temperature} K`;
      expect(relative.largest, where).toBeLessThan(bounds[name as keyof typeof bounds]);
      expect(relative.median, where).toBeGreaterThan(0); // a comparison with itself would be exact
    }
  });

  test.each([
    ["wigner-kirkwood", { quantum: "wigner-kirkwood", phase: "liquid" }, 1e6, 1e7],
    ["baiko-yakovlev", { quantum: "baiko-yakovlev", polarisation: false }, 1e6, 1e7],
    ["fcc", { lattice: "fcc" }, 1e6, 1e6],
    ["rigid", { exchange: false, polarisation: false, mixture: false, anharmonic: false }, 1e6, 1e6],
  ] as const)("its options are understood: %s", (_, options, density, temperature) => {
    const { values } = certifyState(whiteDwarfMatter({ coulomb: options }), core, density, temperature, {
      quantities: ["pressure", "specificEntropy", "heatCapacityV"],
    });
    for (const { name, relative } of values) expect(relative, name).toBeLessThan(2e-15);
  });

  test("T = 0: limits of ratios and the entropy of the alloy", () => {
    const { values, unknown } = certifyState(whiteDwarfMatter(), core, 2e6, 0, { digits: 20 });
    expect(values.length).toBe(31);
    expect(unknown).toEqual(["electronCoupling", "ionCoupling"]); // infinite
    for (const { name, relative } of values) expect(relative, name).toBeLessThan(1e-15);
  });
});

test("the reference at 17 digits is that of 27 digits", () => {
  const quantities = ["pressure", "specificEntropy", "heatCapacityV", "gamma1"] as const;
  for (const [density, temperature] of [
    [1e6, 1e7],
    [1e8, 1e6],
  ] as const) {
    const [few, many] = [17, 27].map((digits) =>
      certifyState(whiteDwarfMatter(), core, density, temperature, { digits, quantities }),
    );
    for (const [i, { reference, name }] of few!.values.entries()) {
      const [a, b] = [reference, many!.values[i]!.reference];
      // all digits but the last, which is rounded
      expect(b.replace(/e.*/, "").startsWith(a.replace(/e.*/, "").slice(0, -1)), `${name} ${a} ${b}`).toBe(true);
    }
  }
});

test("one coefficient wrong by 1e-6 is caught, and located", () => {
  const plasma = coulombPlasma();
  const madelung = plasma.parts.find(({ name }) => name === "lattice energy")!;
  const own = new Float64Array(11);
  const wrong = changed(plasma, {
    add(point, matter, order, members) {
      plasma.add(point, matter, order, members);
      own.fill(0);
      madelung.add(point, matter, order, own);
      for (let i = 0; i < own.length; i++) members[i]! += 1e-6 * own[i]!;
    },
  });
  const matter = combine(electronPositronGas(), wrong, radiation());
  // 1e6 g/cm^3 melts at 2.58e6 K
  const points = { density: [1e6, 1e6, 1e6], temperature: [1e7, 3e6, 2e6] };
  const quantities = ["pressure", "specificEnergy", "heatCapacityV"] as const;
  const { columns, ...found } = certify(matter, core, { points, quantities });
  const [pressure, energy, heat] = found.quantities;
  expect(pressure!.relative.at).toEqual({ density: 1e6, temperature: 2e6 });
  expect(energy!.relative.at).toEqual({ density: 1e6, temperature: 2e6 });
  // the lattice is 3 % of the pressure there
  expect(pressure!.relative.largest).toBeGreaterThan(1e-8);
  expect(pressure!.relative.largest).toBeLessThan(1e-7);
  for (const [liquid, hot] of columns.relative) expect(Math.max(liquid!, hot!)).toBeLessThan(2e-15);
  expect(heat!.relative.largest).toBeLessThan(2e-15); // the lattice has none
});

describe("what has no reference", () => {
  const neutronRich = composition({ n: 0.01, C12: 0.49, O16: 0.5 });
  const quantities = ["pressure", "gamma1"] as const;

  test("is named, with its share", () => {
    const matter = combine(electronPositronGas(), idealIons({ freeNeutrons: false }), fermionGas({ species: "n" }));
    const {
      uncertified,
      quantities: made,
      ...rest
    } = certify(matter, neutronRich, {
      points: { density: [1e6], temperature: [1e9] },
      quantities,
    });
    expect(uncertified).toEqual(["fermions n"]);
    // neutrons are 0.01 n_B kT
    const share = (0.01 * 1e6 * 1.380649e-16 * 1e9) / 1.66053906892e-24;
    const { pressure } = matter.state(1e6, 1e9, neutronRich);
    expect(made[0]!.uncertifiedShare! / (share / pressure)).toBeCloseTo(1, 6);
    expect(made[1]!.uncertifiedShare).toBeUndefined(); // a ratio is no sum
    expect(certificateText({ ...rest, uncertified, quantities: made })).toContain("Not certified");
  });

  test("alone is refused", () => {
    const unknown = changed(radiation(), { name: "something else", physics: [{ model: "new", options: {} }] });
    expect(codeOf(() => certify(combine(unknown), core, { region }))).toBe("invalid-option");
    const { physics: _, ...silent } = radiation();
    expect(codeOf(() => certify(combine(silent), core, { region }))).toBe("invalid-option");
  });

  test("an equation of state of another kind is judged by the physics it names", () => {
    const source = whiteDwarfMatter();
    const off = { ...source.state(1e6, 1e7, core), pressure: 1.001 * source.state(1e6, 1e7, core).pressure };
    const physics = source.contributions.flatMap((one) => one.physics ?? []);
    const table = {
      ...source,
      name: "a table",
      contributions: [{ ...radiation(), name: "a table", physics }],
      state: () => off,
    } as EquationOfState;
    const { values } = certifyState(table, core, 1e6, 1e7, { quantities: ["pressure", "specificEnergy"] });
    expect(values[0]!.relative).toBeCloseTo(0.001 / 1.001, 9);
    expect(values[1]!.relative).toBeLessThan(1e-15);
  });
});

test("where the reference has no answer it says so: a classical gas at T = 0, matter without electrons", () => {
  const neutronRich = composition({ n: 0.1, C12: 0.9 });
  const physics = whiteDwarfMatter().contributions.flatMap((one) => one.physics ?? []);
  const request = { physics, composition: neutronRich, density: 1e6, temperature: 0, digits: 20, length: 6 } as const;
  const at = { ...request, phaseAtBoundary: true, positrons: false };
  expect(codeOf(() => referenceState(at))).toBe("outside-domain");
  const neutral = composition({ n: 1 });
  expect(codeOf(() => certifyState(whiteDwarfMatter(), neutral, 1e6, 1e9))).toBe("invalid-composition");
});

describe("the result", () => {
  const quantities = ["pressure", "gamma1"] as const;
  const points = { density: [1e6, 0.3, 1e8], temperature: [1e8, 1e5, 1e8] };
  const steps: number[] = [];
  const certificate = certify(whiteDwarfMatter(), core, {
    points,
    quantities,
    onProgress: (done, all) => steps.push(done / all),
  });

  test("counts what was refused, and by whom", () => {
    expect([certificate.asked, certificate.compared, steps]).toEqual([3, 2, [1 / 3, 2 / 3, 1]]);
    const [refused] = certificate.refused;
    expect(refused).toMatchObject({ by: "equation of state", code: "unstable", count: 1 });
    expect(refused!.first).toMatchObject({ density: 0.3, temperature: 1e5 });
  });

  test("is plain data", () => {
    expect(JSON.parse(JSON.stringify(certificate))).toEqual(certificate);
  });

  test("is what its columns say", () => {
    const [pressure] = certificate.quantities;
    const column = certificate.columns.relative[0]!;
    expect(pressure!.relative.largest).toBe(Math.max(...column));
    expect(pressure!.relative.median).toBe(Math.min(...column)); // of two, by nearest rank
    expect(certificate.columns.scaled[1]).toBeNull();
    const [map] = errorMaps(certificate);
    expect(map).toMatchObject({ quantity: "pressure", density: [1e6, 1e8], temperature: [1e8, 1e8] });
    for (const one of map!.logError) expect(one).toBeLessThan(-14.5);
  });

  test("as text and as CSV", () => {
    const text = certificateText(certificate);
    for (const line of text.split("\n")) expect(line.length).toBeLessThanOrEqual(80);
    expect(text).toContain("2 of 3 points compared");
    expect(text).toContain("unstable");
    const [head, ...rows] = certificateCsv(certificate).trimEnd().split("\n");
    expect(head!.split(",")).toHaveLength(5);
    expect(rows.map((row) => row.split(",").map(Number))).toEqual(
      [0, 1].map((i) => {
        const { density, temperature, relative, scaled } = certificate.columns;
        return [density[i], temperature[i], relative[0]![i], scaled[0]![i], relative[1]![i]];
      }),
    );
  });

  test("of one state as text", () => {
    const audit = certifyState(whiteDwarfMatter(), core, 2e6, 1e7, { quantities });
    const text = stateCertificateText(audit);
    for (const { reference } of audit.values) expect(text).toContain(reference);
    for (const line of text.split("\n")) expect(line.length).toBeLessThanOrEqual(80);
  });
});

describe("points of a region", () => {
  const only = (seed: number) =>
    certify(combine(radiation()), core, { region: { ...region, points: 40, seed }, quantities: ["pressure"] }).columns;

  test("are the same for the same seed, others for another, all inside and evenly spread", () => {
    const { density, temperature } = only(3);
    expect(only(3).density).toEqual(density);
    expect(only(4).density).not.toEqual(density);
    expect(Math.min(...density)).toBeGreaterThanOrEqual(1e4);
    expect(Math.max(...density)).toBeLessThanOrEqual(1e10);
    // five in each of eight equal parts, give or take two: Halton's sequence in base 2 and 3
    const parts = (column: readonly number[], low: number, high: number): number[] => {
      const counts = new Array<number>(8).fill(0);
      for (const one of column) counts[Math.min(7, Math.floor((8 * Math.log(one / low)) / Math.log(high / low)))]! += 1;
      return counts;
    };
    for (const count of [...parts(density, 1e4, 1e10), ...parts(temperature, 1e6, 1e9)]) {
      expect(Math.abs(count - 5)).toBeLessThanOrEqual(2);
    }
  });
});

test.each<[string, unknown, string]>([
  ["no place", {}, "invalid-option"],
  ["two places", { region, points: { density: [1], temperature: [1] } }, "invalid-option"],
  ["an unknown option", { region, accuracy: 1 }, "invalid-option"],
  ["a range upside down", { region: { ...region, density: [2, 1] } }, "out-of-range"],
  ["a negative range", { region: { ...region, density: [-1, 1] } }, "out-of-range"],
  ["half a point", { region: { ...region, points: 0.5 } }, "out-of-range"],
  ["NaN points", { region: { ...region, points: Number.NaN } }, "not-a-number"],
  ["a negative seed", { region: { ...region, seed: -1 } }, "out-of-range"],
  ["columns of two lengths", { points: { density: [1, 2], temperature: [1] } }, "length-mismatch"],
  ["NaN in a column", { points: { density: [Number.NaN], temperature: [1] } }, "not-a-number"],
  ["no columns", { points: { density: [], temperature: [] } }, "invalid-option"],
  ["fewer digits than a double", { region, digits: 16 }, "invalid-option"],
  ["too many digits", { region, digits: 61 }, "invalid-option"],
  ["an unknown quantity", { region, quantities: ["taste"] }, "unavailable-quantity"],
  ["no quantity", { region, quantities: [] }, "invalid-option"],
  ["a place nobody answers", { points: { density: [1e30], temperature: [1e7] } }, "outside-domain"],
])("%s is refused", (_, options, code) => {
  expect(codeOf(() => certify(whiteDwarfMatter(), core, options as never))).toBe(code);
});

test("no equation of state, no composition", () => {
  expect(codeOf(() => certify({} as never, core, { region }))).toBe("invalid-option");
  expect(codeOf(() => certify(whiteDwarfMatter(), {} as never, { region }))).toBe("invalid-composition");
  expect(codeOf(() => certifyState(whiteDwarfMatter(), core, -1, 1e7))).toBe("out-of-range");
});

function codeOf(action: () => unknown): string {
  try {
    action();
    return "no error";
  } catch (error) {
    if (!isFermistateError(error)) throw error;
    return error.code;
  }
}

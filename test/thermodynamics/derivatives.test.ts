/**
 * Derivatives by pairs of variables: identities of thermodynamics at random points, values integrated along paths, T = 0,
 * refusals. Identities: Callen 1985, Thermodynamics and an Introduction to Thermostatistics, chapter 7 and appendix A.
 */
import { expect, test } from "vitest";
import { type ErrorCode, isFermistateError } from "../../src/errors.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { composition } from "../../src/matter/composition.js";
import { type StateVariable, stateVariables } from "../../src/thermodynamics/brackets.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { type Derivatives, derivatives, derivativesEvaluator } from "../../src/thermodynamics/derivatives.js";
import type { EquationOfState, State } from "../../src/thermodynamics/equation-of-state.js";
import { addNaturalDerivatives } from "../../src/thermodynamics/free-energy.js";
import { type DifferentiableQuantity, differentiable } from "../../src/thermodynamics/gradients.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { Measured, uniform } from "../measured.js";

/** What toThrow compares: an error's code. */
const code = (expected: ErrorCode) => expect.objectContaining({ name: "FermistateError", code: expected });

/** Nodes in (0, 1) and weights of six-point Gauss-Legendre: Abramowitz & Stegun 1964, table 25.4. */
const rule: readonly (readonly [number, number])[] = [
  [0.238619186083197, 0.467913934572691],
  [0.661209386466265, 0.360761573048139],
  [0.932469514203152, 0.17132449237917],
].flatMap(([x, w]) => [
  [(1 - x!) / 2, w! / 2],
  [(1 + x!) / 2, w! / 2],
]) as [number, number][];

const matters = [composition({ C12: 0.5, O16: 0.5 }), composition({ He4: 1 }), composition({ Fe56: 1 })];

/** A kind of matter and random points in it: density and temperature as powers of ten. */
interface Kind {
  readonly name: string;
  readonly eos: EquationOfState;
  readonly density: readonly [number, number];
  readonly temperature: readonly [number, number];
}
const kinds: readonly Kind[] = [
  { name: "ideal", eos: whiteDwarfMatter({ coulomb: false }), density: [-12, 14], temperature: [3, 12] },
  { name: "liquid", eos: whiteDwarfMatter({ coulomb: { phase: "liquid" } }), density: [3, 9], temperature: [7, 9.5] },
  { name: "crystal", eos: whiteDwarfMatter({ coulomb: { phase: "crystal" } }), density: [5, 10], temperature: [5, 7] },
];

/** Calls `visit` at `count` random points of each kind of matter where the sum is stable. */
function atRandom(count: number, seed: number, visit: (kind: Kind, state: State, where: string) => void): void {
  const random = uniform(seed);
  for (const kind of kinds) {
    const between = ([low, high]: readonly [number, number]): number => 10 ** (low + (high - low) * random());
    let visited = 0;
    for (let i = 0; visited < count && i < 10 * count; i++) {
      const [density, temperature] = [between(kind.density), between(kind.temperature)];
      let state: State;
      try {
        state = kind.eos.state(density, temperature, matters[i % 3]!);
      } catch (error) {
        if (isFermistateError(error) && error.code === "unstable") continue;
        throw error;
      }
      visit(kind, state, `${kind.name} ${state.composition.name} rho ${density} T ${temperature}`);
      visited++;
    }
    expect(visited).toBe(count);
  }
}

/** All six variables by a pair; undefined where the pair does not fix the state. */
function tryAll<const A extends StateVariable, const B extends StateVariable>(
  { eos }: Kind,
  { density, temperature, composition: matter }: State,
  a: A,
  b: B,
): Derivatives<DifferentiableQuantity, A | B> | undefined {
  const by: readonly [A | B, A | B] = [a, b];
  try {
    return derivatives(eos, density, temperature, matter, { of: differentiable, by });
  } catch (error) {
    if (isFermistateError(error) && error.code === "dependent-variables") return undefined;
    throw error;
  }
}

test("3 x 1000 points: adiabats, Maxwell's relations and potentials", () => {
  const measured = new Measured();
  atRandom(1000, 271828, (kind, s, where) => {
    const { density: rho, temperature: t, pressure: p } = s;
    const check = (name: string, actual: number, expected: number, scale?: number): void =>
      measured.compare(name, actual, expected, where, scale);
    const rhoS = tryAll(kind, s, "density", "specificEntropy")!;
    const pS = tryAll(kind, s, "pressure", "specificEntropy")!;
    const rhoT = tryAll(kind, s, "density", "temperature")!;
    const pT = tryAll(kind, s, "pressure", "temperature")!;
    check("(dP/drho)_s = gamma1 P/rho", rhoS.pressure.density, (s.gamma1 * p) / rho);
    // gamma3 - 1 has the rounding of gamma3 to 1.
    check(
      "(dT/drho)_s = (gamma3 - 1) T/rho",
      rhoS.temperature.density,
      ((s.gamma3 - 1) * t) / rho,
      (s.gamma3 * t) / rho,
    );
    check("(de/drho)_s = P/rho^2", rhoS.specificEnergy.density, p / rho ** 2);
    check("(de/ds)_rho = T", rhoS.specificEnergy.specificEntropy, t);
    check("(dh/dP)_s = 1/rho", pS.specificEnthalpy.pressure, 1 / rho);
    check("(dh/ds)_P = T", pS.specificEnthalpy.specificEntropy, t);
    check("(dT/dP)_s = gradient T/P", pS.temperature.pressure, (s.adiabaticGradient * t) / p);
    check("(dF/dT)_rho = -s", rhoT.specificFreeEnergy.temperature, -s.specificEntropy);
    check("(dF/drho)_T = P/rho^2", rhoT.specificFreeEnergy.density, p / rho ** 2);
    check("(ds/dT)_rho = c_v/T", rhoT.specificEntropy.temperature, s.heatCapacityV / t);
    check("(ds/dT)_P = c_p/T", pT.specificEntropy.temperature, s.heatCapacityP / t);
    check("(dh/dT)_P = c_p", pT.specificEnthalpy.temperature, s.heatCapacityP);
    // Maxwell: of e, F, h and of g.
    check("(dT/drho)_s = (dP/ds)_rho/rho^2", rhoS.temperature.density, rhoS.pressure.specificEntropy / rho ** 2);
    check("(ds/drho)_T = -(dP/dT)_rho/rho^2", rhoT.specificEntropy.density, -rhoT.pressure.temperature / rho ** 2);
    check("(dT/dP)_s = -(drho/ds)_P/rho^2", pS.temperature.pressure, -pS.density.specificEntropy / rho ** 2);
    check("(ds/dP)_T = (drho/dT)_P/rho^2", pT.specificEntropy.pressure, pT.density.temperature / rho ** 2);
    // Raw partial derivatives that the state has too.
    for (const [name, by, of] of [
      ["pressureByDensity", "density", "pressure"],
      ["pressureByTemperature", "temperature", "pressure"],
      ["energyByDensity", "density", "specificEnergy"],
      ["energyByTemperature", "temperature", "specificEnergy"],
      ["entropyByDensity", "density", "specificEntropy"],
      ["entropyByTemperature", "temperature", "specificEntropy"],
    ] as const) {
      check("those of the state", rhoT[of][by], s[name], name === "energyByDensity" ? p / rho ** 2 : undefined);
    }
  });
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  // Between members of one evaluation 5.0e-16. A state is one of order 2, derivatives of c_v ask for order 3: where the
  // heat capacity of a cold liquid is a small rest of its terms, the two differ by 1.2e-14.
  const within = ["(de/ds)_rho = T", "(dh/dP)_s = 1/rho", "(dh/ds)_P = T"];
  for (const name of measured.names()) {
    expect(measured.count(name)).toBe(name === "those of the state" ? 18_000 : 3000);
    const maxwell = name.endsWith("/rho^2") && !name.includes("= P");
    measured.expectBelow(name, maxwell || within.includes(name) ? 1e-15 : 2.5e-14, 5e-16);
  }
});

test("3 x 60 points: every pair to every other pair and back, triple products, chains", () => {
  const measured = new Measured();
  const pairs = stateVariables.flatMap((a, i) => stateVariables.slice(i + 1).map((b) => [a, b] as const));
  expect(pairs).toHaveLength(15);
  let refused = 0;
  atRandom(60, 1618, (kind, s, where) => {
    const byPair = pairs.map(([a, b]) => tryAll(kind, s, a, b));
    refused += byPair.filter((one) => one === undefined).length;
    for (const [m, [a, b]] of pairs.entries()) {
      const there = byPair[m];
      if (there === undefined) continue;
      for (const [n, [c, d]] of pairs.entries()) {
        const back = byPair[n];
        if (back === undefined || n <= m) continue;
        // J(c, d by a, b) J(a, b by c, d) = 1; each element a sum of two terms.
        const strength = there.conditioning * back.conditioning;
        for (const x of [a, b]) {
          for (const y of [a, b]) {
            const first = there[c][y as typeof a] * back[x][c];
            const second = there[d][y as typeof a] * back[x][d];
            const scale = strength * Math.max(1, Math.abs(first) + Math.abs(second));
            measured.add(
              "J J^-1 = 1",
              Math.abs(first + second - (x === y ? 1 : 0)) / scale,
              `${where}, ${a} ${b} ${c} ${d}`,
            );
          }
        }
        // dQ/dc by way of a and b. A derivative is known to some ulp of Q in each of ln rho and ln T.
        for (const q of ["gamma1", "heatCapacityV", "soundSpeed", "temperatureExponent"] as const) {
          const way = (by: typeof there | typeof back, x: StateVariable): number =>
            Math.abs((by.density as Record<string, number>)[x]! / s.density) +
            Math.abs((by.temperature as Record<string, number>)[x]! / s.temperature);
          const [first, second] = [there[q][a] * back[a][c], there[q][b] * back[b][c]];
          const error = Math.abs(first + second - back[q][c]);
          const ways = way(there, a) * Math.abs(back[a][c]) + way(there, b) * Math.abs(back[b][c]) + way(back, c);
          const scale = Math.abs(first) + Math.abs(second) + Math.abs(s[q]) * ways;
          measured.add(
            "chain rule",
            error === 0 ? 0 : error / (strength * scale),
            `${where}, ${q} ${a} ${b} ${c} ${d}`,
          );
        }
      }
    }
    for (const [i, a] of stateVariables.entries()) {
      for (const [j, b] of stateVariables.entries()) {
        for (const c of stateVariables.slice(j + 1)) {
          if (i >= j) continue;
          // (da/db)_c (db/dc)_a (dc/da)_b = -1
          const [bc, ca, ab] = [tryAll(kind, s, b, c), tryAll(kind, s, c, a), tryAll(kind, s, a, b)];
          if (bc === undefined || ca === undefined || ab === undefined) continue;
          const product = bc[a][b] * ca[b][c] * ab[c][a];
          measured.add("triple product = -1", Math.abs(product + 1), `${where}, ${a} ${b} ${c}`);
        }
      }
    }
  });
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table(), `\n${refused} pairs of 2700 refused`);
  measured.expectBelow("J J^-1 = 1", 1.5e-15); // measured 6.7e-16
  measured.expectBelow("chain rule", 1e-15); // 4.1e-16
  measured.expectBelow("triple product = -1", 1e-15); // 3.3e-16
});

test("3 x 150 points: derivatives integrated along paths of density and of temperature give the difference of values", () => {
  const measured = new Measured();
  const length = 0.02;
  const [matter] = matters;
  for (const kind of kinds) {
    const { eos } = kind;
    const { point, values, fill } = derivativesEvaluator(eos, { of: differentiable, by: ["density", "temperature"] });
    const random = uniform(1414);
    // Away from the edges of the kinds' planes, where a path would leave them or the sum is unstable.
    const between = ([low, high]: readonly [number, number]): number => 10 ** (low + 1 + (high - low - 1.2) * random());
    for (let i = 0; i < 150; i++) {
      const start = [between(kind.density), between(kind.temperature)] as const;
      const where = `${kind.name} rho ${start[0]} T ${start[1]}`;
      for (const axis of [0, 1]) {
        const at = (u: number) =>
          [start[0] * (axis === 0 ? Math.exp(u) : 1), start[1] * (axis === 1 ? Math.exp(u) : 1)] as const;
        const [begin, end] = [eos.state(...start, matter!), eos.state(...at(length), matter!)];
        const mean = new Float64Array(differentiable.length);
        const size = new Float64Array(differentiable.length);
        for (const [node, weight] of rule) {
          [point[0], point[1]] = at(node * length);
          fill(matter!, -1);
          for (const q of differentiable.keys()) {
            const slope = point[axis]! * values[2 * q + axis]!;
            mean[q]! += weight * slope;
            size[q] = Math.max(size[q]!, Math.abs(slope));
          }
        }
        for (const [q, name] of differentiable.entries()) {
          const [first, last] = [begin[name], end[name]];
          // P - T dP/dT of a nearly ideal gas is a small rest of its terms.
          const terms = name === "energyByDensity" ? begin.pressure / begin.density ** 2 : 0;
          const scale = Math.max(Math.abs(first), size[q]!, terms);
          measured.compare(name, (last - first) / length, mean[q]!, where, scale);
        }
      }
    }
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  // The difference over the length has 50 times the rounding of the two values.
  for (const name of differentiable) {
    expect(measured.count(name)).toBe(900);
    // 1.8e-13; what is thermal alone has 6e-14 of c_v where a crystal's phonons are nearly extinct.
    const thermal = /^heatCapacity|^temperatureExponent|ByTemperature$|^entropyBy/.test(name);
    measured.expectBelow(name, thermal ? 1e-11 : 4e-13, 3e-14);
  }
});

test("T = 0: what is known is the limit from above, what is not is refused", () => {
  const measured = new Measured();
  const metal = whiteDwarfMatter({ coulomb: { phase: "crystal" } });
  const known = differentiable.filter(
    (name) => !["gamma2", "gamma3", "adiabaticGradient", "entropyByTemperature"].includes(name),
  );
  const fixing = ["density temperature", "pressure temperature", "temperature specificEnergy"].concat(
    ["temperature specificEnthalpy", "density specificEntropy", "pressure specificEntropy"],
    ["specificEnergy specificEntropy", "specificEntropy specificEnthalpy"],
  );
  for (const density of [1e6, 1e8, 1e10]) {
    const [matter] = matters;
    for (const pair of fixing) {
      const by = pair.split(" ") as [StateVariable, StateVariable];
      const [cold, cool, warm] = [0, 10, 1e3].map((t) => derivatives(metal, density, t, matter!, { of: known, by }));
      expect(cold!.conditioning).toBe(1);
      for (const name of known) {
        for (const variable of by) {
          const [limit, near, far] = [cold, cool, warm].map((one) => one![name][variable]) as [number, number, number];
          const where = `rho ${density} d${name}/d${variable}, ${pair}: ${limit}, ${near}, ${far}`;
          if (limit !== 0) measured.compare("limits", near, limit, where);
          else measured.compare("zeros", near, 0, where, Math.abs(far));
        }
      }
    }
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  // Measured 5.5e-7: at 10 K the phonons' T^3 beside the electrons' T in the heat capacity.
  measured.expectBelow("limits", 1e-6);
  measured.expectBelow("zeros", 0.0101); // at least linear in T: a hundredth of the value at 1000 K

  const ask = (of: DifferentiableQuantity, ...by: [StateVariable, StateVariable]) =>
    derivatives(metal, 1e8, 0, matters[0]!, { of: [of], by });
  for (const of of ["gamma2", "gamma3", "adiabaticGradient", "entropyByTemperature"] as const) {
    expect(() => ask(of, "density", "temperature")).toThrow(code("unavailable-quantity"));
  }
  // What has no heat capacity does not tell the temperature.
  for (const pair of [
    "density pressure",
    "density specificEnergy",
    "pressure specificEnergy",
    "temperature specificEntropy",
  ]) {
    expect(() => ask("pressure", ...(pair.split(" ") as [StateVariable, StateVariable]))).toThrow(
      code("dependent-variables"),
    );
  }
  // Without any thermal part the gammas do not change with T, and entropy is no variable.
  const cold = combine(electronPositronGas()).state(1e8, 0, matters[0]!);
  expect(cold.gamma3).toBeGreaterThan(1);
  const polytrope = combine({
    name: "polytrope of index 3/2",
    domain: { density: [1, 1e12], temperature: [1, 1e10], zeroTemperature: true },
    add(point, _composition, order, members) {
      const f = 1.5 * Math.cbrt(point[0]!) ** 2;
      addNaturalDerivatives(
        members,
        order,
        Float64Array.of(f, (2 / 3) * f, 0, (-2 / 9) * f, 0, 0, (8 / 27) * f, 0, 0, 0, 0),
      );
    },
  });
  for (const temperature of [0, 1e6]) {
    const rigid = derivatives(polytrope, 1e6, temperature, matters[0]!, {
      of: differentiable,
      by: ["density", "temperature"],
    });
    expect(rigid.pressure.density).toBeCloseTo(((5 / 3) * 1e10) / 1e6, 8);
    for (const name of ["gamma1", "gamma2", "gamma3", "densityExponent"] as const) {
      expect(Math.abs(rigid[name].density) * 1e6, name).toBeLessThan(1e-14);
      expect(rigid[name].temperature, name).toBe(0);
    }
    expect(() =>
      derivatives(polytrope, 1e6, temperature, matters[0]!, { of: ["pressure"], by: ["density", "specificEntropy"] }),
    ).toThrow(code("dependent-variables"));
  }
});

test("a pair that hardly fixes the state says so, one that does not is refused", () => {
  const gas = combine(idealIons());
  const nearly = whiteDwarfMatter({ coulomb: false });
  const [matter] = matters;
  for (const by of [
    ["temperature", "specificEnergy"],
    ["temperature", "specificEnthalpy"],
    ["specificEnergy", "specificEnthalpy"],
  ] as const) {
    expect(() => derivatives(gas, 1e-3, 1e4, matter!, { of: ["density"], by })).toThrow(code("dependent-variables"));
    const found = derivatives(nearly, 1e-6, 1e4, matter!, { of: ["density"], by });
    expect(found.conditioning).toBeGreaterThan(1e3);
    expect(found.conditioning).toBeLessThan(1 / (64 * Number.EPSILON));
  }
  expect(
    derivatives(gas, 1e-3, 1e4, matter!, { of: ["density"], by: ["pressure", "specificEnergy"] }).conditioning,
  ).toBeLessThan(5);
  // In a batch, with the row.
  const jacobian = derivativesEvaluator(gas, { of: ["density"], by: ["temperature", "specificEnergy"] });
  const input = { density: Float64Array.of(1, 2), temperature: Float64Array.of(1e6, 1e6), composition: matter! };
  expect(() => jacobian.evaluate(input, {})).toThrow(
    expect.objectContaining({
      code: "dependent-variables",
      index: 0,
      argument: "by",
      given: "temperature and specificEnergy",
    }),
  );
});

test("batch, fill and object agree to the bit; only columns given are written", () => {
  const eos = whiteDwarfMatter();
  const by = ["pressure", "specificEntropy"] as const;
  const of = ["density", "temperature", "gamma1", "soundSpeed"] as const;
  const jacobian = derivativesEvaluator(eos, { of, by });
  const count = 40;
  const density = Float64Array.from({ length: count }, (_, i) => 10 ** (5 + i / 10));
  const temperature = new Float64Array(count).fill(3e7);
  const list = Array.from({ length: count }, (_, i) => matters[2 * (i % 2)]!);
  const column = (): Float64Array => new Float64Array(count + 1).fill(-1);
  const output = {
    density: { pressure: column() },
    gamma1: { pressure: column(), specificEntropy: column() },
    conditioning: column(),
  };
  jacobian.evaluate({ density, temperature, composition: list }, output);
  for (let i = 0; i < count; i++) {
    const one = derivatives(eos, density[i]!, temperature[i]!, list[i]!, { of, by });
    expect(output.density.pressure[i]).toBe(one.density.pressure);
    expect(output.gamma1.pressure[i]).toBe(one.gamma1.pressure);
    expect(output.gamma1.specificEntropy[i]).toBe(one.gamma1.specificEntropy);
    expect(output.conditioning[i]).toBe(one.conditioning);
    [jacobian.point[0], jacobian.point[1]] = [density[i]!, temperature[i]!];
    jacobian.fill(list[i]!, i);
    expect([...jacobian.values.slice(0, 4)]).toEqual([
      one.density.pressure,
      one.density.specificEntropy,
      one.temperature.pressure,
      one.temperature.specificEntropy,
    ]);
  }
  expect(output.density.pressure[count]).toBe(-1);
  // A variable of the pair itself: one and zero, exactly.
  const own = derivatives(eos, 1e6, 1e7, matters[0]!, { of: ["pressure", "specificEntropy"], by });
  expect(own.pressure).toEqual({ pressure: 1, specificEntropy: 0 });
  expect(own.specificEntropy).toEqual({ pressure: 0, specificEntropy: 1 });
  expect(Object.isFrozen(own) && Object.isFrozen(own.pressure)).toBe(true);
});

test("refusals: names, pairs, points, columns", () => {
  const eos = whiteDwarfMatter();
  const [matter] = matters;
  const good = { of: ["gamma1"], by: ["density", "temperature"] };
  // biome-ignore lint/suspicious/noExplicitAny: what a program without types can pass
  const ask = (request: any, density: any = 1e6, temperature: any = 1e7, composed: any = matter) =>
    derivatives(eos, density, temperature, composed, request);
  const bad: readonly (readonly [unknown, string])[] = [
    [undefined, "of"],
    [null, "of"],
    [{}, "of"],
    [{ ...good, of: [] }, "of"],
    [{ ...good, of: "gamma1" }, "of"],
    [{ ...good, of: ["gamma4"] }, "of"],
    [{ ...good, of: ["gamma1", "toString"] }, "of"],
    [{ ...good, of: ["electronDensity"] }, "of"],
    [{ ...good, of: [undefined, "pressure"] }, "of"],
    [{ ...good, by: ["density"] }, "by"],
    [{ ...good, by: ["density", "temperature", "pressure"] }, "by"],
    [{ ...good, by: ["density", "density"] }, "by"],
    [{ ...good, by: ["density", "specificFreeEnergy"] }, "by"],
    [{ ...good, by: ["__proto__", "density"] }, "by"],
    [{ ...good, by: [Number.NaN, "density"] }, "by"],
  ];
  for (const [request, argument] of bad) {
    expect(() => ask(request)).toThrow(expect.objectContaining({ code: "invalid-option", argument }));
  }
  expect(() => ask(good, Number.NaN)).toThrow(code("not-a-number"));
  expect(() => ask(good, "1e6")).toThrow(code("not-a-number"));
  expect(() => ask(good, -1)).toThrow(code("out-of-range"));
  expect(() => ask(good, 1e6, Number.POSITIVE_INFINITY)).toThrow(code("not-a-number"));
  expect(() => ask(good, 1e30)).toThrow(code("outside-domain"));
  expect(() => ask(good, 1e6, 1e7, { ...matter })).toThrow(code("invalid-composition"));

  const jacobian = derivativesEvaluator(eos, { of: ["gamma1"], by: ["density", "temperature"] });
  const input = { density: Float64Array.of(1e6, 1e7), temperature: Float64Array.of(1e7, 1e7), composition: matter! };
  // biome-ignore lint/suspicious/noExplicitAny: what a program without types can pass
  const batch = (some: any, output: any) => jacobian.evaluate(some, output);
  expect(() => batch(undefined, {})).toThrow(code("invalid-option"));
  expect(() => batch(input, null)).toThrow(code("invalid-option"));
  expect(() => batch(input, { gamma2: {} })).toThrow(code("invalid-option"));
  expect(() => batch(input, { gamma1: new Float64Array(2) })).toThrow(code("invalid-option"));
  expect(() => batch(input, { gamma1: { pressure: new Float64Array(2) } })).toThrow(code("invalid-option"));
  expect(() => batch(input, { gamma1: { density: [0, 0] } })).toThrow(code("invalid-option"));
  expect(() => batch(input, { gamma1: { density: new Float64Array(1) } })).toThrow(code("length-mismatch"));
  expect(() => batch({ ...input, temperature: Float64Array.of(1e7) }, {})).toThrow(code("length-mismatch"));
  const untouched = Float64Array.of(7, 7);
  expect(() => batch({ ...input, density: Float64Array.of(1e6, -1) }, { gamma1: { density: untouched } })).toThrow(
    expect.objectContaining({ code: "out-of-range", index: 1 }),
  );
  expect([...untouched]).toEqual([7, 7]);
  jacobian.evaluate(input, { gamma1: { density: untouched } });
  expect(untouched[0]).not.toBe(7);
});

test("a contribution that adds NaN at third order is found out", () => {
  const broken = combine({
    ...idealIons(),
    add(point, matter, order, members) {
      idealIons().add(point, matter, order, members);
      if (order === 3) members[7] = Number.NaN;
    },
  });
  const request = { of: ["densityExponent"], by: ["density", "temperature"] } as const;
  expect(() => derivatives(broken, 1, 1e6, matters[0]!, request)).toThrow(code("unstable"));
  const first = { of: ["pressure"], by: ["density", "temperature"] } as const;
  expect(derivatives(broken, 1, 1e6, matters[0]!, first).pressure.density).toBeGreaterThan(0);
});

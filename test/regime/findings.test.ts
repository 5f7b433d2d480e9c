/**
 * Each finding raised on one side of its threshold and not on the other, at places found from the definitions; benign
 * places raise none. Thresholds are conventions of this library unless a source stands beside the test.
 */
import { describe, expect, test } from "vitest";
import { boltzmannConstant, electronRestEnergy } from "../../src/constants.js";
import { transition } from "../../src/coulomb/transition.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { type Composition, composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import type { Finding, FindingCode, Severity } from "../../src/regime/finding.js";
import type { RegimeOptions } from "../../src/regime/options.js";
import { regime } from "../../src/regime/regime.js";
import { combine } from "../../src/thermodynamics/combine.js";
import type { Contribution } from "../../src/thermodynamics/contribution.js";
import { addNaturalDerivatives } from "../../src/thermodynamics/free-energy.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";

const pure = (label: string): Composition => composition({ [label]: 1 });
const mix = composition({ C12: 0.5, O16: 0.5 });
const carbon = pure("C12");
const helium = pure("He4");

function find(
  code: FindingCode,
  [density, temperature, matter, options]: readonly [number, number, Composition, RegimeOptions?],
): Finding | undefined {
  return regime(density, temperature, matter, options).findings.find((one) => one.code === code);
}

describe("benign places", () => {
  test.each<readonly [number, number, Composition]>([
    [1e6, 2e7, mix],
    [1e6, 1e6, mix],
    [1e9, 4e8, mix],
    [1e5, 1e7, helium],
    [1e7, 1e8, mix],
    [1e-2, 1e6, pure("H1")],
    [1e-6, 1e5, pure("H1")],
    [1e9, 7e7, pure("Fe56")],
    [1e6, 2e7, composition({ meanMassNumber: 14, meanCharge: 7 })],
  ])("%s g/cm^3, %s K", (density, temperature, matter) => {
    expect(regime(density, temperature, matter).findings).toEqual([]);
  });
});

describe("ranges in the plasma parameters", () => {
  // Temperature of a coupling, density of a parameter: scaling laws from one call, T ~ 1/Gamma, rho ~ p^-3, x^3, R_S^-3.
  const at = (density: number, gamma: number, matter: Composition): number =>
    (regime(density, 1e7, matter).parameters.ionCoupling * 1e7) / gamma;
  const densityOf = (
    name: "ionisationParameter" | "relativityParameter" | "ionDensityParameter",
    value: number,
    matter: Composition,
  ): number => {
    const ratio = value / regime(1e6, 1e7, matter).parameters[name];
    return 1e6 * (name === "relativityParameter" ? ratio ** 3 : ratio ** -3);
  };
  const crystal = { phase: "crystal" } as const;
  const liquid = { phase: "liquid" } as const;
  const theta = (density: number, value: number): number =>
    regime(density, 1, carbon).parameters.species[0]!.plasmaTemperature / value;

  test.each<[FindingCode, Severity, (inside: number) => readonly [number, number, Composition, RegimeOptions?]]>([
    // The second number of each row moves by 1 % to either side of the threshold.
    ["partial-ionisation", "strained", (s) => [densityOf("ionisationParameter", 0.25 / s, carbon), 1e4, carbon]],
    ["partial-ionisation", "outside", (s) => [densityOf("ionisationParameter", 0.62 / s, carbon), 1e4, carbon]],
    ["linear-response", "strained", (s) => [densityOf("ionisationParameter", 0.25 / s, carbon), 0, carbon]],
    ["linear-response", "outside", (s) => [densityOf("ionisationParameter", 0.62 / s, carbon), 0, carbon]],
    ["crystal-screening-range", "strained", (s) => [densityOf("relativityParameter", 0.3 * s, carbon), 1e4, carbon]],
    ["crystal-screening-range", "outside", (s) => [densityOf("relativityParameter", 0.1 * s, carbon), 1e3, carbon]],
    ["liquid-fit-range", "strained", (s) => [1e6, at(1e6, 180 / s, carbon), carbon, liquid]],
    ["liquid-fit-range", "outside", (s) => [1e6, at(1e6, 200 / s, carbon), carbon, liquid]],
    ["superheated-crystal", "strained", (s) => [1e6, at(1e6, 170 * s, carbon), carbon, crystal]],
    ["superheated-crystal", "outside", (s) => [1e6, at(1e6, 100 * s, carbon), carbon, crystal]],
    ["liquid-quantum-range", "strained", (s) => [1e8, theta(1e8, 11 / s), carbon, liquid]],
    ["quantum-melting", "strained", (s) => [densityOf("ionDensityParameter", 1000 * s, helium), 1e3, helium]],
    ["quantum-melting", "outside", (s) => [densityOf("ionDensityParameter", 160 * s, helium), 1e3, helium]],
    [
      "exchange-correlation-range",
      "strained",
      (s) => {
        const rs = regime(1, 1e6, pure("H1")).parameters.densityParameter;
        return [(rs / (20 / s)) ** 3, 1e3, pure("H1")];
      },
    ],
    [
      "exchange-correlation-range",
      "strained",
      (s) => [1e7, (0.1 / s) * (electronRestEnergy / boltzmannConstant), helium],
    ],
    ["neutron-drip", "outside", (s) => [4.3e11 / s, 1e8, carbon]],
    ["burning-expected", "strained", (s) => [1e9, 6e8 / s, carbon]],
    ["burning-expected", "strained", (s) => [1e10 / s, 1e7, carbon]],
    ["burning-expected", "strained", (s) => [1e6 / s, 1e6, pure("H1")]],
    ["burning-expected", "strained", (s) => [1e9 / s, 1e6, helium]],
  ])("%s %s", (code, severity, place) => {
    const bad = find(code, place(0.99));
    expect(bad?.severity).toBe(severity);
    expect(Math.abs(bad!.value / bad!.threshold - 1)).toBeLessThan(0.011);
    expect(find(code, place(1.01))?.severity).toBe(
      severity === "outside" && !["neutron-drip"].includes(code) ? "strained" : undefined,
    );
  });

  test("hot thin electrons: exchange matters only where it is not negligible", () => {
    const hydrogen = pure("H1");
    const t = (value: number): number => (1e6 * value) / regime(1, 1e6, hydrogen).parameters.reducedTemperature;
    expect(find("exchange-correlation-range", [1, t(8.1), hydrogen])?.value).toBeCloseTo(8.1, 10);
    expect(find("exchange-correlation-range", [1, t(7.9), hydrogen])).toBeUndefined();
    expect(find("exchange-correlation-range", [1, t(1000), hydrogen])).toBeUndefined();
  });

  test("charges in a crystal", () => {
    const pair = (heavy: string): Composition => composition({ He4: 0.5, [heavy]: 0.5 });
    expect(find("mixture-range", [1e7, 1e5, pair("Ne20")])?.value).toBe(5);
    expect(find("mixture-range", [1e7, 1e5, pair("F19")])).toBeUndefined(); // 9/2 is not above 4.5
    expect(find("crystal-screening-range", [1e8, 1e6, pure("Ga69")])?.value).toBe(31);
    expect(find("crystal-screening-range", [1e8, 1e6, pure("Zn64")])).toBeUndefined();
  });

  test("C/O of equal numbers: 0.146 kT of deviation at Gamma = 175 against 0.68 kT of mixing entropy", () => {
    // 0.146: own evaluation of the formula outside this library. The deviation grows as 1/T.
    const matter = composition({ C12: 12 / 28, O16: 16 / 28 });
    const entropy = -0.5 * (Math.log(3 / 7) + Math.log(4 / 7));
    const expected = (at(1e7, 175, matter) * 0.146) / entropy;
    const found = find("alloy-demixing", [1e7, expected / 2, matter])!;
    expect(Math.abs(found.threshold / expected - 1)).toBeLessThan(0.0005 / 0.146 + 1e-3);
    expect(find("alloy-demixing", [1e7, found.threshold * 0.999, matter])).toBeDefined();
    expect(find("alloy-demixing", [1e7, found.threshold * 1.001, matter])).toBeUndefined();
    expect(find("alloy-demixing", [1e7, 1e3, carbon])).toBeUndefined();
  });

  // A_3 = 1.765e5 of Farouki & Hamaguchi 1993, Phys. Rev. E 47, 4330 (from memory), as in src/coulomb/lattice.ts.
  test("light nuclei in a crystal of heavy ones: outside where melting sets energy free", () => {
    for (const [fractions, label, latent] of [
      [{ C12: 0.01, Fe56: 0.99 }, "C12", -1],
      [{ He4: 1e-3, Fe56: 0.999 }, "He4", -1],
      [{ H1: 1e-3, O16: 0.999 }, "H1", -1],
      [{ C12: 2e-3, Fe56: 0.998 }, "C12", -1], // just enough
      [{ C12: 0.5, O16: 0.5 }, "C12", 1],
      [{ O16: 0.02, Ne22: 0.98 }, "O16", 1],
    ] as const) {
      const matter = composition(fractions);
      const { temperature, latentHeat } = transition(whiteDwarfMatter(), 1e6, matter)!;
      const cold = 0.99 * temperature;
      const found = find("superheated-crystal", [1e6, cold, matter]);
      const own = regime(1e6, cold, matter).parameters.species.find((one) => one.label === label)!;
      const { numberFraction } = matter.species.find((one) => one.label === label)!;
      const last = (numberFraction * 1.765e5) / (3 * own.coupling ** 3);
      const value = last * Math.exp(-0.0112 * own.quantumParameter ** 2);
      if (latent < 0) {
        expect(latentHeat).toBeLessThan(0);
        expect(found).toMatchObject({ severity: "outside", species: label });
        expect(Math.abs(found!.value / value - 1)).toBeLessThan(1e-12);
      } else {
        expect(latentHeat).toBeGreaterThan(0);
        expect(value).toBeLessThan(0.03);
        expect(found).toBeUndefined();
      }
      // Their quantum suppression ends it.
      expect(find("superheated-crystal", [1e6, temperature / 100, matter])).toBeUndefined();
    }
  });

  test("strong zero-point motion: no crystal, and the liquid says why", () => {
    const { phase, kind, findings } = regime(1e8, 1e5, helium);
    expect(phase).toBe("liquid");
    expect(kind).toContain("liquid");
    const codes = findings.map(({ code }) => code);
    expect(codes).toEqual(expect.arrayContaining(["quantum-melting", "liquid-fit-range", "liquid-quantum-range"]));
  });
});

describe("sums of pressures", () => {
  /** The temperature where `value` reaches `limit`, by bisection of the logarithm. */
  function temperatureOf(low: number, high: number, above: (temperature: number) => boolean): number {
    let [a, b] = [Math.log(low), Math.log(high)];
    for (let i = 0; i < 60; i++) {
      const middle = (a + b) / 2;
      if (above(Math.exp(middle)) === above(high)) b = middle;
      else a = middle;
    }
    return Math.exp(b);
  }
  const sided = (
    code: FindingCode,
    severity: Severity,
    density: number,
    temperature: number,
    matter: Composition,
    side: 1 | -1,
  ) => {
    const found = find(code, [density, temperature * (1 + 1e-3 * side), matter]);
    expect(found?.severity).toBe(severity);
    expect(found!.value / found!.threshold).toBeCloseTo(1, 1);
    const other = find(code, [density, temperature * (1 - 1e-3 * side), matter])?.severity;
    expect(other === severity).toBe(false);
  };

  test.each([
    [0.01, "strained"],
    [0.1, "outside"],
  ] as const)("pairs at n_+/n_e = %s", (limit, severity) => {
    const t = temperatureOf(1e8, 1e10, (kelvin) => regime(1e6, kelvin, mix).parameters.pairFraction > limit);
    sided("pairs-important", severity, 1e6, t, mix, 1);
  });

  test("many pairs in thin gas are no more than strained: Coulomb terms are negligible there", () => {
    expect(find("pairs-important", [1, 1e9, mix])?.severity).toBe("strained");
  });

  test("neutrons alone: pairs per nucleon", () => {
    expect(find("pairs-important", [1e10, 1e8, pure("n")])).toBeUndefined();
    expect(find("pairs-important", [1, 1e10, pure("n")])?.quantity.name).toBe("positrons per nucleon");
  });

  test("photons: half of the pressure where a T^4/3 is 2 n kT in hydrogen", () => {
    // a T^3/3 = 2 n k of ideal hydrogen, a from the SI: T = (6 n k/a)^(1/3); electrons are degenerate by 1e-4.
    const hydrogen = pure("H1");
    const n = 1e-3 * hydrogen.ionsPerGram;
    const t = Math.cbrt((6 * n * boltzmannConstant) / 7.565733e-15);
    sided("radiation-dominated", "strained", 1e-3, t, hydrogen, 1);
  });

  test("photons below the plasma frequency, where they still count", () => {
    const t = regime(1e9, 1e8, mix).parameters.electronPlasmaTemperature;
    // 28.7 (rho Y_e/(1 + x^2)^(1/2))^(1/2) eV, the usual plasma frequency (common practice), to its three digits.
    const x = regime(1e9, 1e8, mix).parameters.relativityParameter;
    expect((t * boltzmannConstant) / 1.602176634e-12 / 28.8 / Math.sqrt(5e8 / Math.sqrt(1 + x * x))).toBeCloseTo(1, 2);
    sided("photon-plasma-cutoff", "strained", 1e9, t, mix, -1);
    expect(find("photon-plasma-cutoff", [1e9, t / 10, mix])).toBeUndefined(); // no pressure to speak of
  });

  test("classical ions: strained at n lambda^3 = 0.1, outside where the entropy of the ideal gas is negative", () => {
    const ions = combine(idealIons());
    const zero = temperatureOf(1e3, 1e8, (kelvin) => ions.state(1e6, kelvin, mix).specificEntropy > 0);
    const found = find("ideal-ions-degenerate", [1e6, zero * 0.9999, mix]);
    expect(found?.severity).toBe("outside");
    expect(found!.value / found!.threshold).toBeCloseTo(1, 3);
    expect(find("ideal-ions-degenerate", [1e6, zero * 1.0001, mix])?.severity).toBe("strained");
    // n lambda^3 = h^3 n/(2 pi M kT)^(3/2) with h of the SI.
    const n = 1e6 * helium.ionsPerGram;
    const lambda = Math.cbrt(0.1 / n);
    const t = 6.62607015e-27 ** 2 / (2 * Math.PI * helium.species[0]!.ionMass * boltzmannConstant * lambda ** 2);
    sided("ideal-ions-degenerate", "strained", 1e6, t, helium, -1);
    expect(find("ideal-ions-degenerate", [1e6, 0, mix])).toBeUndefined();
  });
});

describe("stability", () => {
  /** F = factor rho^power + thermal T^2, so P/rho = power factor rho^power and c_v = -2 thermal T. */
  const term = (factor: number, power: number, thermal = 0): Contribution => ({
    name: "attraction",
    domain: electronPositronGas().domain,
    add(point, _matter, order, members) {
      const f = factor * point[0]! ** power;
      const heat = thermal * point[1]! ** 2;
      const curvature = power * (power - 1) * f;
      const natural = [f + heat, power * f, 2 * heat, curvature, 0, 2 * heat, 0, 0, 0, 0, 0];
      addNaturalDerivatives(members, order, Float64Array.from(natural));
    },
  });
  const electrons = combine(electronPositronGas()).state(1e6, 1e7, mix);
  const attraction = (part: number) =>
    // F = -c rho^(1/3), P = -c rho^(4/3)/3: the shape of a lattice.
    combine(electronPositronGas(), term((-3 * part * electrons.pressure) / 1e6 ** (4 / 3), 1 / 3));
  const unstable = (part: number) =>
    find("thermodynamically-unstable", [1e6, 1e7, mix, { equationOfState: attraction(part) }]);

  test("interactions of a quarter of the electrons' pressure strain, more than all of it break", () => {
    expect(unstable(0.249)).toBeUndefined();
    expect(unstable(0.251)?.value).toBeCloseTo(-0.251, 10);
    expect(unstable(0.251)?.severity).toBe("strained");
    expect(unstable(0.9)?.severity).toBe("strained");
    expect(unstable(1.01)?.quantity.name).toBe("pressure");
    expect(unstable(1.01)?.severity).toBe("outside");
  });

  test("each of P, dP/drho and c_v", () => {
    const p = electrons.specificEnthalpy - electrons.specificEnergy;
    // Power 3 is stiff: it takes 12 f = 2.16 P/rho from dP/drho, which is 1.5 P/rho, and 3 f = 0.54 from P/rho.
    const bent = combine(electronPositronGas(), term((-0.18 * p) / 1e18, 3));
    expect(find("thermodynamically-unstable", [1e6, 1e7, mix, { equationOfState: bent }])?.quantity.name).toBe(
      "dP/drho at constant temperature",
    );
    const cold = combine(electronPositronGas(), term(0, 1, 1)); // F = T^2: c_v = -2 T
    expect(find("thermodynamically-unstable", [1e6, 1e7, mix, { equationOfState: cold }])?.quantity.name).toBe(
      "heat capacity at constant volume",
    );
  });

  test("a sum without interactions is judged by the coupling of its ions, at 0.1 and 1", () => {
    const ideal = combine(electronPositronGas(), idealIons(), radiation());
    const others = [combine(electronPositronGas()), attraction(0.1)];
    const gamma = regime(1e4, 1e8, mix).parameters.ionCoupling; // falls like 1/T
    const at = (coupling: number, equationOfState = ideal) =>
      find("coulomb-neglected", [1e4, (1e8 * gamma) / coupling, mix, { equationOfState }]);
    expect(at(0.0999)).toBeUndefined();
    expect(at(0.1001)?.severity).toBe("strained");
    expect(at(0.999)?.severity).toBe("strained");
    expect(at(1.001)?.severity).toBe("outside");
    expect(at(1.001)!.value).toBeCloseTo(1.001, 12);
    for (const eos of others) expect(at(1.001, eos)).toBeUndefined();
    expect(find("coulomb-neglected", [1e4, 1e7, mix])).toBeUndefined();
  });

  test("an ideal sum and its state are stable; interactions switch the judgement of ideal ions off", () => {
    const eos = combine(electronPositronGas(), idealIons(), radiation());
    const options = { equationOfState: eos, state: eos.state(1e6, 2e7, mix) };
    expect(regime(1e6, 2e7, mix, options).findings.map(({ code }) => code)).toEqual(["coulomb-neglected"]);
    expect(find("ideal-ions-degenerate", [1e6, 1e5, mix, { equationOfState: eos }])).toBeDefined();
    expect(find("ideal-ions-degenerate", [1e6, 1e5, mix, { equationOfState: attraction(0.1) }])).toBeUndefined();
    const broken = { ...eos.state(1e6, 2e7, mix), pressure: -1 };
    expect(find("thermodynamically-unstable", [1e6, 2e7, mix, { state: broken }])?.value).toBe(-1);
  });
});

/**
 * Derivatives by the composition of whole sums, without finite differences: what they integrate to along a path is the
 * difference of the states at its ends (identities of the head comment of src/thermodynamics/composition-derivatives.ts,
 * which follow from one free energy; no source needed). Then the relation of Euler, F + P/rho = sum mu_a N_a.
 * Term by term against decimal arithmetic: test/coulomb/composition-derivatives.test.ts.
 */
import { describe, expect, test } from "vitest";
import { atomicMassConstant, electronVolt } from "../../src/constants.js";
import { coldCorrections } from "../../src/coulomb/cold-corrections.js";
import { coulombPlasma } from "../../src/coulomb/coulomb-plasma.js";
import { meltingTemperature } from "../../src/coulomb/phase.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { fermionGas } from "../../src/fermi-gas/fermion-gas.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { type Composition, composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import { regime } from "../../src/regime/regime.js";
import { combine } from "../../src/thermodynamics/combine.js";
import {
  compositionDerivatives,
  type DirectionalDerivatives,
} from "../../src/thermodynamics/composition-derivatives.js";
import type { EquationOfState, State } from "../../src/thermodynamics/equation-of-state.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { gaussLegendre } from "../coulomb/gauss-legendre.js";
import { Measured, uniform } from "../measured.js";

const print = (measured: Measured): void => {
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
};

type Fractions = Readonly<Record<string, number>>;

/** Compositions at the ends of a path: all fractions stay well inside, so that ln X is smooth along it. */
const paths: readonly (readonly [from: Fractions, to: Fractions])[] = [
  [
    { C12: 0.5, O16: 0.4, Ne20: 0.1 },
    { C12: 0.45, O16: 0.42, Ne20: 0.13 },
  ],
  [
    { H1: 0.7, He4: 0.28, C12: 0.02 },
    { H1: 0.66, He4: 0.315, C12: 0.025 },
  ],
  [
    { O16: 0.4, Mg24: 0.2, Fe56: 0.4 },
    { O16: 0.42, Mg24: 0.21, Fe56: 0.37 },
  ],
  [
    { n: 0.1, O16: 0.5, Fe56: 0.4 },
    { n: 0.11, O16: 0.48, Fe56: 0.41 },
  ],
  [
    { C12: 0.3, C13: 0.3, O16: 0.4 },
    { C12: 0.32, C13: 0.31, O16: 0.37 },
  ],
];

const full = combine(electronPositronGas(), coulombPlasma({ phase: "liquid" }), radiation());
const frozen = combine(electronPositronGas(), coulombPlasma({ phase: "crystal", freeNeutrons: false }), radiation());
const ideal = whiteDwarfMatter({ coulomb: false });
const withNeutronGas = combine(
  electronPositronGas(),
  coulombPlasma({ phase: "crystal", freeNeutrons: false }),
  fermionGas({ species: "n" }),
);
const classicCold = combine(electronPositronGas(), coldCorrections(), idealIons());

interface Place {
  readonly eos: EquationOfState;
  readonly density: number;
  readonly temperature: number;
}

/** A place where the sum is stable and the fits make sense, with the sum meant for it. */
function draw(random: () => number, matter: Composition): Place {
  for (;;) {
    const density = 10 ** (3 + 7 * random());
    const temperature = 10 ** (5 + 4.7 * random());
    const gamma = (175 * meltingTemperature(density, matter)) / temperature;
    const kind = random();
    if (kind < 0.15) return { eos: ideal, density: 10 ** (-10 + 22 * random()), temperature };
    if (gamma < 180 && gamma > 0) {
      if (matter.species.some(({ label }) => label === "H1") && density > 1e6) continue;
      if (density < 30 * matter.meanCharge * matter.meanMassNumber) continue;
      return { eos: kind < 0.3 ? classicCold : full, density, temperature };
    }
    if (gamma < 180 || density < 30 * matter.meanCharge * matter.meanMassNumber) continue;
    return { eos: kind < 0.5 ? withNeutronGas : frozen, density, temperature };
  }
}

const mixture = ([from, to]: readonly [Fractions, Fractions], share: number): Composition =>
  composition(Object.fromEntries(Object.keys(from).map((k) => [k, from[k]! + share * (to[k]! - from[k]!)])));
const change = ([from, to]: readonly [Fractions, Fractions]): Fractions =>
  Object.fromEntries(Object.keys(from).map((k) => [k, to[k]! - from[k]!]));

const rule = gaussLegendre(10);
const integral = (at: (node: number) => number): number =>
  rule.nodes.reduce((sum, node, i) => sum + rule.weights[i]! * at(node), 0);

const names = ["specificFreeEnergy", "pressure", "specificEnergy", "specificEntropy"] as const;

test("2000 random paths: a change of composition integrates to the difference of the states", {
  timeout: 60_000,
}, () => {
  const random = uniform(27182818);
  const measured = new Measured();
  for (let i = 0; i < 2000; i++) {
    const path = paths[i % paths.length]!;
    const { eos, density, temperature } = draw(random, mixture(path, 0));
    const [begin, end] = [0, 1].map((share) => eos.state(density, temperature, mixture(path, share))) as [State, State];
    const slopes = Array.from(rule.nodes, (node) =>
      compositionDerivatives(eos, density, temperature, mixture(path, node)).along(change(path)),
    );
    const largest = Math.max(
      Math.abs(begin.specificEnergy),
      Math.abs(begin.specificFreeEnergy),
      temperature * begin.specificEntropy,
    );
    const scale = {
      specificFreeEnergy: largest,
      pressure: begin.pressure,
      specificEnergy: largest,
      specificEntropy: begin.specificEntropy + begin.heatCapacityV,
    };
    for (const name of names) {
      const mean = slopes.reduce((sum, one, j) => sum + rule.weights[j]! * one[name], 0);
      const where = `${eos.name} ${begin.composition.name} rho ${density} T ${temperature}`;
      measured.compare(name, end[name] - begin[name], mean, where, scale[name]);
    }
  }
  print(measured);
  for (const name of names) {
    expect(measured.count(name)).toBe(2000);
    measured.expectBelow(name, 1.5e-14, 3e-16);
  }
});

test("T ds = de + P d(1/rho) - sum mu dN along a path through density, temperature and composition", () => {
  const random = uniform(16180339);
  const measured = new Measured();
  for (let i = 0; i < 300; i++) {
    const path = paths[i % paths.length]!;
    const place = draw(random, mixture(path, 0));
    const at = (share: number) => {
      const density = place.density * Math.exp(0.03 * share);
      const temperature = place.temperature * Math.exp(-0.04 * share);
      const matter = mixture(path, share);
      const state = place.eos.state(density, temperature, matter);
      const work = compositionDerivatives(place.eos, density, temperature, matter).along(change(path));
      return { state, work, densityRate: 0.03 * density, temperatureRate: -0.04 * temperature };
    };
    const slope = (share: number): number => {
      const { state, work, densityRate, temperatureRate } = at(share);
      const energy =
        state.energyByDensity * densityRate + state.energyByTemperature * temperatureRate + work.specificEnergy;
      const volume = -densityRate / (state.density * state.density);
      return (energy + state.pressure * volume - work.specificFreeEnergy) / state.temperature;
    };
    const [begin, end] = [at(0).state, at(1).state];
    const scale = begin.specificEntropy + begin.heatCapacityV + begin.pressure / (begin.density * begin.temperature);
    const where = `${place.eos.name} ${begin.composition.name} rho ${place.density} T ${place.temperature}`;
    measured.compare("entropy", end.specificEntropy - begin.specificEntropy, integral(slope), where, scale);
  }
  print(measured);
  measured.expectBelow("entropy", 1e-15, 1e-16);
});

test("5000 random points: F + P/rho = sum mu N, and d mu/d ln rho is dP/dN", { timeout: 60_000 }, () => {
  const random = uniform(14142135);
  const measured = new Measured();
  const seen = new Set<EquationOfState>();
  const length = 0.05;
  for (let i = 0; i < 5000; i++) {
    const path = paths[i % paths.length]!;
    const matter = mixture(path, random());
    const { eos, density, temperature } = draw(random, matter);
    const where = `${eos.name} ${matter.name} rho ${density} T ${temperature}`;
    seen.add(eos);
    const state = eos.state(density, temperature, matter);
    const at = compositionDerivatives(eos, density, temperature, matter);
    const parts = at.species.map((one, j) => one.specificFreeEnergy * matter.species[j]!.nucleonFraction);
    const sum = parts.reduce((a, b) => a + b, 0);
    const size = Math.max(...parts.map(Math.abs), Math.abs(state.specificFreeEnergy), state.pressure / density);
    measured.compare("Euler", sum, state.specificFreeEnergy + state.pressure / density, where, size);
    if (i % 5 > 0) continue;
    const [end, nodes] = [
      compositionDerivatives(eos, density * Math.exp(length), temperature, matter),
      Array.from(rule.nodes, (s) => compositionDerivatives(eos, density * Math.exp(s * length), temperature, matter)),
    ];
    const [warm, warmer] = [
      compositionDerivatives(eos, density, temperature * Math.exp(length), matter),
      Array.from(rule.nodes, (s) => compositionDerivatives(eos, density, temperature * Math.exp(s * length), matter)),
    ];
    at.species.forEach((one, a) => {
      const scale = Math.max(Math.abs(one.specificFreeEnergy), temperature * Math.abs(one.specificEntropy));
      const pressure = nodes.reduce((s, n, j) => s + (rule.weights[j]! * n.species[a]!.pressure) / n.density, 0);
      const rise = (end.species[a]!.specificFreeEnergy - one.specificFreeEnergy) / length;
      measured.compare("d mu/d ln rho", rise, pressure, where, scale);
      const heat = warmer.reduce((s, n, j) => s + rule.weights[j]! * n.species[a]!.specificEntropy * n.temperature, 0);
      const fall = (warm.species[a]!.specificFreeEnergy - one.specificFreeEnergy) / length;
      measured.compare("d mu/d ln T", fall, -heat, where, scale);
    });
  }
  print(measured);
  expect(measured.count("Euler")).toBe(5000);
  expect(seen.size).toBe(5);
  measured.expectBelow("Euler", 4e-15, 5e-16);
  // Rounding of mu over the length of the path.
  measured.expectBelow("d mu/d ln rho", 6e-14, 6e-15);
  measured.expectBelow("d mu/d ln T", 6e-14, 6e-15);
});

describe("T = 0", () => {
  const cold = combine(electronPositronGas(), coulombPlasma(), radiation());

  test("residual entropy, energy and pressure along a path", () => {
    const measured = new Measured();
    for (const path of [paths[0]!, paths[2]!, paths[4]!]) {
      for (const density of [1e5, 1e7, 1e9]) {
        const [begin, end] = [0, 1].map((share) => cold.state(density, 0, mixture(path, share))) as [State, State];
        const slopes: DirectionalDerivatives[] = Array.from(rule.nodes, (node) =>
          compositionDerivatives(cold, density, 0, mixture(path, node)).along(change(path)),
        );
        for (const name of names) {
          const mean = slopes.reduce((sum, one, j) => sum + rule.weights[j]! * one[name], 0);
          measured.compare(name, end[name] - begin[name], mean, `${density}`, Math.abs(begin[name]));
        }
      }
    }
    print(measured);
    for (const name of names) measured.expectBelow(name, 5e-15);
  });

  test("is the limit of 1 K", () => {
    const matter = composition({ n: 0.1, O16: 0.5, Fe57: 0.4 });
    const sum = combine(electronPositronGas(), fermionGas({ species: "n" }), coulombPlasma({ freeNeutrons: false }));
    const [none, little] = [0, 1].map((t) => compositionDerivatives(sum, 1e9, t, matter));
    none!.species.forEach((one, i) => {
      for (const name of ["specificFreeEnergy", "pressure", "specificEnergy"] as const) {
        expect(little!.species[i]![name] / one[name], `${name} of ${one.label}`).toBeCloseTo(1, 11);
      }
    });
    // Neutrons and electrons at 1 K have an entropy of their own, 1e-9 of that of mixing.
    for (const label of ["O16", "Fe57"]) {
      expect(little!.of(label).specificEntropy / none!.of(label).specificEntropy).toBeCloseTo(1, 6);
    }
    expect(none!.of("O16").specificEntropy).toBeGreaterThan(0);
    expect(none!.of("n").specificEntropy).toBe(0);
  });
});

describe("reactions", () => {
  const helium = composition({ He4: 0.5, C12: 0.5 });
  const mev = 1e6 * electronVolt;

  test("mass excess gives the energy of three He4 -> C12", () => {
    // 7.275 MeV: Tilley et al. and every table of the reaction (from memory); AME2020 masses give 7.27475.
    const reaction = { He4: -3, C12: 1 };
    const [bare, excess, whole] = (["excluded", "excess", "included"] as const).map((restMass) =>
      compositionDerivatives(full, 1e5, 2e8, helium, { restMass }).alongReaction(reaction),
    );
    for (const name of ["energy", "freeEnergy"] as const) {
      expect((bare![name] - excess![name]) / mev).toBeCloseTo(7.275, 3);
      expect(whole![name] / mev).toBeCloseTo(excess![name] / mev, 9);
    }
    expect(excess!.pressure).toBe(bare!.pressure);
    expect(bare!.electrons).toBe(0);
  });

  test("is the change of fractions times A m_u", () => {
    const at = compositionDerivatives(full, 1e5, 2e8, helium);
    const [reaction, direction] = [at.alongReaction({ He4: -3, C12: 1 }), at.along({ He4: -12, C12: 12 })];
    const pairs = [
      ["freeEnergy", "specificFreeEnergy"],
      ["energy", "specificEnergy"],
      ["entropy", "specificEntropy"],
      ["pressure", "pressure"],
    ] as const;
    for (const [name, along] of pairs) {
      expect(reaction[name] / (atomicMassConstant * direction[along]), name).toBeCloseTo(1, 14);
    }
    const chemical = at.of("C12").chemicalPotential - 3 * at.of("He4").chemicalPotential;
    expect(reaction.freeEnergy / chemical).toBeCloseTo(1, 12);
  });

  test("electron capture starts where its chemical potentials balance: Fermi energy, Q and lattice shift of `regime`", () => {
    const trace = composition({ Fe56: 1, Mn56: 1e-12 }, { normalise: true });
    const capture = { Fe56: -1, Mn56: 1 };
    const density = 1.2e9;
    const lattice = coulombPlasma().parts.find(({ name }) => name === "lattice energy")!;
    const { energy, latticeShift } = regime(density, 0, composition({ Fe56: 1 })).captures[0]!;
    const electrons = electronPositronGas();
    const sum = (eos: EquationOfState) =>
      compositionDerivatives(eos, density, 0, trace, { restMass: "excess" }).alongReaction(capture);
    const bare = sum(combine(electrons));
    const potential = combine(electrons).state(density, 0, trace).electronChemicalPotential!;
    expect(bare.freeEnergy / (energy - potential)).toBeCloseTo(1, 11);
    const shift = sum(combine(electrons, lattice)).freeEnergy - bare.freeEnergy;
    expect(shift / latticeShift).toBeCloseTo(1, 9);
    expect(bare.electrons).toBe(-1);
  });
});

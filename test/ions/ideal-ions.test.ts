/** The ideal gas of nuclei against handbook values of the entropy of real gases, and its limits. */
import { expect, test } from "vitest";
import { atomicMassConstant, boltzmannConstant } from "../../src/constants.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { composition } from "../../src/matter/composition.js";
import { combine } from "../../src/thermodynamics/combine.js";

const ions = combine(idealIons());

test("entropy of helium gas at 298.15 K and 1 bar: 126.153 J/(mol K)", () => {
  // CODATA Key Values for Thermodynamics (Cox, Wagman & Medvedev 1989), S(He, gas) = 126.153 +- 0.002 J/(mol K); the
  // spin of He-4 is zero. Nuclei and atoms differ by 2 electron masses in 4 u: 1.5 R ln(1 + 2.7e-4) = 0.003.
  const temperature = 298.15;
  const density = (1e6 / (boltzmannConstant * temperature)) * 4 * atomicMassConstant; // 1 bar = 1e6 dyn/cm^2
  const state = ions.state(density, temperature, composition({ He4: 1 }));
  expect(state.pressure).toBeCloseTo(1e6, 6);
  const perMole = (state.specificEntropy * 4 * atomicMassConstant * 6.02214076e23) / 1e7; // erg -> J
  expect(Math.abs(perMole - 126.153)).toBeLessThan(0.002 + 0.0035);
});

test("entropy of neon gas at 298.15 K and 1 bar: 146.328 J/(mol K), natural mixture with its entropy of mixing removed", () => {
  // Same source: S(Ne, gas) = 146.328 +- 0.003 J/(mol K); by convention it leaves out isotope mixing and nuclear spin.
  const temperature = 298.15;
  const molar = (label: string): number => {
    const matter = composition({ [label]: 1 });
    const species = matter.species[0]!;
    const density = (1e6 / (boltzmannConstant * temperature)) * species.massNumber * atomicMassConstant;
    const perGram = ions.state(density, temperature, matter).specificEntropy;
    return (perGram * species.massNumber * atomicMassConstant * 6.02214076e23) / 1e7;
  };
  // Isotopic abundances 0.9048 and 0.0925 of Ne-20 and Ne-22 (IUPAC 1997, from memory); 0.0027 of Ne-21 joined to Ne-22.
  const mean = 0.9048 * molar("Ne20") + 0.0952 * molar("Ne22");
  expect(Math.abs(mean - 146.328)).toBeLessThan(0.003 + 0.005); // ten electron masses in 20 u: 0.0034
});

test("mixing adds -R sum x ln x, spin adds R ln(2J + 1)", () => {
  const temperature = 1e7;
  const half = composition({ meanMassNumber: 12, meanCharge: 6 });
  const carbon = composition({ C12: 1 });
  // The plain mean of carbon is carbon: same mass number, same charge, spin zero.
  const difference =
    ions.state(1, temperature, half).specificEntropy / ions.state(1, temperature, carbon).specificEntropy;
  expect(Math.abs(difference - 1)).toBeLessThan(1e-14);
  // Number fractions 1/2 of C-12 and O-16: nucleon fractions 3/7 and 4/7. Partial densities give the unmixed entropies.
  const mixed = composition({ C12: 3 / 7, O16: 4 / 7 });
  const parts =
    (3 / 7) * ions.state(1, temperature, carbon).specificEntropy +
    (4 / 7) * ions.state(1, temperature, composition({ O16: 1 })).specificEntropy;
  // Each species alone at the total number density of the mixture would have densities 12/14 and 16/14.
  const perGram = mixed.ionsPerGram * boltzmannConstant;
  const correction = perGram * 0.5 * (Math.log(14 / 12) + Math.log(14 / 16));
  const mixing = ions.state(1, temperature, mixed).specificEntropy - parts - correction;
  expect(Math.abs(mixing / perGram - Math.LN2)).toBeLessThan(1e-13);
});

test("free neutrons are one of the gases, or left to another contribution", () => {
  const matter = composition({ n: 0.5, C12: 0.5 });
  const all = ions.state(1, 1e8, matter);
  const nuclei = combine(idealIons({ freeNeutrons: false })).state(1, 1e8, matter);
  expect(all.pressure / nuclei.pressure).toBeCloseTo(13, 12); // 0.5 + 0.5/12 against 0.5/12
  expect(nuclei.pressure / ((0.5 / 12) * (boltzmannConstant / atomicMassConstant) * 1e8)).toBeCloseTo(1, 13);
});

test("the ideal gas exactly: gamma_1 = 5/3, nabla_ad = 2/5, c_v = 3/2 N k, c_p = 5/2 N k", () => {
  const matter = composition({ Fe56: 1 });
  const state = ions.state(3, 1e6, matter);
  const perGram = matter.ionsPerGram * boltzmannConstant;
  expect(state.gamma1).toBeCloseTo(5 / 3, 15);
  expect(state.adiabaticGradient).toBeCloseTo(0.4, 15);
  expect(state.heatCapacityV / perGram).toBeCloseTo(1.5, 14);
  expect(state.heatCapacityP / perGram).toBeCloseTo(2.5, 14);
});

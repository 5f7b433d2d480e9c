/**
 * Derivatives of the Fermi gases by the amount of a species: electrons and positrons against the arbitrary-precision
 * reference (src/certify, no code shared), one species alone against electrons where there are no pairs.
 */
import { expect, test } from "vitest";
import { referenceElectronGas } from "../../src/certify/electron-gas.js";
import { atomicMassConstant, electronMass, electronRestEnergy } from "../../src/constants.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { fermionGas } from "../../src/fermi-gas/fermion-gas.js";
import { composition } from "../../src/matter/composition.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { compositionDerivatives } from "../../src/thermodynamics/composition-derivatives.js";
import { Measured } from "../measured.js";

const hydrogen = composition({ H1: 1 });
const electrons = combine(electronPositronGas());

/** Thin, partly degenerate, cold; relativistic; pairs 1e-3 to 1e12 times the net electrons; T = 0. */
const points: readonly (readonly [density: number, temperature: number])[] = [
  [1e-8, 1e4],
  [1, 1e6],
  [150, 1.5e7],
  [1e4, 1e7],
  [1e6, 1e7],
  [1e6, 1e5],
  [1e9, 1e8],
  [1e12, 1e9],
  [1e4, 1e9],
  [1e3, 5e9],
  [1e-2, 3e9],
  [1e-6, 1e10],
  [1e8, 1e12],
];

test("electrons and positrons: mu, and the derivatives of e, s and P by n", { timeout: 120_000 }, () => {
  const measured = new Measured();
  for (const [density, temperature] of points) {
    const where = `rho ${density} T ${temperature}`;
    const found = compositionDerivatives(electrons, density, temperature, hydrogen).of("H1");
    // The library's own n_e, so that no rounding of rho Y_e/m_u is in the comparison.
    const { electronDensity: netElectronDensity, positronDensity } = electrons.state(density, temperature, hydrogen);
    // The plain difference below loses the digits of (pairs/net electrons)^2, up to 25.
    const lost = 2 * Math.log10(1 + positronDensity! / netElectronDensity);
    const exact = referenceElectronGas({ temperature, netElectronDensity }, { digits: Math.ceil(20 + lost) });
    const { chemicalPotential, pressureByDensity, pressureByTemperature, entropyDensity } = exact;
    // dP/dT at n is s + n dmu/dT.
    const heat = entropyDensity.minus(pressureByTemperature).div(netElectronDensity).times(temperature); // -T dmu/dT
    const energy = chemicalPotential.plus(heat);
    const scale = Math.max(Math.abs(Number(energy)), Math.abs(Number(heat)));
    const per = atomicMassConstant;
    measured.compare("F", found.chemicalPotential, Number(chemicalPotential), where, scale);
    measured.compare("e", found.specificEnergy * per, Number(energy), where);
    measured.compare("s", found.specificEntropy * temperature * per, Number(heat), where);
    measured.compare("P", (found.pressure / density) * per, Number(pressureByDensity), where);
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  expect(measured.count("F")).toBe(points.length);
  measured.expectBelow("F", 5e-16);
  for (const name of ["e", "s", "P"]) measured.expectBelow(name, 1e-15);
});

test("T = 0: Fermi energy and n de_F/dn", () => {
  for (const density of [1e3, 1e6, 1e9]) {
    const { chemicalPotential, pressureByDensity } = referenceElectronGas({
      temperature: 0,
      density,
      electronsPerNucleon: 1,
    });
    const found = compositionDerivatives(electrons, density, 0, hydrogen).of("H1");
    expect(found.chemicalPotential / Number(chemicalPotential)).toBeCloseTo(1, 14);
    expect((found.pressure * atomicMassConstant) / density / Number(pressureByDensity)).toBeCloseTo(1, 14);
    expect(found.specificEntropy).toBe(0);
  }
});

test("where pairs outnumber electrons 1e10 times, the derivatives keep their digits", () => {
  // kT = 17 m c^2 >> mu: n is mu T^2 times a constant up to (m c^2/kT)^2, so -T dmu/dT = 2 mu and de/dn = 3 mu - m c^2.
  const temperature = 1e11;
  const hot = compositionDerivatives(electrons, 1e-6, temperature, hydrogen).of("H1");
  const state = electrons.state(1e-6, temperature, hydrogen);
  expect(state.positronDensity! / state.electronDensity).toBeGreaterThan(1e10);
  const mu = state.electronChemicalPotential! + electronRestEnergy;
  // dP/dn = n dmu/dn = mu: both carry mu in full, which is lost in mu - m c^2.
  expect((hot.specificEntropy * temperature) / (hot.pressure / 1e-6)).toBeCloseTo(2, 2);
  expect(Math.abs(mu)).toBeLessThan(1e-9 * electronRestEnergy);
});

test("fermions of the electron's mass are electrons without positrons", () => {
  const alone = combine(fermionGas({ species: "H1", mass: electronMass, degeneracy: 2 }));
  for (const [density, temperature] of [
    [1e-8, 1e4],
    [150, 1.5e7],
    [1e6, 1e7],
    [1e9, 1e8],
    [1e6, 0],
  ] as const) {
    const [one, other] = [alone, electrons].map((eos) =>
      compositionDerivatives(eos, density, temperature, hydrogen).of("H1"),
    );
    for (const name of ["specificFreeEnergy", "pressure", "specificEnergy"] as const) {
      expect(one![name] / other![name], `${name} rho ${density} T ${temperature}`).toBeCloseTo(1, 13);
    }
  }
});

test("fermions: other species and their absence count nothing", () => {
  const neutrons = combine(electronPositronGas(), fermionGas({ species: "n" }));
  const matter = composition({ n: 0.2, Fe56: 0.8 });
  const both = compositionDerivatives(neutrons, 1e12, 1e9, matter);
  const bare = compositionDerivatives(electrons, 1e12, 1e9, matter);
  expect(both.of("Fe56")).toEqual(bare.of("Fe56"));
  expect(bare.of("n").specificFreeEnergy).toBe(0);
  expect(both.of("n").chemicalPotential).toBeGreaterThan(0);
  const without = composition({ Fe56: 1 });
  expect(compositionDerivatives(neutrons, 1e12, 1e9, without).species).toHaveLength(1);
});

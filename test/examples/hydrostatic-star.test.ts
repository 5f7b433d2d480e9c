/** Hydrostatic stars: cold ideal electrons against Chandrasekhar's equation, a Coulomb lattice, and what the tolerance buys. */
import {
  atomicMassConstant,
  coldCorrections,
  combine,
  composition,
  electronMass,
  electronPositronGas,
  gravitationalConstant,
  planckConstant,
  reducedPlanckConstant,
  solarMass,
  speedOfLight,
  whiteDwarfMatter,
} from "fermistate";
import { expect, test } from "vitest";
import { hydrostaticStar, type Shell, type StarOptions } from "../../docs/examples/hydrostatic-star.js";
import { Measured } from "../measured.js";

const surfaceOf = (options: StarOptions): Shell => hydrostaticStar(options).shells.at(-1)!;
const cold = { temperature: 0, surface: 1e-30, tolerance: 1e-12 } as const;
const electrons = combine(electronPositronGas());

/**
 * Chandrasekhar 1935, MNRAS 95, 207 (also 1939, An Introduction to the Study of Stellar Structure, table 25): the first zero eta1 of
 * phi and -eta1^2 phi'(eta1), by 1/y0^2 = 1/(1 + x_c^2). The printed tables give five digits; these are the same equation
 * integrated independently in high precision.
 */
const degenerateDwarfs = [
  [0.001, 6.2603517794, 2.00775511475],
  [0.02, 4.98567548181, 1.86521046528],
  [0.05, 4.46013738247, 1.70965458329],
  [0.1, 4.0690266552, 1.51862213171],
  [0.3, 3.58028160131, 1.033911692],
  [0.8, 4.04456081101, 0.3091333549],
  [0.99, 8.18706120957, 0.03044920387],
] as const;

test("mass and radius of ideal degenerate dwarfs", () => {
  // P = A f(x), rho = B x^3: ibid., with the nucleon mass m_u.
  const A = (Math.PI * electronMass ** 4 * speedOfLight ** 5) / (3 * planckConstant ** 3);
  const matter = composition({ He4: 1 });
  const compton = reducedPlanckConstant / (electronMass * speedOfLight);
  const B = (2 * atomicMassConstant) / (3 * Math.PI ** 2 * compton ** 3);
  const length = Math.sqrt((2 * A) / (Math.PI * gravitationalConstant)) / B;
  const measured = new Measured();
  for (const [inverse, eta, slope] of degenerateDwarfs) {
    const centralDensity = B * (1 / inverse - 1) ** 1.5;
    const { mass, radius } = surfaceOf({ eos: electrons, matter, centralDensity, ...cold });
    const [expectedRadius, expectedMass] = [length * Math.sqrt(inverse) * eta, 4 * Math.PI * length ** 3 * B * slope];
    measured.compare("mass", mass, expectedMass, `1/y0^2 = ${inverse}`);
    measured.compare("radius", radius, expectedRadius, `1/y0^2 = ${inverse}`);
  }
  // The printed digits of the slopes end at 1e-11 of 0.03 and more.
  measured.expectBelow("mass", 2e-10, 1e-11);
  measured.expectBelow("radius", 3e-11, 5e-12);
});

test("a Coulomb lattice: the star ends at a finite density", () => {
  // Electrons and bcc lattice at T = 0, Newtonian gravity; integrated independently by two methods, masses to 1e-12.
  const eos = combine(
    electronPositronGas(),
    coldCorrections({ thomasFermi: false, exchange: false, correlation: false }),
  );
  const measured = new Measured();
  for (const [nuclide, centralDensity, mass, radius] of [
    ["C12", 1e7, 0.789261715688626761, 693968554.239577324],
    ["C12", 1e9, 1.33535022533333802, 244127666.933851167],
    ["He4", 1e6, 0.391246680924779772, 1077776787.51737821],
    ["He4", 1e8, 1.16602963057281825, 429700981.576816286],
    ["Fe56", 1e7, 0.632513960774724721, 631150360.175250229],
    ["Fe56", 1e9, 1.10325468975815097, 226490232.34030974],
  ] as const) {
    const star = surfaceOf({ eos, matter: composition({ [nuclide]: 1 }), centralDensity, ...cold, surface: 1e-20 });
    const where = `${nuclide} ${centralDensity}`;
    measured.compare("mass", star.mass / solarMass, mass, where);
    measured.compare("radius", star.radius, radius, where);
    if (nuclide === "C12") measured.compare("density of the surface", star.density, 12.8397264673432075, where);
  }
  measured.expectBelow("mass", 5e-11, 3e-12);
  measured.expectBelow("radius", 2e-11, 3e-12);
  measured.expectBelow("density of the surface", 2e-7); // that at 1e-20 of the central pressure
});

test("the error follows the tolerance", () => {
  const matter = composition({ C12: 1 });
  const mass = 0.400811179788254101; // ideal electrons, 1e6 g/cm^3, Newtonian gravity; integrated independently as above
  for (const [tolerance, bound, most] of [
    [1e-4, 1e-5, 160],
    [1e-6, 1e-7, 280],
    [1e-8, 3e-9, 440],
    [1e-10, 3e-10, 650],
    [1e-12, 5e-13, 1000],
  ] as const) {
    const options = { eos: electrons, matter, centralDensity: 1e6, ...cold, tolerance };
    const { shells, derivatives } = hydrostaticStar(options);
    expect(Math.abs(shells.at(-1)!.mass / solarMass / mass - 1)).toBeLessThan(bound);
    expect(derivatives).toBeLessThan(most);
  }
});

// Density jumps by 1e-4 where the frozen inside meets the liquid; an integrator that does not know it steps over that.
test.each([
  [1e6, 5e-6],
  [2e6, 1e-5],
  [3e6, 1e-6],
])("a star of carbon and oxygen at %d K, frozen inside", (temperature, bound) => {
  const [eos, matter] = [whiteDwarfMatter(), composition({ C12: 0.5, O16: 0.5 })];
  const options = { eos, matter, centralDensity: 2e6, temperature, surface: 1e-5 };
  const [rough, fine] = [1e-6, 1e-10].map((tolerance) => surfaceOf({ ...options, tolerance })) as [Shell, Shell];
  expect(Math.abs(rough.mass / fine.mass - 1)).toBeLessThan(bound);
  expect(Math.abs(rough.radius / fine.radius - 1)).toBeLessThan(bound);
});

/**
 * Electron capture (Z, A) + e -> (Z - 1, A) + nu: the chemical potential at which it starts, and the cold density.
 *
 *     Q      = [M(Z-1, A) - M(Z, A)] c^2                                              atomic masses, AME2020
 *     mu_e - m_e c^2 > Q + 0.8959 [Z^(5/3) - (Z-1)^(5/3) + <Z^(5/3)>/(3 <Z>)] e^2/a_e       in a Coulomb lattice
 *
 * Where the daughter with one neutron fewer and a free neutron is lighter, that is the product (He4 -> H3 + n). The last
 * term of the bracket is the lattice pressure's part: one capture takes an electron out, which thins the background of
 * all ions. For one species it is Z^(2/3)/3, and the bracket is that of two pure phases in balance at one pressure
 * (Chamel & Fantina 2015, Phys. Rev. D 92, 023008, from memory; derived anew from F = sum of n_j Z_j^(5/3) n_e^(1/3)).
 * Ground state to ground state: forbidden transitions start later, captures on excited states earlier. Static bcc
 * lattice with point-like nuclei; in hot gas the shift is smaller, and then below kT.
 */
import {
  atomicMassConstant,
  bohrRadius,
  boltzmannConstant,
  electronDensityUnit,
  electronRestEnergy,
  electronVolt,
  elementaryChargeSquared,
  fineStructureConstant,
  speedOfLight,
} from "../constants.js";
import type { Composition, Species } from "../matter/composition.js";
import { nuclide, nuclides } from "../matter/nuclides.js";
import { radiusFactor } from "../matter/plasma.js";
import { type Finding, judge } from "./finding.js";
import type { RegimeParameters } from "./parameters.js";

/** Threshold of electron capture on one nuclide; frozen. */
export interface CaptureThreshold {
  /** Label of the nuclide. */
  readonly species: string;
  /** What it turns into, without the neutrino: "Mn56", "H3 + n". */
  readonly product: string;
  /** Q, erg: mu_e - m_e c^2 at the threshold without lattice; negative where the nuclide captures at any density. */
  readonly energy: number;
  /** What the lattice adds to Q at this density, erg. */
  readonly latticeShift: number;
  /** Density at which cold electrons of this composition reach Q, g/cm^3; 0 where Q <= 0. */
  readonly density: number;
  /** The same with the lattice, g/cm^3. */
  readonly densityWithLattice: number;
}

/** Madelung constant of the bcc lattice per Z^(5/3) e^2/a_e (Coldwell-Horsfall & Maradudin 1960, J. Math. Phys. 1, 395). */
const madelung = 0.895929255682;
const massEnergy = atomicMassConstant * speedOfLight * speedOfLight;

/** Thresholds of the nuclides of a composition; undefined entries where AME2020 has no daughter, or for a mean nucleus. */
export function captureThresholds(
  composition: Composition,
  densityParameter: number,
): { thresholds: readonly CaptureThreshold[]; complete: boolean } {
  const charged = composition.species.filter((one) => one.chargeNumber > 0);
  const thresholds = charged.flatMap((one) => {
    const product = one.label === "mean" ? undefined : lightestProduct(one);
    return product === undefined ? [] : [threshold(one, product, composition, densityParameter)];
  });
  return { thresholds: Object.freeze(thresholds), complete: thresholds.length === charged.length };
}

/** Adds `electron-capture` for each nuclide that is at its threshold. */
export function judgeCapture(
  list: Finding[],
  thresholds: readonly CaptureThreshold[],
  temperature: number,
  parameters: RegimeParameters,
): void {
  for (const { species, product, energy, latticeShift } of thresholds) {
    judge(list, {
      code: "electron-capture",
      value: parameters.electronChemicalPotential,
      strained: energy - 5 * boltzmannConstant * temperature,
      outside: energy + latticeShift,
      name: "electron chemical potential without rest energy",
      unit: "erg",
      species,
      message: {
        strained: `${species} is near the threshold of electron capture to ${product} (${inMeV(energy)} MeV): fast electrons are caught.`,
        outside: `${species} captures electrons here (to ${product}, above ${inMeV(energy)} MeV): matter does not keep this composition.`,
      },
    });
  }
}

const inMeV = (energy: number): string => (energy / (1e6 * electronVolt)).toPrecision(4);

interface Product {
  readonly label: string;
  /** Atomic mass, neutron included, u. */
  readonly mass: number;
}

let symbols: readonly string[] | undefined;
let labels: ReadonlySet<string> | undefined;

/** The atom of (Z, A) if AME2020 has it. */
function atom(chargeNumber: number, massNumber: number): Product | undefined {
  symbols ??= [...new Set(nuclides().map((label) => label.replace(/\d+$/, "")))];
  labels ??= new Set(nuclides());
  if (chargeNumber === 0) return massNumber === 1 ? { label: "n", mass: nuclide("n").atomicMass } : undefined;
  const label = `${symbols[chargeNumber]}${massNumber}`;
  return labels.has(label) ? { label, mass: nuclide(label).atomicMass } : undefined;
}

function lightestProduct({ chargeNumber, massNumber }: Species): Product | undefined {
  const whole = atom(chargeNumber - 1, massNumber);
  const rest = atom(chargeNumber - 1, massNumber - 1);
  const broken = rest && { label: `${rest.label} + n`, mass: rest.mass + nuclide("n").atomicMass };
  if (whole === undefined || broken === undefined) return whole ?? broken;
  return broken.mass < whole.mass ? broken : whole;
}

function threshold(
  { label, chargeNumber: z }: Species,
  product: Product,
  composition: Composition,
  rs: number,
): CaptureThreshold {
  const energy = (product.mass - nuclide(label).atomicMass) * massEnergy;
  const { meanCharge, chargeMoments } = composition;
  const bracket = z * Math.cbrt(z) ** 2 - (z - 1) * Math.cbrt(z - 1) ** 2 + chargeMoments.fiveThirds / (3 * meanCharge);
  const q = energy / electronRestEnergy;
  return Object.freeze({
    species: label,
    product: product.label,
    energy,
    latticeShift: (madelung * bracket * elementaryChargeSquared) / (rs * bohrRadius),
    density: coldDensity(q, 0, composition),
    densityWithLattice: coldDensity(q, (madelung * bracket * fineStructureConstant ** 2) / radiusFactor, composition),
  });
}

/**
 * Density where (1 + x^2)^(1/2) - 1 = q + b x: a quadratic equation, since e^2/a_e = alpha^2 m_e c^2/r_s is linear in x.
 */
function coldDensity(q: number, b: number, composition: Composition): number {
  if (q <= 0) return 0;
  const half = (1 + q) * b;
  const free = 1 - b * b;
  const x = (half + Math.sqrt(half * half + free * q * (2 + q))) / free;
  return (x ** 3 * electronDensityUnit) / (3 * composition.electronsPerGram);
}

/**
 * Gibbs energy per gram of cold matter of one nuclide in a lattice, and the nuclide that has the least of it.
 *
 *     g(P) = w(P) + Delta,   Delta = [(M_atom + B_el/c^2)/(A m_u) - 1] c^2
 *
 * w is that of the equation of state (electrons, lattice) at the pressure P; Delta is the mass excess per gram, from
 * AME2020. In dense matter no electron is bound: a nucleus weighs M_atom - Z m_e + B_el/c^2, with the binding energy of
 * the electrons B_el = 14.4381 Z^2.39 + 1.55468e-6 Z^5.35 eV (Lunney, Pearson & Thibault 2003, Rev. Mod. Phys. 75,
 * 1021). Leaving B_el out is a convention, and it decides how thick the layer of Fe58 is.
 */
import {
  atomicMassConstant,
  electronDensityUnit,
  electronPressureUnit,
  electronRestEnergy,
  electronVolt,
  fineStructureConstant,
  speedOfLight,
} from "../constants.js";
import { bcc } from "../coulomb/lattice.js";
import { coldPressure } from "../fermi-gas/cold.js";
import { KINETIC_MU, P00, RECORD_LENGTH } from "../fermi-gas/record.js";
import { type Composition, composition } from "../matter/composition.js";
import { nuclide, nuclides } from "../matter/nuclides.js";
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { ENERGY, PRESSURE, PRESSURE_R } from "../thermodynamics/free-energy.js";

/** A nuclide that a crust may be made of. */
export interface CrustNuclide {
  /** "Fe56". */
  readonly label: string;
  /** Z. */
  readonly chargeNumber: number;
  /** A. */
  readonly massNumber: number;
  /** Delta, erg/g. */
  readonly massExcess: number;
  /** True where AME2020 marks the mass as estimated from trends. */
  readonly extrapolated: boolean;
}

const c2 = speedOfLight * speedOfLight;

/** Mass excess of free neutrons, erg per gram of baryon mass. */
export function neutronMassExcess(): number {
  return (nuclide("n").atomicMass - 1) * c2;
}

/** All nuclides of AME2020 with Z > 0, measured or with the extrapolated ones, with their mass excess. */
export function crustNuclides(extrapolated: boolean, electronBinding: boolean): readonly CrustNuclide[] {
  return nuclides()
    .map((label) => nuclide(label))
    .filter((one) => one.chargeNumber > 0 && (extrapolated || !one.extrapolated))
    .map((one) => {
      const { label, chargeNumber: z, massNumber: a, atomicMass } = one;
      const binding = electronBinding ? 14.4381 * z ** 2.39 + 1.55468e-6 * z ** 5.35 : 0; // eV
      const massExcess = ((atomicMass - a) / a) * c2 + (binding * electronVolt) / (a * atomicMassConstant);
      return { label, chargeNumber: z, massNumber: a, massExcess, extrapolated: one.extrapolated };
    });
}

/** What pure matter of a nuclide is like at a pressure. */
export interface PureMatter {
  /** g/cm^3. */
  readonly density: number;
  /** w of the equation of state, erg/g, mass excess not in it. */
  readonly potential: number;
}

/** Matter of a nuclide at T = 0 and a pressure, by Newton in ln rho; compositions are made once. */
export function pureMatterOf(
  equationOfState: EquationOfState,
): (nuclide: CrustNuclide, pressure: number) => PureMatter {
  const { point, members, fillMembers } = equationOfState.evaluator();
  const made = new Map<string, Composition>();
  const gas = new Float64Array(RECORD_LENGTH);
  return (one, pressure) => {
    let matter = made.get(one.label);
    if (matter === undefined) {
      matter = composition({ [one.label]: 1 });
      made.set(one.label, matter);
    }
    const x = momentumAt(gas, pressure, one.chargeNumber);
    let density = (x ** 3 * electronDensityUnit) / (3 * matter.electronsPerGram);
    point[TEMPERATURE] = 0;
    for (let i = 0; i < 60; i++) {
      point[DENSITY] = density;
      fillMembers(matter, 2);
      const move = (pressure / density - members[PRESSURE]!) / members[PRESSURE_R]!;
      density *= Math.exp(Math.max(-1, Math.min(1, move)));
      if (Math.abs(move) < 1e-12) break;
    }
    point[DENSITY] = density;
    fillMembers(matter, 2);
    return { density, potential: members[ENERGY]! + members[PRESSURE]! };
  };
}

/** e_C/(m_e c^2) = -b Z^(2/3) x: the bcc lattice energy per electron. */
const latticeFactor = -bcc.madelung * fineStructureConstant * Math.cbrt(4 / (9 * Math.PI));

/** x of ideal electrons and a lattice of charge Z at a pressure; Newton in ln x. */
function momentumAt(gas: Float64Array, pressure: number, z: number): number {
  const wanted = pressure / electronPressureUnit;
  const lattice = (latticeFactor * Math.cbrt(z) ** 2) / 9; // P = P_e - (b Z^(2/3)/9) x^4
  let x = Math.max(Math.sqrt(Math.sqrt(12 * wanted)), (15 * wanted) ** 0.2, 3 * lattice);
  for (let i = 0; i < 60; i++) {
    const x2 = x * x;
    gas[KINETIC_MU] = x2 / (1 + Math.sqrt(1 + x2));
    coldPressure(gas);
    const value = gas[P00]! - lattice * x2 * x2;
    const slope = (x2 * x2 * x) / (3 * Math.sqrt(1 + x2)) - 4 * lattice * x2 * x2; // x dP/dx
    const move = (wanted - value) / slope;
    x *= Math.exp(Math.max(-0.5, Math.min(0.5, move)));
    if (Math.abs(move) < 1e-14) break;
  }
  return x;
}

/**
 * The nuclides whose Gibbs energy by the closed form of ideal electrons and lattice lies within `margin` (erg/g) of the
 * least at a pressure: those another equation of state of electrons need be asked about.
 */
export function candidates(all: readonly CrustNuclide[], pressure: number, margin: number): readonly CrustNuclide[] {
  const gas = new Float64Array(RECORD_LENGTH);
  const perNucleus = new Map<number, number>();
  const values = all.map(({ chargeNumber: z, massNumber, massExcess }) => {
    let energy = perNucleus.get(z);
    if (energy === undefined) {
      const x = momentumAt(gas, pressure, z);
      const fermi = (x * x) / (1 + Math.sqrt(1 + x * x));
      energy =
        (z * (fermi - (4 / 3) * latticeFactor * Math.cbrt(z) ** 2 * x) * electronRestEnergy) / atomicMassConstant;
      perNucleus.set(z, energy);
    }
    return massExcess + energy / massNumber;
  });
  const least = Math.min(...values);
  return all.filter((_, i) => values[i]! <= least + margin);
}

/** Between the record of a point and that of its gas of electrons and positrons, in the units of the electron. */
import {
  atomicMassConstant,
  electronDensityUnit,
  electronPressureUnit,
  electronRestEnergy,
  electronRestTemperature,
} from "../constants.js";
import type { Composition } from "../matter/composition.js";
import {
  DENSITY,
  ELECTRON_CHEMICAL_POTENTIAL,
  ELECTRON_DEGENERACY,
  ELECTRON_DENSITY,
  FERMI_ENERGY,
  RELATIVITY,
  ROUGH_THIRD_ORDER,
  TEMPERATURE,
} from "../matter/point.js";
import { notesOf } from "../matter/species-list.js";
import {
  SPECIES_ENERGY,
  SPECIES_ENTROPY,
  SPECIES_LENGTH,
  SPECIES_PRESSURE,
} from "../thermodynamics/species-members.js";
import { CENTRE, FERMI_MOMENTUM, KINETIC_MU, N00, N01, N10, NET_DENSITY, PSI, ROUGH_THIRD, THETA } from "./record.js";

/** Writes what is given at a point into the gas; into `scale` the unit of its pressure over the density, erg/g. */
export function enterElectrons(point: Float64Array, gas: Float64Array, scale: Float64Array): void {
  gas[NET_DENSITY] = point[ELECTRON_DENSITY]! / electronDensityUnit;
  gas[FERMI_MOMENTUM] = point[RELATIVITY]!;
  gas[KINETIC_MU] = point[FERMI_ENERGY]!;
  gas[THETA] = point[TEMPERATURE]! / electronRestTemperature;
  gas[ROUGH_THIRD] = point[ROUGH_THIRD_ORDER]!;
  scale[0] = electronPressureUnit / point[DENSITY]!;
}

/** Tells the point the chemical potential of a solved gas. */
export function tellPotential(point: Float64Array, gas: Float64Array): void {
  const theta = gas[THETA]!;
  point[ELECTRON_CHEMICAL_POTENTIAL] = electronRestEnergy * (gas[CENTRE]! + theta * gas[PSI]!);
  point[ELECTRON_DEGENERACY] = gas[CENTRE]! === 0 ? gas[PSI]! : gas[PSI]! + gas[CENTRE]! / theta;
}

/** Takes a gas solved nearby, of density and temperature above 0, to the point, by the first derivatives of psi. */
export function moveElectrons(point: Float64Array, gas: Float64Array, scale: Float64Array): void {
  const density = gas[NET_DENSITY]!;
  const theta = gas[THETA]!;
  enterElectrons(point, gas, scale);
  // d psi/d ln n and d psi/d ln T as in density-derivatives.ts.
  const byDensity = (gas[NET_DENSITY]! - density) / density;
  const byTemperature = (gas[THETA]! - theta) / theta;
  gas[PSI]! += (gas[N00]! * byDensity - gas[N01]! * byTemperature) / gas[N10]!;
  tellPotential(point, gas);
}

/**
 * Adds the derivatives by the amount of one electron, three numbers, to the rows of the nuclides that bring Z of them.
 */
export function addElectronSpecies(perParticle: Float64Array, composition: Composition, rows: Float64Array): void {
  const { nuclei } = notesOf(composition).list;
  for (let i = 0, row = 0; i < nuclei.length; i++, row += SPECIES_LENGTH) {
    const unit = (nuclei[i]!.chargeNumber * electronRestEnergy) / atomicMassConstant;
    rows[row + SPECIES_ENERGY]! += unit * perParticle[0]!;
    rows[row + SPECIES_ENTROPY]! += unit * perParticle[1]!;
    rows[row + SPECIES_PRESSURE]! += unit * perParticle[2]!;
  }
}

/** A species table as a contribution: electrons and positrons from one surface, charge neutrality solved at each point. */
import {
  atomicMassConstant,
  electronDensityUnit,
  electronPressureUnit,
  electronRestEnergy,
  electronRestTemperature,
} from "../constants.js";
import { addGasMembers, fillParticleMembers } from "../fermi-gas/density-derivatives.js";
import {
  ANTIPARTICLES,
  CENTRE,
  FERMI_MOMENTUM,
  KINETIC_MU,
  N00,
  N01,
  N10,
  NET_DENSITY,
  PSI,
  RECORD_LENGTH,
  ROUGH_THIRD,
  THETA,
} from "../fermi-gas/record.js";
import type { Composition } from "../matter/composition.js";
import {
  DENSITY,
  ELECTRON_CHEMICAL_POTENTIAL,
  ELECTRON_DEGENERACY,
  ELECTRON_DENSITY,
  FERMI_ENERGY,
  POSITRON_DENSITY,
  RELATIVITY,
  ROUGH_THIRD_ORDER,
  TEMPERATURE,
} from "../matter/point.js";
import type { Contribution } from "../thermodynamics/contribution.js";
import type { Order } from "../thermodynamics/free-energy.js";
import {
  SPECIES_ENERGY,
  SPECIES_ENTROPY,
  SPECIES_LENGTH,
  SPECIES_PRESSURE,
} from "../thermodynamics/species-members.js";
import { fillPositrons, solveSpeciesGas } from "./species-gas.js";
import { speciesSurface } from "./species-surface.js";
import type { SpeciesTable } from "./species-table.js";

/**
 * The ideal gas of electrons and positrons as `electronPositronGas` gives it, read from a species table: any composition,
 * density 1e-20 to 1e18 g/cm^3, temperatures of the table.
 *
 * Consistent to rounding, since every member is a derivative of one grand potential; its distance from the exact gas is that of
 * `table.certificate`. For checking an exported table and its readers: the direct gas is as fast, and exact.
 */
export function speciesTableContribution(table: SpeciesTable): Contribution {
  const surface = speciesSurface(table);
  const gas = new Float64Array(RECORD_LENGTH);
  const scale = new Float64Array(1);
  const perParticle = new Float64Array(3);
  const { logTheta, restTemperature, certificate } = table;
  // Rounded inward, so that the ends of the domain have a logarithm within the nodes.
  const lowest = restTemperature * Math.exp(logTheta[0]!) * (1 + 1e-14);
  const highest = restTemperature * Math.exp(logTheta[logTheta.length - 1]!) * (1 - 1e-14);
  const within = (name: "pressure" | "entropy"): string => certificate.errors[name].bound.toExponential(1);

  function enter(point: Float64Array): void {
    gas[NET_DENSITY] = point[ELECTRON_DENSITY]! / electronDensityUnit;
    gas[FERMI_MOMENTUM] = point[RELATIVITY]!;
    gas[KINETIC_MU] = point[FERMI_ENERGY]!;
    gas[THETA] = point[TEMPERATURE]! / electronRestTemperature;
    gas[ROUGH_THIRD] = point[ROUGH_THIRD_ORDER]!;
    scale[0] = electronPressureUnit / point[DENSITY]!;
  }

  function tellPotential(point: Float64Array): void {
    const theta = gas[THETA]!;
    point[ELECTRON_CHEMICAL_POTENTIAL] = electronRestEnergy * (gas[CENTRE]! + theta * gas[PSI]!);
    point[ELECTRON_DEGENERACY] = gas[CENTRE]! === 0 ? gas[PSI]! : gas[PSI]! + gas[CENTRE]! / theta;
  }

  return Object.freeze({
    name: "table of one species: electrons and positrons",
    validity:
      `Electrons and positrons are an ideal gas, interpolated: pressure within ${within("pressure")}, entropy within ` +
      `${within("entropy")}; atoms are fully ionised.`,
    ideal: true,
    standsFor: ["electrons and positrons"],
    excludes: ["electrons and positrons"],
    dependsOn: "electron density",
    domain: Object.freeze({
      density: [1e-20, 1e18],
      temperature: [lowest, highest],
      zeroTemperature: false,
    } as const),

    add(point: Float64Array, _composition: Composition, order: Order, members: Float64Array): void {
      enter(point);
      if (gas[NET_DENSITY] === 0 && gas[THETA]! < 1 / 650) {
        gas[CENTRE] = -1; // mu = 0, and not even pairs: their e^(-1/theta) underflows
        gas[PSI] = 0;
      } else {
        solveSpeciesGas(surface, gas, order);
        addGasMembers(gas, scale, order, members);
      }
      tellPotential(point);
    },

    rewrite(point: Float64Array): void {
      const density = gas[NET_DENSITY]!;
      const theta = gas[THETA]!;
      if (density === 0) return;
      enter(point);
      // d psi/d ln n and d psi/d ln T as in density-derivatives.ts.
      const byDensity = (gas[NET_DENSITY]! - density) / density;
      const byTemperature = (gas[THETA]! - theta) / theta;
      gas[PSI]! += (gas[N00]! * byDensity - gas[N01]! * byTemperature) / gas[N10]!;
      tellPotential(point);
    },

    addDetail(point: Float64Array): void {
      if (gas[NET_DENSITY] === 0 && gas[THETA]! < 1 / 650) gas[ANTIPARTICLES] = 0;
      else fillPositrons(surface, gas);
      point[POSITRON_DENSITY] = gas[ANTIPARTICLES]! * electronDensityUnit;
    },

    addSpecies(_point: Float64Array, composition: Composition, rows: Float64Array): void {
      fillParticleMembers(gas, perParticle);
      const { species } = composition;
      for (let i = 0, row = 0; i < species.length; i++, row += SPECIES_LENGTH) {
        const unit = (species[i]!.chargeNumber * electronRestEnergy) / atomicMassConstant;
        rows[row + SPECIES_ENERGY]! += unit * perParticle[0]!;
        rows[row + SPECIES_ENTROPY]! += unit * perParticle[1]!;
        rows[row + SPECIES_PRESSURE]! += unit * perParticle[2]!;
      }
    },
  });
}

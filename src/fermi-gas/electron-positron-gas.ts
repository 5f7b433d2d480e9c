/**
 * Electrons and positrons as a contribution: ideal, at any degeneracy and any relativity, charge neutrality inside.
 *
 * The gas of n_- - n_+ = rho Y_e/m_u net electrons per volume in equilibrium with pairs, mu_+ = -mu_-. Exact physics of
 * the ideal gas; measured error at most 1e-14 in P, e, s, first derivatives and c_v over rho Y_e = 1e-15 to 1e15 g/cm^3
 * and T = 0 and 1e2 to 1e13 K (docs/guide/fermi-gas.md). Interactions are other contributions' matter.
 */
import { electronDensityUnit, electronRestTemperature } from "../constants.js";
import type { Composition } from "../matter/composition.js";
import { POSITRON_DENSITY, TEMPERATURE } from "../matter/plasma.js";
import type { Contribution } from "../thermodynamics/contribution.js";
import type { Order } from "../thermodynamics/free-energy.js";
import { addColdGasSlopes, addColdMembers, fillColdParticleMembers } from "./cold.js";
import { addGasMembers, fillParticleMembers } from "./density-derivatives.js";
import { addElectronSpecies, enterElectrons, moveElectrons, tellPotential } from "./electron-point.js";
import { solveDensity } from "./net-density.js";
import { ANTIPARTICLES, CENTRE, NET_DENSITY, NU, PSI, RECORD_LENGTH, THETA } from "./record.js";
import { antiparticleDensity } from "./single-species.js";

/**
 * The ideal electron-positron gas as a contribution: any degeneracy, any relativity, T = 0 included.
 *
 * The net density n_- - n_+ = rho Y_e/m_u is given, mu_+ = -mu_-; the energy excludes the rest mass of net electrons and
 * includes 2 m_e c^2 per pair. Measured error at most 1e-14 in P, e, s and their first derivatives over rho Y_e = 1e-15
 * to 1e15 g/cm^3, T = 0 and 1e2 to 1e13 K (docs/guide/fermi-gas.md, with sources). Answers at 1e-20 to 1e18 g/cm^3 and
 * at T = 0 or 1 to 1e13 K. Also tells the chemical potential, the degeneracy and the density of positrons.
 */
export function electronPositronGas(): Contribution {
  const gas = new Float64Array(RECORD_LENGTH);
  const scale = new Float64Array(1);
  const perParticle = new Float64Array(3);

  return Object.freeze({
    name: "electrons and positrons",
    physics: Object.freeze([{ model: "electrons and positrons", options: {} }]),
    validity: "Electrons and positrons are an ideal gas, exact to rounding as such; atoms are fully ionised.",
    ideal: true,
    dependsOn: "electron density",
    domain: Object.freeze({ density: [1e-20, 1e18], temperature: [1, 1e13], zeroTemperature: true } as const),

    add(point: Float64Array, _composition: Composition, order: Order, members: Float64Array): void {
      enterElectrons(point, gas, scale);
      const temperature = point[TEMPERATURE]!;
      if (temperature === 0) {
        addColdMembers(gas, scale, order, members);
        gas[ANTIPARTICLES] = 0;
      } else if (gas[NET_DENSITY] === 0 && gas[THETA]! < 1 / 650) {
        gas[CENTRE] = -1; // mu = 0, and not even pairs: their e^(-1/theta) underflows
        gas[PSI] = 0;
        gas[ANTIPARTICLES] = 0;
      } else {
        solveDensity(gas, true, order);
        addGasMembers(gas, scale, order, members);
      }
      tellPotential(point, gas);
    },

    rewrite(point: Float64Array): void {
      if (gas[NET_DENSITY] === 0 || gas[THETA] === 0) return;
      moveElectrons(point, gas, scale);
      gas[ANTIPARTICLES] = -1; // to be computed where asked for
    },

    addColdSlopes(point: Float64Array, _composition: Composition, slopes: Float64Array): void {
      enterElectrons(point, gas, scale);
      scale[0]! /= electronRestTemperature * electronRestTemperature;
      addColdGasSlopes(gas, scale, slopes);
    },

    addDetail(point: Float64Array): void {
      if (gas[ANTIPARTICLES]! < 0) {
        gas[NU] = gas[CENTRE] === -1 ? gas[PSI]! : gas[PSI]! + (1 + gas[CENTRE]!) / gas[THETA]!;
        antiparticleDensity(gas);
      }
      point[POSITRON_DENSITY] = gas[ANTIPARTICLES]! * electronDensityUnit;
    },

    addSpecies(point: Float64Array, composition: Composition, rows: Float64Array): void {
      if (point[TEMPERATURE] === 0) fillColdParticleMembers(gas, perParticle);
      else fillParticleMembers(gas, perParticle);
      addElectronSpecies(perParticle, composition, rows);
    },
  });
}

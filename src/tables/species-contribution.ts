/**
 * A species table as a contribution: electrons and positrons from one surface, charge neutrality solved at each point.
 */
import { electronDensityUnit, electronPressureUnit, electronRestTemperature } from "../constants.js";
import { FermistateError } from "../errors.js";
import { addGasMembers, fillParticleMembers } from "../fermi-gas/density-derivatives.js";
import { addElectronSpecies, enterElectrons, moveElectrons, tellPotential } from "../fermi-gas/electron-point.js";
import { ANTIPARTICLES, CENTRE, NET_DENSITY, PSI, RECORD_LENGTH, THETA } from "../fermi-gas/record.js";
import type { Composition } from "../matter/composition.js";
import { POSITRON_DENSITY } from "../matter/point.js";
import type { Contribution } from "../thermodynamics/contribution.js";
import type { Order } from "../thermodynamics/free-energy.js";
import { fillPositrons, solveSpeciesGas } from "./species-gas.js";
import { speciesSurface } from "./species-surface.js";
import { NODE_LENGTH, type SpeciesTable } from "./species-table.js";

/**
 * The ideal gas of electrons and positrons as `electronPositronGas` gives it, read from a species table: any
 * composition, density 1e-20 to 1e18 g/cm^3, temperatures of the table.
 *
 * Consistent to rounding, since every member is a derivative of one grand potential; its distance from the exact gas is
 * that of `table.certificate`. For checking an exported table and its readers: the direct gas is faster, and exact.
 *
 * @throws `invalid-option` for a table of another layout or of other constants than this library's
 */
export function speciesTableContribution(table: SpeciesTable): Contribution {
  requireUsable(table);
  const surface = speciesSurface(table);
  const gas = new Float64Array(RECORD_LENGTH);
  const scale = new Float64Array(1);
  const perParticle = new Float64Array(3);
  const { logTheta, restTemperature, certificate } = table;
  // Rounded inward, so that the ends of the domain have a logarithm within the nodes.
  const lowest = restTemperature * Math.exp(logTheta[0]!) * (1 + 1e-14);
  const highest = restTemperature * Math.exp(logTheta[logTheta.length - 1]!) * (1 - 1e-14);
  const within = (name: "pressure" | "entropy"): string => certificate.errors[name].bound.toExponential(1);

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
      enterElectrons(point, gas, scale);
      if (gas[NET_DENSITY] === 0 && gas[THETA]! < 1 / 650) {
        gas[CENTRE] = -1; // mu = 0, and not even pairs: their e^(-1/theta) underflows
        gas[PSI] = 0;
      } else {
        solveSpeciesGas(surface, gas, order);
        addGasMembers(gas, scale, order, members);
      }
      tellPotential(point, gas);
    },

    rewrite(point: Float64Array): void {
      if (gas[NET_DENSITY] !== 0) moveElectrons(point, gas, scale);
    },

    addDetail(point: Float64Array): void {
      if (gas[NET_DENSITY] === 0 && gas[THETA]! < 1 / 650) gas[ANTIPARTICLES] = 0;
      else fillPositrons(surface, gas);
      point[POSITRON_DENSITY] = gas[ANTIPARTICLES]! * electronDensityUnit;
    },

    addSpecies(_point: Float64Array, composition: Composition, rows: Float64Array): void {
      fillParticleMembers(gas, perParticle);
      addElectronSpecies(perParticle, composition, rows);
    },
  });
}

/** The surface is a pure function, but its temperatures and units are those of the constants it was made with. */
function requireUsable(table: SpeciesTable): void {
  const { layout, degeneracy, logTheta, nodes } = table;
  if (layout !== 2 || nodes.length !== NODE_LENGTH * degeneracy.length * logTheta.length) {
    const allowed = `2, with ${NODE_LENGTH} numbers a node: a table of buildSpeciesTable of this version`;
    throw new FermistateError("invalid-option", { argument: "table.layout", given: layout, allowed });
  }
  const constants = {
    restTemperature: electronRestTemperature,
    pressureUnit: electronPressureUnit,
    densityUnit: electronDensityUnit,
  };
  for (const [name, own] of Object.entries(constants)) {
    const given = table[name as keyof typeof constants];
    if (given === own) continue;
    const allowed = `${own}, this library's constants (CODATA 2022): build the table with this version`;
    throw new FermistateError("invalid-option", { argument: `table.${name}`, given, allowed });
  }
}

/**
 * The dimensionless numbers and temperatures that say what kind of matter this is.
 *
 *     Gamma_j = Gamma_e Z_j^(5/3),  Gamma = sum x_j Gamma_j       coupling; x_j among charged nuclei
 *     T_p,j   = (hbar/k) (4 pi e^2 n_e Z_j/M_j)^(1/2),  theta_j = T_p,j/T
 *     R_S,j   = (M_j/m_e) Z_j^(7/3) r_s = 3 (Gamma_j/theta_j)^2   density parameter of the ions
 *     t       = T/T_F,nr,  k T_F,nr = x_r^2 m_e c^2/2             reduced temperature
 *     p       = max_j r_s Z_j^(2/3)                               ionisation parameter
 *
 * Definitions as in Salpeter & Van Horn 1969 (ApJ 155, 183) and common practice since. p is a_e over the Thomas-Fermi
 * size of the atom; the cold Coulomb pressure is 0.41 p of the non-relativistic electron pressure.
 */
import {
  atomicMassConstant,
  bohrRadius,
  boltzmannConstant,
  electronMass,
  electronRestEnergy,
  electronRestTemperature,
  elementaryChargeSquared,
  reducedPlanckConstant,
} from "../constants.js";
import { electronPositronGas } from "../fermi-gas/electron-positron-gas.js";
import { type Composition, requireComposition, type Species } from "../matter/composition.js";
import {
  DENSITY,
  ELECTRON_CHEMICAL_POTENTIAL,
  ELECTRON_COUPLING,
  ELECTRON_DEGENERACY,
  ELECTRON_DENSITY,
  FERMI_ENERGY,
  fillPlasma,
  ION_COUPLING,
  PLASMA_TEMPERATURE_SQUARED,
  POINT_LENGTH,
  POSITRON_DENSITY,
  RADIATION_PRESSURE,
  RELATIVITY,
  radiusFactor,
  TEMPERATURE,
} from "../matter/plasma.js";
import { radiation } from "../radiation.js";
import { holds, refusePoint } from "../thermodynamics/domain.js";
import { MEMBER_COUNT, PRESSURE } from "../thermodynamics/free-energy.js";

/** Parameters of one charged species; frozen. */
export interface SpeciesParameters {
  /** Label of the nuclide, "mean" for the mean nucleus. */
  readonly label: string;
  /** Gamma_j; Infinity at T = 0. */
  readonly coupling: number;
  /** Plasma temperature T_p,j, K. */
  readonly plasmaTemperature: number;
  /** theta_j = T_p,j/T; Infinity at T = 0. */
  readonly quantumParameter: number;
  /** R_S,j. */
  readonly ionDensityParameter: number;
  /** r_s Z_j^(2/3). */
  readonly ionisationParameter: number;
}

/** Parameters of a point; frozen. JSON writes null for the infinities named below. */
export interface RegimeParameters {
  /** Gamma of the ions, sum x_j Gamma_j over charged nuclei; Infinity at T = 0 unless nothing is charged. */
  readonly ionCoupling: number;
  /** Gamma_e = e^2/(a_e kT); as above. */
  readonly electronCoupling: number;
  /** r_s = a_e/a_B; Infinity without electrons. */
  readonly densityParameter: number;
  /** x_r = p_F/(m_e c) of the net electrons. */
  readonly relativityParameter: number;
  /** Ion plasma temperature T_p = (sum x_j Z_j/<Z> T_p,j^2)^(1/2), K. */
  readonly ionPlasmaTemperature: number;
  /** hbar omega/k of electron plasma waves, omega^2 = 4 pi e^2 n_e/(m_e (1 + x_r^2)^(1/2)), K; degenerate electrons. */
  readonly electronPlasmaTemperature: number;
  /** Fermi energy without rest energy over k, K. */
  readonly fermiTemperature: number;
  /** t = T/T_F with the non-relativistic T_F; 0 at T = 0, Infinity without electrons. */
  readonly reducedTemperature: number;
  /** mu_e - m_e c^2, erg. */
  readonly electronChemicalPotential: number;
  /** eta = (mu_e - m_e c^2)/kT; Infinity at T = 0. */
  readonly electronDegeneracy: number;
  /** Pressure of photons over that of electrons, pairs, photons and ideal ions (n_i kT). */
  readonly radiationPressureFraction: number;
  /** n_+/n_e with n_e = n_- - n_+; 0 where there is neither, Infinity where there are pairs alone. */
  readonly pairFraction: number;
  /**
   * Size of the Coulomb pressure over the same sum as above: n_i kT min(0.3 Gamma, Gamma^(3/2)/(2 3^(1/2))), the ion
   * sphere and the Debye-Hueckel limit of ions in a rigid background. An estimate, 30 % at worst near Gamma = 1.
   */
  readonly coulombPressureShare: number;
  /** R_S of the mixture: the mean of R_S,j over the charged nuclei; 0 where nothing is charged. */
  readonly ionDensityParameter: number;
  /** p = max_j r_s Z_j^(2/3) over all charged species, traces included; 0 where nothing is charged. */
  readonly ionisationParameter: number;
  /** The charged species, in the order of the composition. */
  readonly species: readonly SpeciesParameters[];
}

/** Parameters, and what only the findings need. */
export interface Measured {
  readonly parameters: RegimeParameters;
  /** Pressure of electrons and pairs, dyn/cm^2. */
  readonly electronPressure: number;
  /** Positrons per nucleon. */
  readonly positronsPerNucleon: number;
}

const gas = /* @__PURE__ */ electronPositronGas();
const photons = /* @__PURE__ */ radiation();
const parts = [gas, photons] as const;

/** Checks the arguments as an equation of state does, and works out the parameters. */
export function measure(density: number, temperature: number, composition: Composition): Measured {
  requireComposition(composition);
  const numbers = typeof density === "number" && typeof temperature === "number";
  if (!numbers || !holds(gas.domain, density, temperature)) refusePoint(parts, density, temperature);

  const point = new Float64Array(POINT_LENGTH);
  const members = new Float64Array(MEMBER_COUNT);
  point[DENSITY] = density;
  point[TEMPERATURE] = temperature;
  fillPlasma(point, composition);
  gas.add(point, composition, 2, members);
  gas.addDetail?.(point, composition);
  const electronPressure = members[PRESSURE]! * density;
  photons.add(point, composition, 2, members);

  const x = point[RELATIVITY]!;
  const electronDensity = point[ELECTRON_DENSITY]!;
  const rs = radiusFactor / x; // Infinity without electrons
  const positrons = point[POSITRON_DENSITY]!;
  const ionPressure = density * composition.ionsPerGram * boltzmannConstant * temperature;
  const pressure = members[PRESSURE]! * density + ionPressure;
  // A charge so small that its powers underflow is none.
  const none = x === 0 || composition.plasmaFrequencySum === 0;
  const charged = none ? [] : composition.species.filter((one) => one.chargeNumber > 0);
  const species = Object.freeze(charged.map((one) => ofSpecies(one, electronDensity, rs, point)));
  // Gamma T, finite at T = 0.
  const couplingTemperature = none
    ? 0
    : (elementaryChargeSquared / (rs * bohrRadius * boltzmannConstant)) * composition.chargeMoments.fiveThirds;
  const gamma = none ? 0 : point[ION_COUPLING]!;
  // n_i kT Gamma stays finite at T = 0.
  const coupledPressure = density * composition.ionsPerGram * boltzmannConstant * couplingTemperature;
  const coulombPressure = coupledPressure * Math.min(0.3, Math.sqrt(gamma / 12));

  const parameters: RegimeParameters = Object.freeze({
    ionCoupling: gamma,
    electronCoupling: none ? 0 : point[ELECTRON_COUPLING]!,
    densityParameter: rs,
    relativityParameter: x,
    ionPlasmaTemperature: Math.sqrt(point[PLASMA_TEMPERATURE_SQUARED]!),
    electronPlasmaTemperature: plasmaTemperature(electronDensity, electronMass * Math.sqrt(1 + x * x)),
    fermiTemperature: point[FERMI_ENERGY]! * electronRestTemperature,
    reducedTemperature: none ? Number.POSITIVE_INFINITY : (2 * temperature) / (x * x * electronRestTemperature),
    electronChemicalPotential: point[ELECTRON_CHEMICAL_POTENTIAL]!,
    electronDegeneracy: point[ELECTRON_DEGENERACY]!,
    radiationPressureFraction: share(point[RADIATION_PRESSURE]!, pressure),
    pairFraction: share(positrons, electronDensity),
    coulombPressureShare: share(coulombPressure, pressure),
    ionDensityParameter: meanOf(charged, species),
    ionisationParameter: species.reduce((most, one) => Math.max(most, one.ionisationParameter), 0),
    species,
  });
  return { parameters, electronPressure, positronsPerNucleon: (positrons * atomicMassConstant) / density };
}

/** Mean of R_S,j over charged nuclei. */
function meanOf(charged: readonly Species[], species: readonly SpeciesParameters[]): number {
  const nuclei = charged.reduce((sum, one) => sum + one.numberFraction, 0);
  return species.reduce(
    (sum, one, place) => sum + one.ionDensityParameter * (charged[place]!.numberFraction / nuclei),
    0,
  );
}

/** 0/0 is no share at all. */
const share = (part: number, whole: number): number => (part === 0 ? 0 : part / whole);

/** (hbar/k)(4 pi e^2 n/M)^(1/2), K. */
function plasmaTemperature(density: number, mass: number): number {
  const frequency = Math.sqrt((4 * Math.PI * elementaryChargeSquared * density) / mass);
  return (reducedPlanckConstant / boltzmannConstant) * frequency;
}

function ofSpecies(one: Species, electrons: number, rs: number, point: Float64Array): SpeciesParameters {
  const { label, chargeNumber: z, ionMass } = one;
  const root = Math.cbrt(z);
  const temperatureOfPlasma = plasmaTemperature(electrons * z, ionMass);
  const temperature = point[TEMPERATURE]!;
  return Object.freeze({
    label,
    coupling: point[ELECTRON_COUPLING]! * z * root * root,
    plasmaTemperature: temperatureOfPlasma,
    quantumParameter: temperatureOfPlasma / temperature,
    ionDensityParameter: (ionMass / electronMass) * z * z * root * rs,
    ionisationParameter: rs * root * root,
  });
}

/** kT/(m_e c^2). */
export const relativisticTemperature = (temperature: number): number =>
  (boltzmannConstant * temperature) / electronRestEnergy;

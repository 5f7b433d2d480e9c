/** Net electron density and temperature of a reference evaluation: three ways to give them, and the domain. */
import type { Decimal } from "decimal.js";
import { FermistateError } from "../errors.js";
import * as constants from "./constants.js";
import { type Arithmetic, type ExactNumber, exactDecimal } from "./exact.js";
import type { Units } from "./state-functions.js";

/** Where to evaluate: T and one of two ways to give the net electron density n_e = n_- - n_+. */
export type ReferenceElectronGasInput = { /** T [K], 0 or 1 to 1e14. */ readonly temperature: ExactNumber } & (
  | {
      /** Baryon mass density rho = n_B m_u [g/cm^3]. */
      readonly density: ExactNumber;
      /** Y_e; n_e = rho Y_e/m_u. */
      readonly electronsPerNucleon: ExactNumber;
    }
  | { /** n_e [cm^-3], 1e-290 to 1e42. */ readonly netElectronDensity: ExactNumber }
);

/** n_e and T in internal units at one precision. */
export interface Conditions {
  readonly n: Decimal;
  readonly theta: Decimal;
  readonly netElectronDensity: Decimal;
  readonly temperature: Decimal;
  readonly units: Units;
}

/** The conditions that `input` asks for. */
export function conditions(D: Arithmetic, input: ReferenceElectronGasInput): Conditions {
  const temperature = exactDecimal(D, "temperature", input.temperature);
  const netElectronDensity = netDensity(D, input);
  const energy = new D(constants.electronMass).times(new D(constants.speedOfLight).pow(2));
  const boltzmann = new D(constants.boltzmannConstant);
  const inverseWavelength = new D(constants.electronMass).times(constants.speedOfLight).div(constants.planckConstant);
  const density = inverseWavelength.pow(3).times(8).times(D.acos(-1));
  return {
    n: netElectronDensity.div(density),
    theta: boltzmann.times(temperature).div(energy),
    netElectronDensity,
    temperature,
    units: { density, energy, boltzmann },
  };
}

const densityArguments = ["density", "netElectronDensity"];

function netDensity(D: Arithmetic, input: ReferenceElectronGasInput): Decimal {
  const given = densityArguments.filter((name) => name in input);
  if (given.length !== 1) {
    throw new FermistateError("invalid-option", {
      argument: "input",
      given: given.join(" and ") || "no density",
      allowed: "one of density (with electronsPerNucleon), netElectronDensity",
    });
  }
  if ("netElectronDensity" in input) return exactDecimal(D, "netElectronDensity", input.netElectronDensity);
  const density = exactDecimal(D, "density", input.density);
  const electronsPerNucleon = exactDecimal(D, "electronsPerNucleon", input.electronsPerNucleon);
  return density.times(electronsPerNucleon).div(constants.atomicMassConstant);
}

/** Throws unless n_e and T are within what this folder answers. */
export function requireDomain(input: ReferenceElectronGasInput, { netElectronDensity, temperature }: Conditions): void {
  if (temperature.isNegative() && !temperature.isZero()) {
    throw new FermistateError("out-of-range", {
      argument: "temperature",
      given: input.temperature,
      allowed: "0 K or 1 K to 1e14 K",
    });
  }
  if (!temperature.isZero() && (temperature.lt(1) || temperature.gt("1e14"))) {
    throw new FermistateError("outside-domain", {
      argument: "temperature",
      given: input.temperature,
      allowed: "0 K or 1 K to 1e14 K",
    });
  }
  const details = {
    argument: "density",
    given: netElectronDensity.toPrecision(6),
    allowed: "net electron densities from 1e-290 to 1e42 cm^-3",
  };
  if (netElectronDensity.lte(0)) throw new FermistateError("out-of-range", details);
  if (netElectronDensity.lt("1e-290") || netElectronDensity.gt("1e42")) {
    throw new FermistateError("outside-domain", details);
  }
}

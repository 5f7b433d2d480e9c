/**
 * Quantities of the reference from the natural derivatives of F and from the plasma variables, by the textbook definitions
 * (Cox & Giuli 1968, Principles of Stellar Structure, chapter 9), with the scale that errors are measured by where a
 * quantity is a sum of terms that may cancel.
 */
import type { Decimal } from "decimal.js";
import type { FreeEnergyDerivatives } from "../thermodynamics/equation-of-state.js";
import type { QuantityName } from "../thermodynamics/quantities.js";
import * as constants from "./constants.js";
import { arithmetic } from "./exact.js";
import { chargedMean, sum } from "./plasma.js";
import { type ReferenceState, total } from "./reference-state.js";

/** What can be certified: a quantity of a state, or a natural derivative of the free energy. */
export type CertifiedQuantity = QuantityName | keyof FreeEnergyDerivatives;

/** A reference value. */
export interface ReferenceValue {
  readonly value: Decimal;
  /** Sum of the absolute values of the terms (or kT, 1 for a chemical potential); undefined where it is no sum. */
  readonly scale: Decimal | undefined;
}

/** Natural derivatives by name, in the order of `powers`. */
export const derivativeNames: readonly (keyof FreeEnergyDerivatives)[] = [
  ...(["f00", "f10", "f01", "f20", "f11", "f02"] as const),
  ...(["f30", "f21", "f12", "f03", "f22"] as const),
];

/** A point at which quantities are formed. */
interface At {
  readonly D: typeof Decimal;
  readonly rho: Decimal;
  readonly T: Decimal;
  readonly cold: ReferenceState["cold"];
}

type Linear = (f: readonly Decimal[], at: At) => Decimal;

/** Quantities that are sums over terms; `f` are natural derivatives of one term or of all. */
const linear: { readonly [Name in QuantityName]?: Linear } = {
  pressure: (f, { rho }) => f[1]!.times(rho),
  specificEnergy: (f) => f[0]!.minus(f[2]!),
  specificEntropy: (f, { T, cold, D }) => (cold === undefined ? f[2]!.div(T).neg() : new D(cold.entropy)),
  specificFreeEnergy: (f) => f[0]!,
  specificEnthalpy: (f) => f[0]!.minus(f[2]!).plus(f[1]!),
  heatCapacityV: (f, at) => heat(f, at),
  energyByTemperature: (f, at) => heat(f, at),
  pressureByDensity: (f) => f[1]!.times(2).plus(f[3]!),
  pressureByTemperature: (f, { rho, T }) => (T.isZero() ? T : f[4]!.times(rho).div(T)),
  energyByDensity: (f, { rho }) => f[1]!.minus(f[4]!).div(rho),
  entropyByDensity: (f, { rho, T }) => (T.isZero() ? T : f[4]!.neg().div(rho).div(T)),
  entropyByTemperature: (f, { T, cold, D }) => (cold === undefined ? f[5]!.neg().div(T).div(T) : new D(cold.heat)),
};

function heat(f: readonly Decimal[], { T }: At): Decimal {
  return T.isZero() ? T : f[5]!.neg().div(T);
}

/** Reference values of all quantities asked for that the reference knows. */
export function referenceQuantities(
  state: ReferenceState,
  names: readonly CertifiedQuantity[],
  digits: number,
): ReadonlyMap<CertifiedQuantity, ReferenceValue> {
  const D = arithmetic(digits + 12);
  const at: At = { D, rho: new D(state.density), T: new D(state.temperature), cold: state.cold };
  const f = total(state).map((one) => new D(one));
  const parts = state.terms.map(({ derivatives }) => derivatives.map((one) => new D(one)));
  const absolute = (of: (part: readonly Decimal[]) => Decimal): Decimal =>
    parts.reduce((scale, part) => scale.plus(of(part).abs()), new D(0));
  const ratios = ratioQuantities(f, at);
  const found = new Map<CertifiedQuantity, ReferenceValue>();
  for (const name of names) {
    const slot = derivativeNames.indexOf(name as keyof FreeEnergyDerivatives);
    const sumOf = linear[name as QuantityName];
    if (slot >= 0) found.set(name, { value: f[slot]!, scale: absolute((part) => part[slot]!) });
    else if (sumOf !== undefined) {
      const value = sumOf(f, at);
      const isLimit = state.cold !== undefined && (name === "specificEntropy" || name === "entropyByTemperature");
      found.set(name, { value, scale: isLimit ? undefined : absolute((part) => sumOf(part, at)) });
    } else if (name === "densityExponent" || name === "temperatureExponent") {
      const numerator = name === "densityExponent" ? linear.pressureByDensity! : (g: readonly Decimal[]) => g[4]!;
      const scale = absolute((part) => numerator(part, at)).div(f[1]!.abs());
      found.set(name, { value: numerator(f, at).div(f[1]!), scale });
    } else {
      const value = ratios(name as QuantityName) ?? plasmaQuantity(name as QuantityName, state, f, at);
      if (value !== undefined) found.set(name, value);
    }
  }
  return found;
}

/** Quantities that are ratios of sums. */
function ratioQuantities(f: readonly Decimal[], at: At): (name: QuantityName) => ReferenceValue | undefined {
  const { D, rho, cold } = at;
  const thermal = f[4]!; // (T/rho) dP/dT
  const capacity = f[5]!.neg(); // T c_v
  const stiffness = f[1]!.times(2).plus(f[3]!); // dP/drho at constant T
  const zero = new D(0);
  const grueneisen =
    cold !== undefined
      ? cold.heat.isZero()
        ? zero
        : new D(cold.pressure).div(cold.heat)
      : capacity.isZero()
        ? zero
        : thermal.div(capacity);
  const adiabatic = stiffness.plus(thermal.times(grueneisen));
  const gamma1 = adiabatic.div(f[1]!);
  const gradient = grueneisen.div(gamma1);
  const light = new D(constants.speedOfLight).pow(2);
  const enthalpy = f[0]!.minus(f[2]!).plus(f[1]!);
  const values: { readonly [Name in QuantityName]?: () => Decimal } = {
    heatCapacityP: () => heat(f, at).times(adiabatic).div(stiffness),
    gamma1: () => gamma1,
    gamma2: () => new D(1).div(gradient.neg().plus(1)),
    gamma3: () => grueneisen.plus(1),
    adiabaticGradient: () => gradient,
    soundSpeed: () => adiabatic.div(enthalpy.div(light).plus(1)).sqrt(),
    bulkModulus: () => adiabatic.times(rho),
  };
  return (name) => {
    const value = values[name]?.();
    return value === undefined ? undefined : { value, scale: undefined };
  };
}

/** Quantities of the electrons and of the plasma. */
function plasmaQuantity(
  name: QuantityName,
  { gas, plasma, crystal, terms }: ReferenceState,
  f: readonly Decimal[],
  { D, rho, T }: At,
): ReferenceValue | undefined {
  const { matter } = plasma;
  const hasElectrons = matter.charged.length > 0;
  const alone = (value: Decimal | undefined): ReferenceValue | undefined =>
    value === undefined ? undefined : { value: new D(value), scale: undefined };
  const restEnergy = new D(constants.electronMass).times(new D(constants.speedOfLight).pow(2));
  switch (name) {
    case "electronDensity":
      return alone(rho.times(matter.electronsPerGram));
    case "electronChemicalPotential": {
      if (gas === undefined) return undefined;
      const value = new D(gas.chemicalPotential);
      return { value, scale: value.abs().plus(T.times(constants.boltzmannConstant)) };
    }
    case "electronDegeneracy": {
      if (gas === undefined) return undefined;
      const value = new D(gas.degeneracyParameter);
      return { value, scale: value.abs().plus(1) };
    }
    case "positronDensity":
      return alone(gas?.positronDensity);
    case "radiationPressureFraction": {
      const photons = terms.find((one) => one.name === "radiation");
      return alone(photons === undefined || T.isZero() ? new D(0) : new D(photons.derivatives[1]!).div(f[1]!));
    }
    case "relativityParameter":
      return hasElectrons ? alone(plasma.x.c[0]) : undefined;
    case "densityParameter":
      return hasElectrons ? alone(plasma.rs.c[0]) : undefined;
    case "electronCoupling":
      return hasElectrons && !T.isZero() ? alone(plasma.gammaE.c[0]) : undefined;
    case "ionCoupling": {
      if (!hasElectrons || T.isZero()) return undefined;
      const moment = chargedMean(matter, (one) => one.coupling);
      return alone(plasma.gammaE.c[0]!.times(moment));
    }
    case "fermiTemperature": {
      if (!hasElectrons) return undefined;
      const x = new D(plasma.x.c[0]!);
      const energy = x.times(x).div(x.times(x).plus(1).sqrt().plus(1));
      return alone(energy.times(restEnergy).div(constants.boltzmannConstant));
    }
    case "ionPlasmaTemperature": {
      if (!hasElectrons) return undefined;
      const squares = sum(plasma.D, matter.charged, ({ perGram, z, mass }) => perGram.times(z.pow(2)).div(mass));
      const charge = plasma.alpha.times(plasma.hbar).times(constants.speedOfLight);
      const frequency = squares.times(plasma.density.c[0]!).times(charge).times(plasma.pi).times(4).sqrt();
      return alone(frequency.times(plasma.hbar).div(constants.boltzmannConstant));
    }
    case "crystalFraction":
      return crystal === undefined ? undefined : alone(new D(crystal ? 1 : 0));
    default:
      return undefined;
  }
}

/** The electron-positron gas of the quadrature (electron-gas.ts) as one term: natural derivatives of its free energy. */
import { Decimal } from "decimal.js";
import { FermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { coldEntropySlope } from "./cold.js";
import * as constants from "./constants.js";
import { type Extent, electronGas, type ReferenceElectronGas } from "./electron-gas.js";
import { arithmetic, exactDecimal } from "./exact.js";
import { exactMatter } from "./plasma.js";

/** The gas and its natural derivatives. */
export interface ElectronTerm {
  readonly gas: ReferenceElectronGas;
  /** In the order of `powers`, erg/g; all of temperature zero at T = 0. */
  readonly derivatives: readonly Decimal[];
  /** At T = 0 limits of c_v/T and (dP/dT)/(rho T), erg/(g K^2); else undefined. */
  readonly coldSlopes: readonly [Decimal, Decimal] | undefined;
}

/**
 * Electrons and positrons at a point.
 *
 * @throws FermistateError as `referenceElectronGas`; `invalid-composition` for matter without electrons
 */
export function electronTerm(
  composition: Composition,
  density: number,
  temperature: number,
  digits: number,
  extent: Extent,
): ElectronTerm {
  const D = arithmetic(digits + 20);
  const { electronsPerGram } = exactMatter(D, composition);
  if (electronsPerGram.isZero()) {
    const allowed = "matter with electrons: the reference has no gas of pairs alone";
    throw new FermistateError("invalid-composition", { argument: "composition", given: composition.name, allowed });
  }
  const rho = exactDecimal(D, "density", density);
  const T = exactDecimal(D, "temperature", temperature);
  const n = rho.times(electronsPerGram);
  const gas = electronGas({ netElectronDensity: n, temperature: T }, digits, extent);
  const per = (value: Decimal, inDensity: number, inTemperature: number): Decimal =>
    new D(value).times(n.pow(inDensity)).times(T.pow(inTemperature)).div(rho);
  // F_rho = P/rho^2 and F_T = -s give every derivative; n and rho are proportional
  const p = per(gas.pressure, 0, 0);
  const pn = per(gas.pressureByDensity, 1, 0);
  const pt = per(gas.pressureByTemperature, 0, 1);
  const ptt = per(gas.pressureByTemperatureTwice, 0, 2);
  const entropy = per(gas.entropyDensity, 0, 1);
  const derivatives = [
    per(gas.energyDensity, 0, 0).minus(entropy),
    p,
    entropy.neg(),
    pn.minus(p.times(2)),
    pt,
    per(gas.heatCapacityDensity, 0, 1).neg(),
    per(gas.pressureByDensityTwice, 2, 0).minus(pn.times(4)).plus(p.times(6)),
    per(gas.pressureByDensityAndTemperature, 1, 1).minus(pt.times(2)),
    ptt,
    per(gas.entropyByTemperatureTwice, 0, 3).neg(),
    per(gas.pressureByDensityAndTemperatureTwice, 1, 2).minus(ptt.times(2)),
  ];
  if (!T.isZero()) return { gas, derivatives, coldSlopes: undefined };
  const restEnergy = new D(constants.electronMass).times(new D(constants.speedOfLight).pow(2));
  const slopes = [coldEntropySlope(D, n, restEnergy).div(rho), new D(gas.pressureByTemperatureTwice).div(rho)] as const;
  return { gas, derivatives, coldSlopes: slopes };
}

/** Nothing: where matter has no such term. */
export const noDerivatives: readonly Decimal[] = Array.from({ length: 11 }, () => new Decimal(0));

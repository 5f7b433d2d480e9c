/**
 * Error estimates of a reference evaluation: two resolutions compared, quantity by quantity.
 *
 * Some quantities vanish in the ideal limit (d2P/dn2 of a classical gas is e^eta times smaller than P_n/n), others
 * change sign. Errors are measured against max(|value|, natural scale), see {@link naturalScales}.
 */
import { Decimal } from "decimal.js";
import type { ElectronGasValues } from "./state-functions.js";

type Name = keyof ElectronGasValues;

/** n_e and T in cgs. */
export interface DensityAndTemperature {
  readonly netElectronDensity: Decimal;
  readonly temperature: Decimal;
}

/** Values with the error estimates that belong to them. */
export interface ValuesWithErrors extends ElectronGasValues {
  readonly netElectronDensity: Decimal;
  readonly errors: ElectronGasValues;
  readonly relativeError: number;
}

/** Guard digits leave rounding below 10^-(digits + 4) of the scale; two sums may agree by chance, so this is a floor. */
const roundingMargin = 4;

/** `fine` rounded to digits + 5, with |fine - coarse| and its largest share of a natural scale. */
export function withErrors(
  digits: number,
  fine: ElectronGasValues,
  coarse: ElectronGasValues,
  at: DensityAndTemperature,
): ValuesWithErrors {
  const scales = naturalScales(fine, at);
  const floor = new Decimal(10).pow(-(digits + roundingMargin));
  const errors: Partial<Record<Name, Decimal>> = {};
  const rounded: Partial<Record<Name, Decimal>> = {};
  let relativeError = 0;
  for (const name of Object.keys(fine) as Name[]) {
    const value = fine[name];
    rounded[name] = value.toSignificantDigits(digits + 5);
    errors[name] = new Decimal(0);
    const scale = Decimal.max(value.abs(), scales[name]?.abs() ?? 0);
    if (scale.isZero() || !scale.isFinite()) continue; // exact: a zero or an infinity of T = 0
    const error = Decimal.max(value.minus(coarse[name]).abs(), scale.times(floor));
    errors[name] = error.toSignificantDigits(3, Decimal.ROUND_UP);
    relativeError = Math.max(relativeError, error.div(scale).toNumber());
  }
  return {
    ...(rounded as ElectronGasValues),
    netElectronDensity: at.netElectronDensity.toSignificantDigits(digits + 5),
    errors: errors as ElectronGasValues,
    relativeError,
  };
}

/** Sizes that a quantity has by dimension where its value vanishes. */
function naturalScales(values: ElectronGasValues, at: DensityAndTemperature): Partial<Record<Name, Decimal>> {
  const { netElectronDensity: n, temperature: T } = at;
  if (T.isZero()) return {};
  const { pressureByDensity, pressureByTemperature, heatCapacityDensity, degeneracyParameter, chemicalPotential } =
    values;
  const mixed = Decimal.min(pressureByDensity.div(T), pressureByTemperature.div(n));
  // d2s/dT2 of degenerate matter is the cubic term of s(T), eta^2 times smaller than s/T^2
  const degenerate = Decimal.max(degeneracyParameter, 0).pow(2).plus(1);
  return {
    degeneracyParameter: new Decimal(1),
    chemicalPotential: degeneracyParameter.isZero() ? new Decimal(0) : chemicalPotential.div(degeneracyParameter),
    pressureByDensityTwice: pressureByDensity.div(n),
    pressureByDensityAndTemperature: mixed,
    pressureByDensityAndTemperatureTwice: mixed.div(T),
    pressureByTemperatureTwice: pressureByTemperature.div(T),
    entropyByTemperatureTwice: heatCapacityDensity.div(T).div(T).div(degenerate),
  };
}

/**
 * Physical and solar constants, cgs (Gaussian) units.
 *
 * Exact ones: the definitions of the SI, CODATA 2022. Measured ones: CODATA 2022, Mohr, Newell, Taylor & Tiesinga 2025,
 * Rev. Mod. Phys. 97, 025002. Solar ones: nominal, IAU 2015 Resolution B3 (Prsa et al. 2016, AJ 152, 41).
 * Derived ones are products of powers of these and of pi; each is worked out in exact rational arithmetic and rounded
 * once, so it is the double nearest to the true product. Uncertainties and sources stand in {@link constants}.
 */

/** Speed of light in vacuum c, cm/s (exact). */
export const speedOfLight: number = 29979245800;
/** Planck constant h, erg s (exact). */
export const planckConstant: number = 6.62607015e-27;
/** Boltzmann constant k, erg/K (exact). */
export const boltzmannConstant: number = 1.380649e-16;
/** Elementary charge e in coulomb, the exact SI value. Not a Gaussian charge: see {@link elementaryChargeSquared}. */
export const elementaryCharge: number = 1.602176634e-19;
/** Avogadro constant N_A, 1/mol (exact). */
export const avogadroConstant: number = 6.02214076e23;
/** One electron volt, erg (exact). */
export const electronVolt: number = 1.602176634e-12;

/** Fine-structure constant alpha, dimensionless. */
export const fineStructureConstant: number = 7.2973525643e-3;
/** Electron mass m_e, g. */
export const electronMass: number = 9.1093837139e-28;
/** Proton mass m_p, g. */
export const protonMass: number = 1.67262192595e-24;
/** Neutron mass m_n, g. */
export const neutronMass: number = 1.67492750056e-24;
/** Atomic mass constant m_u = m(C-12)/12, g. */
export const atomicMassConstant: number = 1.66053906892e-24;
/** Electron mass in units of m_u. */
export const electronMassInU: number = 5.485799090441e-4;
/** Newtonian constant of gravitation G, cm^3 g^-1 s^-2. Its 2.2e-5 dominates the error of any mass in solar masses. */
export const gravitationalConstant: number = 6.6743e-8;

/** Nominal solar mass parameter GM, cm^3/s^2 (a convention, without uncertainty). */
export const solarMassParameter: number = 1.3271244e26;
/** Nominal solar radius, cm (a convention, without uncertainty). */
export const solarRadius: number = 6.957e10;
/** Nominal solar luminosity, erg/s (a convention, without uncertainty). */
export const solarLuminosity: number = 3.828e33;

const pi = /* @__PURE__ */ decimal("3.14159265358979323846264338327950288419716939937510582097494"); // cut at 1e-60
const c = /* @__PURE__ */ decimal(speedOfLight);
const h = /* @__PURE__ */ decimal(planckConstant);
const k = /* @__PURE__ */ decimal(boltzmannConstant);
const alpha = /* @__PURE__ */ decimal(fineStructureConstant);
const electron = /* @__PURE__ */ decimal(electronMass);

/** Reduced Planck constant hbar = h/(2 pi), erg s. */
export const reducedPlanckConstant: number = /* @__PURE__ */ product([1n, 2n], [h, 1], [pi, -1]);
/** Radiation constant a = 8 pi^5 k^4/(15 h^3 c^3), erg cm^-3 K^-4. */
export const radiationConstant: number = /* @__PURE__ */ product([8n, 15n], [pi, 5], [k, 4], [h, -3], [c, -3]);
/** Stefan-Boltzmann constant sigma = 2 pi^5 k^4/(15 h^3 c^2), erg cm^-2 s^-1 K^-4. */
export const stefanBoltzmannConstant: number = /* @__PURE__ */ product([2n, 15n], [pi, 5], [k, 4], [h, -3], [c, -2]);
/** Gaussian charge squared e^2 = alpha hbar c, erg cm. */
export const elementaryChargeSquared: number = /* @__PURE__ */ product([1n, 2n], [alpha, 1], [h, 1], [c, 1], [pi, -1]);
/** Bohr radius hbar/(m_e c alpha), cm. */
export const bohrRadius: number = /* @__PURE__ */ product(
  [1n, 2n],
  [h, 1],
  [pi, -1],
  [electron, -1],
  [c, -1],
  [alpha, -1],
);
/** Electron rest energy m_e c^2, erg. */
export const electronRestEnergy: number = /* @__PURE__ */ product([1n, 1n], [electron, 1], [c, 2]);
/** Electron rest temperature m_e c^2/k, K. */
export const electronRestTemperature: number = /* @__PURE__ */ product([1n, 1n], [electron, 1], [c, 2], [k, -1]);
/** Reduced Compton wavelength of the electron lambdabar_C = hbar/(m_e c), cm. */
export const electronComptonLength: number = /* @__PURE__ */ product(
  [1n, 2n],
  [h, 1],
  [pi, -1],
  [electron, -1],
  [c, -1],
);
/** Unit of the electron number density 1/(pi^2 lambdabar_C^3) = 8 pi (m_e c/h)^3, cm^-3. */
export const electronDensityUnit: number = /* @__PURE__ */ product([8n, 1n], [pi, 1], [electron, 3], [c, 3], [h, -3]);
/** Unit of the pressure of an electron gas, m_e c^2/(pi^2 lambdabar_C^3) = 8 pi m_e^4 c^5/h^3, dyn/cm^2. */
export const electronPressureUnit: number = /* @__PURE__ */ product([8n, 1n], [pi, 1], [electron, 4], [c, 5], [h, -3]);
/** Solar mass GM/G, g: the nominal GM over the measured G. */
export const solarMass: number = /* @__PURE__ */ product(
  [1n, 1n],
  [/* @__PURE__ */ decimal(solarMassParameter), 1],
  [/* @__PURE__ */ decimal(gravitationalConstant), -1],
);

/** Where a constant comes from. */
export interface Constant {
  /** In the unit named beside it. */
  readonly value: number;
  /** One standard deviation, same unit; 0 where the value is exact or a convention. */
  readonly standardUncertainty: number;
  /** Unit in words of the field; "1" for a pure number. */
  readonly unit: string;
  /** Reference for a given value, formula for a derived one. */
  readonly source: string;
  /** Fixed by the SI, measured, worked out here from the others, or agreed by convention. */
  readonly kind: "exact" | "measured" | "derived" | "nominal";
}

/** Names in {@link constants}: those of the single exports. */
export type ConstantName =
  | "speedOfLight"
  | "planckConstant"
  | "boltzmannConstant"
  | "elementaryCharge"
  | "avogadroConstant"
  | "electronVolt"
  | "fineStructureConstant"
  | "electronMass"
  | "protonMass"
  | "neutronMass"
  | "atomicMassConstant"
  | "electronMassInU"
  | "gravitationalConstant"
  | "solarMassParameter"
  | "solarRadius"
  | "solarLuminosity"
  | "reducedPlanckConstant"
  | "radiationConstant"
  | "stefanBoltzmannConstant"
  | "elementaryChargeSquared"
  | "bohrRadius"
  | "electronRestEnergy"
  | "electronRestTemperature"
  | "electronComptonLength"
  | "electronDensityUnit"
  | "electronPressureUnit"
  | "solarMass";

/**
 * Every constant with its standard uncertainty, unit and source.
 *
 * Uncertainties of derived ones are propagated to first order, alpha and m_e as fully anticorrelated: CODATA takes m_e
 * from the Rydberg constant, m_e = 2 h R_inf/(c alpha^2), and R_inf (1.1e-12) is 300 times better known than m_e.
 * Taken as independent, they would give the Bohr radius twice its error.
 */
export const constants: Readonly<Record<ConstantName, Constant>> = /* @__PURE__ */ tabulate();

/** A decimal number: digits times a power of ten. */
type Decimal = readonly [digits: bigint, exponent: number];

/** The decimal a constant is printed with: a double repeats up to 15 digits, so this loses nothing. */
function decimal(value: number | string): Decimal {
  const [mantissa = "", exponent = "0"] = String(value).split("e");
  const [whole = "", decimals = ""] = mantissa.split(".");
  return [BigInt(whole + decimals), Number(exponent) - decimals.length];
}

/** The fraction times the powers, worked out exactly and rounded once to the nearest double. */
function product(fraction: readonly [bigint, bigint], ...factors: (readonly [base: Decimal, power: number])[]): number {
  let [numerator, denominator] = fraction;
  let powerOfTen = 0;
  for (const [[digits, exponent], power] of factors) {
    powerOfTen += exponent * power;
    if (power > 0) numerator *= digits ** BigInt(power);
    else denominator *= digits ** BigInt(-power);
  }
  if (powerOfTen > 0) numerator *= 10n ** BigInt(powerOfTen);
  else denominator *= 10n ** BigInt(-powerOfTen);
  return nearestDouble(numerator, denominator);
}

/** numerator/denominator rounded to nearest, for quotients between 1e-50 and 1e200. */
function nearestDouble(numerator: bigint, denominator: bigint): number {
  // 90 bits or more, the last one sticky: Number() then rounds once, as IEEE 754 asks; 2^-256 is exact.
  const scaled = numerator << 256n;
  const whole = scaled / denominator;
  return Number(whole * denominator === scaled ? whole : whole | 1n) * 2 ** -256;
}

function tabulate(): Readonly<Record<ConstantName, Constant>> {
  const entry = (kind: Constant["kind"], source: string, value: number, standardUncertainty: number, unit: string) =>
    Object.freeze({ value, standardUncertainty, unit, source, kind });
  const exact = (value: number, unit: string) => entry("exact", "SI definition, CODATA 2022", value, 0, unit);
  const nominal = (value: number, unit: string) => entry("nominal", "IAU 2015 Resolution B3", value, 0, unit);
  const measured = (value: number, uncertainty: number, unit: string) =>
    entry("measured", "CODATA 2022", value, uncertainty, unit);
  const derived = (value: number, relativeUncertainty: number, unit: string, formula: string) =>
    entry("derived", formula, value, value * relativeUncertainty, unit);
  // Relative uncertainties; those of alpha and m_e belong to deviations of opposite sign.
  const [ofAlpha, ofElectronMass, ofG] = [
    1.1e-12 / fineStructureConstant,
    2.8e-37 / electronMass,
    1.5e-12 / gravitationalConstant,
  ];
  return Object.freeze({
    speedOfLight: exact(speedOfLight, "cm s^-1"),
    planckConstant: exact(planckConstant, "erg s"),
    boltzmannConstant: exact(boltzmannConstant, "erg K^-1"),
    elementaryCharge: exact(elementaryCharge, "C"),
    avogadroConstant: exact(avogadroConstant, "mol^-1"),
    electronVolt: exact(electronVolt, "erg"),
    fineStructureConstant: measured(fineStructureConstant, 1.1e-12, "1"),
    electronMass: measured(electronMass, 2.8e-37, "g"),
    protonMass: measured(protonMass, 5.2e-34, "g"),
    neutronMass: measured(neutronMass, 8.5e-34, "g"),
    atomicMassConstant: measured(atomicMassConstant, 5.2e-34, "g"),
    electronMassInU: measured(electronMassInU, 9.7e-15, "u"),
    gravitationalConstant: measured(gravitationalConstant, 1.5e-12, "cm^3 g^-1 s^-2"),
    solarMassParameter: nominal(solarMassParameter, "cm^3 s^-2"),
    solarRadius: nominal(solarRadius, "cm"),
    solarLuminosity: nominal(solarLuminosity, "erg s^-1"),
    reducedPlanckConstant: derived(reducedPlanckConstant, 0, "erg s", "h/(2 pi)"),
    radiationConstant: derived(radiationConstant, 0, "erg cm^-3 K^-4", "8 pi^5 k^4/(15 h^3 c^3)"),
    stefanBoltzmannConstant: derived(stefanBoltzmannConstant, 0, "erg cm^-2 s^-1 K^-4", "2 pi^5 k^4/(15 h^3 c^2)"),
    elementaryChargeSquared: derived(elementaryChargeSquared, ofAlpha, "erg cm", "alpha hbar c"),
    bohrRadius: derived(bohrRadius, ofElectronMass - ofAlpha, "cm", "hbar/(m_e c alpha)"),
    electronRestEnergy: derived(electronRestEnergy, ofElectronMass, "erg", "m_e c^2"),
    electronRestTemperature: derived(electronRestTemperature, ofElectronMass, "K", "m_e c^2/k"),
    electronComptonLength: derived(electronComptonLength, ofElectronMass, "cm", "hbar/(m_e c)"),
    electronDensityUnit: derived(electronDensityUnit, 3 * ofElectronMass, "cm^-3", "8 pi (m_e c/h)^3"),
    electronPressureUnit: derived(electronPressureUnit, 4 * ofElectronMass, "dyn/cm^2", "8 pi m_e^4 c^5/h^3"),
    solarMass: derived(solarMass, ofG, "g", "nominal GM/G"),
  });
}

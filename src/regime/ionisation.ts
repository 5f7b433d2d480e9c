/**
 * Are the atoms ionised? Pressure ionisation by p = r_s Z^(2/3), thermal ionisation by the 1s level of the last electron.
 *
 *     B = ln(e^y - 1 - y) - (3/2) ln t - ln(3 pi^(1/2)/4),    y = Z^2 Ry/kT = Z^2 Gamma_e r_s/2
 *
 * e^B is the occupation of the hydrogen-like 1s level in ideal Saha balance with non-degenerate electrons of reduced
 * temperature t, with the weight of Planck 1924 and Larkin 1960 in place of e^y, which leaves out states that thermal
 * motion dissolves; ln(3 pi^(1/2)/4) = 0.285. With e^y itself the centre of the Sun would be flagged at y = 0.01.
 * p = 0.62 is where the cold Coulomb pressure is 0.25 of that of the electrons, at about 10.5 A Z g/cm^3 for every
 * element; 0.25 is where first-order screening of the ions is off by a third in the entropy of melting.
 * An estimate of where full ionisation fails, not a model of it.
 */
import type { Composition } from "../matter/composition.js";
import { type Finding, judge } from "./finding.js";
import type { RegimeParameters } from "./parameters.js";

/** Limits of p = r_s Z^(2/3): strained, outside. */
const ionisationLimits = { strained: 0.25, outside: 0.62 } as const;
/** Species that hold less than this share of the electrons raise no finding about atoms and screening. */
const traceOfElectrons = 1e-3;
const leastBinding = /* @__PURE__ */ Math.log(0.1);

/** ln of the occupation of the 1s level, B above; Infinity at T = 0, -Infinity where nothing is bound. */
export function boundLevelOccupation(energyOverThermal: number, reducedTemperature: number): number {
  if (reducedTemperature === 0) return Number.POSITIVE_INFINITY;
  const y = energyOverThermal;
  const weight = y > 40 ? y : Math.log(y < 1e-3 ? (y * y * (1 + y / 3)) / 2 : Math.expm1(y) - y);
  return weight - 1.5 * Math.log(reducedTemperature) - Math.log(0.75 * Math.sqrt(Math.PI));
}

/** Adds `partial-ionisation` and `linear-response`. */
export function judgeIonisation(list: Finding[], composition: Composition, parameters: RegimeParameters): void {
  const { reducedTemperature, electronCoupling, densityParameter, species } = parameters;
  let worst: { label: string; strength: number } | undefined;
  for (const { label, chargeNumber, nucleonFraction, massNumber } of composition.species) {
    const electrons = (nucleonFraction * chargeNumber) / massNumber / composition.electronsPerNucleon;
    if (!(electrons > traceOfElectrons)) continue;
    const p = species.find((one) => one.label === label)!.ionisationParameter;
    const y = (chargeNumber * chargeNumber * electronCoupling * densityParameter) / 2;
    const bound = boundLevelOccupation(y, reducedTemperature);
    if (bound > leastBinding) {
      judge(list, {
        code: "partial-ionisation",
        value: p,
        strained: ionisationLimits.strained,
        ...(bound > 0 ? { outside: ionisationLimits.outside } : {}),
        name: "ionisation parameter r_s Z^(2/3)",
        species: label,
        message: {
          strained: `${label} may keep inner electrons here; full ionisation is assumed and is doubtful by some per cent.`,
          outside: `${label} is not fully ionised here, so numbers for bare nuclei do not describe this matter.`,
        },
      });
    }
    const strength = p / (1 + reducedTemperature);
    if (worst === undefined || strength > worst.strength) worst = { label, strength };
  }
  if (worst === undefined) return;
  // kT_F -> k(T_F + T): heat weakens the response of the electrons as their Fermi energy does.
  judge(list, {
    code: "linear-response",
    value: worst.strength,
    ...ionisationLimits,
    name: "screening strength r_s Z^(2/3)/(1 + T/T_F)",
    species: worst.label,
    message: {
      strained: `Electrons crowd around ${worst.label} more than first-order screening allows: screening terms are rough.`,
      outside: `Electrons crowd around ${worst.label} so much that first-order screening fails: Coulomb terms mislead.`,
    },
  });
}

/**
 * Reactions that change the composition under the user's hands: neutron drip, fusion by heat or by density.
 *
 * All limits here are common practice and rough: a rate needs a network and a time scale, and this library has neither.
 * Drip: 4.3e11 g/cm^3 for cold catalysed matter (Baym, Pethick & Sutherland 1971, ApJ 170, 299). Ignition temperatures:
 * those at which a burning phase of a star is said to run, from memory. Pycnonuclear densities: powers of ten above
 * which zero-point motion alone burns the fuel in well under 10^9 years, after Salpeter & Van Horn 1969 (ApJ 155, 183)
 * and Shapiro & Teukolsky 1983, section 3.7, from memory; published rates differ by many powers of ten.
 */
import type { Composition } from "../matter/composition.js";
import { type Finding, judge } from "./finding.js";

/** Density of neutron drip in cold catalysed matter, g/cm^3. */
export const dripDensity = 4.3e11;
/** Fuels below this share of the nucleons raise no finding. */
const leastFuel = 1e-3;

interface Fuel {
  /** K. */
  readonly ignition: number;
  /** Density from which `ignition` is meant, g/cm^3: in thinner gas the same heat burns nothing to speak of. */
  readonly from: number;
  /** g/cm^3. */
  readonly pycnonuclear?: number;
}

const fuels: Readonly<Record<string, Fuel>> = {
  H1: { ignition: 1e7, from: 1, pycnonuclear: 1e6 },
  He4: { ignition: 1e8, from: 1e3, pycnonuclear: 1e9 },
  C12: { ignition: 6e8, from: 1e5, pycnonuclear: 1e10 },
  O16: { ignition: 1.5e9, from: 1e5 },
  Ne20: { ignition: 1.2e9, from: 1e5 },
  Si28: { ignition: 3e9, from: 1e6 },
};

/** Adds `neutron-drip` and `burning-expected`. */
export function judgeReactions(list: Finding[], density: number, temperature: number, composition: Composition): void {
  judge(list, {
    code: "neutron-drip",
    value: density,
    outside: dripDensity,
    name: "density",
    unit: "g/cm^3",
    message:
      "Above the density of neutron drip nuclei are neutron-rich and sit in a neutron gas: give it another model.",
  });
  for (const { label, nucleonFraction } of composition.species) {
    const fuel = Object.hasOwn(fuels, label) ? fuels[label] : undefined;
    if (fuel === undefined || nucleonFraction < leastFuel) continue;
    const code = "burning-expected";
    const unless = "unless the matter is young, the composition is not what it was (rough limit, common practice).";
    const { ignition, from, pycnonuclear } = fuel;
    const hot =
      density >= from &&
      judge(list, {
        code,
        value: temperature,
        strained: ignition,
        name: "temperature",
        unit: "K",
        species: label,
        message: `${label} burns at about this temperature: ${unless}`,
      });
    if (hot || pycnonuclear === undefined) continue;
    judge(list, {
      code,
      value: density,
      strained: pycnonuclear,
      name: "density",
      unit: "g/cm^3",
      species: label,
      message: `${label} burns at about this density even when cold: ${unless}`,
    });
  }
}

/** Published barotropes of neutron-star matter by name, with their sources and how their numbers are known. */
import { speedOfLight } from "../constants.js";
import { FermistateError } from "../errors.js";
import { nuclide } from "../matter/nuclides.js";
import type { Barotrope } from "./barotrope.js";
import { massEnergyFit } from "./mass-energy-fit.js";
import { logPressureOf, publishedFits } from "./published-fits.js";
import { publishedLimits } from "./published-limits.js";
import { publishedCores, publishedPieces } from "./published-pieces.js";

/** A published parameter set. */
export interface PublishedBarotrope {
  /** Name to ask for, as in "SLy piecewise" or "BSk21". */
  readonly name: string;
  /** Authors, year, journal, table. */
  readonly source: string;
  /** How the numbers got here, in words. */
  readonly howKnown: string;
  /**
   * Densities at which it is used here, g/cm^3: baryon mass density of a piecewise polytrope, mass-energy of a formula.
   */
  readonly range: readonly [lowest: number, highest: number];
  /** The parameters, in the order of the source. */
  readonly parameters: readonly number[];
}

const pieceSource = "Read, Lackey, Owen & Friedman 2009, Phys. Rev. D 79, 124032, tables II and III";
const source2004 = "Haensel & Potekhin 2004, Astron. Astrophys. 428, 191, table 1";
const source2013 = "Potekhin, Fantina, Chamel, Pearson & Goriely 2013, Astron. Astrophys. 560, A48, table 2";
const howKnown =
  "from memory of the source; stars computed with it, independently of this library, have the published maximum mass";

/** All published parameter sets this library has. */
export const publishedBarotropes: readonly PublishedBarotrope[] = /* @__PURE__ */ list();

function list(): readonly PublishedBarotrope[] {
  const pieces = Object.entries(publishedCores).map(([name, parameters]) => ({
    name: `${name} piecewise`,
    source: pieceSource,
    howKnown,
    range: Object.freeze([0, 1e16] as const),
    parameters: Object.freeze(parameters),
  }));
  const fits = Object.entries(publishedFits).map(([name, { form, coefficients }]) => ({
    name,
    source: form === 2004 ? source2004 : source2013,
    howKnown,
    range: Object.freeze([1e6, 1e16] as const),
    parameters: Object.freeze(coefficients),
  }));
  return Object.freeze([...pieces, ...fits].map((one) => Object.freeze(one)));
}

/**
 * A published barotrope by name.
 *
 * The piecewise polytropes take e = 0 at density 0. The formulas of crust and core ("SLy", "FPS", "BSk19", "BSk20",
 * "BSk21") give P as a function of the density of mass-energy; rho follows from the first law, with the mass of Fe56
 * per baryon at density 0, where a polytrope of the formula's own exponent replaces it below 1e6 g/cm^3. P and e fit
 * each other to 1e-13; what the numbers are worth is 1 % or so. Most are acausal above some density beyond that of the
 * heaviest star. `barotropeFindings` says where, and where that star is.
 *
 * @throws `invalid-option` for a name that is not in {@link publishedBarotropes}
 * @example
 * ```ts
 * import { publishedBarotrope } from "fermistate/barotropes";
 * publishedBarotrope("BSk21").state(1e15).pressure; // => 2.787e35
 * publishedBarotrope("SLy piecewise").state(1e15).gamma1; // => 2.851
 * ```
 */
export function publishedBarotrope(name: string): Barotrope {
  const found = publishedBarotropes.find((one) => one.name === name);
  if (found === undefined) {
    const allowed = publishedBarotropes.map((one) => one.name).join(", ");
    throw new FermistateError("invalid-option", { argument: "name", given: name, allowed });
  }
  const validity =
    `Cold neutron-star matter in beta equilibrium; parameters from memory of ${found.source}. Good to about 1 % from ` +
    "1e6 g/cm^3 to the centre of its heaviest star; a schematic envelope below, an extrapolation above.";
  if (Object.hasOwn(publishedFits, name)) {
    const fit = publishedFits[name as keyof typeof publishedFits];
    const iron = (nuclide("Fe56").atomicMass / 56 - 1) * speedOfLight * speedOfLight;
    return withLimits(massEnergyFit(name, validity, logPressureOf(fit), [6, 16], iron));
  }
  return withLimits(publishedPieces(name, validity, found.parameters as readonly [number, number, number, number]));
}

function withLimits(matter: Barotrope): Barotrope {
  return Object.freeze({ ...matter, limits: publishedLimits(matter.name) });
}

/** Where an equation of state answers: the common part of its contributions' domains, and refusals that name the one. */
import { FermistateError, requireFinite, withIndex } from "../errors.js";
import type { Contribution, Domain } from "./contribution.js";

/** The common part of the domains. */
export function commonDomain(contributions: readonly Contribution[]): Domain {
  const low = (pick: (domain: Domain) => readonly [number, number]): number =>
    Math.max(...contributions.map(({ domain }) => pick(domain)[0]));
  const high = (pick: (domain: Domain) => readonly [number, number]): number =>
    Math.min(...contributions.map(({ domain }) => pick(domain)[1]));
  return Object.freeze({
    density: Object.freeze([low((d) => d.density), high((d) => d.density)] as const),
    temperature: Object.freeze([low((d) => d.temperature), high((d) => d.temperature)] as const),
    zeroTemperature: contributions.every(({ domain }) => domain.zeroTemperature),
  });
}

/** True where the domain holds the point; false for NaN and everything else that is not inside. */
export function holds(domain: Domain, density: number, temperature: number): boolean {
  return (
    density >= domain.density[0] &&
    density <= domain.density[1] &&
    ((temperature >= domain.temperature[0] && temperature <= domain.temperature[1]) ||
      (temperature === 0 && domain.zeroTemperature))
  );
}

/** The first row whose point the domain does not hold, or -1. */
export function firstOutside(domain: Domain, density: Float64Array, temperature: Float64Array): number {
  const [lowest, highest] = domain.density;
  const [coldest, hottest] = domain.temperature;
  const zero = domain.zeroTemperature;
  for (let i = 0; i < density.length; i++) {
    const rho = density[i]!;
    const t = temperature[i]!;
    // Written so that NaN is outside.
    if (!(rho >= lowest && rho <= highest && ((t >= coldest && t <= hottest) || (t === 0 && zero)))) return i;
  }
  return -1;
}

/** Throws the error that says what is wrong with a point outside the domain, and which contribution refuses it. */
export function refusePoint(
  contributions: readonly Contribution[],
  density: unknown,
  temperature: unknown,
  index?: number,
): never {
  const rho = requireFinite("density", density, "a finite number > 0, g/cm^3", index);
  const kelvin = requireFinite("temperature", temperature, "a finite number >= 0, K", index);
  const fail = (code: "out-of-range" | "outside-domain", argument: string, given: number, allowed: string): never => {
    throw new FermistateError(code, withIndex({ argument, given, allowed }, index));
  };
  if (!(rho > 0)) fail("out-of-range", "density", rho, "> 0 g/cm^3");
  if (!(kelvin >= 0)) fail("out-of-range", "temperature", kelvin, ">= 0 K");
  for (const { name, domain } of contributions) {
    const [lowest, highest] = domain.density;
    if (rho < lowest || rho > highest) {
      fail("outside-domain", "density", rho, `${compact(lowest)} to ${compact(highest)} g/cm^3 (${name})`);
    }
    if (kelvin === 0 ? !domain.zeroTemperature : kelvin < domain.temperature[0] || kelvin > domain.temperature[1]) {
      const zero = domain.zeroTemperature ? "0, or " : "";
      const cure = kelvin === 0 ? "; leave it out at T = 0" : "";
      fail(
        "outside-domain",
        "temperature",
        kelvin,
        `${zero}${compact(domain.temperature[0])} to ${compact(domain.temperature[1])} K (${name}${cure})`,
      );
    }
  }
  return fail("outside-domain", "density", rho, "a point inside the domain of every contribution");
}

/** The shorter of 0.001 and 1e-3: for messages. */
export function compact(value: number): string {
  const plain = String(value);
  const scientific = value.toExponential().replace("e+", "e");
  return scientific.length < plain.length ? scientific : plain;
}

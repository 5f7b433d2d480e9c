/** Checks of options that several makers of barotropes share. */
import { FermistateError, requireFinite } from "../errors.js";
import type { Barotrope } from "./barotrope.js";

/** Throws `invalid-option` unless `value` has the members of a barotrope; returns it. */
export function requireBarotrope(argument: string, value: unknown): Barotrope {
  const given = (typeof value === "object" && value !== null ? value : {}) as Partial<Barotrope>;
  const fills = [given.fillAtDensity, given.fillAtPressure, given.fillAtPotential];
  const isOne =
    fills.every((fill) => typeof fill === "function") && Array.isArray(given.density) && given.jumps !== undefined;
  if (isOne) return value as Barotrope;
  throw new FermistateError("invalid-option", { argument, given: value, allowed: "a barotrope" });
}

/** A finite number > 0. @throws `not-a-number`, `out-of-range` */
export function requirePositive(argument: string, value: unknown, unit = ""): number {
  const number = requireFinite(argument, value, `a finite number > 0${unit}`);
  if (number > 0) return number;
  throw new FermistateError("out-of-range", { argument, given: value, allowed: `> 0${unit}` });
}

/** A pair of densities, 0 < lowest < highest. @throws `invalid-option`, `not-a-number`, `out-of-range` */
export function requireDensityRange(value: unknown): readonly [number, number] {
  if (!Array.isArray(value) || value.length !== 2) {
    throw new FermistateError("invalid-option", {
      argument: "density",
      given: value,
      allowed: "[lowest, highest], g/cm^3",
    });
  }
  const lowest = requirePositive("density[0]", value[0], " g/cm^3");
  const highest = requirePositive("density[1]", value[1], " g/cm^3");
  if (highest > lowest) return [lowest, highest];
  throw new FermistateError("out-of-range", { argument: "density[1]", given: highest, allowed: `> ${lowest} g/cm^3` });
}

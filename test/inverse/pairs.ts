/** The pairs of given quantities with at least one unknown. */
import type { GivenName } from "../../src/index.js";

export const pairs = [
  ["density", "pressure"],
  ["density", "specificEnergy"],
  ["density", "specificEntropy"],
  ["density", "specificEnthalpy"],
  ["temperature", "pressure"],
  ["temperature", "specificEntropy"],
  ["pressure", "specificEntropy"],
  ["pressure", "specificEnergy"],
  ["pressure", "specificEnthalpy"],
  ["specificEnthalpy", "specificEntropy"],
  ["specificEnergy", "specificEntropy"],
] as const satisfies readonly (readonly [GivenName, GivenName])[];

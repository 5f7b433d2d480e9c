/**
 * Where published representations stop being what they were made for.
 *
 * Below 1e6 g/cm^3 a formula is continued as a polytrope, and the first piece of a piecewise polytrope stands for all of
 * the envelope. Above the centre of the heaviest star no density is met in a stable star, which is what the parameters were
 * fitted for (common practice); where that is, is computed here and by another integration in test/structure.
 */
import type { BarotropeLimit } from "./barotrope.js";

/** Below, no formula was fitted, g/cm^3. */
const schematic = 1e6;

/** Baryon mass density at the centre of the heaviest star, g/cm^3, in general relativity, rounded up. */
const heaviestCentres: Readonly<Record<string, number>> = {
  "SLy piecewise": 2.007e15,
  "APR3 piecewise": 1.645e15,
  "APR4 piecewise": 1.916e15,
  "FPS piecewise": 2.434e15,
  "WFF1 piecewise": 2.106e15,
  "WFF2 piecewise": 1.94e15,
  "BBB2 piecewise": 2.262e15,
  "ENG piecewise": 1.783e15,
  "MPA1 piecewise": 1.489e15,
  "MS1 piecewise": 1.138e15,
  "MS1b piecewise": 1.144e15,
  "H4 piecewise": 1.619e15,
  "GNH3 piecewise": 1.751e15,
  "ALF2 piecewise": 1.635e15,
  "PAL6 piecewise": 2.839e15,
  SLy: 2.008e15,
  FPS: 2.434e15,
  BSk19: 2.429e15,
  BSk20: 1.876e15,
  BSk21: 1.627e15,
};

/** The limits of a published representation. */
export function publishedLimits(name: string): readonly BarotropeLimit[] {
  const limits: readonly BarotropeLimit[] = [
    {
      code: "extrapolated",
      density: schematic,
      side: "below",
      message: "Below this density the published representation is continued by one exponent: a schematic envelope.",
    },
    {
      code: "extrapolated",
      density: heaviestCentres[name]!,
      side: "above",
      message:
        "Denser than the centre of the heaviest star of this matter: the published parameters were made for stars and are " +
        "extrapolated.",
    },
  ];
  return Object.freeze(limits.map((limit) => Object.freeze(limit)));
}

/** Densities above which cold matter does not keep its composition: its first electron capture, neutron drip. */
import { type Composition, requireComposition } from "../matter/composition.js";
import { DENSITY, fillPlasma, POINT_LENGTH, RELATIVITY, radiusFactor } from "../matter/plasma.js";
import { type CaptureThreshold, captureThresholds } from "../regime/capture.js";
import { dripDensity } from "../regime/reactions.js";
import type { BarotropeLimit } from "./barotrope.js";

/**
 * The electron capture that sets in at the lowest density in cold matter of a composition; undefined where AME2020 has
 * no daughter for any of its nuclides.
 *
 * `densityWithLattice` is that density, g/cm^3, and `latticeShift` that at it; at a ground state's threshold to 1 keV or better in energy. A star whose centre
 * is denser loses electrons there: a barotrope of fixed composition ends. Thresholds of all nuclides:
 * `regime(...).captures`.
 *
 * @throws `invalid-composition`
 * @example
 * ```ts
 * import { composition } from "fermistate";
 * import { firstElectronCapture } from "fermistate/barotropes";
 * const first = firstElectronCapture(composition({ C12: 0.5, O16: 0.5 }));
 * first?.species; // => "O16"
 * first?.densityWithLattice; // => 2.057e10
 * ```
 */
export function firstElectronCapture(composition: Composition): CaptureThreshold | undefined {
  requireComposition(composition);
  const { thresholds } = captureThresholds(composition, 1); // the density parameter moves latticeShift only
  const first = thresholds.reduce<CaptureThreshold | undefined>(
    (least, one) => (least === undefined || one.densityWithLattice < least.densityWithLattice ? one : least),
    undefined,
  );
  if (first === undefined || first.densityWithLattice === 0) return first;
  const point = new Float64Array(POINT_LENGTH);
  point[DENSITY] = first.densityWithLattice;
  fillPlasma(point, composition);
  const there = captureThresholds(composition, radiusFactor / point[RELATIVITY]!);
  return there.thresholds.find(({ species }) => species === first.species);
}

/** Electron capture and neutron drip, where they come below the highest density of matter that keeps its composition. */
export function compositionLimits(composition: Composition, highest: number): BarotropeLimit[] {
  const limits: BarotropeLimit[] = [];
  const add = (code: BarotropeLimit["code"], density: number, message: string): void => {
    if (density < highest) limits.push(Object.freeze({ code, density, side: "above", message }));
  };
  const capture = firstElectronCapture(composition);
  if (capture !== undefined) {
    const { species, product, densityWithLattice } = capture;
    const message =
      `${species} captures electrons (to ${product}) in cold matter above this density: the composition does not stay as ` +
      "given, and the electrons lost no longer press.";
    add("electron-capture", densityWithLattice, message);
  }
  const drip =
    "Neutrons leave the nuclei above this density: matter of nuclei and electrons alone is no longer its model.";
  if (composition.meanCharge > 0) add("neutron-drip", dripDensity, drip);
  return limits;
}

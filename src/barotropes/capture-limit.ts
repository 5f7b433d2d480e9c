/** The density above which cold matter does not keep its composition: its first electron capture. */
import { type Composition, requireComposition } from "../matter/composition.js";
import { DENSITY, fillPlasma, POINT_LENGTH, RELATIVITY, radiusFactor } from "../matter/plasma.js";
import { type CaptureThreshold, captureThresholds } from "../regime/capture.js";

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

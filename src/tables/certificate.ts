/**
 * The certificate of a finished table: its error measured in every cell, at places where the builder did not look.
 *
 * The places are the points of a low-discrepancy sequence in each cell (the generalised golden ratio of two dimensions), so no cell
 * escapes and fresh random points find the same errors. The bound is twice the largest error measured.
 */
import { MEMBER_COUNT } from "../thermodynamics/free-energy.js";
import { certifiedQuantities, fillErrors } from "./errors-at.js";
import type { SheetPlan, TablePlan } from "./plan.js";
import { fillTableMembers, fillWhole } from "./strip.js";
import { type Surface, surfaceOf } from "./surface.js";
import type { CertifiedError, CertifiedQuantity, TableCertificate, TableSheet } from "./table.js";

/** Errors found in a table, by quantity. */
interface Measured {
  /** All errors of each quantity. */
  readonly errors: readonly number[][];
  /** What each place stands for: the area of its cell in ln rho and ln T, in blocks. */
  readonly weights: number[];
  /** Largest error of each quantity and its place. */
  readonly worst: { error: number; density: number; temperature: number }[];
}

/** Stated bound over largest error measured. */
const safety = 2;
/** Places a cell. */
const perCell = 2;
/** 1/p and 1/p^2 of the plastic number p, the root of p^3 = p + 1: the golden ratio of two dimensions. */
const plastic: readonly [number, number] = [0.7548776662466927, 0.5698402909980532];

/** Certificate of all sheets. */
export function certificateOf(
  plan: TablePlan,
  sheets: readonly TableSheet[],
  blocksAboveTarget: number,
): TableCertificate {
  const errors: number[][] = certifiedQuantities.map(() => []);
  const weights: number[] = [];
  const worst = certifiedQuantities.map(() => ({ error: 0, density: 0, temperature: 0 }));
  sheets.forEach((sheet, s) => {
    const surface = surfaceOf(sheet, plan.density, plan.temperature);
    measureSheet(plan, plan.sheets[s]!, sheet, surface, { errors, weights, worst });
  });
  const states = certifiedQuantities.map((name, k): readonly [CertifiedQuantity, CertifiedError] => {
    const at = percentiles(errors[k]!, weights);
    const { error, density, temperature } = worst[k]!;
    return [
      name,
      {
        bound: safety * error,
        largest: error,
        percentile99: at(0.99),
        median: at(0.5),
        worst: [density, temperature],
      },
    ];
  });
  return {
    places: errors[0]!.length,
    target: plan.accuracy,
    blocksAboveTarget,
    errors: Object.fromEntries(states) as Record<CertifiedQuantity, CertifiedError>,
  };
}

/** The error that a share of the area does not exceed. */
function percentiles(errors: readonly number[], weights: readonly number[]): (share: number) => number {
  const order = Uint32Array.from(errors.keys()).sort((a, b) => errors[a]! - errors[b]!);
  const all = weights.reduce((sum, weight) => sum + weight, 0);
  return (share) => {
    let sum = 0;
    for (const i of order) {
      sum += weights[i]!;
      if (sum >= share * all) return errors[i]!;
    }
    return 0;
  };
}

function measureSheet(plan: TablePlan, source: SheetPlan, sheet: TableSheet, surface: Surface, into: Measured): void {
  const members = new Float64Array(MEMBER_COUNT);
  const whole = new Float64Array(MEMBER_COUNT);
  const errors = new Float64Array(certifiedQuantities.length);
  let place = 0;
  const up = plan.temperature.blocks;
  for (let block = 0; block < sheet.densityLevels.length; block++) {
    if (sheet.densityLevels[block]! < 0) continue;
    const rows = 2 ** sheet.densityLevels[block]!;
    const cells = 2 ** sheet.temperatureLevels[block]!;
    for (let i = 0; i < rows * cells * perCell; i++) {
      place += 1;
      const cell = Math.floor(i / perCell);
      const x = Math.floor(cell / cells) + ((place * plastic[0]) % 1);
      const y = (cell % cells) + ((place * plastic[1]) % 1);
      const u = surface.u.start + (Math.floor(block / up) + x / rows) / surface.u.perUnit;
      const v = surface.v.start + ((block % up) + y / cells) / surface.v.perUnit;
      const density = Math.exp(u);
      const temperature = Math.exp(v);
      if (!isStable(plan, sheet, density, temperature)) continue;
      source.sampler.sampleAt(density, temperature, 2);
      fillWhole(plan, source, u, v, whole);
      fillTableMembers(plan, surface, Math.log(density), Math.log(temperature), members);
      fillErrors(members, source.sampler.members, whole, errors);
      into.weights.push(1 / (rows * cells * perCell));
      for (let k = 0; k < errors.length; k++) {
        into.errors[k]!.push(errors[k]!);
        if (errors[k]! > into.worst[k]!.error) into.worst[k] = { error: errors[k]!, density, temperature };
      }
    }
  }
}

/** True where matter of a place is in the phase of a sheet. */
function isStable({ freezing }: TablePlan, { phase }: TableSheet, density: number, temperature: number): boolean {
  if (freezing === undefined) return true;
  const isCrystal = density <= freezing.highestDensity && temperature <= freezing.factor * Math.cbrt(density);
  return isCrystal === (phase === "crystal");
}

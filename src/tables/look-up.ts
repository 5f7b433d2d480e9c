/**
 * A table at one point: which sheet, where on it, and its members. Functions of the module with one record, because V8 does not
 * specialise closures that are made several times.
 */
import { FermistateError } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import { requireSame } from "../matter/composition-difference.js";
import { CRYSTAL_FRACTION, DENSITY, TEMPERATURE } from "../matter/point.js";
import type { Order } from "../thermodynamics/free-energy.js";
import { type ColdLookUp, coldLookUp, fillCold } from "./cold.js";
import { fillBeyond, nearestBlocks } from "./extension.js";
import { fillSurface, type Surface, surfaceOf } from "./surface.js";
import type { FreeEnergyTable, SheetPhase } from "./table.js";

/** A table made ready, for the phase that is stable or for one alone. */
export interface TableLookUp {
  readonly table: FreeEnergyTable;
  readonly phase: SheetPhase | "equilibrium";
  readonly cold: ColdLookUp;
  /** The sheet of the crystal and of the liquid; the same one where there is only one. */
  readonly crystal: Surface;
  readonly liquid: Surface;
  readonly nearestCrystal: Int32Array;
  readonly nearestLiquid: Int32Array;
  /** Whether a point is told its phase. */
  readonly tellsPhase: boolean;
  /** Ends of density; 1/T_m^3 times density; highest density of a crystal: in a record, so that none is boxed. */
  readonly limits: Float64Array;
  /** Slot 0: density of the table over density of the matter, for the last composition. */
  readonly share: Float64Array;
  /** The last composition that the table holds for. */
  last: Composition | undefined;
}

/** Makes a table ready. */
export function tableLookUp(table: FreeEnergyTable, phase: SheetPhase | "equilibrium"): TableLookUp {
  const surface = (name: SheetPhase): Surface => {
    const sheet = table.sheets.find((one) => one.phase === name);
    if (sheet !== undefined) return surfaceOf(sheet, table.density, table.temperature);
    throw new FermistateError("invalid-option", {
      argument: "table",
      given: `no sheet "${name}"`,
      allowed: "its sheets",
    });
  };
  const crystal = surface(phase === "equilibrium" ? "crystal" : phase);
  const liquid = phase === "equilibrium" ? surface("liquid") : crystal;
  const { factor = 1, highestDensity = 0 } = table.freezing ?? {};
  return {
    table,
    phase,
    cold: coldLookUp(table.cold, table.density),
    crystal,
    liquid,
    nearestCrystal: nearestBlocks(crystal),
    nearestLiquid: nearestBlocks(liquid),
    tellsPhase: phase !== "single",
    limits: Float64Array.of(table.density.lowest, table.density.highest, 1 / factor, highestDensity),
    share: Float64Array.of(1),
    last: undefined,
  };
}

/** Whether the ions are a crystal, and tells the point so where the table knows their phase. */
export function tellPhase(look: TableLookUp, point: Float64Array): boolean {
  if (!look.tellsPhase) return false;
  const density = point[DENSITY]!;
  const ratio = point[TEMPERATURE]! * look.limits[2]!;
  const isCrystal =
    look.phase === "equilibrium"
      ? ratio * ratio * ratio <= density && density <= look.limits[3]!
      : look.phase === "crystal";
  point[CRYSTAL_FRACTION] = isCrystal ? 1 : 0;
  return isCrystal;
}

/**
 * Looks a point up: fills the cold curve and the sheet that is returned; undefined where the matter has nothing of what the table
 * holds.
 */
export function lookUp(
  look: TableLookUp,
  point: Float64Array,
  composition: Composition,
  order: Order,
): Surface | undefined {
  if (composition !== look.last) accept(look, composition);
  const { cold, limits } = look;
  const share = look.share[0]!;
  if (share === 0) return undefined;
  const density = point[DENSITY]! * share;
  if (!(density >= limits[0]! && density <= limits[1]!)) refuseDensity(look, point);
  const surface = tellPhase(look, point) ? look.crystal : look.liquid;
  const u = Math.log(density);
  surface.share[0] = share;
  surface.at[0] = u;
  surface.at[1] = Math.log(point[TEMPERATURE]!);
  cold.at[0] = u;
  if (!fillSurface(surface, order)) lookBeyond(look, surface, point, order);
  fillCold(cold, order);
  return surface;
}

function lookBeyond(look: TableLookUp, surface: Surface, point: Float64Array, order: Order): void {
  const nearest = surface === look.crystal ? look.nearestCrystal : look.nearestLiquid;
  const isSide = look.phase === "liquid" || look.phase === "crystal";
  if (fillBeyond(surface, nearest, order, isSide)) return;
  throw new FermistateError("outside-domain", {
    argument: "density, temperature",
    given: `${point[DENSITY]} g/cm^3, ${point[TEMPERATURE]} K`,
    allowed: "where the matter that was tabulated has a positive entropy",
  });
}

/** Refuses a composition that the table does not hold for; one equal to its own to ten digits passes. */
function accept(look: TableLookUp, composition: Composition): void {
  const own = look.table.composition;
  requireComposition(composition);
  if (look.table.holdsFor === "electron density") {
    look.share[0] = composition.electronsPerNucleon / own.electronsPerNucleon;
  } else {
    requireSame(composition, own, "this table");
  }
  look.last = composition;
}

function refuseDensity({ table, share }: TableLookUp, point: Float64Array): never {
  const { lowest, highest } = table.density;
  throw new FermistateError("outside-domain", {
    argument: "density",
    given: point[DENSITY]!,
    allowed: `${lowest / share[0]!} to ${highest / share[0]!} g/cm^3 for this composition (table)`,
  });
}

/** A table as a contribution, and as an equation of state with what stands beside it. */
import { boltzmannConstant } from "../constants.js";
import { FermistateError } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import {
  CRYSTAL_FRACTION,
  DENSITY,
  ELECTRON_CHEMICAL_POTENTIAL,
  ELECTRON_DEGENERACY,
  TEMPERATURE,
} from "../matter/point.js";
import { radiation } from "../radiation.js";
import { combine } from "../thermodynamics/combine.js";
import type { Contribution, Domain, PhasePair } from "../thermodynamics/contribution.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { ENERGY, ENTROPY, type Order, PRESSURE, SECOND_ORDER_COUNT } from "../thermodynamics/free-energy.js";
import { coldLookUp, fillCold } from "./cold.js";
import { fillBeyond, nearestBlocks } from "./extension.js";
import { addTableMembers } from "./members.js";
import { fillSurface, type Surface, surfaceOf } from "./surface.js";
import type { FreeEnergyTable, SheetPhase } from "./table.js";

/**
 * The tabulated part alone, as a contribution: for sums of one's own.
 *
 * A table of one composition refuses others (`invalid-composition`), and its states tell neither the chemical potential of the
 * electrons nor composition derivatives: the free energy of one composition does not hold them. A table of electrons and
 * positrons alone takes any composition; their chemical potential is (F + P/rho) m_u/Y_e, whose error is that of the pressure times
 * P/(n_e kT) where pairs outnumber the net electrons.
 */
export function tabulated(table: FreeEnergyTable): Contribution {
  const { freezing } = table;
  const [only] = table.sheets;
  if (freezing === undefined) return contributionOf(table, only!.phase);
  const { factor, highestDensity } = freezing;
  const phases: PhasePair = Object.freeze({
    liquid: contributionOf(table, "liquid"),
    crystal: contributionOf(table, "crystal"),
    fillBoundary(_: Composition, boundary: Float64Array): void {
      const root = boundary[1]! / factor;
      const density = root * root * root;
      boundary[2] = boundary[0]! > highestDensity ? 0 : factor * Math.cbrt(boundary[0]!);
      boundary[3] = density <= highestDensity ? density : Number.POSITIVE_INFINITY;
      boundary[4] = highestDensity;
    },
  });
  return Object.freeze({ ...contributionOf(table, "equilibrium"), phases });
}

/** What stands beside a table, by the name that its source tells. */
const companions: Readonly<Record<string, () => Contribution>> = { radiation };

/**
 * A table as an equation of state: the same interface as the physics it was made from, at the composition of the table.
 *
 * @param beside - contributions that were kept beside the table, where they are not the library's own
 * @throws `invalid-option` where the table asks for a contribution that is neither given nor known
 */
export function tableEquationOfState(table: FreeEnergyTable, ...beside: readonly Contribution[]): EquationOfState {
  const known = table.source.beside.map((name): Contribution => {
    const given = beside.find((one) => one.name === name) ?? companions[name]?.();
    if (given !== undefined) return given;
    const allowed = `the contribution "${name}", which stands beside this table`;
    throw new FermistateError("invalid-option", { argument: "beside", given: "none of that name", allowed });
  });
  return combine(tabulated(table), ...known);
}

function contributionOf(table: FreeEnergyTable, phase: SheetPhase | "equilibrium"): Contribution {
  const cold = coldLookUp(table.cold, table.density);
  const lookUp = (name: SheetPhase): Surface | undefined => {
    const sheet = table.sheets.find((one) => one.phase === name);
    return sheet && surfaceOf(sheet, table.density, table.temperature);
  };
  const low = lookUp(phase === "equilibrium" ? "crystal" : phase);
  const high = phase === "equilibrium" ? lookUp("liquid") : low;
  if (low === undefined || high === undefined) throw new Error(`a table without the sheet ${phase}`);
  const lowNearest = nearestBlocks(low);
  const highNearest = nearestBlocks(high);
  const factor = table.freezing?.factor ?? 0;
  const highest = table.freezing?.highestDensity ?? 0;
  const perElectron = table.holdsFor === "electron density";
  const accepted: Acceptance = { own: table.composition, perElectron, last: undefined, share: Float64Array.of(1) };
  const own = new Float64Array(SECOND_ORDER_COUNT);
  const [lowest, top] = [table.density.lowest, table.density.highest];
  const domain: Domain = Object.freeze({
    density: Object.freeze([table.density.lowest, table.density.highest] as const),
    temperature: Object.freeze([table.temperature.lowest, table.temperature.highest] as const),
    zeroTemperature: false,
  });

  /** 1 where the ions are a crystal. */
  function crystalAt(point: Float64Array): number {
    if (phase !== "equilibrium") return phase === "crystal" ? 1 : 0;
    const density = point[DENSITY]!;
    return density <= highest && point[TEMPERATURE]! <= factor * Math.cbrt(density) ? 1 : 0;
  }

  /** Looks up the point: sheet, cold curve, share. False where the matter has none of what the table holds. */
  function lookUpAt(point: Float64Array, composition: Composition, order: Order): Surface | undefined {
    if (composition !== accepted.last) accept(accepted, composition);
    const share = accepted.share[0]!;
    if (share === 0) return undefined;
    const density = point[DENSITY]! * share;
    if (!(density >= lowest && density <= top)) refuseDensity(table, point, share);
    const surface = crystalAt(point) === 1 ? low! : high!;
    const u = Math.log(density);
    surface.share[0] = share;
    surface.at[0] = u;
    surface.at[1] = Math.log(point[TEMPERATURE]!);
    cold.at[0] = u;
    if (!fillSurface(surface, order)) {
      const nearest = surface === low ? lowNearest : highNearest;
      if (!fillBeyond(surface, nearest, order, phase === "liquid" || phase === "crystal")) refuseBlock(point);
    }
    fillCold(cold, order);
    return surface;
  }

  function tellPhase(point: Float64Array): void {
    if (table.freezing !== undefined) point[CRYSTAL_FRACTION] = crystalAt(point);
  }

  /** mu - m_e c^2 = d(rho F)/d n_e, from the members of the gas alone. */
  function tellPotential(point: Float64Array, surface: Surface, composition: Composition): void {
    for (let k = 0; k < SECOND_ORDER_COUNT; k++) own[k] = 0;
    addTableMembers(cold, surface, 2, own);
    const potential = (own[ENERGY]! - own[ENTROPY]! + own[PRESSURE]!) / composition.electronsPerGram;
    point[ELECTRON_CHEMICAL_POTENTIAL] = potential;
    point[ELECTRON_DEGENERACY] = potential / (boltzmannConstant * point[TEMPERATURE]!);
  }

  return {
    name: `table of ${table.source.tabulated.join(" + ")}`,
    domain,
    standsFor: table.source.tabulated,
    excludes: table.source.tabulated,
    ...(perElectron ? { dependsOn: "electron density" as const } : {}),
    validity:
      `Interpolated: pressure within ${bound(table, "pressure")}, entropy within ${bound(table, "specificEntropy")} of the ` +
      `equation of state it was made from. ${table.source.validity.join(" ")}`,
    add(point: Float64Array, composition: Composition, order: Order, members: Float64Array): void {
      const surface = lookUpAt(point, composition, order);
      if (surface === undefined) return;
      tellPhase(point);
      addTableMembers(cold, surface, order, members);
      if (perElectron) tellPotential(point, surface, composition);
    },
    rewrite(point: Float64Array, composition: Composition): void {
      tellPhase(point);
      if (!perElectron) return;
      const surface = lookUpAt(point, composition, 2);
      if (surface !== undefined) tellPotential(point, surface, composition);
    },
  };
}

const bound = (table: FreeEnergyTable, name: "pressure" | "specificEntropy"): string =>
  table.certificate.errors[name].bound.toExponential(1).replace("e+", "e");

/** The composition of a table, and the last object seen that it holds for. */
interface Acceptance {
  readonly own: Composition;
  readonly perElectron: boolean;
  last: Composition | undefined;
  /** Slot 0: density of the table over density of the matter. */
  readonly share: Float64Array;
}

/** Refuses a composition that the table does not hold for; one equal to its own but made anew passes. */
function accept(accepted: Acceptance, composition: Composition): void {
  const { own } = accepted;
  requireComposition(composition);
  if (accepted.perElectron) accepted.share[0] = composition.electronsPerNucleon / own.electronsPerNucleon;
  else if (!isSame(composition, own)) {
    const allowed = `${own.name}: this table holds one composition`;
    throw new FermistateError("invalid-composition", { argument: "composition", given: composition.name, allowed });
  }
  accepted.last = composition;
}

function isSame(a: Composition, b: Composition): boolean {
  return (
    a.species.length === b.species.length &&
    a.species.every((one, i) => {
      const other = b.species[i]!;
      return (
        one.label === other.label && one.nucleonFraction === other.nucleonFraction && one.ionMass === other.ionMass
      );
    })
  );
}

function refuseDensity(table: FreeEnergyTable, point: Float64Array, share: number): never {
  const { lowest, highest } = table.density;
  throw new FermistateError("outside-domain", {
    argument: "density",
    given: point[DENSITY]!,
    allowed: `${lowest / share} to ${highest / share} g/cm^3 for this composition (table)`,
  });
}

function refuseBlock(point: Float64Array): never {
  throw new FermistateError("outside-domain", {
    argument: "density, temperature",
    given: `${point[DENSITY]} g/cm^3, ${point[TEMPERATURE]} K`,
    allowed: "where the matter that was tabulated has a positive entropy",
  });
}

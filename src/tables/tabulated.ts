/** A table as a contribution, and as an equation of state with what stands beside it. */
import { FermistateError } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import { CRYSTAL_FRACTION, DENSITY, TEMPERATURE } from "../matter/point.js";
import { radiation } from "../radiation.js";
import { combine } from "../thermodynamics/combine.js";
import type { Contribution, Domain, PhasePair } from "../thermodynamics/contribution.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import type { Order } from "../thermodynamics/free-energy.js";
import { coldLookUp, fillCold } from "./cold.js";
import { addTableMembers } from "./members.js";
import { fillSurface, surfaceOf } from "./surface.js";
import type { FreeEnergyTable, SheetPhase } from "./table.js";

/**
 * The tabulated part alone, as a contribution: for sums of one's own.
 *
 * It answers for the composition of the table only, and refuses others (`invalid-composition`). A state of a table tells neither
 * the chemical potential of the electrons nor composition derivatives: the free energy of one composition does not hold them.
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
  const lookUp = (name: SheetPhase): ReturnType<typeof surfaceOf> | undefined => {
    const sheet = table.sheets.find((one) => one.phase === name);
    return sheet && surfaceOf(sheet, table.density, table.temperature);
  };
  const low = lookUp(phase === "equilibrium" ? "crystal" : phase);
  const high = phase === "equilibrium" ? lookUp("liquid") : low;
  if (low === undefined || high === undefined) throw new Error(`a table without the sheet ${phase}`);
  const factor = table.freezing?.factor ?? 0;
  const highest = table.freezing?.highestDensity ?? 0;
  const accepted = acceptance(table.composition);
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

  return {
    name: `table of ${table.source.tabulated.join(" + ")}`,
    domain,
    validity:
      `Interpolated at ${table.composition.name}: pressure within ${bound(table, "pressure")}, entropy within ` +
      `${bound(table, "specificEntropy")} of the equation of state it was made from. ${table.source.validity.join(" ")}`,
    add(point: Float64Array, composition: Composition, order: Order, members: Float64Array): void {
      if (composition !== accepted.last) accept(accepted, composition);
      const crystal = crystalAt(point);
      const surface = crystal === 1 ? low : high;
      point[CRYSTAL_FRACTION] = crystal;
      const u = Math.log(point[DENSITY]!);
      surface.at[0] = u;
      surface.at[1] = Math.log(point[TEMPERATURE]!);
      cold.at[0] = u;
      if (!fillSurface(surface, order)) refuseBlock(point);
      fillCold(cold, order);
      addTableMembers(cold, surface, order, members);
    },
    rewrite(point: Float64Array): void {
      point[CRYSTAL_FRACTION] = crystalAt(point);
    },
  };
}

const bound = (table: FreeEnergyTable, name: "pressure" | "specificEntropy"): string =>
  table.certificate.errors[name].bound.toExponential(1).replace("e+", "e");

/** The composition of a table, and the last object seen that equals it. */
interface Acceptance {
  readonly own: Composition;
  last: Composition;
}

const acceptance = (own: Composition): Acceptance => ({ own, last: own });

/** Refuses a composition other than the table's; an equal one made anew passes. */
function accept(accepted: Acceptance, composition: Composition): void {
  const { own } = accepted;
  requireComposition(composition);
  const same =
    composition.species.length === own.species.length &&
    composition.species.every((one, i) => {
      const mine = own.species[i]!;
      return one.label === mine.label && one.nucleonFraction === mine.nucleonFraction && one.ionMass === mine.ionMass;
    });
  if (!same) {
    const allowed = `${own.name}: this table holds one composition`;
    throw new FermistateError("invalid-composition", { argument: "composition", given: composition.name, allowed });
  }
  accepted.last = composition;
}

function refuseBlock(point: Float64Array): never {
  throw new FermistateError("outside-domain", {
    argument: "density, temperature",
    given: `${point[DENSITY]} g/cm^3, ${point[TEMPERATURE]} K`,
    allowed: "where the sheet of this phase has blocks",
  });
}

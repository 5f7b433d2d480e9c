/** A table as a contribution, and as an equation of state with what stands beside it. */
import { boltzmannConstant } from "../constants.js";
import { FermistateError } from "../errors.js";
import { idealIons } from "../ions/ideal-ions.js";
import type { Composition } from "../matter/composition.js";
import { ELECTRON_CHEMICAL_POTENTIAL, ELECTRON_DEGENERACY, TEMPERATURE } from "../matter/point.js";
import { radiation } from "../radiation.js";
import { combine } from "../thermodynamics/combine.js";
import type { Contribution, Domain, PhasePair } from "../thermodynamics/contribution.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { ENERGY, ENTROPY, type Order, PRESSURE, SECOND_ORDER_COUNT } from "../thermodynamics/free-energy.js";
import { lookUp, type TableLookUp, tableLookUp, tellPhase } from "./look-up.js";
import { addTableMembers } from "./members.js";
import type { Surface } from "./surface.js";
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
  requireTable(table);
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

/** Throws `invalid-option` unless `table` is one: what a file holds is checked by fermistate/table-files. */
function requireTable(table: unknown): void {
  if (typeof table === "object" && table !== null && "layout" in table && table.layout === 1 && "sheets" in table)
    return;
  const allowed = "a table from buildTable, tableFromHdf5 or tableFromCsv";
  throw new FermistateError("invalid-option", { argument: "table", given: table, allowed });
}

/** What stands beside a table, by the name that its source tells. */
const companions: Readonly<Record<string, () => Contribution>> = { radiation, "ideal ions": idealIons };

/**
 * A table as an equation of state: the same interface as the physics it was made from, at the composition of the table.
 *
 * @param beside - contributions that were kept beside the table, where they are not the library's own
 * @throws `invalid-option` where the table asks for a contribution that is neither given nor known
 */
export function tableEquationOfState(table: FreeEnergyTable, ...beside: readonly Contribution[]): EquationOfState {
  requireTable(table);
  const known = table.source.beside.map((name): Contribution => {
    const given = beside.find((one) => one.name === name) ?? companions[name]?.();
    if (given !== undefined) return given;
    const allowed = `the contribution "${name}", which stands beside this table`;
    throw new FermistateError("invalid-option", { argument: "beside", given: "none of that name", allowed });
  });
  return combine(tabulated(table), ...known);
}

function contributionOf(table: FreeEnergyTable, phase: SheetPhase | "equilibrium"): Contribution {
  const look = tableLookUp(table, phase);
  const own = new Float64Array(SECOND_ORDER_COUNT);
  const perElectron = table.holdsFor === "electron density";
  const domain: Domain = Object.freeze({
    density: Object.freeze([table.density.lowest, table.density.highest] as const),
    temperature: Object.freeze([table.temperature.lowest, table.temperature.highest] as const),
    zeroTemperature: false,
  });
  return {
    name: `table of ${table.source.tabulated.join(" + ")}`,
    domain,
    standsFor: table.source.tabulated,
    ...(table.source.physics.length > 0 ? { physics: table.source.physics } : {}),
    excludes: table.source.tabulated,
    ...(perElectron ? { dependsOn: "electron density" as const } : {}),
    validity:
      `Interpolated: pressure within ${bound(table, "pressure")}, entropy within ${bound(table, "specificEntropy")} of the ` +
      `equation of state it was made from. ${table.source.validity.join(" ")}`,
    add(point: Float64Array, composition: Composition, order: Order, members: Float64Array): void {
      const surface = lookUp(look, point, composition, order);
      if (surface === undefined) return;
      addTableMembers(look.cold, surface, order, members);
      if (perElectron) tellPotential(look, surface, own, point, composition);
    },
    rewrite(point: Float64Array, composition: Composition): void {
      tellPhase(look, point);
      if (!perElectron) return;
      const surface = lookUp(look, point, composition, 2);
      if (surface !== undefined) tellPotential(look, surface, own, point, composition);
    },
  };
}

/** mu - m_e c^2 = d(rho F)/d n_e, from the members of the gas alone. */
function tellPotential(
  look: TableLookUp,
  surface: Surface,
  own: Float64Array,
  point: Float64Array,
  composition: Composition,
): void {
  for (let k = 0; k < SECOND_ORDER_COUNT; k++) own[k] = 0;
  addTableMembers(look.cold, surface, 2, own);
  const potential = (own[ENERGY]! - own[ENTROPY]! + own[PRESSURE]!) / composition.electronsPerGram;
  point[ELECTRON_CHEMICAL_POTENTIAL] = potential;
  point[ELECTRON_DEGENERACY] = potential / (boltzmannConstant * point[TEMPERATURE]!);
}

const bound = (table: FreeEnergyTable, name: "pressure" | "specificEntropy"): string =>
  table.certificate.errors[name].bound.toExponential(1).replace("e+", "e");

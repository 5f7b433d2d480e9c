/** A table of any equation of state at one composition: plan, strips, assembly, certificate. */
import { FermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { libraryVersion } from "../version.js";
import { assembleSheets } from "./assemble.js";
import { certificateOf } from "./certificate.js";
import { type TableOptions, type TablePlan, tablePlan } from "./plan.js";
import { buildStrip, type Strip } from "./strip.js";
import type { FreeEnergyTable, TableSheet } from "./table.js";

/**
 * Builds a table of `eos` at one composition, in this thread: a second or two a megabyte. Large tables: `fermistate/table-build`.
 *
 * @param onProgress - called with the number of strips of density that are finished, and of all
 * @throws `not-a-number`, `out-of-range`, `invalid-option`, `invalid-composition`; `outside-domain` for a region beyond that of the
 * equation of state; `unstable` for matter without positive entropy
 */
export function buildTable(
  eos: EquationOfState,
  composition: Composition,
  options: TableOptions,
  onProgress?: (done: number, all: number) => void,
): FreeEnergyTable {
  const plan = tablePlan(eos, composition, options);
  const strips: Strip[] = [];
  for (let index = 0; index < plan.density.blocks; index++) {
    strips.push(buildStrip(plan, index));
    onProgress?.(index + 1, plan.density.blocks);
  }
  return assembleTable(plan, strips);
}

/** A table from all strips of its plan, in their order. */
export function assembleTable(plan: TablePlan, strips: readonly Strip[]): FreeEnergyTable {
  const sheets = assembleSheets(plan, strips);
  if (sheets.some(({ densityLevels }) => densityLevels.every((level) => level < 0))) refuseEmpty(sheets);
  const above = strips.reduce((sum, strip) => sum + strip.blocksAboveTarget, 0);
  const certificate = certificateOf(plan, sheets, above);
  const named = [...plan.tabulated, ...plan.beside];
  return {
    layout: 1,
    holdsFor: plan.tabulated.every((part) => part.dependsOn === "electron density")
      ? "electron density"
      : "one composition",
    composition: plan.composition,
    density: plan.density,
    temperature: plan.temperature,
    cold: plan.cold,
    sheets,
    ...(plan.freezing === undefined ? {} : { freezing: plan.freezing }),
    source: {
      tabulated: plan.tabulated.map((part) => part.name),
      beside: plan.beside.map((part) => part.name),
      physics: plan.tabulated.every((part) => part.physics !== undefined)
        ? plan.tabulated.flatMap((part) => part.physics!)
        : [],
      validity: named.flatMap((part) => (part.validity === undefined ? [] : [`${part.name}: ${part.validity}`])),
      version: libraryVersion,
    },
    certificate,
  };
}

function refuseEmpty(sheets: readonly TableSheet[]): never {
  throw new FermistateError("unstable", {
    argument: "eos",
    given: `no entropy above zero in the region (${sheets.map(({ phase }) => phase).join(", ")})`,
    allowed: "matter with a positive entropy: a table holds the logarithm of what heat does",
  });
}

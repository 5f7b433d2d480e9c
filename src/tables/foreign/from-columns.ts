/** Columns from anywhere -> a report on them and one consistent equation of state. */
import { FermistateError, requireFinite } from "../../errors.js";
import { type Composition, requireComposition } from "../../matter/composition.js";
import { DENSITY, TEMPERATURE } from "../../matter/point.js";
import { combine } from "../../thermodynamics/combine.js";
import type { Contribution } from "../../thermodynamics/contribution.js";
import { firstOutside, refusePoint } from "../../thermodynamics/domain.js";
import type { EquationOfState } from "../../thermodynamics/equation-of-state.js";
import { ENERGY, ENTROPY, PRESSURE } from "../../thermodynamics/free-energy.js";
import { type SortedRows, type StateColumns, sortedRows } from "./columns.js";
import { deviationsOf, unstablePlaces } from "./compare.js";
import { columnsContribution } from "./contribution.js";
import { lastDigit } from "./digits.js";
import { entropyFromEnergy } from "./entropy.js";
import { addedEntropy, fitColumns } from "./fit.js";
import { gapsOf } from "./gaps.js";
import { meshOf } from "./mesh.js";
import { outliersOf } from "./outliers.js";
import { refuseContradictory, refuseUnstable } from "./refusals.js";
import type { ColumnsReport } from "./report.js";
import { contradictionsOf, residualsOf, stabilityOf } from "./residuals.js";

/** How columns are taken. */
export interface ColumnsOptions {
  /** The matter that the columns describe; no other is answered for. */
  readonly composition: Composition;
  /** Name of the contribution; default "given columns". */
  readonly name?: string | undefined;
  /**
   * Contributions that are in the columns and known exactly, such as `radiation()`: taken away before the fit and added to it again.
   * Where photons or pairs rule, P hardly depends on density and no interpolation of the whole keeps dP/drho. Default none.
   */
  readonly beside?: readonly Contribution[] | undefined;
  /**
   * Without a column of entropy: the entropy of the columns, less that of `beside`, at the lowest density and temperature, erg/(g K).
   * Default: what makes the lowest one of all nodes zero. Only entropies, free energies and chemical potentials depend on it.
   */
  readonly entropyAtLowestNode?: number | undefined;
  /**
   * "refuse" (default): throw where the fit is not stable somewhere. "report": list the places in the report; a state there is
   * refused one by one.
   */
  readonly unstable?: "refuse" | "report" | undefined;
  /**
   * "refuse" (default): throw where the columns contradict each other by order one over most of the mesh, as those in other units,
   * logarithms or in another order do. "report": name the relations in the report; what is made of such columns is no physics.
   */
  readonly contradictory?: "refuse" | "report" | undefined;
}

/** What columns become. */
export interface ColumnsResult {
  /** The consistent free energy, with what stands beside it. */
  readonly equationOfState: EquationOfState;
  /** How good the columns are, and how close it is to them. */
  readonly report: ColumnsReport;
}

const known: readonly (keyof ColumnsOptions)[] = [
  "composition",
  "name",
  "beside",
  "entropyAtLowestNode",
  "unstable",
  "contradictory",
];

/**
 * An equation of state from columns of density, temperature, pressure, energy and, if there is one, entropy; and a report that says
 * how inconsistent they are and how far the equation of state is from them.
 *
 * The columns fix one free energy by pressure and entropy, in the sense of least squares with one relative error for P and T s. So
 * P = rho^2 dF/drho, s = -dF/dT and all Maxwell relations hold to rounding, between nodes too. No column is honoured to the last digit
 * at all nodes: columns that agree with each other are, up to the sixth-order error of integrating T s and P over a cell (the report
 * has the measured figures; along the lowest isotherm P keeps its digits best); columns that disagree are met halfway. Energy fixes F at
 * the node of lowest density and temperature alone and follows elsewhere; in place of a missing entropy it counts everywhere.
 * Interpolated are the energy on the lowest isotherm and the logarithm of what heat takes from F since, on quintic
 * Hermite cells of the given mesh, which may be unequal.
 *
 * Each density has the same temperatures, or at least five of its own: then all are resampled along ln T to common ones.
 *
 * @param columns - one row a state, in any order; at least 5 densities of 5 temperatures, at most 1 million rows
 * @throws `not-a-number`, `out-of-range` (with the row), `length-mismatch`, `too-large`, `invalid-composition`; `invalid-option` for too
 * few nodes, rows that form no mesh, two rows of one state with different values, columns that contradict each other by order one over
 * most of the mesh; `unstable` where the fit is not that of stable
 * matter, or energies have too few digits to hold the heat
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { equationOfStateFromColumns } from "fermistate/tables";
 * const helium = composition({ He4: 1 });
 * const matter = whiteDwarfMatter();
 * const states = [0, 1, 2, 3, 4, 5, 6, 7].flatMap((i) =>
 *   [0, 1, 2, 3, 4, 5].map((j) => matter.state(10 ** (4 + i / 4), 10 ** (7 + j / 5), helium)),
 * );
 * const { equationOfState } = equationOfStateFromColumns(
 *   {
 *     density: states.map((state) => state.density),
 *     temperature: states.map((state) => state.temperature),
 *     pressure: states.map((state) => state.pressure),
 *     specificEnergy: states.map((state) => state.specificEnergy),
 *     specificEntropy: states.map((state) => state.specificEntropy),
 *   },
 *   { composition: helium },
 * );
 * equationOfState.state(1e5, 3e7, helium).pressure; // => 7.129e20
 * ```
 */
export function equationOfStateFromColumns(columns: StateColumns, options: ColumnsOptions): ColumnsResult {
  const { composition, name, beside, corner, unstable, contradictory } = checkedOptions(options);
  const rows = sortedRows(columns);
  const given = meshOf(rows);
  const half = (column: Float64Array | undefined): number => lastDigit(column ?? new Float64Array(1)) / 2;
  const digits = { pressure: half(rows.pressure), energy: half(rows.energy), entropy: half(rows.entropy) };
  const residuals = residualsOf(given, digits);
  const contradictions = contradictionsOf(residuals);
  if (contradictory === "refuse") refuseContradictory(contradictions, residuals);
  const mesh = beside.length === 0 ? given : meshOf(without(rows, beside, composition));
  if (mesh.entropy !== undefined && corner !== undefined) {
    const allowed = "nothing where specificEntropy is given";
    throw new FermistateError("invalid-option", { argument: "entropyAtLowestNode", given: corner, allowed });
  }
  const entropy = mesh.entropy ?? entropyFromEnergy(mesh, corner);
  const shift = addedEntropy(entropy);
  const fit = fitColumns(mesh, entropy, shift);
  const make = (validity: string): EquationOfState =>
    combine(columnsContribution(mesh, fit, composition, name, validity), ...beside);
  const bare = make("");
  const { deviations, rowsOutside } = deviationsOf(bare, composition, rows, addedEntropy(rows.entropy ?? entropy));
  const gaps = given.resampled ? gapsOf(rows) : undefined;
  const report: ColumnsReport = Object.freeze({
    arrangement:
      gaps !== undefined
        ? "rectangular but for some rows"
        : given.resampled
          ? "scattered in temperature"
          : "rectangular",
    missing: gaps?.missing ?? { density: new Float64Array(), temperature: new Float64Array() },
    strayRows: gaps?.strayRows ?? [],
    rows: columns.density.length,
    duplicates: rows.duplicates,
    rowsOutside,
    densities: given.density,
    temperatures: given.temperature,
    entropy: given.entropy === undefined ? "from pressure and energy" : "given",
    residuals,
    contradictions,
    outliers: given.resampled ? undefined : outliersOf(given, rows),
    stability: stabilityOf(given),
    deviations,
    unstable: unstablePlaces(bare, composition, given),
  });
  if (unstable === "refuse") refuseUnstable(report);
  const far = ({ max }: { readonly max: number }): string => max.toExponential(1).replace("e+", "e");
  const equationOfState = make(
    `Fitted to columns: pressure within ${far(deviations.pressure)}, energy within ${far(deviations.specificEnergy)} of the rows; ` +
      "between rows and for the physics behind them their source must vouch.",
  );
  return Object.freeze({ equationOfState, report });
}

interface CheckedOptions {
  readonly composition: Composition;
  readonly name: string;
  readonly beside: readonly Contribution[];
  readonly corner: number | undefined;
  readonly unstable: "refuse" | "report";
  readonly contradictory: "refuse" | "report";
}

function checkedOptions(options: ColumnsOptions): CheckedOptions {
  const isObject = typeof options === "object" && options !== null && !Array.isArray(options);
  const stranger = isObject
    ? Object.keys(options).find((key) => !known.includes(key as keyof ColumnsOptions))
    : options;
  const refuse = (argument: string, given: unknown, allowed: string): never => {
    throw new FermistateError("invalid-option", { argument, given, allowed });
  };
  if (!isObject || stranger !== undefined) refuse("options", stranger, `{ ${known.join(", ")} }`);
  const {
    composition,
    name = "given columns",
    beside = [],
    entropyAtLowestNode: corner,
    unstable = "refuse",
    contradictory = "refuse",
  } = options;
  requireComposition(composition);
  if (typeof name !== "string" || name === "") refuse("name", name, "a text");
  if (!Array.isArray(beside)) refuse("beside", beside, "a list of contributions, such as [radiation()]");
  if (beside.length > 0) combine(...beside);
  if (corner !== undefined) requireFinite("entropyAtLowestNode", corner, "a finite number, erg/(g K)");
  for (const [option, value] of Object.entries({ unstable, contradictory })) {
    if (value !== "refuse" && value !== "report") refuse(option, value, '"refuse" or "report"');
  }
  return { composition, name, beside, corner, unstable, contradictory };
}

/** Rows less what is known exactly. */
function without(rows: SortedRows, beside: readonly Contribution[], composition: Composition): SortedRows {
  const known = combine(...beside);
  const outside = firstOutside(known.domain, rows.density, rows.temperature);
  if (outside >= 0) refusePoint(beside, rows.density[outside], rows.temperature[outside], outside);
  const { point, members, fillMembers } = known.evaluator();
  const pressure = rows.pressure.slice();
  const energy = rows.energy.slice();
  const entropy = rows.entropy?.slice();
  for (let k = 0; k < pressure.length; k++) {
    point[DENSITY] = rows.density[k]!;
    point[TEMPERATURE] = rows.temperature[k]!;
    fillMembers(composition, 2);
    pressure[k]! -= members[PRESSURE]! * rows.density[k]!;
    energy[k]! -= members[ENERGY]!;
    if (entropy !== undefined) entropy[k]! -= members[ENTROPY]! / rows.temperature[k]!;
    if (!(pressure[k]! > 0)) {
      throw new FermistateError("out-of-range", {
        argument: "pressure",
        given: pressure[k],
        allowed: `> 0 dyn/cm^2 without ${known.name}: the columns do not hold it, or not the digits; leave "beside" out`,
      });
    }
  }
  return { ...rows, pressure, energy, entropy };
}

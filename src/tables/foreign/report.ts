/** What is said about columns: how far they agree with each other, and how far the consistent free energy is from each of them. */

/** Places of a mesh, as plain columns. */
export interface Places {
  /** g/cm^3. */
  readonly density: Float64Array;
  /** K. */
  readonly temperature: Float64Array;
}

/** How large relative errors are. */
export interface ErrorSpread {
  /** Largest one. */
  readonly max: number;
  /** 99 % are not above. */
  readonly percentile99: number;
  /** Half of them are not above. */
  readonly median: number;
  /** Density [g/cm^3] and temperature [K] of the largest one. */
  readonly worst: readonly [density: number, temperature: number];
}

/** By how much a relation between columns fails, node by node. */
export interface ResidualMap extends ErrorSpread, Places {
  /** The relation: left side less right side is the residual. */
  readonly relation: string;
  /** Residual over the largest term of the relation, at each node. */
  readonly residual: Float64Array;
  /**
   * What the distance of the nodes alone may have caused, as spread of the change when derivatives are taken with two nodes less:
   * residuals below it say nothing about the columns.
   */
  readonly resolution: Pick<ErrorSpread, "max" | "percentile99" | "median">;
  /** What the digits that the columns were printed with may have caused at most, likewise. */
  readonly digits: Pick<ErrorSpread, "max" | "percentile99" | "median">;
  /** Half of the residuals exceed what resolution and digits explain at their node by this or more; 0 where those explain them. */
  readonly unexplained: number;
}

/** Where the columns are not those of stable matter. */
export interface ColumnsStability {
  /** Nodes where (d ln P/d ln rho) at constant T is not positive. */
  readonly densityExponent: Places;
  /** Nodes where c_v, from de/dT, is not positive. */
  readonly heatCapacityV: Places;
  /** Nodes from which P falls or stays to the next density. */
  readonly pressureAlongDensity: Places;
  /** Nodes from which P falls or stays to the next temperature. */
  readonly pressureAlongTemperature: Places;
  /** Nodes from which e falls or stays to the next temperature. */
  readonly energyAlongTemperature: Places;
  /** Nodes from which s falls or stays to the next temperature; none where it is not given. */
  readonly entropyAlongTemperature: Places;
}

/** The relations. */
export interface ColumnsResiduals {
  /** T ds/d ln rho = -dP/dT T/rho; undefined without a column of s. */
  readonly maxwell: ResidualMap | undefined;
  /** P/rho = de/d ln rho + dP/dT T/rho. */
  readonly energy: ResidualMap;
  /** de = T ds at constant density; undefined without a column of s. */
  readonly heat: ResidualMap | undefined;
}

/** How far the fit is from the columns, at every row within its domain. */
export interface ColumnsDeviations {
  /** Over P. */
  readonly pressure: ErrorSpread;
  /** Over |e| + P/rho. */
  readonly specificEnergy: ErrorSpread;
  /** Over s, from the zero that makes all entropies positive where they are not; undefined without a column of s. */
  readonly specificEntropy: ErrorSpread | undefined;
}

/** An entry far from what its neighbours say along density and along temperature. */
export interface ColumnsOutlier {
  /** Row of the input, from 0. */
  readonly row: number;
  /** Density, g/cm^3. */
  readonly density: number;
  /** Temperature, K. */
  readonly temperature: number;
  /** Its column. */
  readonly column: "pressure" | "specificEnergy" | "specificEntropy";
  /** How far it is from them: given over expected value, less 1. */
  readonly deviation: number;
  /** Times what the lines beside it and the digits of the column explain. */
  readonly factor: number;
}

/** The report on columns and on the free energy made of them. */
export interface ColumnsReport {
  /**
   * How the rows lay: on a mesh, or every density with temperatures of its own, or on a mesh with a few gaps; all but the first are
   * resampled along ln T to common temperatures.
   */
  readonly arrangement: "rectangular" | "rectangular but for some rows" | "scattered in temperature";
  /** Nodes of the mesh without a row, where it is "rectangular but for some rows"; none otherwise. */
  readonly missing: Places;
  /** Rows of the input, from 0, at temperatures that most densities do not have, in that case. */
  readonly strayRows: readonly number[];
  /** Rows given. */
  readonly rows: number;
  /** Rows dropped because another one said the same. */
  readonly duplicates: number;
  /** Rows outside the temperatures that every density has: not used by the fit. */
  readonly rowsOutside: number;
  /** Densities of the mesh, g/cm^3. */
  readonly densities: Float64Array;
  /** Temperatures of the mesh, K. */
  readonly temperatures: Float64Array;
  /** Whether there was a column of entropy. */
  readonly entropy: "given" | "from pressure and energy";
  /** How far the columns agree with each other. */
  readonly residuals: ColumnsResiduals;
  /** Relations that fail by half of their largest term or more over half of the mesh, where neither mesh nor digits explain it. */
  readonly contradictions: readonly string[];
  /** Entries that stand out, the worst first; undefined where the rows were resampled: they are not looked for then. */
  readonly outliers: readonly ColumnsOutlier[] | undefined;
  /** Where they are not those of stable matter. */
  readonly stability: ColumnsStability;
  /** How far the fit is from them. */
  readonly deviations: ColumnsDeviations;
  /** Places, of the nodes and the middles of cells and their sides, where the fit is not stable: it refuses to answer there. */
  readonly unstable: Places;
}

/** Spread of |values|; places by number. */
export function spreadOf(values: Float64Array, place: (index: number) => readonly [number, number]): ErrorSpread {
  const sizes = values.map(Math.abs);
  let worst = 0;
  for (let k = 1; k < sizes.length; k++) if (sizes[k]! > sizes[worst]!) worst = k;
  const [density, temperature] = place(worst);
  const max = sizes[worst]!;
  sizes.sort();
  const at = (share: number): number => sizes[Math.ceil(share * sizes.length) - 1]!;
  return { max, percentile99: at(0.99), median: at(0.5), worst: Object.freeze([density, temperature] as const) };
}

/**
 * What a species table holds: the pressure of electrons alone over degeneracy and temperature, from which the gas of
 * electrons and positrons follows at any composition. Plain data, for export.
 *
 *     P(eta, theta) = electronPressureUnit exp L(eta, ln theta)      dyn/cm^2,    theta = kT/(m_e c^2)
 *
 * Positrons are the same function at -eta - 2/theta, so the onset of pairs is nowhere in the table. Below its lowest
 * eta the gas is classical, L + d + (L_eta - 1)(e^d - 1) with d = eta - lowest; above its highest Sommerfeld's series
 * is exact. Between nodes L is the polynomial of degree 13 in either variable that has the derivatives of the four
 * nodes.
 */

/** Highest derivative by each variable at a node. */
export const NODE_ORDER = 6;
/** Numbers of a node. */
export const NODE_LENGTH = 49;

/** Quantities whose error the certificate of a species table states. */
export type SpeciesQuantity =
  | "pressure"
  | "numberDensity"
  | "entropy"
  | "densityByDegeneracy"
  | "heatCapacity"
  | "pressureByDensity"
  | "pressureByTemperature";

/** Their names. */
export const speciesQuantities: readonly SpeciesQuantity[] = [
  "pressure",
  "numberDensity",
  "entropy",
  "densityByDegeneracy",
  "heatCapacity",
  "pressureByDensity",
  "pressureByTemperature",
];

/** The error of one quantity over a species table. */
export interface SpeciesError {
  /** Twice the largest error measured. */
  readonly bound: number;
  /** Largest error measured. */
  readonly largest: number;
  /** On half of the area in eta and ln theta the error is below. */
  readonly median: number;
  /** Where the largest one was found: eta, and temperature in K. */
  readonly worst: readonly [degeneracy: number, temperature: number];
}

/**
 * How far the gas of electrons alone is from its integrals, relative, measured all over the table. heatCapacity is that
 * at constant volume, pressureByDensity n dP/dn at constant temperature, pressureByTemperature T dP/dT at constant density.
 */
export interface SpeciesCertificate {
  /** Number of places measured. */
  readonly places: number;
  /** By quantity. */
  readonly errors: Readonly<Record<SpeciesQuantity, SpeciesError>>;
}

/** A table of ln P of electrons alone. */
export interface SpeciesTable {
  /** Version of this layout. */
  readonly layout: 2;
  /** Nodes of eta = (mu - m_e c^2)/kT, increasing. */
  readonly degeneracy: Float64Array;
  /** Nodes of ln theta = ln(kT/m_e c^2), increasing. */
  readonly logTheta: Float64Array;
  /**
   * 49 numbers a node, 7 i + j: d^(i+j) L/(d eta^i d ln theta^j), i, j = 0..6. Node (k, l) starts at 49 (k
   * logTheta.length + l).
   */
  readonly nodes: Float64Array;
  /** m_e c^2/k, K: what T is divided by. */
  readonly restTemperature: number;
  /** m_e c^2/(pi^2 lambdabar^3), dyn/cm^2: what e^L is multiplied by. */
  readonly pressureUnit: number;
  /** 1/(pi^2 lambdabar^3), cm^-3: the unit of n = (dP/d eta)/theta. */
  readonly densityUnit: number;
  /** Version of this library that made it. */
  readonly version: string;
  /** Its measured error. */
  readonly certificate: SpeciesCertificate;
}

/** Bytes of the numbers of a species table. */
export function speciesTableBytes(table: SpeciesTable): number {
  return table.degeneracy.byteLength + table.logTheta.byteLength + table.nodes.byteLength;
}

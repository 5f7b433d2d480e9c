/**
 * What a table of the free energy holds: plain data, from which `tableEquationOfState` makes an equation of state and which
 * files carry. At one composition,
 *
 *     F(rho, T) = F_0(rho) - 2^k exp L(ln rho, ln T)     erg/g
 *
 * F_0 is the energy of the coldest matter, a curve; L, the logarithm of what heat takes from it, a surface of quintic
 * Hermite patches. Where ions freeze there are two surfaces, each beyond the boundary as far as its blocks reach, and the
 * boundary: no patch mixes phases. Contributions that are cheap and exact (photons) stay beside the table.
 */
import type { Composition } from "../matter/composition.js";
import type { Physics } from "../thermodynamics/contribution.js";

/** One axis: equal steps of the natural logarithm. */
export interface TableAxis {
  /** Lowest value, g/cm^3 or K. */
  readonly lowest: number;
  /** Highest value, g/cm^3 or K. */
  readonly highest: number;
  /** Number of blocks: each is cut into 2^level cells of its own. */
  readonly blocks: number;
}

/** Which particles a sheet describes: all there are, or the ions as a liquid or crystal alone. */
export type SheetPhase = "single" | "liquid" | "crystal";

/** One surface. Arrays by block run over the blocks of the temperature axis fastest. */
export interface TableSheet {
  /** What it describes. */
  readonly phase: SheetPhase;
  /** Level by block along density: 2^level cells; -1 where the sheet has no block. */
  readonly densityLevels: Int8Array;
  /** Level by block along temperature. */
  readonly temperatureLevels: Int8Array;
  /** The exponent k by block: keeps L small, and with it the rounding of its differences. */
  readonly exponents: Int16Array;
  /**
   * Nine numbers a node, 3 i + j: d^(i+j) L/(d ln rho^i d ln T^j), i, j = 0..2. Nodes of a block stand together, those of one
   * density in a row, temperature fastest: (2^densityLevel + 1)(2^temperatureLevel + 1) of them; blocks in their order.
   */
  readonly nodes: Float64Array;
}

/** The cold curve: F_0 and its first two derivatives in ln rho, erg/g, three numbers a node, at equal steps of ln rho. */
export interface ColdCurve {
  /** Temperature of F_0 = F + T s, K; 0 where the matter has a state there. */
  readonly temperature: number;
  /** Three numbers a node over the whole density axis, ends included. */
  readonly nodes: Float64Array;
}

/** Where ions freeze: T_m = factor rho^(1/3) up to the highest density of a crystal. */
export interface FreezingLine {
  /** T_m/rho^(1/3), K (g/cm^3)^(-1/3). */
  readonly factor: number;
  /** Highest density of a crystal, g/cm^3. */
  readonly highestDensity: number;
}

/** What a table was made from. */
export interface TableSource {
  /** Name of each contribution that was tabulated. */
  readonly tabulated: readonly string[];
  /** Name of each contribution that stands beside the table, to be added. */
  readonly beside: readonly string[];
  /** What the tabulated contributions say of themselves: models and options; empty where one of them says nothing. */
  readonly physics: readonly Physics[];
  /** Where the physics holds, of each contribution that says so. */
  readonly validity: readonly string[];
  /** Version of this library that made it. */
  readonly version: string;
}

/** Quantities whose error a certificate states. */
export type CertifiedQuantity =
  | "pressure"
  | "specificEnergy"
  | "specificEntropy"
  | "heatCapacityV"
  | "pressureByDensity"
  | "pressureByTemperature";

/** The error of one quantity over a table. */
export interface CertifiedError {
  /** No error at a place of its own was found above this: twice the largest one measured. */
  readonly bound: number;
  /** Largest error measured, relative as {@link TableCertificate} says. */
  readonly largest: number;
  /** On 99 % of the area in ln rho and ln T the error is below. */
  readonly percentile99: number;
  /** On half of the area the error is below. */
  readonly median: number;
  /** Where the largest one was found: density, g/cm^3, and temperature, K. */
  readonly worst: readonly [density: number, temperature: number];
}

/**
 * How far a table is from the equation of state it was made from, measured in every cell of the finished table.
 *
 * Errors are relative: of pressure and pressureByDensity to the pressure scale max(P/rho, dP/drho), of energy to |e| + P/rho,
 * of entropy and heat capacity to themselves, of pressureByTemperature to itself plus rho c_v.
 */
export interface TableCertificate {
  /** Number of places measured. */
  readonly places: number;
  /** Error that the builder was asked for. */
  readonly target: number;
  /** Blocks in which the finest mesh allowed did not reach it. */
  readonly blocksAboveTarget: number;
  /** By quantity. */
  readonly errors: Readonly<Record<CertifiedQuantity, CertifiedError>>;
}

/** A table of the free energy. */
export interface FreeEnergyTable {
  /** Version of this layout. */
  readonly layout: 1;
  /**
   * "one composition", or "electron density": of electrons and positrons alone, which know only rho Y_e, so that the table
   * holds for all compositions and its densities are those of `composition`.
   */
  readonly holdsFor: "one composition" | "electron density";
  /** The composition it was made at. */
  readonly composition: Composition;
  /** Baryon mass density, g/cm^3. */
  readonly density: TableAxis;
  /** Temperature, K. */
  readonly temperature: TableAxis;
  /** F_0. */
  readonly cold: ColdCurve;
  /** One sheet of the matter or of the one phase it has in the region, or "liquid" and "crystal". */
  readonly sheets: readonly TableSheet[];
  /** Where there are two sheets, the line between them. */
  readonly freezing?: FreezingLine;
  /** What it was made from. */
  readonly source: TableSource;
  /** Its measured error. */
  readonly certificate: TableCertificate;
}

/** Numbers a node of a sheet. */
export const NODE_LENGTH = 9;
/** Numbers a node of the cold curve. */
export const COLD_LENGTH = 3;
/** Finest level: 2^level cells a block. */
export const highestLevel = 8;

/** Bytes of the numbers of a table. */
export function tableBytes(table: FreeEnergyTable): number {
  const arrays = table.sheets.flatMap((sheet) => [
    sheet.densityLevels,
    sheet.temperatureLevels,
    sheet.exponents,
    sheet.nodes,
  ]);
  return [table.cold.nodes, ...arrays].reduce((sum, array) => sum + array.byteLength, 0);
}

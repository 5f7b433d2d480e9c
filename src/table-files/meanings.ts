/** What each item of a table means and in which unit, for the files: who reads a file needs nothing else to use the numbers. */
import { formatMeanings, type Meaning } from "./form.js";

/** What the whole is. */
export const title = "Helmholtz free energy of matter as a table";

/** How to get numbers out of it. */
export const recipe: readonly string[] = [
  "F(rho, T) = F_0(rho) - 2^k exp L(u, v), erg/g, u = ln rho, v = ln T; rho: baryon mass density, g/cm^3; T: K.",
  "Pressure P = rho^2 dF/drho, specific entropy s = -dF/dT, specific energy F + T s; what stands beside the table is to be " +
    "added.",
  "The density axis is cut into axes/density/blocks blocks of equal steps of u, the temperature axis likewise in v. In arrays by " +
    "block the first index runs along density, the second along temperature. A block is cut into 2^density_level times " +
    "2^temperature_level equal cells; density_level -1: the sheet has no block there. k is the exponent of the block.",
  "Blocks follow each other in sheets/PHASE/nodes in the order of the arrays by block; each has (2^density_level + 1) " +
    "(2^temperature_level + 1) nodes, temperature fastest. A node is a 3 x 3 matrix: entry (i, j) is d^(i+j) L/(du^i dv^j).",
  "In a cell L is the polynomial of degree five in u and in v that has these derivatives at the four corners (quintic " +
    "Hermite patch).",
  "cold/nodes has F_0, dF_0/du, d2F_0/du2 at equal steps of u over the whole density axis, ends included: degree five " +
    "between two nodes, too.",
  "With a liquid and a crystal sheet the crystal one holds at T <= sheets/freezing/factor rho^(1/3) and rho <= " +
    "sheets/freezing/highest_density, else the liquid one.",
  "Where composition/holds_for is electron density: matter of y times the electrons per nucleon of this composition has " +
    "y F(y rho, T).",
  "Derived constants follow CODATA 2022. Compositions are nucleon fractions: a species has X rho/(A m_u) nuclei per cm^3.",
];

const block = "by block (density, temperature)";
const relative =
  "Errors are relative: of pressure and pressureByDensity to max(P/rho, dP/drho), of energy to |e| + P/rho, of entropy and " +
  "heat capacity to themselves, of pressureByTemperature to itself plus rho c_v";

const meanings: Readonly<Record<string, Meaning>> = {
  "format/layout": { units: "1", description: "version of this layout" },
  "composition/holds_for": {
    description: "one composition, or electron density: electrons and positrons alone, in any composition",
  },
  "composition/name": { description: "the composition in words" },
  "composition/label": { description: "nuclides by charge number, then mass number; mean: one fictitious nucleus" },
  "composition/mass_number": { units: "1", description: "mass number A" },
  "composition/charge_number": { units: "1", description: "charge number Z" },
  "composition/nucleon_fraction": { units: "1", description: "fraction X of the nucleons in this nuclide" },
  "axes/density/lowest": { units: "g/cm^3", description: "lowest baryon mass density" },
  "axes/density/highest": { units: "g/cm^3", description: "highest baryon mass density" },
  "axes/density/blocks": { units: "1", description: "number of blocks, equal steps of ln rho" },
  "axes/temperature/lowest": { units: "K", description: "lowest temperature" },
  "axes/temperature/highest": { units: "K", description: "highest temperature" },
  "axes/temperature/blocks": { units: "1", description: "number of blocks, equal steps of ln T" },
  "cold/temperature": { units: "K", description: "F_0 is F + T s at this temperature" },
  "cold/nodes": { units: "erg/g", description: "F_0, dF_0/du, d2F_0/du2 at equal steps of u = ln rho" },
  "sheets/phase": { description: "what the sheets describe" },
  "sheets/density_level": { units: "1", description: `2^level cells along density, ${block}; -1: no block` },
  "sheets/temperature_level": { units: "1", description: `2^level cells along temperature, ${block}` },
  "sheets/exponent": { units: "1", description: `k in F = F_0 - 2^k exp L, ${block}` },
  "sheets/nodes": { units: "1", description: "node by node d^(i+j) L/(du^i dv^j), i and j from 0 to 2" },
  "sheets/freezing/factor": { units: "K (g/cm^3)^(-1/3)", description: "freezing temperature over rho^(1/3)" },
  "sheets/freezing/highest_density": { units: "g/cm^3", description: "highest density of a crystal" },
  "source/tabulated": { description: "contributions to the free energy that are in the table" },
  "source/beside": { description: "contributions that are not: to be added" },
  "source/physics": { description: "model and options of each tabulated contribution, as JSON" },
  "source/validity": { description: "where the physics holds" },
  "source/version": { description: "version of fermistate that made the table" },
  "certificate/places": { units: "1", description: "number of places where the finished table was measured" },
  "certificate/target": { units: "1", description: "error asked for" },
  "certificate/blocks_above_target": { units: "1", description: "blocks that did not reach it" },
  "certificate/quantity": { description: `quantities whose error is stated. ${relative}` },
  "certificate/errors/bound": { units: "1", description: "twice the largest error measured, by quantity" },
  "certificate/errors/largest": { units: "1", description: "largest error measured, by quantity" },
  "certificate/errors/percentile99": {
    units: "1",
    description: "on 99 % of the area in u and v the error is below, by quantity",
  },
  "certificate/errors/median": { units: "1", description: "on half of the area the error is below, by quantity" },
  "certificate/errors/worst": {
    units: "g/cm^3, K",
    description: "density and temperature of the largest error, by quantity",
  },
};

/** The meaning of an item; sheets share theirs. */
export function meaningOf(name: string): Meaning {
  return formatMeanings[name] ?? meanings[name.replace(/^sheets\/(single|liquid|crystal)\//, "sheets/")]!;
}

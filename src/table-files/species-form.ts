/** Tables of the electrons alone, as the containers know them: their items and what those mean. */
import {
  NODE_ORDER,
  type SpeciesError,
  type SpeciesQuantity,
  type SpeciesTable,
  speciesQuantities,
} from "../tables/species-table.js";
import { formatMeanings, type Meaning, type TableForm } from "./form.js";
import { float64, type Item, integer, number, numbers, type ReadItem, text, texts } from "./item.js";
import { checkSpeciesTable, SPECIES_LAYOUT } from "./species-check.js";

const width = NODE_ORDER + 1;

/** How to get numbers out of it. */
const recipe: readonly string[] = [
  "P(eta, theta) = units.pressure exp L(eta, ln theta), dyn/cm^2: the pressure of electrons alone, an ideal gas; " +
    "eta = (mu - m_e c^2)/kT, theta = kT/(m_e c^2) = T/units.rest_temperature.",
  "n = units.density exp(L) L_eta/theta, cm^-3; T s = P (L_y - eta L_eta), y = ln theta. Positrons have the same " +
    "functions at -eta - 2/theta; n_- - n_+ = rho Y_e/m_u gives eta. Both signs add in P and s.",
  "surface.nodes[k, l, i, j] is d^(i+j) L/(d eta^i d y^j) at eta = axes.degeneracy[k], y = axes.log_theta[l], " +
    "i, j = 0..6. In a cell L is the polynomial of degree 13 in eta and in y that has these derivatives at the four " +
    "corners (Hermite interpolation).",
  "Below the lowest eta_0, with d = eta - eta_0 and values at eta_0: L + d + (L_eta - 1)(e^d - 1), exact to e^(2 eta).",
  "Above the highest eta Sommerfeld's series to all orders is good to 2e-12 in every second derivative.",
  "Here the names of the items are with a point for each slash. Constants: CODATA 2022.",
];

const errorColumns = ["bound", "largest", "median"] as const;

function itemsOf(table: SpeciesTable): Item[] {
  const { certificate, degeneracy, logTheta } = table;
  const errors = speciesQuantities.map((name) => certificate.errors[name]);
  return [
    integer(layoutItem, table.layout),
    float64("axes/degeneracy", degeneracy, [degeneracy.length]),
    float64("axes/log_theta", logTheta, [logTheta.length]),
    float64("surface/nodes", table.nodes, [degeneracy.length, logTheta.length, width, width]),
    number("units/rest_temperature", table.restTemperature),
    number("units/pressure", table.pressureUnit),
    number("units/density", table.densityUnit),
    text("source/version", table.version),
    integer("certificate/places", certificate.places),
    texts("certificate/quantity", speciesQuantities),
    ...errorColumns.map((column) =>
      numbers(
        `certificate/errors/${column}`,
        errors.map((one) => one[column]),
      ),
    ),
    float64("certificate/errors/worst", Float64Array.from(errors.flatMap((one) => one.worst)), [errors.length, 2]),
  ];
}

function tableOf(read: ReadItem): SpeciesTable {
  const one = (name: string): number => read(name, "float64", [])[0]!;
  const count = speciesQuantities.length;
  const degeneracy = read("axes/degeneracy", "float64", [undefined]);
  const logTheta = read("axes/log_theta", "float64", [undefined]);
  const nodes = read("surface/nodes", "float64", [degeneracy.length, logTheta.length, width, width]);
  const places = read("certificate/places", "int32", [])[0]!;
  const columns = errorColumns.map((column) => read(`certificate/errors/${column}`, "float64", [count]));
  const worst = read("certificate/errors/worst", "float64", [count, 2]);
  const errors = speciesQuantities.map((name, i): [SpeciesQuantity, SpeciesError] => {
    const [bound, largest, median] = columns.map((column) => column[i]!) as [number, number, number];
    return [name, { bound, largest, median, worst: [worst[2 * i]!, worst[2 * i + 1]!] }];
  });
  return {
    layout: read(layoutItem, "int32", [])[0] as SpeciesTable["layout"],
    degeneracy,
    logTheta,
    nodes,
    restTemperature: one("units/rest_temperature"),
    pressureUnit: one("units/pressure"),
    densityUnit: one("units/density"),
    version: read("source/version", "text", [])[0]!,
    certificate: { places, errors: Object.fromEntries(errors) as SpeciesTable["certificate"]["errors"] },
  };
}

const layoutItem = "format/electron_table_layout";

const meanings: Readonly<Record<string, Meaning>> = {
  [layoutItem]: { units: "1", description: "version of this layout" },
  "axes/degeneracy": { units: "1", description: "nodes of eta = (mu - m_e c^2)/kT" },
  "axes/log_theta": { units: "1", description: "nodes of y = ln(kT/m_e c^2)" },
  "surface/nodes": {
    units: "1",
    description: "by eta, y, i, j: d^(i+j) L/(d eta^i d y^j) of L = ln(P/units.pressure), i and j from 0 to 6",
  },
  "units/rest_temperature": { units: "K", description: "m_e c^2/k: theta is T over this" },
  "units/pressure": { units: "dyn/cm^2", description: "m_e c^2/(pi^2 lambdabar^3)" },
  "units/density": { units: "cm^-3", description: "1/(pi^2 lambdabar^3), lambdabar = hbar/(m_e c)" },
  "source/version": { description: "version of fermistate that made the table" },
  "certificate/places": { units: "1", description: "number of places where the finished table was measured" },
  "certificate/quantity": {
    description:
      "quantities of electrons alone whose relative error is stated: P, n, s, dn/d eta at constant T, c_v, n dP/dn at " +
      "constant T, T dP/dT at constant n",
  },
  "certificate/errors/bound": { units: "1", description: "twice the largest error measured, by quantity" },
  "certificate/errors/largest": { units: "1", description: "largest error measured, by quantity" },
  "certificate/errors/median": {
    units: "1",
    description: "on half of the area in eta and y the error is below, by quantity",
  },
  "certificate/errors/worst": { units: "1, K", description: "eta and temperature of the largest error, by quantity" },
};

/** Items, their meaning and their check. */
export const speciesForm: TableForm<SpeciesTable> = {
  titleOf: () => "Pressure of electrons alone as a table over degeneracy and temperature, for any composition",
  recipe,
  layout: { item: layoutItem, version: SPECIES_LAYOUT },
  itemsOf,
  tableOf,
  check: checkSpeciesTable,
  meaningOf: (name) => formatMeanings[name] ?? meanings[name]!,
};

/** A misspelt option is refused with the names that exist, everywhere: left unread, it would change the answer silently. */
import { describe, expect, test } from "vitest";
import * as barotropes from "../src/barotropes/index.js";
import * as certify from "../src/certify/index.js";
import * as charts from "../src/charts/index.js";
import { compare } from "../src/compare/index.js";
import * as grids from "../src/grids/index.js";
import * as core from "../src/index.js";
import { parallelEvaluator } from "../src/parallel/index.js";
import * as structure from "../src/structure/index.js";
import { buildInFolder } from "../src/table-build/index.js";

const matter = core.whiteDwarfMatter();
const carbon = core.composition({ C12: 1 });
const white = barotropes.polytrope({ constant: 1e13, index: 1.5 });
const small = grids.grid(matter, carbon, { density: [1e6], temperature: [1e7] });
const given = { density: 1e6, specificEnergy: 1e17 };
const column = Float64Array.of(1e6);
const slip = { slip: 1 };

/** Each call, and one name that the message must offer. */
const calls: readonly [name: string, call: (options: never) => unknown, offered: string][] = [
  ["whiteDwarfMatter", core.whiteDwarfMatter, "coulomb"],
  ["whiteDwarfMatter.coulomb", (coulomb) => core.whiteDwarfMatter({ coulomb }), "polarisation"],
  ["coulombPlasma", core.coulombPlasma, "lattice"],
  ["coldCorrections", core.coldCorrections, "thomasFermi"],
  ["idealIons", core.idealIons, "freeNeutrons"],
  ["fermionGas", core.fermionGas, "species"],
  ["composition", (options) => core.composition({ C12: 1 }, options), "normalise"],
  ["compositionDerivatives", (o) => core.compositionDerivatives(matter, 1e6, 1e7, carbon, o), "restMass"],
  ["solve", (options) => core.solve(matter, carbon, given, options), "guess"],
  ["solve, guess", (guess) => core.solve(matter, carbon, given, { guess }), "temperature"],
  [
    "solveColumns, guess",
    (guess) => core.solveColumns(matter, { composition: carbon, density: column, specificEnergy: column, guess }, {}),
    "temperature",
  ],
  ["regime", (options) => core.regime(1e6, 1e7, carbon, options), "phase"],
  ["barotrope", (options) => barotropes.barotrope(matter, carbon, options), "specificEntropy"],
  ["polytrope", barotropes.polytrope, "gamma"],
  ["piecewisePolytrope", barotropes.piecewisePolytrope, "gammas"],
  ["joinBarotropes", (options) => barotropes.joinBarotropes(white, white, options), "pressure"],
  ["fitPiecewisePolytrope", (options) => barotropes.fitPiecewisePolytrope(white, options), "pieces"],
  ["fitSmoothBarotrope", (options) => barotropes.fitSmoothBarotrope(white, options), "terms"],
  ["outerCrust", barotropes.outerCrust, "electronBinding"],
  ["hydrostaticStar", (options) => structure.hydrostaticStar(white, options), "centralDensity"],
  ["massRadiusSequence", (options) => structure.massRadiusSequence(white, options), "count"],
  ["starOfMass", (options) => structure.starOfMass(white, 1e33, options), "range"],
  ["maximumMass", (options) => structure.maximumMass(white, options), "range"],
  ["starFigures", structure.starFigures, "mass"],
  ["limitingMassLadder", (options) => structure.limitingMassLadder(carbon, options), "temperature"],
  ["chandrasekharMass", (options) => structure.chandrasekharMass(2, options), "massUnit"],
  ["degenerateMassLimit", (options) => structure.degenerateMassLimit(2, options), "massUnit"],
  ["grid", (options) => grids.grid(matter, carbon, options), "quantities"],
  ["logarithmicAxis", grids.logarithmicAxis, "pointsPerDecade"],
  ["linearAxis", grids.linearAxis, "points"],
  ["gridToJson", (texts) => grids.gridToJson(small, texts), "note"],
  ["gridToCsvMetadata", (texts) => grids.gridToCsvMetadata(small, "a.csv", texts), "note"],
  ["gridToNpz", (texts) => grids.gridToNpz(small, texts), "note"],
  ["chartGrid", (options) => charts.chartGrid(small, options), "quantity"],
  [
    "chartMap",
    (options) =>
      charts.chartMap({ density: [1, 2], temperature: [1, 2], values: new Float64Array(4), label: "x" }, options),
    "scale",
  ],
  ["certify", (options) => certify.certify(matter, carbon, options), "quantities"],
  ["certifyState", (options) => certify.certifyState(matter, carbon, 1e6, 1e7, options), "digits"],
  ["referenceElectronGas", (o) => certify.referenceElectronGas({ density: 1, temperature: 1e7 } as never, o), "digits"],
  ["compare", (options) => compare(matter, matter, options), "consistency"],
  ["parallelEvaluator", (options) => parallelEvaluator({ whiteDwarfMatter: {} }, options), "threads"],
  ["buildInFolder", (options) => buildInFolder("nowhere", {} as never, options), "shard"],
];

describe("an option that does not exist is refused with those that do", () => {
  test.each(calls)("%s", async (_name, call, offered) => {
    // Functions that promise reject; the others throw.
    await expect(async () => call(slip as never)).rejects.toMatchObject({ code: "invalid-option", given: "slip" });
    await expect(async () => call(slip as never)).rejects.toThrow(offered);
  });
});

describe("options that are no object", () => {
  const strangers: readonly unknown[] = [null, 3, "yes", [1], () => true];
  const isOptional = ["whiteDwarfMatter", "coulombPlasma", "coldCorrections", "outerCrust", "solve", "certifyState"];
  test.each(calls.filter(([name]) => isOptional.includes(name)))("%s", (_name, call) => {
    for (const stranger of strangers) {
      expect(() => call(stranger as never), String(stranger)).toThrow(
        expect.objectContaining({ code: "invalid-option" }),
      );
    }
  });
});

test("whiteDwarfMatter: what `coulomb` may be, and no function in its place", () => {
  for (const coulomb of [null, 1, "off", [], () => true]) {
    expect(() => core.whiteDwarfMatter({ coulomb: coulomb as never })).toThrow(
      expect.objectContaining({ code: "invalid-option", argument: "options.coulomb" }),
    );
  }
  expect(() => core.whiteDwarfMatter({ radiation: 1 as never })).toThrow(
    expect.objectContaining({ code: "invalid-option", argument: "options.radiation", allowed: "true or false" }),
  );
  expect(core.whiteDwarfMatter({ coulomb: { lattice: "fcc" } }).name).toContain("Coulomb plasma");
});

/**
 * Makes docs/guide/compare-pressure.svg and docs/guide/compare-maxwell.svg, and prints what the guide quotes. The same library
 * gives the same bytes.
 *
 * Run from the root: npx tsx docs/generators/compare-maps.ts
 */
import { writeFileSync } from "node:fs";
import { compare } from "../../src/compare/compare.js";
import { comparisonMap } from "../../src/compare/forms.js";
import { comparisonSummary } from "../../src/compare/text.js";
import { logarithmicAxis } from "../../src/grids/axes.js";
import { type Composition, composition } from "../../src/matter/composition.js";
import type { EquationOfState, State } from "../../src/thermodynamics/equation-of-state.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";

const matter = composition({ C12: 0.5, O16: 0.5 });
const full = whiteDwarfMatter();

/** A table of ten points per decade, each quantity interpolated by itself: bilinear in the logarithms. */
function tabulated(source: EquationOfState, pointsPerDecade: number): EquationOfState {
  const known = new Map<string, State>();
  const node = (i: number, j: number, mixture: Composition): State => {
    const key = `${i} ${j}`;
    const state = known.get(key) ?? source.state(10 ** (i / pointsPerDecade), 10 ** (j / pointsPerDecade), mixture);
    known.set(key, state);
    return state;
  };
  const state: EquationOfState["state"] = (density, temperature, mixture) => {
    const [x, y] = [Math.log10(density) * pointsPerDecade, Math.log10(temperature) * pointsPerDecade];
    const [i, j] = [Math.floor(x), Math.floor(y)];
    const corners = [
      node(i, j, mixture),
      node(i + 1, j, mixture),
      node(i, j + 1, mixture),
      node(i + 1, j + 1, mixture),
    ];
    const [u, v] = [x - i, y - j];
    const weights = [(1 - u) * (1 - v), u * (1 - v), (1 - u) * v, u * v];
    const between = (name: keyof State): number => {
      const values = corners.map((one) => one[name] as number);
      const isPositive = values.every((one) => one > 0);
      const sum = values.reduce((all, one, k) => all + weights[k]! * (isPositive ? Math.log(one) : one), 0);
      return isPositive ? Math.exp(sum) : sum;
    };
    const names = Object.keys(corners[0]!).filter((name) => typeof corners[0]![name as keyof State] === "number");
    return {
      ...Object.fromEntries(names.map((name) => [name, between(name as keyof State)])),
      density,
      temperature,
      composition: mixture,
      crystalFraction: 0,
    } as State;
  };
  return { ...source, name: `table of ${pointsPerDecade} points per decade`, state };
}

const wide = {
  composition: matter,
  density: logarithmicAxis({ from: 1e4, to: 1e10, points: 180 }),
  temperature: logarithmicAxis({ from: 1e6, to: 1e10, points: 120 }),
  quantities: ["pressure"] as const,
};
const interactions = compare(full, whiteDwarfMatter({ coulomb: false }), {
  ...wide,
  names: ["interacting plasma", "ideal plasma"],
  consistency: false,
});
console.log(comparisonSummary(interactions).join("\n"));
writeFileSync(
  "docs/guide/compare-pressure.svg",
  comparisonMap(interactions, "pressure", { title: "Pressure: ideal against interacting plasma, carbon and oxygen" }),
);

const liquid = whiteDwarfMatter({ coulomb: { phase: "liquid" } });
const table = compare(liquid, tabulated(liquid, 10), {
  ...wide,
  // The middles of the cells, where a table is worst.
  density: logarithmicAxis({ from: 10 ** 4.05, to: 10 ** 9.95, points: 60 }),
  temperature: logarithmicAxis({ from: 10 ** 7.05, to: 10 ** 9.95, points: 30 }),
  names: ["direct", "table"],
});
console.log(comparisonSummary(table).join("\n"));
writeFileSync(
  "docs/guide/compare-maxwell.svg",
  comparisonMap(table, "pressure", {
    show: { of: "second", relation: "maxwell" },
    title: "By how much a table of ten points per decade misses ds/d\u03c1 = \u2212(dP/dT)/\u03c1\u00b2",
    note: "Every quantity interpolated by itself, linear in logarithms; in the middles of the cells; carbon and oxygen, liquid.",
  }),
);

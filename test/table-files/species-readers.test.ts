/**
 * docs/electron_table.c and docs/electron_table.py on a file of this library, against the table's own contribution and
 * against electronPositronGas(): other code, other solver, same numbers.
 */
import { execFileSync, spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { composition } from "../../src/matter/composition.js";
import { speciesTableToNpz } from "../../src/table-files/index.js";
import { buildSpeciesTable, speciesTableContribution } from "../../src/tables/index.js";
import { combine } from "../../src/thermodynamics/combine.js";
import type { EquationOfState } from "../../src/thermodynamics/equation-of-state.js";
import { Measured, uniform } from "../measured.js";

const folder = mkdtempSync(join(tmpdir(), "fermistate-electrons-"));
afterAll(() => rmSync(folder, { recursive: true }));
const path = join(folder, "electrons.npz");
const table = buildSpeciesTable();
const matter = composition({ C12: 0.5, O16: 0.5 });
const print = process.env["FERMISTATE_PRINT"] !== undefined;

/** Electron densities and temperatures: the onset of pairs, pairs alone, either side of the table, then at random. */
const random = uniform(17);
const places: readonly (readonly [density: number, temperature: number])[] = [
  [3e25, 1e9],
  [1e10, 1e9],
  [1e5, 5e9],
  [1e20, 2e10],
  [1e36, 1e8],
  [1e24, 1.0001e5],
  [1e5, 1e6],
  [1e30, 1e7],
  [5.5625064027749532e29, 72417717940.562302], // nu = 5e-5: eta cannot resolve it
  ...Array.from({ length: 92 }, () => [10 ** (9 + 28 * random()), 10 ** (5.001 + 7.998 * random())] as const),
];
const words = places.flat().map((number) => number.toPrecision(17));

const names = [
  "pressure",
  "entropy",
  "energy",
  "heat_capacity",
  "pressure_by_density",
  "pressure_by_temperature",
  "eta",
  "positrons",
] as const;

/** The same numbers by the library, per cm^3. */
function expected(eos: EquationOfState, electrons: number, temperature: number): readonly number[] {
  const density = electrons / matter.electronsPerGram;
  const state = eos.state(density, temperature, matter);
  return [
    state.pressure,
    density * state.specificEntropy,
    density * state.specificEnergy,
    density * state.heatCapacityV,
    state.pressureByDensity / matter.electronsPerGram,
    state.pressureByTemperature,
    state.electronDegeneracy!,
    state.positronDensity!,
  ];
}

/** Errors of a reader's lines, relative; of eta to max(1, |eta|). */
function measure(lines: readonly (readonly number[])[], eos: EquationOfState): Measured {
  const measured = new Measured();
  expect(lines).toHaveLength(places.length);
  lines.forEach((line, k) => {
    const [electrons, temperature] = places[k]!;
    const truth = expected(eos, electrons, temperature);
    names.forEach((name, i) => {
      const value = truth[i]!;
      if (name === "positrons" && value < 1e-250) return;
      const scale = name === "eta" ? Math.max(1, Math.abs(value)) : Math.abs(value);
      measured.compare(name, line[i]!, value, `${electrons} per cm^3, ${temperature} K`, scale);
    });
  });
  return measured;
}

const has = (command: string, ...options: string[]): boolean => spawnSync(command, options).status === 0;
const isRequired = process.env["CI"] === "true";
const noCompiler = !isRequired && !has("cc", "--version");
if (noCompiler) console.warn("cc is missing: the test of docs/electron_table.c is skipped");
const python = ["/usr/bin/python3", "python3"].find((command) => has(command, "-c", "import numpy"));
const noPython = !isRequired && python === undefined;
if (noPython) console.warn("python3 with numpy is missing: the test of docs/electron_table.py is skipped");

const readers: Readonly<Record<string, { readonly skip: boolean; run(...given: string[]): string }>> = {
  C: {
    skip: noCompiler,
    run: (...given) =>
      execFileSync(join(folder, "electron_table"), given, { encoding: "utf8", stdio: "pipe" as const }),
  },
  Python: {
    skip: noPython,
    run: (...given) =>
      execFileSync(python!, ["docs/electron_table.py", ...given], { encoding: "utf8", stdio: "pipe" as const }),
  },
};

beforeAll(async () => {
  writeFileSync(path, await speciesTableToNpz(table));
  if (noCompiler) return;
  const options = ["-std=c99", "-O2", "-Wall", "-Wextra", "-Werror"];
  execFileSync("cc", [...options, "docs/electron_table.c", "-o", join(folder, "electron_table"), "-lm"]);
});

describe.each(Object.entries(readers))("in %s", (_language, { skip, run }) => {
  test.skipIf(skip)("the same gas as the table's contribution and as the exact one", () => {
    const text = run(path, ...words);
    const lines = text
      .trim()
      .split("\n")
      .filter((line) => /\d/.test(line))
      .map((line) =>
        line
          .split(" ")
          .filter((word) => /^[-\d]/.test(word))
          .map(Number),
      );
    const own = measure(lines, combine(speciesTableContribution(table)));
    const exact = measure(lines, combine(electronPositronGas()));
    if (print) console.log(`table\n${own.table()}\nexact\n${exact.table()}`);
    for (const [measured, secondDerivatives] of [
      [own, 1e-11],
      [exact, 2e-10],
    ] as const) {
      for (const name of ["pressure", "energy", "eta"]) measured.expectBelow(name, 4e-14, 3e-15);
      for (const name of ["positrons", "pressure_by_density"]) measured.expectBelow(name, 6e-13, 1e-14);
      measured.expectBelow("entropy", 1e-12, 3e-15);
      measured.expectBelow("heat_capacity", secondDerivatives, 5e-15);
      measured.expectBelow("pressure_by_temperature", secondDerivatives, 5e-15);
    }
  });

  test.skipIf(skip)("the numbers that docs/guide/electron-table.md prints", () => {
    const text = run(path, "3.0110703768336843e25", "1e9");
    expect(text).toContain("1.50040841355338");
    expect(text).toContain("-5.9021481818664");
  });

  test.skipIf(skip)("another file, a damaged one and a temperature outside are refused", () => {
    const other = join(folder, "other.npz");
    writeFileSync(other, "not a table");
    expect(() => run(other, "1e25", "1e8")).toThrow();
    expect(() => run(path, "1e25", "1e4")).toThrow(/outside the table/);
  });
});

test.skipIf(noPython)("Python finds the checksum good, and that of a file of another number bad", async () => {
  expect(readers["Python"]!.run(path)).toContain("heatCapacity: 6");
  const file = join(folder, "changed.npz");
  const code = [
    "import numpy, sys",
    "data = dict(numpy.load(sys.argv[1]))",
    "data['surface.nodes'][3, 4, 1, 1] += 1e-9",
    "numpy.savez(sys.argv[2], **data)",
  ].join("\n");
  execFileSync(python!, ["-c", code, path, file]);
  expect(() => readers["Python"]!.run(file)).toThrow(/checksum/);
});

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
import { arraysToNpz } from "../../src/grids/npz.js";
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
  [6.1e3, 1e9], // the ends of the library's own domain
  [6.1e3, 1.0001e5],
  [3e41, 1.0001e5],
  [3e41, 0.9999e13],
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

const readers: Readonly<Record<string, { readonly skip: boolean; readonly command: readonly string[] }>> = {
  C: { skip: noCompiler, command: [join(folder, "electron_table")] },
  Python: { skip: noPython, command: [python ?? "python3", "docs/electron_table.py"] },
};

/** Both programs say the same. */
const other = join(folder, "other.npz");
const cut = join(folder, "cut.npz");
const grid = join(folder, "arrays.npz");
const form = "an electron table as speciesTableToNpz of fermistate writes it";
const densities = "1e3 to 1e42 net electrons per cm^3";
const temperatures = "1e+05 to 1e+13 K";
const refusals: readonly (readonly [what: string, given: readonly string[], message: string])[] = [
  ["nothing", [], "arguments: given none; allowed: electrons.npz [DENSITY TEMPERATURE]...: net electrons per cm^3, K"],
  [
    "no file",
    [join(folder, "no.npz"), "1e25", "1e8"],
    `file: given FOLDER/no.npz, and it cannot be read; allowed: ${form}`,
  ],
  ["a folder", [folder, "1e25", "1e8"], `file: given FOLDER, and it cannot be read; allowed: ${form}`],
  ["a text", [other, "1e25", "1e8"], `file: given FOLDER/other.npz, and it is no .npz file; allowed: ${form}`],
  ["half a file", [cut, "1e25", "1e8"], `file: given FOLDER/cut.npz, and it is cut or damaged; allowed: ${form}`],
  [
    "another .npz file",
    [grid, "1e25", "1e8"],
    `file: given FOLDER/arrays.npz, and it is no electron table of layout 2; allowed: ${form}`,
  ],
  ["a word", [path, "abc", "1e8"], `density: given abc; allowed: ${densities}`],
  ["a number with a tail", [path, "1e25x", "1e8"], `density: given 1e25x; allowed: ${densities}`],
  ["an empty word", [path, "1e25", ""], `temperature: given ; allowed: ${temperatures}`],
  ["density -1", [path, "-1", "1e9"], `density: given -1; allowed: ${densities}`],
  ["density 0", [path, "0", "1e9"], `density: given 0; allowed: ${densities}`],
  ["density inf", [path, "inf", "1e9"], `density: given inf; allowed: ${densities}`],
  ["density nan", [path, "nan", "1e9"], `density: given nan; allowed: ${densities}`],
  ["density 1e200", [path, "1e200", "1e9"], `density: given 1e200; allowed: ${densities}`],
  ["a cold point", [path, "1e25", "1e4"], `temperature: given 1e4; allowed: ${temperatures}`],
  [
    "a hot point after a good one",
    [path, "1e25", "1e9", "1e25", "2e13"],
    `temperature: given 2e13; allowed: ${temperatures}`,
  ],
  ["temperature -1", [path, "1e25", "-1"], `temperature: given -1; allowed: ${temperatures}`],
  ["half a point", [path, "1e25"], "temperature: given none; allowed: one after each density"],
];

/**
 * Turns one bit of every 211th byte of a file and of each of its first 600 and last 2600 bytes (which has the directory), then cuts
 * it to 60 lengths. Prints how many files were refused, gave the same table, another one, and how many of those accepted had the
 * bit within the nodes.
 */
const damageProgram = `
#include "electron_table.c"
static int same(const struct electron_table *a, const struct electron_table *b) {
  return a->rows == b->rows && a->columns == b->columns && memcmp(a->eta, b->eta, a->rows * sizeof(double)) == 0 &&
         memcmp(a->y, b->y, a->columns * sizeof(double)) == 0 && a->rest == b->rest && a->pressure == b->pressure &&
         a->density == b->density && memcmp(a->nodes, b->nodes, 49 * sizeof(double) * a->rows * a->columns) == 0;
}
static struct electron_table good;
static int results[4];
static void attempt(const char *path, int within) {
  struct electron_table other;
  if (electron_table_read(path, &other) != 0) {
    results[0]++;
    return;
  }
  results[same(&good, &other) ? 1 : 2]++;
  results[3] += within;
  electron_table_free(&other);
}
static int put(const char *path, const char *mode, size_t at, const unsigned char *bytes, size_t count) {
  FILE *file = fopen(path, mode);
  if (file == NULL || fseek(file, (long)at, SEEK_SET) != 0 || fwrite(bytes, 1, count, file) != count) return -1;
  return fclose(file);
}
int main(int count, char **words) {
  size_t length;
  unsigned char *bytes = count == 3 ? bytes_of(words[1], &length) : NULL;
  if (bytes == NULL || electron_table_read(words[1], &good) != 0) return 2;
  if (put(words[2], "wb", 0, bytes, length) != 0) return 2;
  for (size_t at = 0; at < length; at += at < 600 || at > length - 2600 ? 1 : 211) {
    unsigned char turned = bytes[at] ^ 1 << at % 8;
    if (put(words[2], "r+b", at, &turned, 1) != 0) return 2;
    attempt(words[2], at > 2000 && at < 290000);
    if (put(words[2], "r+b", at, bytes + at, 1) != 0) return 2;
  }
  for (size_t k = 0; k < 60; k++) {
    size_t kept = k < 30 ? k * length / 30 : length - 1 - (k - 30) * 3;
    if (put(words[2], "wb", 0, bytes, kept) != 0) return 2;
    attempt(words[2], 1);
  }
  printf("%d %d %d %d\\n", results[0], results[1], results[2], results[3]);
  return 0;
}
`;

beforeAll(async () => {
  const bytes = await speciesTableToNpz(table);
  writeFileSync(path, bytes);
  writeFileSync(other, "not a table");
  writeFileSync(cut, bytes.subarray(0, 200_000));
  writeFileSync(grid, arraysToNpz({ pressure: { shape: [2], values: Float64Array.of(1e23, 2e23) } }));
  if (noCompiler) return;
  const options = ["-std=c99", "-O2", "-Wall", "-Wextra", "-Werror"];
  execFileSync("cc", [...options, "docs/electron_table.c", "-o", join(folder, "electron_table"), "-lm"]);
});

describe.each(Object.entries(readers))("in %s", (_language, { skip, command: [program, ...first] }) => {
  const outcome = (given: readonly string[]) => spawnSync(program!, [...first, ...given], { encoding: "utf8" });
  const run = (...given: string[]): string => {
    const { status, stdout, stderr } = outcome(given);
    expect(stderr).toBe("");
    expect(status).toBe(0);
    return stdout;
  };

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

  test.skipIf(skip).each(refusals)("%s is refused with what was given and what is allowed", (_, given, message) => {
    const { status, stdout, stderr } = outcome(given);
    expect(stderr.trim()).toBe(message.replaceAll("FOLDER", folder));
    expect(status).toBe(1);
    expect(stdout).toBe("");
  });
});

/** Bits turned and files cut. A cyclic code finds every single bit (Peterson and Brown 1961, Proc. IRE 49, 228, from memory). */
describe("damaged files are refused or give the same table", () => {
  test.skipIf(noCompiler)("in C", () => {
    const source = join(folder, "damage.c");
    writeFileSync(source, damageProgram);
    const program = join(folder, "damage");
    const options = ["-std=c99", "-O2", "-Wall", "-Wextra", "-Werror", "-D", "ELECTRON_TABLE_NO_MAIN", "-I", "docs"];
    execFileSync("cc", [...options, source, "-o", program, "-lm"]);
    const text = execFileSync(program, [path, join(folder, "damaged.npz")], { encoding: "utf8" });
    const [refused, same, changed, ofNodes] = text.trim().split(" ").map(Number);
    if (print) console.log(`C: ${text}`);
    expect(changed).toBe(0);
    expect(ofNodes).toBe(0);
    expect(refused).toBeGreaterThan(3000);
    expect(same).toBeLessThan(1500); // the directory, dates and versions carry nothing that is used
  });

  test.skipIf(noPython)("in Python", () => {
    const code = [
      "import sys",
      "sys.path.insert(0, 'docs')",
      "sys.dont_write_bytecode = True",
      "from electron_table import ElectronTable, Refused",
      "content = open(sys.argv[1], 'rb').read()",
      "good = ElectronTable(sys.argv[1])",
      "refused = same = changed = 0",
      "for k in range(400):",
      "    bytes_ = bytearray(content)",
      "    at = (k * 7919 + 10) % len(content) if k < 300 else len(content) - 1 - 29 * (k - 300)",
      "    bytes_[at] ^= 1 << k % 8",
      "    if k % 10 == 9: del bytes_[at:]",
      "    open(sys.argv[2], 'wb').write(bytes_)",
      "    try:",
      "        table = ElectronTable(sys.argv[2])",
      "    except Refused:",
      "        refused += 1",
      "        continue",
      "    equal = all((getattr(table, n) == getattr(good, n)).all() for n in ('eta', 'y', 'nodes'))",
      "    equal = equal and all(getattr(table, n) == getattr(good, n) for n in ('rest', 'pressure', 'density'))",
      "    same += equal",
      "    changed += not equal",
      "print(refused, same, changed)",
    ].join("\n");
    const text = execFileSync(python!, ["-c", code, path, join(folder, "damaged.npz")], { encoding: "utf8" });
    if (print) console.log(`Python: ${text}`);
    const [refused, , changed] = text.trim().split(" ").map(Number);
    expect(changed).toBe(0);
    expect(refused).toBeGreaterThan(300);
  });
});

test.skipIf(noPython)("Python finds the checksum good, and that of a file of another number bad", () => {
  const run = (file: string) => spawnSync(python!, ["docs/electron_table.py", file], { encoding: "utf8" });
  expect(run(path).stdout).toContain("heatCapacity: 6");
  const file = join(folder, "changed.npz");
  const code = [
    "import numpy, sys",
    "data = dict(numpy.load(sys.argv[1]))",
    "data['surface.nodes'][3, 4, 1, 1] += 1e-9",
    "numpy.savez(sys.argv[2], **data)",
  ].join("\n");
  execFileSync(python!, ["-c", code, path, file]);
  expect(run(file)).toMatchObject({ status: 1, stderr: expect.stringMatching(/does not have the checksum/) });
});

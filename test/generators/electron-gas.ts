/**
 * Writes the reference values of the ideal electron-positron gas that the fast code is tested against.
 *
 *     npx tsx test/generators/electron-gas.ts compute <folder> <process> <processes>
 *     npx tsx test/generators/electron-gas.ts write <folder>
 *
 * `compute` may run in several processes at once; each appends its share of the points, in random order, to
 * <folder>/*.part<process>.csv. `write` puts them in order into test/fixtures. The points follow from a fixed seed;
 * the values come from src/certify (double-exponential quadrature in decimal.js, 25 digits), which shares nothing with
 * src/fermi-gas. About 0.4 s of processor time a point; an interrupted run goes on where it stopped. Another engine's exp
 * and log may move a point by some 1e-16, which does not matter: the files state where the values belong to.
 */
import { appendFileSync, existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import type { Decimal } from "decimal.js";
import { type ElectronGasValues, referenceElectronGas } from "../../src/certify/index.js";
import { neighbourhoodPoints, type Point, referencePoints } from "./electron-gas-points.js";

const columns: readonly [heading: string, name: keyof ElectronGasValues][] = [
  ["eta", "degeneracyParameter"],
  ["nu", "reducedChemicalPotential"],
  ["n_plus", "positronDensity"],
  ["P", "pressure"],
  ["e_pair", "energyDensity"],
  ["s", "entropyDensity"],
  ["dP_dn", "pressureByDensity"],
  ["dP_dT", "pressureByTemperature"],
  ["c_v", "heatCapacityDensity"],
  ["d2P_dn2", "pressureByDensityTwice"],
  ["d2P_dndT", "pressureByDensityAndTemperature"],
  ["d2P_dT2", "pressureByTemperatureTwice"],
  ["d2s_dT2", "entropyByTemperatureTwice"],
  ["d3P_dndT2", "pressureByDensityAndTemperatureTwice"],
];
const digits = 25;
const printedDigits = 20;
const files = { "electron-gas-reference": referencePoints, "electron-gas-neighbourhood": neighbourhoodPoints };
const fixtures = join(dirname(fileURLToPath(import.meta.url)), "..", "fixtures");

const heading = ["region", "n_e", "T", ...columns.map(([name]) => name)].join(",");
const about = [
  "# Ideal electron-positron gas, cgs, CODATA 2022. n_e [cm^-3] = n_minus - n_plus and T [K] are exact IEEE doubles.",
  "# Made by test/generators/electron-gas.ts: double-exponential quadrature in decimal.js, 25 digits, two resolutions.",
  "# eta = (mu - mc^2)/kT; nu = mu/kT; e_pair = kinetic + 2 n_plus mc^2; c_v = T ds/dT per volume; dT at fixed n_e.",
  `# ${printedDigits} significant digits, fewer where the error estimate (at least 1e-29 of the natural scale) leaves fewer; 0: none.`,
];

const [command, folder, process0, processes] = process.argv.slice(2);
if (command === "compute" && folder !== undefined) compute(folder, Number(process0 ?? 0), Number(processes ?? 1));
else if (command === "write" && folder !== undefined) write(folder);
else throw new Error("usage: compute <folder> <process> <processes> | write <folder>");

function compute(into: string, mine: number, of: number): void {
  mkdirSync(into, { recursive: true });
  for (const [file, makePoints] of Object.entries(files)) {
    const part = join(into, `${file}.part${mine}.csv`);
    if (!existsSync(part)) writeFileSync(part, `index,${heading}\n`);
    const done = new Set(rows(part).map((line) => Number(line.split(",")[0])));
    const points = makePoints();
    const share = shuffled(points.map((_, index) => index)).filter((_, place) => place % of === mine);
    for (const index of share) if (!done.has(index)) appendFileSync(part, `${index},${row(points[index]!)}\n`);
  }
}

function write(from: string): void {
  for (const [file, makePoints] of Object.entries(files)) {
    const parts = readdirSync(from).filter((name) => name.startsWith(`${file}.part`));
    const all = parts.flatMap((name) => rows(join(from, name))).map((line) => line.split(/,(.*)/s) as [string, string]);
    all.sort(([a], [b]) => Number(a) - Number(b));
    if (all.length !== makePoints().length)
      throw new Error(`${file}: ${all.length} points, not ${makePoints().length}`);
    writeFileSync(join(fixtures, `${file}.csv`), `${[...about, heading, ...all.map(([, line]) => line)].join("\n")}\n`);
  }
}

/** Complete lines below the heading; a line cut short by an interruption has no newline and is not counted. */
function rows(path: string): string[] {
  return readFileSync(path, "utf8").split("\n").slice(1, -1);
}

function row({ region, n, T }: Point): string {
  const gas = referenceElectronGas({ netElectronDensity: n, temperature: T }, { digits });
  const values = columns.map(([, name]) => printed(gas[name], gas.errors[name]));
  return [region, String(n), String(T), ...values].join(",");
}

/** At most 20 digits, and none that the error estimate does not cover. */
function printed(value: Decimal, error: Decimal): string {
  if (value.isZero() || value.abs().lte(error)) return "0";
  const sure = error.isZero() ? printedDigits : value.e - error.e - 1;
  if (sure < 1) return "0";
  return value.toSignificantDigits(Math.min(printedDigits, sure)).toExponential().replace("e+", "e");
}

/** Fisher-Yates with a fixed seed, so that the first rows of every part cover all regions. */
function shuffled(items: number[]): number[] {
  let state = 12345;
  for (let i = items.length - 1; i > 0; i--) {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    const j = Math.floor((state / 2 ** 32) * (i + 1));
    [items[i], items[j]] = [items[j]!, items[i]!];
  }
  return items;
}

/**
 * Makes src/matter/nuclide-table.ts from the AME2020 mass table (file mass.mas20, unrounded, 3 March 2021):
 *
 *   node docs/generators/nuclides.mjs mass.mas20.txt > src/matter/nuclide-table.ts
 *
 * The file is distributed by its authors: Wang, Huang, Kondev, Audi & Naimi 2021, Chin. Phys. C 45, 030003; Huang et
 * al. 2021, 45, 030002. Columns are those of its Fortran format line, counted from 0 here. Anything irregular stops
 * the run.
 */
import { createHash } from "node:crypto";
import { readFileSync } from "node:fs";

const sha256 = "5ffac3813cb24e8410d17c6bf8fca3deb3eb4a9130cb7138823c907ad3170c73";
const headLines = 35;
const nuclides = 3558;

const path = process.argv[2];
if (path === undefined) throw new Error("usage: node docs/generators/nuclides.mjs FILE");
const bytes = readFileSync(path);
const found = createHash("sha256").update(bytes).digest("hex");
if (found !== sha256) throw new Error(`${path}: sha256 ${found}, expected ${sha256}`);

/** @param {unknown} condition @param {string} line */
function demand(condition, line) {
  if (!condition) throw new Error(`irregular line: ${line}`);
}

/** Row per charge number: "symbol firstMassNumber entry entry ...". @type {string[][]} */
const rows = [];
for (const line of bytes.toString("latin1").split("\n").slice(headLines)) {
  if (line.trim() === "") continue;
  const [neutrons, charge, mass] = [line.slice(4, 9), line.slice(9, 14), line.slice(14, 19)].map(Number);
  demand(neutrons + charge === mass, line);
  const symbol = line.slice(20, 23).trim();
  const whole = Number(line.slice(106, 109));
  const [micro, deviation] = [line.slice(110, 123).trim(), line.slice(123).trim()];

  // Atomic mass: whole u, then micro-u with six digits before the point; "#" for the point marks an extrapolation.
  const extrapolated = micro.endsWith("#");
  demand(extrapolated ? /^\d{6}#$/.test(micro) : /^\d{6}\.\d+$/.test(micro), line);
  demand(extrapolated ? /^\d+#$/.test(deviation) : /^\d+\.\d+$/.test(deviation), line);
  const decimals = micro.replace(/[.#]/, "");
  const places = (/** @type {string} */ text) => text.split(".")[1]?.length ?? 0;
  demand(places(micro) === places(deviation), line); // the deviation counts units of the last digit
  demand(whole === (decimals < "5" ? mass : mass - 1), line); // so the whole part need not be stored
  const entry = `${decimals}${extrapolated ? "#" : ","}${Number(deviation.replace(/[.#]/, ""))}`;

  rows[charge] ??= [symbol, String(mass)];
  const row = rows[charge];
  demand(row[0] === symbol && mass === Number(row[1]) + row.length - 2, line); // mass numbers without a gap
  row.push(entry);
}

const count = rows.reduce((sum, row) => sum + row.length - 2, 0);
if (count !== nuclides) throw new Error(`${count} nuclides, expected ${nuclides}`);

process.stdout.write(`/**
 * Atomic masses of AME2020, made by docs/generators/nuclides.mjs from mass.mas20 (sha256 ${sha256.slice(0, 16)}...).
 * Source: Wang, Huang, Kondev, Audi & Naimi 2021, Chin. Phys. C 45, 030003 and Huang et al. 2021, 45, 030002.
 *
 * One string per charge number from 0: symbol, first mass number, then one entry per mass number without a gap:
 * decimals of the atomic mass in u as printed, "," (or "#" where extrapolated), uncertainty in units of the last digit.
 * The whole part of the mass is A, or A - 1 where the decimals begin with 5 or more.
 */
export const nuclideTable: readonly string[] = [
${rows.map((row) => `  "${row.join(" ")}",`).join("\n")}
];
`);

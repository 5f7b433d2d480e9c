/** The command as a function: what it prints, writes and returns. Values are those of the library; no goldens of digits. */
import { existsSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import fc from "fast-check";
import {
  breakdown,
  type CoulombPlasmaOptions,
  combine,
  composition,
  electronPositronGas,
  isFermistateError,
  meltingTemperature,
  quantityNames,
  regime,
  transition,
  whiteDwarfMatter,
} from "fermistate";
import { grid, gridToCsv, gridToCsvMetadata, gridToNpz, logarithmicAxis } from "fermistate/grids";
import { gridToParquet } from "fermistate/table-files";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { commands, run } from "../../src/cli/run.js";
import { libraryVersion } from "../../src/version.js";
import { commandLine } from "./command-line.js";

let cwd = "";
beforeEach(() => {
  cwd = mkdtempSync(join(tmpdir(), "fermistate-cli-"));
});
afterEach(() => rmSync(cwd, { recursive: true, force: true }));

const command = commandLine(() => cwd);

const read = (name: string): string => readFileSync(join(cwd, name), "utf8");
const matter = whiteDwarfMatter();
const core = composition({ C12: 0.5, O16: 0.5 });

describe("help", () => {
  test("without arguments, with --help, -h or help: what it is for, how to begin, exit codes; code 0", async () => {
    const { out, code } = await command("");
    expect(code).toBe(0);
    for (const line of ["--help", "-h", "help"]) expect(await command(line)).toEqual({ code: 0, out, err: "" });
    for (const word of [
      "state",
      "grid",
      "regime",
      "demo",
      "baryon mass density",
      "Exit codes",
      "fermistate demo",
      libraryVersion,
    ]) {
      expect(out).toContain(word);
    }
  });

  test("every command explains every option, and the same by --help", async () => {
    for (const { name, options, examples } of commands) {
      const { out, code } = await command(`help ${name}`);
      expect(code).toBe(0);
      for (const option of Object.keys(options)) expect(out).toContain(`  --${option}`);
      expect(out).toContain("--help");
      expect(examples.length).toBeGreaterThan(0);
      expect((await command(`${name} --density x --help`)).out).toBe(out);
    }
  });

  test("every example of every help runs as it stands", async () => {
    let count = 0;
    for (const { name } of commands) {
      const { out } = await command(`help ${name}`);
      const lines = out.replaceAll(/ \\\n\s*/g, " ").match(/^ +fermistate .* --.*|^ +fermistate demo$/gm) ?? [];
      for (const line of lines.filter((one) => !/AXIS|KELVIN|FOLDER|LOW/.test(one))) {
        const result = await command(line.trim().slice("fermistate ".length));
        expect(result, line).toMatchObject({ code: 0, err: "" });
        count += 1;
      }
    }
    expect(count).toBe(commands.reduce((sum, one) => sum + one.examples.length, 0));
  });

  test("topics: quantities with units, conventions with the domain, axes", async () => {
    const quantities = (await command("help quantities")).out;
    for (const name of quantityNames) expect(quantities).toContain(name);
    const conventions = (await command("help conventions")).out.replaceAll(/\s+/g, " ");
    const [full = "", ideal = ""] = conventions.split("with --without coulomb");
    expect(full).toContain("Coulomb terms assume full ionisation");
    expect(full).not.toContain("Ideal plasma");
    expect(ideal).toMatch(/Ideal plasma: no Coulomb interactions .* 1 to 30 % too high/);
    for (const word of [
      "baryon mass density",
      "1e-20 to 1e18 g/cm^3",
      "1 to 1e13 K",
      "no Coulomb",
      "rest mass",
      "unstable",
    ]) {
      expect(conventions).toContain(word);
    }
    expect((await command("help axes")).out).toContain("10-per-decade");
  });

  test("lines fit a terminal of 80 columns, tables of quantities aside", async () => {
    for (const line of [
      "help",
      "help state",
      "help grid",
      "help regime",
      "help demo",
      "help conventions",
      ...["compare", "certify", "table"].map((one) => `help ${one}`),
    ]) {
      for (const one of (await command(line)).out.split("\n")) expect(one.length, one).toBeLessThanOrEqual(80);
    }
  });

  test("--version", async () => {
    expect((await command("--version")).out).toBe(`fermistate ${libraryVersion}\n`);
  });
});

describe("state", () => {
  const line = "state --density 2e6 --temperature 1e7 --composition C12=0.5,O16=0.5";
  const state = matter.state(2e6, 1e7, core);

  test("prints every quantity with its unit", async () => {
    const { code, out, err } = await command(line);
    expect([code, err]).toEqual([0, ""]);
    for (const name of quantityNames) {
      const printed = new RegExp(`^  ${name} +(\\S+)`, "m").exec(out)?.[1];
      expect(Math.abs(Number(printed) - state[name]!), name).toBeLessThanOrEqual(5e-10 * Math.abs(state[name]!));
    }
    expect(out).toMatch(/pressure +\S+ +dyn\/cm\^2/);
    expect(out).toContain("Coulomb terms assume full ionisation");
    expect(out).not.toContain("Ideal plasma");
    expect((await command(`${line} --without coulomb`)).out).toContain("Ideal plasma: no Coulomb interactions");
  });

  test("--json has all digits", async () => {
    const { out } = await command(`${line} --json`);
    const document = JSON.parse(out);
    for (const name of quantityNames) expect(document.quantities[name].value).toBe(state[name]);
    expect(document.quantities.pressure.unit).toBe("dyn/cm^2");
    expect(document).toMatchObject({ density: { value: 2e6, unit: "g/cm^3" }, temperature: { value: 1e7, unit: "K" } });
  });

  test.each([
    // Worst of the ideal plasma: 3.7e-16 (P), 6.8e-16 (e), 4.6e-16 (s) of the sum of sizes.
    ["ideal", false, { pressure: 8e-16, specificEnergy: 1.4e-15, specificEntropy: 1e-15 }, 1221],
    // Worst of the full one: 5.2e-16 (P), 4.1e-16 (e), 4.5e-16 (s); 115 points of cold thin matter are unstable.
    ["full", true, { pressure: 1e-15, specificEnergy: 8e-16, specificEntropy: 9e-16 }, 1106],
  ] as const)("shares of the contributions add up to the state: %s plasma", (_, coulomb, bounds, count) => {
    const eos = whiteDwarfMatter({ coulomb });
    const worst: Record<string, number> = { pressure: 0, specificEnergy: 0, specificEntropy: 0 };
    let judged = 0;
    for (const density of logarithmicAxis({ from: 1e-6, to: 1e12, points: 37 }).values) {
      for (const temperature of logarithmicAxis({ from: 1e3, to: 1e11, points: 33 }).values) {
        try {
          eos.state(density, temperature, core);
        } catch (error) {
          if (isFermistateError(error) && error.code === "unstable") continue;
          throw error;
        }
        judged += 1;
        const { state: whole, shares } = breakdown(eos, density, temperature, core);
        for (const name of ["pressure", "specificEnergy", "specificEntropy"] as const) {
          const sum = shares.reduce((total, share) => total + share[name], 0);
          const size = shares.reduce((total, share) => total + Math.abs(share[name]), 0);
          worst[name] = Math.max(worst[name]!, Math.abs(sum - whole[name]) / size);
        }
      }
    }
    expect(judged).toBe(count);
    for (const [name, bound] of Object.entries(bounds)) expect(worst[name], name).toBeLessThanOrEqual(bound);
  });

  test("--json gives the shares, the Coulomb plasma by its terms", async () => {
    const { contributions } = JSON.parse((await command(`${line} --json`)).out);
    const { shares } = breakdown(matter, 2e6, 1e7, core);
    expect(contributions).toEqual(shares);
    const names = shares.map(({ name }) => name);
    for (const name of ["ion correlation", "electron polarisation", "radiation"]) expect(names).toContain(name);
  });

  test("shares are printed with their value and in percent of the state", async () => {
    const { out } = await command(line);
    for (const share of breakdown(matter, 2e6, 1e7, core).shares) {
      const row = new RegExp(`^  ${share.name} +(\\S+) +(\\S+) % +(\\S+) +(\\S+) % +(\\S+) +(\\S+) %$`, "m").exec(out);
      const printed = row?.slice(1).map(Number) ?? [];
      for (const [i, name] of (["pressure", "specificEnergy", "specificEntropy"] as const).entries()) {
        expect(Math.abs(printed[2 * i]! / share[name] - 1), share.name).toBeLessThanOrEqual(5e-6); // six digits
        const percent = (100 * share[name]) / state[name];
        const half = Math.abs(percent) >= 1e-2 ? 0.005 : 0.05 * Math.abs(percent); // two places, or two digits
        expect(Math.abs(printed[2 * i + 1]! - percent), share.name).toBeLessThanOrEqual(half * (1 + 1e-9));
      }
    }
  });

  test("says what kind of matter it is, and none of no findings", async () => {
    const { out } = await command(line);
    expect(out).toMatch(/\nWhat kind of matter\n {2}degenerate, relativistic, liquid\n/);
    expect(out).toMatch(/\nFindings\n {2}none\n/);
    const cold = (await command("state --density 2e6 --temperature 1e6 --composition C12=0.5,O16=0.5")).out;
    expect(cold).toMatch(/\nWhat kind of matter\n {2}degenerate, relativistic, crystal\n/);
    expect(cold).toMatch(/crystalFraction +1\.0+\n/);
    expect(cold).toMatch(/^ {2}phonons /m);
  });

  test("lists each finding with its number against the threshold and what it means", async () => {
    const iron = composition({ Fe56: 1 });
    const { findings } = regime(2e9, 1e7, iron, { equationOfState: matter });
    expect(findings.length).toBeGreaterThan(0);
    const at = "state --density 2e9 --temperature 1e7 --composition Fe56=1";
    const text = (await command(at)).out;
    const words = text.slice(text.indexOf("\nFindings\n")).replaceAll(/\s+/g, " ");
    for (const { code, severity, species, quantity, message } of findings) {
      expect(words).toContain(` ${code}: ${severity} (${species}) ${quantity.name} is `);
      expect(words).toContain(message);
    }
    expect(words).toMatch(/is 7\.28\de-6 erg, above 6\.39\de-6 erg/);
    expect(JSON.parse((await command(`${at} --json`)).out).regime.findings).toEqual(findings);
  });

  test.each([
    ["coulomb", { coulomb: false }],
    ["ions", { ions: false }],
    ["radiation", { radiation: false }],
    ["coulomb,radiation", { coulomb: false, radiation: false }],
    ["polarisation", { coulomb: { polarisation: false } }],
    ["exchange", { coulomb: { exchange: false } }],
    ["mixture", { coulomb: { mixture: false } }],
    ["anharmonic", { coulomb: { anharmonic: false } }],
    ["exchange,polarisation,radiation", { coulomb: { exchange: false, polarisation: false }, radiation: false }],
  ] as const)("--without %s is the library without it", async (names, options) => {
    const at = "--density 2e6 --temperature 1e6 --composition C12=0.5,O16=0.5"; // a crystal: all terms are at work
    const { quantities } = JSON.parse((await command(`state ${at} --without ${names} --json`)).out);
    const { pressure, specificEntropy } = whiteDwarfMatter(options).state(2e6, 1e6, core);
    expect([quantities.pressure.value, quantities.specificEntropy.value]).toEqual([pressure, specificEntropy]);
    expect(pressure).not.toBe(matter.state(2e6, 1e6, core).pressure);
  });

  test.each([
    ["--phase liquid", { phase: "liquid" }, "liquid"],
    ["--phase crystal", { phase: "crystal" }, "crystal"],
    ["--melting-coupling 200", { meltingCoupling: 200 }, "liquid"],
    ["--melting-coupling 150", { meltingCoupling: 150 }, "crystal"],
  ] as const)("%s", async (words, coulomb: CoulombPlasmaOptions, phase) => {
    const temperature =
      meltingTemperature(2e6, core) * (words.includes("200") || words.includes("liquid") ? 0.98 : 1.02);
    const at = ["--density", "2e6", "--temperature", String(temperature), "--composition", "C12=0.5,O16=0.5"];
    const document = JSON.parse((await command(["state", ...at, ...words.split(" "), "--json"])).out);
    const forced = whiteDwarfMatter({ coulomb }).state(2e6, temperature, core);
    expect(document.quantities.specificEntropy.value).toBe(forced.specificEntropy);
    expect(forced.specificEntropy).not.toBe(matter.state(2e6, temperature, core).specificEntropy);
    expect(document.regime.phase).toBe(phase);
    expect(document.regime.kind).toContain(phase);
  });

  test("a crystal at T = 0", async () => {
    const { out } = await command("state --density 1e6 --temperature 0 --composition C12=1 --json");
    const document = JSON.parse(out);
    expect(document.quantities.crystalFraction.value).toBe(1);
    expect(document.quantities.pressure.value).toBe(matter.state(1e6, 0, composition({ C12: 1 })).pressure);
    expect(document.regime.parameters.ionCoupling.value).toBe("INF");
    const text = (await command("state --density 1e6 --temperature 0 --composition C12=1")).out;
    expect(text).not.toMatch(/NaN|Infinity|undefined/);
  });

  test("without contributions, at T = 0, with infinities spelled out", async () => {
    const cold = combine(electronPositronGas()).state(1e6, 0, composition({ Fe56: 1 }));
    const at = "state --density 1e6 --temperature 0 --composition Fe56=1 --without ions,radiation";
    const document = JSON.parse((await command(`${at} --json`)).out);
    expect(document.quantities.pressure.value).toBe(cold.pressure);
    expect(document.quantities.electronDegeneracy.value).toBe("INF");
    const { out } = await command(at);
    expect(out).toMatch(/electronDegeneracy +INF/);
    expect(out).not.toMatch(/NaN|Infinity|undefined/);
  });

  test("--normalise, a mean nucleus, the neutron", async () => {
    const scaled = JSON.parse(
      (await command("state --density 1 --temperature 1e7 --composition C12=2,O16=2 --normalise --json")).out,
    );
    expect(scaled.quantities.pressure.value).toBe(matter.state(1, 1e7, core).pressure);
    const mean = JSON.parse(
      (await command("state --density 1 --temperature 1e7 --composition meanMassNumber=13.7,meanCharge=6.85 --json"))
        .out,
    );
    const nucleus = composition({ meanMassNumber: 13.7, meanCharge: 6.85 });
    expect(mean.quantities.pressure.value).toBe(matter.state(1, 1e7, nucleus).pressure);
    expect((await command("state --density 1 --temperature 1e7 --composition n=0.1,He4=0.9")).code).toBe(0);
  });
});

describe("grid", () => {
  const line = "grid --density 1e2..1e10,10-per-decade --temperature 1e6..1e9,4-points --composition C12=0.5,O16=0.5";
  const made = grid(matter, core, {
    density: logarithmicAxis({ from: 1e2, to: 1e10, pointsPerDecade: 10 }),
    temperature: logarithmicAxis({ from: 1e6, to: 1e9, points: 4 }),
  });

  test("writes what the library writes, and says what and how large", async () => {
    const { code, out, err } = await command(`${line} --out core --format both --chart pressure,gamma1`);
    expect([code, err]).toEqual([0, ""]);
    const names = ["core.csv", "core.csv-metadata.json", "core-gamma1.svg", "core-pressure.svg", "core.json"];
    expect(readdirSync(cwd).sort()).toEqual(names.sort());
    expect(read("core.csv")).toBe(gridToCsv(made));
    expect(read("core.csv-metadata.json")).toBe(gridToCsvMetadata(made, "core.csv"));
    expect(JSON.parse(read("core.json")).shape).toEqual([4, 81]);
    expect(read("core-gamma1.svg")).toMatch(/^<svg /);
    for (const name of names) expect(out).toContain(`  ${name} `);
    expect(out).toMatch(/81 densities x 4 temperatures = 324 states of C12 0\.5, O16 0\.5 in \d+ ms/);
    expect(out).toMatch(/core\.csv +7\d\.\d kB/);
  });

  test("writes Parquet", async () => {
    const { code, out, err } = await command(`${line} --out core.parquet --format parquet --note Invented.`);
    expect([code, err]).toEqual([0, ""]);
    expect(readdirSync(cwd)).toEqual(["core.parquet"]);
    expect(out).toMatch(/core\.parquet +\d+\.\d kB +the columns, with units in the metadata/);
    const bytes = readFileSync(join(cwd, "core.parquet"));
    expect(Buffer.compare(bytes, await gridToParquet(made, { note: "Invented." }))).toBe(0);
  });

  test("--format npz writes what the library writes", async () => {
    const { code, out } = await command(`${line} --out core.npz --format npz`);
    expect(code).toBe(0);
    expect(readdirSync(cwd)).toEqual(["core.npz"]);
    expect(new Uint8Array(readFileSync(join(cwd, "core.npz")))).toEqual(gridToNpz(made));
    expect(out).toMatch(/core\.npz +\d+\.\d kB {2}arrays for NumPy/);
  });

  test("prints CSV or JSON where there is no --out", async () => {
    expect((await command(line)).out).toBe(gridToCsv(made));
    expect(JSON.parse((await command(`${line} --format json`)).out).columns.pressure.values[3]).toBe(
      made.columns.pressure![3],
    );
    expect(readdirSync(cwd)).toEqual([]);
  });

  test("stops printing when nobody reads", async () => {
    let pieces = 0;
    const io = { out: () => ++pieces < 2, err: () => {}, isTerminal: false, cwd };
    const many = "grid --density 1e2..1e10,1000-points --temperature 1e6..1e9,20-points --composition C12=1".split(" ");
    expect(await run(many, io)).toBe(0);
    expect(pieces).toBe(2);
  });

  test("--quantities, all of them too; a chart's quantity becomes a column", async () => {
    await command(`${line} --quantities temperatureExponent,gamma2 --chart bulkModulus --out a`);
    expect(read("a.csv").split("\r\n")[0]).toBe(
      "density [g/cm^3],temperature [K],temperatureExponent [1],gamma2 [1],bulkModulus [dyn/cm^2]",
    );
    await command(`${line} --quantities all --out b`);
    expect(read("b.csv").split("\r\n")[0]?.split(",")).toHaveLength(2 + quantityNames.length);
  });

  test("an ending of PATH is dropped; title and note reach the files", async () => {
    const words = [
      ...line.split(" "),
      "--out",
      "core.csv",
      "--title",
      "My core",
      "--note",
      "a trial",
      "--chart",
      "pressure",
    ];
    expect((await command(words)).code).toBe(0);
    expect(readdirSync(cwd).sort()).toEqual(["core-pressure.svg", "core.csv", "core.csv-metadata.json"]);
    for (const name of ["core.csv-metadata.json", "core-pressure.svg"]) {
      expect(read(name)).toContain("My core");
      expect(read(name)).toContain("a trial");
    }
  });

  test("replaces files only when told to, and finds out before it calculates", async () => {
    writeFileSync(join(cwd, "core.csv-metadata.json"), "mine");
    const refused = await command(`${line} --out core`);
    expect(refused.code).toBe(1);
    expect(refused.err).toMatch(
      /^fermistate: path: given ".*core\.csv-metadata\.json"; .* exists .* \(file-not-written\)\n$/,
    );
    expect(readdirSync(cwd)).toEqual(["core.csv-metadata.json"]);
    expect((await command(`${line} --out core --overwrite`)).code).toBe(0);
    expect(read("core.csv-metadata.json")).not.toBe("mine");
  });

  test("makes folders only when told to", async () => {
    expect(await command(`${line} --out new/core`)).toMatchObject({ code: 1, out: "" });
    expect(existsSync(join(cwd, "new"))).toBe(false);
    expect((await command(`${line} --out new/core --create-folders`)).code).toBe(0);
    expect(readdirSync(join(cwd, "new"))).toHaveLength(2);
  });

  test("shows progress on a terminal only, and wipes it", async () => {
    const large =
      "grid --density 1e2..1e10,600-points --temperature 1e6..1e9,200-points --composition C12=1 --out x --quantities pressure";
    expect((await command(`${large} --overwrite`)).err).toBe("");
    const { err } = await command(`${large} --overwrite`, true);
    expect(err).toMatch(/^\rgrid: \d+ of 120000 points \(\d+ %\)/);
    expect(err).toMatch(/\r {20,}\r$/);
    expect(err).not.toContain("\u001b");
  });

  test.each([
    ["2e6", [2e6]],
    ["1e5,1e6,3e7", [1e5, 1e6, 3e7]],
    ["1e2..1e4,1-per-decade", [1e2, 1e3, 1e4]],
    ["1e2..1e4,3-points", [1e2, 1e3, 1e4]],
    ["1..2,3-linear-points", [1, 1.5, 2]],
    ["1.5..1.5e2,3-points", [1.5, 15, 150]],
    [".5..5.,2-points", [0.5, 5]],
  ])("the axis %s", async (text, values) => {
    const { out } = await command([
      "grid",
      "--density",
      text,
      "--temperature",
      "1e7",
      "--composition",
      "He4=1",
      "--format",
      "json",
    ]);
    expect(JSON.parse(out).columns.density.values).toEqual(values);
  });
});

describe("grid --findings", () => {
  const line = "grid --density 1e4..1e10,2-per-decade --temperature 1e6,1e9 --composition C12=0.5,O16=0.5 --findings";
  const density = logarithmicAxis({ from: 1e4, to: 1e10, pointsPerDecade: 2 });
  const made = grid(matter, core, { density, temperature: [1e6, 1e9], findings: regime });

  test("adds the columns of the library, in CSV and JSON, with the list", async () => {
    expect((await command(line)).out).toBe(gridToCsv(made));
    const document = JSON.parse((await command(`${line} --format json`)).out);
    expect(document.findings).toEqual(made.findings);
    expect(document.columns.findingsStrained.values).toEqual([...made.columns.findingsStrained!]);
  });

  test("says which were met at how many points, or none", async () => {
    const { out } = await command(`${line} --out a`);
    expect(out).toContain("Findings among 26 states\n");
    expect(made.findings!.length).toBeGreaterThan(2);
    for (const { code, strained, outside } of made.findings!) {
      expect(out).toMatch(new RegExp(`^  ${code} +${strained} +${outside}$`, "m"));
    }
    expect(JSON.parse(read("a.csv-metadata.json"))["schema:additionalProperty"]).toContainEqual({
      "@type": "schema:PropertyValue",
      "schema:name": `points where ${made.findings![0]!.code} is strained`,
      "schema:value": made.findings![0]!.strained,
      "schema:unitText": "1",
    });
    const calm = "grid --density 2e6 --temperature 1e7 --composition C12=0.5,O16=0.5 --findings --out b";
    expect((await command(calm)).out).toContain("Findings among 1 state: none\n");
    expect((await command(calm.replace(" --findings --out b", " --out c"))).out).not.toContain("Findings");
  });
});

describe("regime", () => {
  const line = "regime --density 2e9 --temperature 1e8 --composition Fe56=1";
  const found = regime(2e9, 1e8, composition({ Fe56: 1 }), { equationOfState: matter });

  test("prints kind, parameters with units, nuclei, captures, findings", async () => {
    const { code, out, err } = await command(line);
    expect([code, err]).toEqual([0, ""]);
    expect(out).toContain(`\nWhat kind of matter\n  ${found.kind.join(", ")}\n`);
    const { species, ...numbers } = found.parameters;
    for (const [name, value] of Object.entries(numbers)) {
      const printed = Number(new RegExp(`^  ${name} +(\\S+)`, "m").exec(out)?.[1]);
      expect(Math.abs(printed - value), name).toBeLessThanOrEqual(5e-6 * Math.abs(value)); // six digits
    }
    expect(out).toMatch(/ionPlasmaTemperature +\S+ +K /);
    expect(out).toMatch(/electronChemicalPotential +\S+ +erg /);
    expect(Number(/^ {2}Fe56 +(\S+)/m.exec(out)?.[1])).toBeCloseTo(species[0]!.coupling, 3);
    expect(out).toMatch(/^ {2}Fe56 +Mn56 /m);
    expect(out).toContain("  electron-capture: outside (Fe56)\n");
    for (const one of out.split("\n")) expect(one.length, one).toBeLessThanOrEqual(100);
  });

  test("--json has all digits, units and the findings", async () => {
    const document = JSON.parse((await command(`${line} --json`)).out);
    const { species, ...numbers } = found.parameters;
    for (const [name, value] of Object.entries(numbers)) expect(document.parameters[name].value, name).toBe(value);
    expect(document.parameters.fermiTemperature.unit).toBe("K");
    expect(document.species[0].coupling.value).toBe(species[0]!.coupling);
    expect(document).toMatchObject({ kind: found.kind, phase: found.phase, findings: found.findings });
    expect(document.captures).toEqual(found.captures);
  });

  test("judges a sum that state refuses as unstable", async () => {
    const at = "--density 10 --temperature 1e5 --composition C12=1";
    expect(await command(`state ${at}`)).toMatchObject({ code: 1, err: expect.stringMatching(/\(unstable\)\n$/) });
    const { code, out } = await command(`regime ${at}`);
    expect(code).toBe(0);
    expect(out).toMatch(/thermodynamically-unstable: outside\n {4}pressure is -\S+ dyn\/cm\^2, not above 0\n/);
    const phases = { liquid: "liquid", crystal: "crystal" };
    for (const [phase, word] of Object.entries(phases)) {
      expect(JSON.parse((await command(`regime ${at} --phase ${phase} --json`)).out).phase).toBe(word);
    }
    // Gamma is 77 here, so 100 keeps the liquid; at half the temperature it melts at 100 and not at 175.
    const colder = at.replace("1e5", "5e4");
    expect((await command(`state ${colder}`)).code).toBe(1);
    expect(JSON.parse((await command(`regime ${colder} --json`)).out).phase).toBe("liquid");
    expect(JSON.parse((await command(`regime ${colder} --melting-coupling 100 --json`)).out).phase).toBe("crystal");
  });

  test("infinities are spelled out, and neutrons alone have no nuclei", async () => {
    const { out } = await command("regime --density 10 --temperature 1e7 --composition n=1");
    expect(out).toMatch(/densityParameter +INF/);
    expect(out).not.toMatch(/\nNuclei\n|NaN|Infinity|undefined/);
    const ideal = "regime --density 1e8 --temperature 1e5 --composition C12=1 --without coulomb";
    expect((await command(ideal)).out).toContain("ideal-ions-degenerate: outside");
  });
});

describe("demo", () => {
  test("writes grids and charts of the invented star, shows a table and a state, and can be run again", async () => {
    const { code, out, err } = await command("demo");
    expect([code, err]).toEqual([0, ""]);
    const names = readdirSync(join(cwd, "fermistate-demo"));
    expect(names).toHaveLength(12);
    for (const name of names) expect(out).toContain(join("fermistate-demo", name));
    for (const word of [
      "Invented scenario",
      "degeneracy",
      "of pressure",
      "He4 0.98, N14 0.02",
      "phonons",
      "ion correlation",
    ])
      expect(out).toContain(word);
    for (const name of names.filter((one) => !one.endsWith(".csv"))) {
      expect(readFileSync(join(cwd, "fermistate-demo", name), "utf8")).toContain("Invented scenario");
    }
    expect(readFileSync(join(cwd, "fermistate-demo", "core.csv"), "utf8")).toContain("crystalFraction [1]");
    expect((await command("demo")).code).toBe(0);
    expect(readdirSync(join(cwd, "fermistate-demo"))).toHaveLength(12);
  });

  test("says where the core is a crystal", async () => {
    const { out } = await command("demo");
    const matterOfCore = composition({ C12: 0.5, O16: 0.48, Ne22: 0.02 });
    const rows = [...out.matchAll(/^ +(10000|1e\d+) +(\S+e\d+) +(\S+e\d+)$/gm)];
    expect(rows).toHaveLength(4);
    for (const [, density, temperature, heat] of rows) {
      const melting = transition(matter, Number(density), matterOfCore)!;
      expect(Math.abs(Number(temperature) / melting.temperature - 1)).toBeLessThanOrEqual(5e-4); // four digits
      expect(Math.abs(Number(heat) / melting.latentHeat - 1)).toBeLessThanOrEqual(5e-4);
    }
    const text = readFileSync(join(cwd, "fermistate-demo", "core.json"), "utf8");
    const frozen = (JSON.parse(text).columns.crystalFraction.values as number[]).filter((one) => one === 1).length;
    expect(frozen).toBeGreaterThan(0);
    expect(out).toContain(`Core: ${frozen} of 484 states are a crystal`);
  });

  test("the command that it names at the end runs, and so does another folder", async () => {
    const { out } = await command("demo --out here/there");
    expect(readdirSync(join(cwd, "here/there"))).toHaveLength(12);
    const line = /^ {2}npx fermistate (state .*)$/m.exec(out)?.[1] ?? "";
    expect((await command(line)).code).toBe(0);
  });

  test("a file in the way", async () => {
    mkdirSync(join(cwd, "fermistate-demo/core.csv"), { recursive: true });
    expect(await command("demo")).toMatchObject({ code: 1, out: "" });
    expect(readdirSync(join(cwd, "fermistate-demo"))).toEqual(["core.csv"]);
  });
});

describe("errors are one line, with a code for programs", () => {
  const at = "--density 1 --temperature 1e7 --composition C12=1";

  test.each([
    ["stat", 2, /^fermistate: command: given "stat"; allowed: perhaps state\?/],
    ["x", 2, /one of state, grid, regime, compare, certify, table, limiting-mass, demo, help/],
    ["help grdi", 2, /perhaps grid\?/],
    ["help grid state", 2, /one word/],
    [`state ${at} --densty 1`, 2, /given "--densty"; allowed: perhaps --density\?/],
    [`state ${at} --qqqqqqq`, 2, /--density, --temperature/],
    [`state ${at} extra`, 2, /given "extra"/],
    [`state ${at} --density 2`, 2, /--density: given "a second time"/],
    [`state ${at} --json=yes`, 2, /--json: given "yes"; allowed: a switch/],
    ["state --temperature 1e7 --composition C12=1", 2, /--density: not given; allowed: G\/CM3, which state needs/],
    ["state --temperature 1e7 --composition C12=1 --density", 2, /--density: given ""/],
    ["state --density 1e --temperature 1e7 --composition C12=1", 2, /given "1e"; allowed: a number such as 2e6/],
    ["state --density 0x10 --temperature 1e7 --composition C12=1", 2, /a number such as/],
    ["state --density 1e999 --temperature 1e7 --composition C12=1", 2, /density: given Infinity/],
    [
      "state --density -1 --temperature 1e7 --composition C12=1",
      2,
      /^fermistate: density: given -1; allowed: > 0 g\/cm\^3 \(out-of-range\)\n$/,
    ],
    ["state --density 1e30 --temperature 1e7 --composition C12=1", 1, /1e-20 to 1e18 .* \(outside-domain\)/],
    ["state --density 1 --temperature 0 --composition C12=1", 1, /for stable matter; given at density .* \(unstable\)/],
    [
      "state --density 1 --temperature 0 --composition C12=1 --without coulomb",
      1,
      /ideal ions; leave it out at T = 0\) \(outside-domain\)/,
    ],
    ["state --density 1e6 --temperature 0 --composition H1=1", 1, /do not freeze there .*\(outside-domain\)/],
    [
      "state --density 10 --temperature 1e5 --composition C12=1",
      1,
      /for stable matter; given at density .* \(unstable\)/,
    ],
    [`state ${at} --phase solid`, 2, /--phase: given "solid"; allowed: one of liquid, crystal/],
    [`state ${at} --phase crystal --without coulomb`, 2, /--phase: .* --without coulomb leaves out/],
    [`state ${at} --melting-coupling 170 --without ions`, 2, /--melting-coupling: .* --without ions leaves out/],
    [`state ${at} --without coulomb,exchange`, 2, /--without: given "exchange"; .* --without coulomb leaves out/],
    [`state ${at} --melting-coupling 170 --phase liquid`, 2, /only without --phase/],
    [`grid ${at} --melting-coupling 17`, 2, /--melting-coupling: given 17; allowed: 100 to 300 \(out-of-range\)/],
    ["regime --density -1 --temperature 1e7 --composition C12=1", 2, /density: given -1/],
    [`regime ${at} --findings`, 2, /given "--findings"/],
    [
      "state --density 1 --temperature 1e7 --composition C12=0.9",
      2,
      /given 0\.9; .*--normalise.* \(invalid-composition\)/,
    ],
    ["state --density 1 --temperature 1e7 --composition C12=-1", 2, /invalid-composition/],
    ["state --density 1 --temperature 1e7 --composition c12=1", 2, /nearest: C12.* \(unknown-nuclide\)/],
    ["state --density 1 --temperature 1e7 --composition C12=1,C12=0", 2, /C12 is there twice/],
    ["state --density 1 --temperature 1e7 --composition C12:1", 2, /nucleon fractions such as/],
    [`state ${at} --without ion`, 2, /perhaps ions/],
    [`state ${at} --without ions,ions`, 2, /ions is there twice/],
    [
      "grid --density 5..1,3-points --temperature 1e7 --composition C12=1",
      2,
      /--density, to: given 1; allowed: greater than from/,
    ],
    ["grid --density 1..5 --temperature 1e7 --composition C12=1", 2, /10-per-decade/],
    ["grid --density 1..5,3-steps --temperature 1e7 --composition C12=1", 2, /10-per-decade/],
    ["grid --density 3,2 --temperature 1e7 --composition C12=1", 2, /each greater than the one before/],
    ["grid --density 1..5,99999999-points --temperature 1e7 --composition C12=1", 1, /\(too-large\)/],
    [
      "grid --density 1..5,10-points --temperature 1e7 --composition C12=1 --maximum-points 9",
      1,
      /at most 9 .* \(too-large\)/,
    ],
    [`grid ${at} --quantities presure`, 2, /perhaps pressure/],
    [`grid ${at} --chart pressure`, 2, /only together with --out/],
    [`grid ${at} --format both`, 2, /only together with --out/],
    [`grid ${at} --format npz`, 2, /only together with --out/],
    [`grid ${at} --format parquet`, 2, /only together with --out/],
    [`grid ${at} --format xml`, 2, /one of csv, json, both, npz, parquet/],
    [`grid ${at} --out`, 2, /--out: given ""/],
    ["demo --out", 2, /--out: given ""/],
    ["demo now", 2, /options only/],
  ])("fermistate %s", async (line, code, message) => {
    const result = await command(line);
    expect(result.err).toMatch(message);
    expect(result.err).toMatch(/^fermistate: [^\n]+ \([a-z-]+\)\n$/);
    expect([result.code, result.out]).toEqual([code, ""]);
    expect(readdirSync(cwd)).toEqual([]);
  });
});

test("no arguments make it throw, print a stack or a NaN, or leave a file behind", async () => {
  const value = fc.oneof(
    fc.double().map(String),
    fc.constantFrom(
      "1e7",
      "1e6",
      "0",
      "-0",
      "C12=1",
      "He4=0.5,C12=0.5",
      "pressure",
      "all",
      "1..10,3-points",
      "1,2,3",
      "liquid",
      "175",
    ),
    fc.string(),
  );
  const option = fc.constantFrom(
    "density",
    "temperature",
    "composition",
    "without",
    "quantities",
    "json",
    "format",
    "maximum-points",
    "normalise",
    "phase",
    "melting-coupling",
    "findings",
    "q",
  );
  const argument = fc.oneof(
    option.map((name) => `--${name}`),
    value,
    fc.tuple(option, value).map(([a, b]) => `--${a}=${b}`),
  );
  const good = fc.constant("state --density=1e6 --temperature=1e7 --composition=C12=1".split(" "));
  const line = fc.oneof(
    fc.array(argument, { maxLength: 8 }),
    fc
      .tuple(fc.constantFrom("state", "grid", "regime", "help"), fc.array(argument, { maxLength: 8 }))
      .map(([a, b]) => [a, ...b]),
    fc.tuple(good, fc.array(argument, { maxLength: 1 })).map(([a, b]) => [...a, ...b]),
  );
  let succeeded = 0;
  await fc.assert(
    fc.asyncProperty(line, async (words) => {
      const { code, out, err } = await command(words);
      expect([0, 1, 2]).toContain(code);
      expect(err.includes("unexpected")).toBe(false);
      expect(err.split("\n").length).toBeLessThanOrEqual(2);
      expect(/NaN|undefined/.test(out)).toBe(false);
      if (code === 0) succeeded += 1;
      else expect(out).toBe("");
    }),
    { seed: 20260105, numRuns: 1500 },
  );
  expect(succeeded).toBeGreaterThan(100);
  expect(readdirSync(cwd)).toEqual([]);
});

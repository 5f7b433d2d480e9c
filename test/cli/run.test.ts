/** The command as a function: what it prints, writes and returns. Values are those of the library; no goldens of digits. */
import { existsSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import fc from "fast-check";
import { combine, composition, electronPositronGas, quantityNames, whiteDwarfMatter } from "fermistate";
import { grid, gridToCsv, gridToCsvMetadata, logarithmicAxis } from "fermistate/grids";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { commands, run } from "../../src/cli/run.js";
import { sharesOf } from "../../src/cli/shares.js";
import { libraryVersion } from "../../src/version.js";

let cwd = "";
beforeEach(() => {
  cwd = mkdtempSync(join(tmpdir(), "fermistate-cli-"));
});
afterEach(() => rmSync(cwd, { recursive: true, force: true }));

/** Runs a line of arguments separated by blanks, or a list of them. */
async function command(
  line: string | readonly string[],
  isTerminal = false,
): Promise<{ code: number; out: string; err: string }> {
  let out = "";
  let err = "";
  const io = {
    out: (text: string) => {
      out += text;
      return true;
    },
    err: (text: string) => {
      err += text;
    },
    isTerminal,
    cwd,
  };
  const code = await run(typeof line === "string" ? line.split(" ").filter((word) => word !== "") : line, io);
  return { code, out, err };
}

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
      for (const line of lines.filter((one) => !/AXIS|KELVIN|FOLDER/.test(one))) {
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
    for (const word of ["baryon mass density", "1e-20 to 1e18 g/cm^3", "1 to 1e13 K", "no Coulomb", "rest mass"]) {
      expect(conventions).toContain(word);
    }
    expect((await command("help axes")).out).toContain("10-per-decade");
  });

  test("lines fit a terminal of 80 columns, tables of quantities aside", async () => {
    for (const line of ["help", "help state", "help grid", "help demo", "help conventions"]) {
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
    expect(out).toContain("no Coulomb interactions");
  });

  test("--json has all digits", async () => {
    const { out } = await command(`${line} --json`);
    const document = JSON.parse(out);
    for (const name of quantityNames) expect(document.quantities[name].value).toBe(state[name]);
    expect(document.quantities.pressure.unit).toBe("dyn/cm^2");
    expect(document).toMatchObject({ density: { value: 2e6, unit: "g/cm^3" }, temperature: { value: 1e7, unit: "K" } });
  });

  test("shares of the contributions add up to the state", () => {
    // Over 1221 points the sums differ from the state by at most 3.7e-16 (P), 6.8e-16 (e), 4.6e-16 (s) of the sum of sizes.
    const bounds = { pressure: 8e-16, specificEnergy: 1.4e-15, specificEntropy: 1e-15 };
    for (const density of logarithmicAxis({ from: 1e-6, to: 1e12, points: 37 }).values) {
      for (const temperature of logarithmicAxis({ from: 1e3, to: 1e11, points: 33 }).values) {
        const whole = matter.state(density, temperature, core);
        const shares = sharesOf(matter, density, temperature, core);
        for (const name of ["pressure", "specificEnergy", "specificEntropy"] as const) {
          const sum = shares.reduce((total, share) => total + share[name], 0);
          const size = shares.reduce((total, share) => total + Math.abs(share[name]), 0);
          const error = Math.abs(sum - whole[name]) / size;
          if (!(error <= bounds[name])) throw new Error(`${name} at ${density}, ${temperature}: off by ${error}`);
        }
      }
    }
  });

  test("--json gives the shares", async () => {
    const { contributions } = JSON.parse((await command(`${line} --json`)).out);
    expect(contributions).toEqual(sharesOf(matter, 2e6, 1e7, core));
  });

  test("shares are printed in percent", async () => {
    const { out } = await command(line);
    expect(out).toMatch(/electrons and positrons +\S+ +99\.84 %/);
    expect(out).toMatch(/radiation +\S+ +3\.3e-8 %/);
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
    const many = "grid --density 1e2..1e10,1000-points --temperature 1e6..1e9,20-points --composition He4=1".split(" ");
    expect(await run(many, io)).toBe(0);
    expect(pieces).toBe(2);
  });

  test("--quantities, all of them too; a chart's quantity becomes a column", async () => {
    await command(`${line} --quantities chiT,gamma2 --chart bulkModulus --out a`);
    expect(read("a.csv").split("\r\n")[0]).toBe(
      "density [g/cm^3],temperature [K],chiT [1],gamma2 [1],bulkModulus [dyn/cm^2]",
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
      "grid --density 1e2..1e10,600-points --temperature 1e6..1e9,200-points --composition He4=1 --out x --quantities pressure";
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

describe("demo", () => {
  test("writes grids and charts of the invented star, shows a table and a state, and can be run again", async () => {
    const { code, out, err } = await command("demo");
    expect([code, err]).toEqual([0, ""]);
    const names = readdirSync(join(cwd, "fermistate-demo"));
    expect(names).toHaveLength(12);
    for (const name of names) expect(out).toContain(join("fermistate-demo", name));
    for (const word of ["Invented scenario", "degeneracy", "of pressure", "He4 0.98, N14 0.02"])
      expect(out).toContain(word);
    for (const name of names.filter((one) => !one.endsWith(".csv"))) {
      expect(readFileSync(join(cwd, "fermistate-demo", name), "utf8")).toContain("Invented scenario");
    }
    expect((await command("demo")).code).toBe(0);
    expect(readdirSync(join(cwd, "fermistate-demo"))).toHaveLength(12);
  });

  test("the command that it names at the end runs, and so does another folder", async () => {
    const { out } = await command("demo --out here/there");
    expect(readdirSync(join(cwd, "here/there"))).toHaveLength(12);
    const line = /^ {2}fermistate (state .*)$/m.exec(out)?.[1] ?? "";
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
    ["x", 2, /one of state, grid, demo, help/],
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
    ["state --density 1 --temperature 0 --composition C12=1", 1, /ideal ions; leave it out at T = 0\) \(outside-domain\)/],
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
    [`grid ${at} --format xml`, 2, /one of csv, json, both/],
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
    fc.constantFrom("1e7", "1e6", "0", "-0", "C12=1", "He4=0.5,C12=0.5", "pressure", "all", "1..10,3-points", "1,2,3"),
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
    fc.tuple(fc.constantFrom("state", "grid", "help"), fc.array(argument, { maxLength: 8 })).map(([a, b]) => [a, ...b]),
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

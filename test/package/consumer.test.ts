/** The packed tarball, installed in an empty folder, as its users meet it: ESM, CommonJS and TypeScript. */
import { execFileSync, spawnSync } from "node:child_process";
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath, pathToFileURL } from "node:url";
import { afterAll, beforeAll, describe, expect, inject, test } from "vitest";

const root = fileURLToPath(new URL("../..", import.meta.url));
const about = JSON.parse(readFileSync(`${root}package.json`, "utf8")) as {
  version: string;
  exports: Record<string, unknown>;
  dependencies: Record<string, string>;
};
const entryPoints = Object.keys(about.exports)
  .filter((name) => !name.endsWith(".json"))
  .map((name) => `fermistate${name.slice(1)}`);

let home = "";

beforeAll(() => {
  home = mkdtempSync(join(tmpdir(), "fermistate-consumer-"));
  writeFileSync(join(home, "package.json"), JSON.stringify({ name: "consumer", private: true }));
  // The run-time dependencies are packed from this repository's node_modules: no network, no cache needed.
  const dependencies = Object.keys(about.dependencies).map((name) => `${root}node_modules/${name}`);
  const options = ["--offline", "--install-links", "--ignore-scripts", "--no-audit", "--no-fund", "--loglevel=error"];
  execFileSync("npm", ["install", ...options, inject("tarball"), ...dependencies], { cwd: home, stdio: "pipe" });
});

afterAll(() => rmSync(home, { recursive: true, force: true }));

/** Writes a program into the consumer's folder and runs it with Node; returns what it printed. */
function run(file: string, code: string): string {
  writeFileSync(join(home, file), code);
  return execFileSync(process.execPath, [file], { cwd: home, encoding: "utf8" }).trim();
}

test("the tarball brings its run-time dependencies and nothing else", () => {
  const installed = readdirSync(join(home, "node_modules")).filter((name) => !name.startsWith("."));
  expect(installed.sort()).toEqual(["fermistate", ...Object.keys(about.dependencies)].sort());
});

test("import and require give the same names at every entry point", () => {
  const list = JSON.stringify(entryPoints);
  const show = "const names = (m) => Object.keys(m).filter((n) => n !== 'default').sort();";
  const esm = `${show} const all = {}; for (const e of ${list}) all[e] = names(await import(e));
    console.log(JSON.stringify(all));`;
  const cjs = `${show} const all = {}; for (const e of ${list}) all[e] = names(require(e));
    console.log(JSON.stringify(all));`;
  const imported = JSON.parse(run("names.mjs", esm)) as Record<string, string[]>;
  expect(JSON.parse(run("names.cjs", cjs))).toEqual(imported);
  for (const entry of entryPoints) expect(imported[entry]?.length, entry).toBeGreaterThan(0);
});

test("an error of the CommonJS copy is recognised by the ESM copy", () => {
  const code = `import { createRequire } from "node:module";
    import { FermistateError, isFermistateError } from "fermistate";
    const other = createRequire(import.meta.url)("fermistate");
    const error = new other.FermistateError("out-of-range", { argument: "density", given: -1, allowed: "positive" });
    console.log(error instanceof FermistateError, isFermistateError(error), error.code);`;
  expect(run("errors.mjs", code)).toBe("false true out-of-range");
});

test("the command runs from node_modules/.bin", () => {
  const { status, stdout, stderr } = spawnSync(join(home, "node_modules/.bin/fermistate"), ["--version"], {
    cwd: home,
    encoding: "utf8",
  });
  expect({ status, stderr }).toEqual({ status: 0, stderr: "" });
  expect(stdout).toContain(about.version);
});

/** What each parallel program does: batches on two threads, compared with one; `open` makes the evaluator. */
const batches = (open: string): string => `
  const rows = 9_000;
  const density = Float64Array.from({ length: rows }, (_, i) => 1e6 + 1e3 * i);
  const temperature = new Float64Array(rows).fill(2e7);
  const input = { density, temperature, composition: composition({ C12: 0.5, O16: 0.5 }) };
  const serial = new Float64Array(rows);
  const parallel = new Float64Array(rows);
  const evaluator = ${open};
  evaluator.equationOfState.evaluate(input, { pressure: serial });
  await evaluator.evaluate(input, { pressure: parallel });
  console.log(evaluator.equationOfState.name, serial.every((value, i) => value === parallel[i]), parallel[0] > 0);
  density[8_000] = -1;
  await evaluator.evaluate(input, { pressure: parallel }).catch((error) => console.log(error.code, error.index));`;
const printed = "ideal ions + radiation true true\nout-of-range 8000";

test.each([
  [
    "mjs",
    'import { assembleFolders, buildInFolder } from "fermistate/table-build"; import { tableEquationOfState } from "fermistate/tables";',
  ],
  [
    "cjs",
    'const { assembleFolders, buildInFolder } = require("fermistate/table-build"); const { tableEquationOfState } = require("fermistate/tables");',
  ],
])("fermistate/table-build on two threads, as %s", (kind, imports) => {
  const code = `${imports}
    (async () => {
      const options = { density: [1e6, 1e7], temperature: [1e8, 1e9], accuracy: 1e-2 };
      const request = { matter: { whiteDwarfMatter: {} }, composition: { C12: 1 }, options };
      console.log(JSON.stringify(await buildInFolder("table-${kind}", request, { threads: 2 })));
      const table = await assembleFolders("table-${kind}");
      console.log(tableEquationOfState(table).state(3e6, 3e8, table.composition).pressure.toPrecision(4));
    })();`;
  expect(run(`table.${kind}`, code)).toBe('{"made":2,"kept":0,"left":0,"strips":2}\n1.515e+23');
});

describe("fermistate/parallel", () => {
  beforeAll(() => {
    const make = 'import { combine, idealIons, radiation } from "fermistate";';
    writeFileSync(join(home, "matter.mjs"), `${make} export const gas = () => combine(idealIons(), radiation());`);
    writeFileSync(
      join(home, "matter.cjs"),
      'const { combine, idealIons, radiation } = require("fermistate"); module.exports = combine(idealIons(), radiation());',
    );
  });

  test("as a module; a program that does not close ends by itself", () => {
    const code = `import { composition } from "fermistate"; import { parallelEvaluator } from "fermistate/parallel";
      ${batches('await parallelEvaluator({ module: new URL("./matter.mjs", import.meta.url), export: "gas" }, { threads: 2 })')}`;
    expect(run("parallel.mjs", code)).toBe(printed);
  });

  test("in CommonJS", () => {
    const code = `const { composition } = require("fermistate"); const { parallelEvaluator } = require("fermistate/parallel");
      (async () => { ${batches('await parallelEvaluator({ module: require.resolve("./matter.cjs") }, { threads: 2 })')}
      await evaluator.close(); })();`;
    expect(run("parallel.cjs", code)).toBe(printed);
  });

  test.each([
    ["with a JavaScript module", 'new URL("./matter.mjs", import.meta.url), export: "gas"'],
    // tsx does not reach into threads on Node 20: a module of two lines hands on to it.
    ["with a TypeScript module behind tsx's own import", 'new URL("./typed.mjs", import.meta.url)'],
  ])("a TypeScript program with await using, %s", (_, module) => {
    const api = pathToFileURL(`${root}node_modules/tsx/dist/esm/api/index.mjs`).href;
    writeFileSync(
      join(home, "typed.mjs"),
      `import { tsImport } from "${api}"; export default (await tsImport("./matter.ts", import.meta.url)).default;`,
    );
    writeFileSync(
      join(home, "matter.ts"),
      `import { combine, type EquationOfState, idealIons, radiation } from "fermistate";
      const gas: EquationOfState = combine(idealIons(), radiation()); export default gas;`,
    );
    const code = `import { composition } from "fermistate"; import { parallelEvaluator } from "fermistate/parallel";
      async function main(): Promise<void> {
        await using opened = await parallelEvaluator({ module: ${module} }, { threads: 2 });
        ${batches("opened").replaceAll("parallel[0] >", "parallel[0]! >").replace("(error)", "(error: { code: string; index: number })")}
      }
      void main();`;
    writeFileSync(join(home, "parallel.mts"), code);
    const tsx = pathToFileURL(`${root}node_modules/tsx/dist/loader.mjs`).href;
    const options = { cwd: home, encoding: "utf8" } as const;
    expect(execFileSync(process.execPath, ["--import", tsx, "parallel.mts"], options).trim()).toBe(printed);
  });

  test("by options of white-dwarf matter; the core loads no pool", () => {
    const code = `import { composition } from "fermistate";
      console.log(Object.keys(process.memoryUsage()).length > 0 && process.moduleLoadList.some((m) => m.includes("worker_threads")));
      const { parallelEvaluator } = await import("fermistate/parallel");
      ${batches("await parallelEvaluator({ whiteDwarfMatter: { coulomb: false } })")}
      await evaluator.close();`;
    expect(run("options.mjs", code)).toBe(
      `false\n${printed.replace("ideal ions", "electrons and positrons + ideal ions")}`,
    );
  });

  test("a program that names itself as the module is told so, not run for ever", () => {
    const code = `import { combine, idealIons } from "fermistate"; import { parallelEvaluator } from "fermistate/parallel";
      export default combine(idealIons());
      await parallelEvaluator({ module: import.meta.url }, { threads: 2 }).catch((error) => console.log(error.code, error.given));`;
    const lines = run("itself.mjs", code).split("\n"); // of the threads and of the program
    expect(lines).toHaveLength(3);
    expect([...new Set(lines)]).toEqual(["invalid-option a module that opens threads itself"]);
  });
});

/** A program that uses every entry point's types: all exports are touched by name. */
function typedProgram(names: Record<string, readonly string[]>): string {
  const lines = entryPoints.map((entry, i) => `import * as m${i} from "${entry}";`);
  for (const [i, entry] of entryPoints.entries()) {
    for (const name of names[entry] ?? [])
      lines.push(`export const m${i}_${name}: typeof m${i}.${name} = m${i}.${name};`);
  }
  lines.push('export const code: m0.ErrorCode = "out-of-range";');
  return `${lines.join("\n")}\n`;
}

/** A way to write modules and to find them, as TypeScript names it. */
type Setting = readonly [module: string, resolution: string];

/**
 * Compiles files of the consumer's folder under strict settings, library checks on, no DOM; returns the complaints. One
 * run of the compiler for all settings, each a project of its own.
 */
function compile(files: readonly string[], settings: readonly Setting[]): string {
  const projects = settings.map(([module, moduleResolution]) => {
    const compilerOptions = {
      strict: true,
      exactOptionalPropertyTypes: true,
      skipLibCheck: false,
      noEmit: true,
      target: "es2022",
      lib: ["es2022"],
      types: [],
      module,
      moduleResolution,
    };
    const project = join(home, `${module}.json`);
    writeFileSync(project, JSON.stringify({ compilerOptions, files }));
    return project;
  });
  const compiler = `${root}node_modules/typescript/bin/tsc`;
  const options = { cwd: home, encoding: "utf8" } as const;
  const { status, stdout } = spawnSync(process.execPath, [compiler, "--build", "--force", ...projects], options);
  return status === 0 ? stdout : `${stdout}exit ${status}`;
}

test("TypeScript consumers compile with modules node16, nodenext and esnext behind a bundler", () => {
  const list = `console.log(JSON.stringify(Object.fromEntries(await Promise.all(${JSON.stringify(entryPoints)}
    .map(async (e) => [e, Object.keys(await import(e)).filter((n) => n !== "default")])))));`;
  const program = typedProgram(JSON.parse(run("list.mjs", list)));
  writeFileSync(join(home, "consumer.mts"), program);
  writeFileSync(join(home, "consumer.cts"), program);
  const settings: readonly Setting[] = [
    ["node16", "node16"],
    ["nodenext", "nodenext"],
    ["esnext", "bundler"],
  ];
  expect(compile(["consumer.mts", "consumer.cts"], settings)).toBe("");
  expect(readdirSync(home).filter((name) => name.endsWith(".tsbuildinfo"))).toHaveLength(settings.length);
});

test("a wrong use does not compile: the types are really read", () => {
  const program = 'import type { ErrorCode } from "fermistate";\nexport const code: ErrorCode = "no";\n';
  writeFileSync(join(home, "wrong.mts"), program);
  writeFileSync(join(home, "wrong.cts"), program);
  const complaints = compile(["wrong.mts", "wrong.cts"], [["nodenext", "nodenext"]]);
  expect(complaints).toMatch(/^wrong\.mts\(2,14\): error TS2322/m);
  expect(complaints).toMatch(/^wrong\.cts\(2,14\): error TS2322/m);
});

/** What each entry point costs a browser, and what may not be in it. */
import { readFile } from "node:fs/promises";
import { fileURLToPath } from "node:url";
import { brotliCompressSync } from "node:zlib";
import { build } from "esbuild";
import { expect, test } from "vitest";

const root = fileURLToPath(new URL("../..", import.meta.url));

/** A program bundled into one minified file, and the files it was made of. */
async function bundle(contents: string, external: readonly string[]): Promise<{ code: string; inputs: string[] }> {
  const result = await build({
    stdin: { contents, resolveDir: root },
    absWorkingDir: root,
    bundle: true,
    minify: true,
    format: "esm",
    platform: "neutral",
    mainFields: ["module", "main"],
    external: [...external],
    metafile: true,
    write: false,
    logLevel: "silent",
  });
  return { code: result.outputFiles[0]?.text ?? "", inputs: Object.keys(result.metafile.inputs) };
}

/** A program that uses everything of a built entry point. */
const all = (entry: string): string => `export * from "./dist/${entry}.js";`;

/**
 * Limits in bytes, minified and brotli-compressed, run-time dependencies included where the entry point uses them:
 * about 1.25 times what was measured (printed by each test) when the line was last touched. The core is mostly the
 * table of nuclides; charts hold d3 and certify holds decimal.js (each about 10 kB).
 */
const limits: Record<string, number> = {
  index: 80_000,
  barotropes: 81_000,
  contributions: 3_000,
  grids: 12_500,
  charts: 24_000,
  files: 3_000,
  compare: 82_000, // regime brings the electron gas and AME2020
  certify: 86_000, // decimal.js, the formulas a second time, d3 for maps
  parallel: 80_000, // with the inverse questions
  tables: 90_000,
  "table-build": 90_000,
  "table-files": 53_500, // most of it AME2020 for compositions, and zod; h5wasm and hyparquet-writer are loaded when needed
  structure: 78_000, // limitingMassLadder brings the equation of state and AME2020; a program without it does not pay
};

/** What is not bundled: modules of Node, and packages that users may have or not. */
const externals: Record<string, string[]> = {
  files: ["node:*"],
  parallel: ["node:*", "tinypool"],
  "table-build": ["node:*", "tinypool", "zod/mini"],
  "table-files": ["h5wasm", "hyparquet-writer"],
};

test.each(Object.entries(limits))("fermistate %s stays under %i bytes", async (entry, limit) => {
  const { code } = await bundle(all(entry), externals[entry] ?? []);
  const bytes = brotliCompressSync(code).length;
  console.log(`${entry}: ${code.length} bytes minified, ${bytes} brotli (limit ${limit})`);
  expect(bytes).toBeLessThanOrEqual(limit);
});

/** Names that only Node defines; `process.env` and the like would stop a page. */
const nodeOnly = /(?<![\w$.])(require|process|Buffer|__dirname|__filename|global)(?![\w$])\s*[.([]/g;

test("the core is made of dist only: no zod, no decimal.js, no d3, nothing of Node", async () => {
  const { code, inputs } = await bundle(all("index"), []); // a Node module is an error here, a package shows as an input
  expect(inputs.filter((path) => !/^(dist\/[\w.-]+\.js|<stdin>)$/.test(path))).toEqual([]);
  expect(code.match(nodeOnly)).toBeNull();
  // d3 is copied into dist, so it would not show as an input.
  const dist = await Promise.all(
    inputs.filter((path) => path.startsWith("dist/")).map((path) => readFile(root + path)),
  );
  expect(dist.length).toBeGreaterThan(0);
  expect(dist.filter((text) => text.includes("// node_modules/"))).toEqual([]);
});

test("the search for unwanted code finds it", async () => {
  const { inputs } = await bundle('import "zod/mini"; import { Decimal } from "decimal.js"; Decimal.set({})', []);
  expect(inputs.filter((path) => path.startsWith("node_modules/")).length).toBeGreaterThan(1);
  await expect(bundle('import "node:fs"', [])).rejects.toThrow(/node:fs/);
  expect("var a=process.env.HOME,b=require('x'),c=Buffer.from(d)".match(nodeOnly)).toHaveLength(3);
  expect("new ArrayBuffer(8);subprocess.run();this.process.x".match(nodeOnly)).toBeNull();
});

test("an unused import of the core costs a bundler nothing", async () => {
  const { code } = await bundle('import { isFermistateError } from "fermistate"; export const nothing = 0;', []);
  expect(code.length).toBeLessThan(60);
});

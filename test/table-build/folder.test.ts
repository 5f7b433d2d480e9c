/** Tables built in a folder: one answer however the work is split, killed and taken up again. */
import { spawn } from "node:child_process";
import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, truncateSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { build } from "esbuild";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { isFermistateError } from "../../src/errors.js";
import { composition } from "../../src/matter/composition.js";
import { assembleFolders, buildInFolder } from "../../src/table-build/index.js";
import { buildTable, type FreeEnergyTable } from "../../src/tables/index.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { uniform } from "../measured.js";

const root = fileURLToPath(new URL("../..", import.meta.url));
const fractions = { C12: 0.5, O16: 0.5 };
const options = { density: [1e5, 1e8], temperature: [1e6, 3e7], accuracy: 1e-3 } as const;
const request = { matter: { whiteDwarfMatter: {} }, composition: fractions, options };

let place: string;
let expected: string;
beforeAll(async () => {
  mkdirSync(`${root}.cache`, { recursive: true });
  place = mkdtempSync(join(`${root}.cache`, "tables-"));
  expected = bits(buildTable(whiteDwarfMatter(), composition(fractions), options));
  // The room as the build makes it, for threads and for programs that are killed.
  await build({
    entryPoints: {
      "table-build": `${root}src/table-build/index.ts`,
      "strip-worker": `${root}src/table-build/strip-worker.ts`,
    },
    outdir: place,
    bundle: true,
    splitting: true,
    format: "esm",
    platform: "node",
    external: ["tinypool", "zod"],
    logLevel: "silent",
  });
  writeFileSync(join(place, "package.json"), '{ "type": "module" }');
});
afterAll(() => rmSync(place, { recursive: true, force: true }));

/** All numbers of a table as text: equal texts are equal bits. */
function bits(table: FreeEnergyTable): string {
  const arrays = table.sheets.map(({ phase, densityLevels, temperatureLevels, exponents, nodes }) => [
    phase,
    [...densityLevels],
    [...temperatureLevels],
    [...exponents],
    [...nodes],
  ]);
  return JSON.stringify([arrays, [...table.cold.nodes], table.certificate]);
}

const folder = (name: string): string => join(place, name);

/** Runs a program that builds in a folder; resolves with its last line, or undefined where it was killed after `life` ms. */
function child(name: string, more: string, life?: number): Promise<string | undefined> {
  const code = `import { buildInFolder } from "./table-build.js";
    const result = await buildInFolder(${JSON.stringify(folder(name))}, ${JSON.stringify(request)}, ${more});
    console.log(JSON.stringify(result));`;
  const file = join(place, `run-${name}.js`);
  writeFileSync(file, code);
  return new Promise((resolve, reject) => {
    const running = spawn(process.execPath, [file], { stdio: ["ignore", "pipe", "inherit"] });
    let text = "";
    running.stdout.on("data", (chunk) => {
      text += chunk;
    });
    const timer = life === undefined ? undefined : setTimeout(() => running.kill("SIGKILL"), life);
    running.once("exit", (exit, signal) => {
      clearTimeout(timer);
      if (exit === 0 || signal === "SIGKILL") resolve(exit === 0 ? text.trim() : undefined);
      else reject(new Error(`exit ${exit}, ${signal}`));
    });
  });
}

describe("the same bits", () => {
  test("in one go, with progress", async () => {
    const seen: string[] = [];
    const result = await buildInFolder(folder("whole"), request, {
      onProgress: ({ done, all }) => seen.push(`${done}/${all}`),
    });
    expect(result).toEqual({ made: 6, kept: 0, left: 0, strips: 6 });
    expect(seen).toEqual(["0/6", "1/6", "2/6", "3/6", "4/6", "5/6", "6/6"]);
    expect(bits(await assembleFolders(folder("whole")))).toBe(expected);
    expect(await buildInFolder(folder("whole"), request)).toMatchObject({ made: 0, kept: 6 });
  });

  test("on two threads", async () => {
    expect(await child("threads", "{ threads: 2 }")).toContain('"made":6');
    expect(bits(await assembleFolders(folder("threads")))).toBe(expected);
  });

  test("in three shares, merged in any order", async () => {
    for (const k of [1, 2, 3]) await buildInFolder(folder(`share-${k}`), request, { shard: [k, 3] });
    const error = await assembleFolders(folder("share-1"), folder("share-3")).catch((one: unknown) => one);
    expect(error).toMatchObject({ code: "invalid-option", given: "without 2, 5" });
    expect(bits(await assembleFolders(folder("share-3"), folder("share-1"), folder("share-2")))).toBe(expected);
  });

  test("killed twenty times at random moments, then finished", async () => {
    const random = uniform(99);
    let killed = 0;
    for (let round = 0; killed < 20 && round < 60; round++) {
      // A run needs some 0.2 s to start; what it leaves behind is taken away so that there is always work to interrupt.
      const ended = await child("killed", "{}", 150 + 500 * random());
      if (ended === undefined) killed += 1;
      else rmSync(join(folder("killed"), `strip-000${1 + Math.floor(6 * random())}.json`), { force: true });
    }
    expect(killed).toBe(20);
    expect(await child("killed", "{}")).toContain('"left":0');
    expect(bits(await assembleFolders(folder("killed")))).toBe(expected);
    expect(readdirSync(folder("killed")).filter((name) => name.endsWith(".part"))).toEqual([]);
  }, 120_000);

  test("stopped by a signal, it says what is left", async () => {
    const signal = { aborted: false };
    const result = await buildInFolder(folder("stopped"), request, {
      signal,
      onProgress: ({ done }) => {
        signal.aborted = done === 2;
      },
    });
    expect(result).toEqual({ made: 2, kept: 0, left: 4, strips: 6 });
    await buildInFolder(folder("stopped"), request);
    expect(bits(await assembleFolders(folder("stopped")))).toBe(expected);
  });
});

test("damaged strips are made again", async () => {
  const name = (k: number): string => join(folder("whole"), `strip-000${k}.json`);
  truncateSync(name(2), 1000);
  const text = readFileSync(name(4), "utf8");
  writeFileSync(name(4), text.replace(/[A-M](?=[^"]*"\}\],"checksum)/, "Z"));
  writeFileSync(name(5), "");
  writeFileSync(name(6), readFileSync(name(3))); // another strip's
  await expect(assembleFolders(folder("whole"))).rejects.toMatchObject({ given: "without 2, 4, 5, 6" });
  expect(await buildInFolder(folder("whole"), request)).toMatchObject({ made: 4, kept: 2 });
  expect(bits(await assembleFolders(folder("whole")))).toBe(expected);
});

test("refusals", async () => {
  const other = { ...request, composition: { He4: 1 } };
  const cases: readonly (readonly [() => Promise<unknown>, string, string])[] = [
    [() => buildInFolder(folder("whole"), other), "invalid-option", "folder"],
    [() => buildInFolder(folder("new"), request, { threads: 0 }), "invalid-option", "options.threads"],
    [() => buildInFolder(folder("new"), request, { shard: [4, 3] }), "invalid-option", "options.shard"],
    [() => buildInFolder(folder("new"), request, { speed: 1 } as object), "invalid-option", "options"],
    [() => buildInFolder(join(folder("whole"), "table.json"), request), "file-not-written", "folder"],
    [() => buildInFolder(folder("new"), { ...request, composition: { Xx1: 1 } }), "unknown-nuclide", "nuclide"],
    [
      () => buildInFolder(folder("new"), { ...request, options: { ...options, accuracy: 1 } }),
      "out-of-range",
      "accuracy",
    ],
    [() => assembleFolders(), "invalid-option", "folders"],
    [() => assembleFolders(folder("nowhere")), "invalid-option", "folder"],
    [() => assembleFolders(folder("share-1"), place), "invalid-option", "folder"],
  ];
  for (const [ask, code, argument] of cases) {
    const error = await ask().then(
      () => undefined,
      (one: unknown) => one,
    );
    expect(isFermistateError(error), String(error)).toBe(true);
    expect(error).toMatchObject({ code });
    expect(String((error as { argument: string }).argument)).toContain(argument === "nuclide" ? "" : argument);
  }
  expect(readdirSync(place)).not.toContain("new");
});

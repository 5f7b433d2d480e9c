/**
 * The house and its floors: a room imports only from below, no file imports itself in a circle, and the core reaches
 * neither Node nor a package. What DEVELOPERS.md draws is checked here.
 */
import { readdirSync, readFileSync } from "node:fs";
import { dirname, join, normalize } from "node:path";
import { fileURLToPath } from "node:url";
import ts from "typescript";
import { describe, expect, test } from "vitest";

const root = fileURLToPath(new URL("..", import.meta.url));

/** Rooms from the ground up; those on one floor do not know each other. A room is a folder or a file of src. */
const floors: readonly (readonly string[])[] = [
  ["constants", "errors", "version"],
  ["numerics"],
  ["matter"],
  ["thermodynamics"],
  ["fermi-gas", "ions", "radiation"],
  ["coulomb", "inverse"],
  ["regime"],
  ["barotropes"],
  ["tables"],
  ["white-dwarf-matter", "contributions"],
  ["grids"],
  ["charts", "files", "parallel", "table-files"],
  ["table-build"],
  ["certify", "compare"],
  ["structure"],
  ["index"],
  ["cli"],
];

/** What a room may not import although it lies below. */
const forbidden: Readonly<Record<string, readonly string[]>> = {
  // The reference shares no code with what it judges.
  certify: ["numerics", "fermi-gas", "coulomb", "ions", "radiation"],
  // The core: sub-paths are entered by their own name.
  index: [
    "barotropes",
    "grids",
    "charts",
    "files",
    "certify",
    "compare",
    "contributions",
    "parallel",
    "structure",
    "tables",
    "table-build",
    "table-files",
  ],
};

/** Packages a room may import; any other room imports none. `node:` stands for every module of Node. */
const packages: Readonly<Record<string, readonly string[]>> = {
  charts: ["d3-scale", "d3-shape"],
  files: ["node:"],
  certify: ["decimal.js"],
  parallel: ["node:", "tinypool"],
  "table-build": ["node:", "zod/mini"],
  "table-files": ["h5wasm", "hyparquet-writer", "zod/mini"],
  cli: ["node:", "zod/mini"],
};

/** Every source file with the names it imports: paths relative to src for its own, bare names for the rest. */
type Imports = ReadonlyMap<string, readonly string[]>;

/** Reads `import`, `export ... from`, `import()` and `import type` of every file, by the compiler's own scanner. */
function readImports(files: ReadonlyMap<string, string>): Imports {
  const all = new Map<string, readonly string[]>();
  for (const [file, text] of files) {
    const names = ts.preProcessFile(text, true, true).importedFiles.map((found) => found.fileName);
    const resolved = names.map((name) =>
      name.startsWith(".") ? normalize(join(dirname(file), name)).replace(/\.js$/, ".ts") : name,
    );
    all.set(file, resolved);
  }
  return all;
}

/** Room of a file: its folder, or its own name where it stands in src itself. */
const room = (file: string): string => file.split("/")[0]?.replace(/\.ts$/, "") ?? "";
const floor = (name: string): number => floors.findIndex((rooms) => rooms.includes(name));
const isOwn = (name: string): boolean => name.endsWith(".ts");

/** Every import that breaks a rule, as "importer -> imported: reason". */
function violations(imports: Imports): string[] {
  const found: string[] = [];
  for (const [file, names] of imports) {
    const from = room(file);
    if (floor(from) < 0) found.push(`${file}: the room "${from}" has no floor; give it one in this test`);
    for (const name of names) {
      const say = (reason: string) => found.push(`${file} -> ${name}: ${reason}`);
      if (!isOwn(name)) {
        const allowed = packages[from] ?? [];
        if (!allowed.some((prefix) => name === prefix || (prefix.endsWith(":") && name.startsWith(prefix)))) {
          say(`${from} may import ${allowed.join(", ") || "no package"}`);
        }
        continue;
      }
      const to = room(name);
      if (!imports.has(name)) say("no such file");
      else if (to === from) continue;
      else if (floor(to) >= floor(from)) say(`${to} does not lie below ${from}`);
      else if (forbidden[from]?.includes(to)) say(`${from} must not know ${to}`);
    }
  }
  return found;
}

/** Every circle of imports, each once, as the files along it. */
function circles(imports: Imports): string[] {
  const found: string[] = [];
  const done = new Set<string>();
  const walk = (file: string, path: readonly string[]): void => {
    const at = path.indexOf(file);
    if (at >= 0) found.push([...path.slice(at), file].join(" -> "));
    if (at >= 0 || done.has(file)) return;
    for (const name of imports.get(file) ?? []) if (isOwn(name)) walk(name, [...path, file]);
    done.add(file);
  };
  for (const file of imports.keys()) walk(file, []);
  return found;
}

/** Bare names (packages, Node) that a file reaches through any chain of imports. */
function reached(imports: Imports, start: string): string[] {
  const seen = new Set([start]);
  for (const file of seen) for (const name of imports.get(file) ?? []) seen.add(name);
  return [...seen].filter((name) => !isOwn(name)).sort();
}

const sources = new Map(
  readdirSync(`${root}src`, { recursive: true, encoding: "utf8" })
    .filter((file) => file.endsWith(".ts"))
    .sort()
    .map((file) => [file.replaceAll("\\", "/"), readFileSync(`${root}src/${file}`, "utf8")]),
);

describe("the sources", () => {
  const imports = readImports(sources);

  test("imports go down only", () => expect(violations(imports)).toEqual([]));

  test("there is no circle of imports", () => expect(circles(imports)).toEqual([]));

  test("the core reaches no package and nothing of Node", () => expect(reached(imports, "index.ts")).toEqual([]));

  test("grids are pure too", () => expect(reached(imports, "grids/index.ts")).toEqual([]));

  test("comparisons reach charts only", () => expect(reached(imports, "compare/index.ts")).toEqual(["d3-scale"]));

  test("stellar structure is pure too", () => expect(reached(imports, "structure/index.ts")).toEqual([]));

  test("imports name files with their .js ending", () => {
    const loose = [...sources].flatMap(([file, text]) =>
      ts
        .preProcessFile(text, true, true)
        .importedFiles.filter((found) => found.fileName.startsWith(".") && !found.fileName.endsWith(".js"))
        .map((found) => `${file}: ${found.fileName}`),
    );
    expect(loose).toEqual([]);
  });
});

test("the top level holds what the design lists, and dot-files", () => {
  const listed = [
    "src",
    "test",
    "docs",
    "bench",
    "package.json",
    "package-lock.json",
    "tsconfig.json",
    "tsup.config.ts",
  ];
  listed.push("README.md", "DEVELOPERS.md", "CHANGELOG.md", "LICENSE");
  const made = ["node_modules", "dist", "fermistate-demo"];
  const names = readdirSync(root).filter(
    (name) => !name.startsWith(".") && !made.includes(name) && !name.endsWith(".tgz"),
  );
  expect(names.filter((name) => !listed.includes(name))).toEqual([]);
});

describe("the rules see what they forbid", () => {
  const house = (files: Record<string, string>) => readImports(new Map(Object.entries(files)));

  test.each([
    ["a room above", { "ions/gas.ts": 'import "../grids/axes.js";', "grids/axes.ts": "" }, "does not lie below"],
    [
      "a neighbour",
      { "ions/gas.ts": 'import type { A } from "../radiation.js";', "radiation.ts": "" },
      "not lie below",
    ],
    ["a type by import()", { "errors.ts": 'let a: import("./matter/a.js").A;', "matter/a.ts": "" }, "not lie below"],
    ["a re-export", { "matter/a.ts": 'export * from "../cli/main.js";', "cli/main.ts": "" }, "not lie below"],
    [
      "the judged in the judge",
      { "certify/a.ts": 'import "../fermi-gas/b.js";', "fermi-gas/b.ts": "" },
      "must not know",
    ],
    [
      "a sub-path in the core",
      { "index.ts": 'export * from "./grids/index.js";', "grids/index.ts": "" },
      "must not know",
    ],
    ["Node in the core", { "matter/a.ts": 'const fs = await import("node:fs");' }, "may import no package"],
    ["zod in certify", { "certify/a.ts": 'import * as z from "zod/mini";' }, "may import decimal.js"],
    ["all of zod", { "cli/a.ts": 'import { z } from "zod";' }, "may import node:, zod/mini"],
    ["a missing file", { "matter/a.ts": 'import "./gone.js";' }, "no such file"],
    ["a new room", { "helpers/a.ts": "" }, 'the room "helpers" has no floor'],
  ])("%s", (_, files, reason) => {
    const found = violations(house(files as Record<string, string>));
    expect(found).toHaveLength(1);
    expect(found[0]).toContain(reason);
  });

  test("a circle, of types too", () => {
    const files = { "matter/a.ts": 'import "./b.js";', "matter/b.ts": 'import type { A } from "./a.js";' };
    expect(circles(house(files))).toEqual(["matter/a.ts -> matter/b.ts -> matter/a.ts"]);
  });

  test("a package behind two doors", () => {
    const files = { "index.ts": 'export * from "./matter/a.js";', "matter/a.ts": 'import { z } from "zod";' };
    expect(reached(house(files), "index.ts")).toEqual(["zod"]);
  });
});

/** Two builds: the library (ESM, CommonJS, types; one file per sub-path) and the command line (one Node program). */
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { defineConfig, type Options } from "tsup";
import ts from "typescript";

/** d3 is published as ESM only, so the CommonJS half could not load it: it is copied into dist, with its licences. */
const bundled = [/^d3-/, /^internmap$/];
const licencesFile = "dist/THIRD-PARTY-LICENSES.txt";

/** Folders of all bundled packages, found by the bundler itself; both builds add theirs. */
const bundledFolders = new Set<string>();

const shared: Options = {
  target: "es2022",
  removeNodeProtocol: false,
  noExternal: bundled,
  esbuildOptions(options) {
    // Module-level numeric constants (slot indices of records) become literals in hot loops, across modules too:
    // those that stand at the head of their file, before any import and any other statement.
    options.minifySyntax = true;
  },
  esbuildPlugins: [
    {
      name: "third-party-licences",
      setup(build) {
        build.initialOptions.metafile = true;
        build.onEnd((result) => {
          for (const input of Object.keys(result.metafile?.inputs ?? {})) {
            const folder = /^(?:.*\/)?node_modules\/(?:@[^/]+\/)?[^/]+/.exec(input)?.[0];
            if (folder !== undefined) bundledFolders.add(folder);
          }
          writeLicences();
        });
      },
    },
  ],
};

/** Writes the name, version and full licence text of every bundled package. */
function writeLicences(): void {
  if (bundledFolders.size === 0) return;
  const texts = [...bundledFolders].sort().map((folder) => {
    const about = JSON.parse(readFileSync(join(folder, "package.json"), "utf8")) as Record<string, string>;
    const file = readdirSync(folder).find((name) => /^licen[cs]e/i.test(name));
    if (file === undefined) throw new Error(`${folder} is bundled but has no licence file`);
    const text = readFileSync(join(folder, file), "utf8").trim();
    return `${about["name"]} ${about["version"]} (${about["license"]})\n\n${text}\n`;
  });
  if (!existsSync("dist")) mkdirSync("dist");
  const head = "Parts of these packages are included in the files of this folder.\n";
  writeFileSync(licencesFile, [head, ...texts].join(`\n${"-".repeat(80)}\n\n`));
}

/** Types are built for what package.json exports; the file of the threads needs none. */
const { exports: exported } = JSON.parse(readFileSync("package.json", "utf8")) as { exports: Record<string, unknown> };
const typed = Object.fromEntries(
  Object.keys(exported)
    .filter((name) => !name.endsWith(".json"))
    .map((name) => (name === "." ? ["index", "src/index.ts"] : [name.slice(2), `src${name.slice(1)}/index.ts`])),
);

/**
 * The bundler writes `var` for every `const` at the head of a module. Back again, where nothing assigns: V8 builds the
 * address of a constant typed array and the value of a constant number into optimised code, but loads and checks a
 * variable at every use (8 % of a state).
 */
function constantsOf(code: string): string {
  const file = ts.createSourceFile("chunk.js", code, ts.ScriptTarget.ES2022, false);
  const assigned = new Set<string>();
  const visit = (node: ts.Node): void => {
    if (ts.isBinaryExpression(node) && ts.isIdentifier(node.left) && isAssignment(node.operatorToken.kind)) {
      assigned.add(node.left.text);
    }
    if ((ts.isPrefixUnaryExpression(node) || ts.isPostfixUnaryExpression(node)) && ts.isIdentifier(node.operand)) {
      assigned.add(node.operand.text);
    }
    ts.forEachChild(node, visit);
  };
  visit(file);
  let out = code;
  for (const { declarationList } of file.statements.filter(ts.isVariableStatement).reverse()) {
    const fixed = ({ name, initializer }: ts.VariableDeclaration): boolean =>
      initializer !== undefined && ts.isIdentifier(name) && !assigned.has(name.text);
    const start = declarationList.getStart(file);
    if (!code.startsWith("var", start) || !declarationList.declarations.every(fixed)) continue;
    out = `${out.slice(0, start)}const${out.slice(start + "var".length)}`;
  }
  return out;
}

function isAssignment(kind: ts.SyntaxKind): boolean {
  return kind >= ts.SyntaxKind.FirstAssignment && kind <= ts.SyntaxKind.LastAssignment;
}

export default defineConfig([
  {
    ...shared,
    plugins: [{ name: "constants", renderChunk: (code) => ({ code: constantsOf(code) }) }],
    entry: {
      index: "src/index.ts",
      barotropes: "src/barotropes/index.ts",
      grids: "src/grids/index.ts",
      charts: "src/charts/index.ts",
      contributions: "src/contributions/index.ts",
      files: "src/files/index.ts",
      certify: "src/certify/index.ts",
      compare: "src/compare/index.ts",
      parallel: "src/parallel/index.ts",
      "parallel-worker": "src/parallel/parallel-worker.ts", // stands beside parallel.js for its threads
      structure: "src/structure/index.ts",
      "table-files": "src/table-files/index.ts",
      tables: "src/tables/index.ts",
      "table-build": "src/table-build/index.ts",
      "strip-worker": "src/table-build/strip-worker.ts", // stands beside table-build.js for its threads
    },
    format: ["esm", "cjs"],
    platform: "neutral",
    external: [/^node:/],
    splitting: true,
    // Hands the CommonJS conversion to rollup: tsup's own breaks on class fields written by `minifySyntax`.
    treeshake: true,
    dts: {
      entry: typed,
      compilerOptions: {
        ignoreDeprecations: "6.0", // tsup sets `baseUrl`, which TypeScript 6 calls deprecated
        types: ["node"], // for src/files and src/parallel only
        // "npm run types" checks: every declaration states its type (isolatedDeclarations), so writing it needs no check,
        // which would be half the time of a build.
        noCheck: true,
        isolatedDeclarations: false,
      },
    },
  },
  {
    ...shared,
    entry: { cli: "src/cli/main.ts" },
    format: ["esm"],
    platform: "node",
  },
]);

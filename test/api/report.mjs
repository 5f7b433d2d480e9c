// @ts-check
/**
 * Writes the public API of every entry point to test/api/*.api.md, from the built types; with --check compares only
 * and fails on a difference. A change of the API is thus a line in a diff. Needs a built dist.
 */
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { Extractor, ExtractorConfig } from "@microsoft/api-extractor";
import ts from "typescript";

const root = fileURLToPath(new URL("../..", import.meta.url));
const check = process.argv.includes("--check");
const temporary = `${root}.cache/api`;
mkdirSync(temporary, { recursive: true });

const about = JSON.parse(readFileSync(`${root}package.json`, "utf8"));
const names = Object.keys(about.exports)
  .filter((name) => !name.endsWith(".json"))
  .map((name) => (name === "." ? "index" : name.slice(2)));
/** Names that the core exports: a sub-path may use these types without exporting them again. */
const core = exportsOf(`${root}dist/index.d.ts`);
/** @type {string[]} */
const complaints = [];

for (const name of names) {
  const types = `${root}dist/${name}.d.ts`;
  if (!existsSync(types)) throw new Error(`${types} is missing: run "npm run build" first`);
  const config = ExtractorConfig.prepare({
    configObject: {
      projectFolder: root,
      mainEntryPointFilePath: types,
      compiler: {
        overrideTsconfig: {
          compilerOptions: {
            target: "es2022",
            lib: ["es2022"],
            types: [],
            module: "nodenext",
            moduleResolution: "nodenext",
            strict: true,
            skipLibCheck: true,
          },
          files: [types],
        },
      },
      apiReport: {
        enabled: true,
        reportFileName: `${name}.api.md`,
        reportFolder: `${root}test/api`,
        reportTempFolder: temporary,
      },
      docModel: { enabled: false },
      dtsRollup: { enabled: false },
      newlineKind: "lf",
      messages: {
        compilerMessageReporting: { default: { logLevel: /** @type {any} */ ("error") } },
        extractorMessageReporting: {
          "ae-undocumented": { logLevel: /** @type {any} */ ("error") },
          default: { logLevel: /** @type {any} */ ("none") },
          "ae-forgotten-export": { logLevel: /** @type {any} */ ("error") },
        },
        // Formulas in comments are LaTeX, which TSDoc's strict reading takes for bad escapes.
        tsdocMessageReporting: { default: { logLevel: /** @type {any} */ ("none") } },
      },
    },
    configObjectFullPath: `${root}test/api/report.mjs`,
    packageJsonFullPath: `${root}package.json`,
  });
  const result = Extractor.invoke(config, {
    localBuild: !check,
    showVerboseMessages: false,
    messageCallback(message) {
      const symbol = message.messageId === "ae-forgotten-export" ? /"([^"]+)"/.exec(message.text)?.[1] : undefined;
      const inCore = name !== "index" && symbol !== undefined && core.has(symbol);
      if (message.logLevel === "error" && !inCore) {
        complaints.push(`${name}: ${message.text.replaceAll(root, "")}`);
      }
      message.handled = true;
    },
  });
  if (check && result.apiReportChanged) {
    complaints.push(
      `${name}: the public API is not the one in test/api/${name}.api.md; run "npm run api", read the diff`,
    );
  }
}

for (const file of readdirSync(`${root}test/api`)) {
  if (!file.endsWith(".api.md") || names.includes(file.slice(0, -".api.md".length))) continue;
  if (check) complaints.push(`test/api/${file}: no such entry point`);
  else rmSync(`${root}test/api/${file}`);
}

/** @param {string} file types of one entry point */
function exportsOf(file) {
  const program = ts.createProgram([file], { module: ts.ModuleKind.NodeNext, types: [], skipLibCheck: true });
  const source = program.getSourceFile(file);
  const symbol = source && program.getTypeChecker().getSymbolAtLocation(source);
  return new Set(
    symbol &&
      program
        .getTypeChecker()
        .getExportsOfModule(symbol)
        .map((one) => one.name),
  );
}

for (const complaint of complaints) console.error(complaint);
if (complaints.length > 0) process.exitCode = 1;
else console.log(`${names.length} entry points: the API ${check ? "is as written" : "is written"} in test/api`);

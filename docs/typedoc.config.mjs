// @ts-check
/** The reference and the guide as one site in docs/api; formulas become MathML here, so a page needs no script for them. */
import { existsSync, readdirSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { tex } from "@mdit/plugin-tex";
import temml from "temml";

const folder = fileURLToPath(new URL(".", import.meta.url));
const guide = existsSync(`${folder}guide`) ? readdirSync(`${folder}guide`).filter((file) => file.endsWith(".md")) : [];

/** @type {Partial<import("typedoc").TypeDocOptions>} */
const options = {
  name: "fermistate",
  entryPoints: [
    "index",
    "barotropes/index",
    "grids/index",
    "contributions/index",
    "charts/index",
    "files/index",
    "certify/index",
    "compare/index",
    "parallel/index",
    "structure/index",
    "table-files/index",
    "tables/index",
    "table-build/index",
  ].map((file) => `../src/${file}.ts`),
  tsconfig: "../test/tsconfig.json",
  out: "api",
  readme: existsSync(`${folder}../README.md`) ? "../README.md" : "none",
  projectDocuments: guide.sort().map((file) => `guide/${file}`),
  customCss: "style.css",
  includeVersion: true,
  disableSources: true,
  githubPages: false,
  excludePrivate: true,
  excludeInternal: true,
  sort: ["source-order"],
  treatWarningsAsErrors: true,
  skipErrorChecking: true, // "npm run types" does it
  validation: {
    notExported: true,
    invalidLink: true,
    rewrittenLink: true,
    notDocumented: true,
    unusedMergeModuleWith: true,
  },
  // Members of interfaces are the API report's to ask for: TypeDoc would ask for those of mapped types too.
  requiredToBeDocumented: [
    "Module",
    "Variable",
    "Function",
    "Class",
    "Interface",
    "TypeAlias",
    "Method",
    "Constructor",
  ],
  markdownItLoader(parser) {
    parser.use(tex, {
      delimiters: "dollars",
      render: (/** @type {string} */ content, /** @type {boolean} */ displayMode) =>
        temml.renderToString(content, { displayMode, throwOnError: true }),
    });
  },
};

export default options;

/** The judge shares nothing with the judged: what the reference evaluates, it evaluates by itself. */
import { readFileSync } from "node:fs";
import { dirname, join, normalize } from "node:path";
import { fileURLToPath } from "node:url";
import ts from "typescript";
import { expect, test } from "vitest";

const source = fileURLToPath(new URL("../../src/", import.meta.url));

/** Modules that a file imports values from: `import type` and `export type` leave no trace in what runs. */
function valueImports(file: string): string[] {
  const tree = ts.createSourceFile(file, readFileSync(join(source, file), "utf8"), ts.ScriptTarget.ES2022);
  return tree.statements.flatMap((one) => {
    if (!ts.isImportDeclaration(one) && !ts.isExportDeclaration(one)) return [];
    const target = one.moduleSpecifier;
    if (target === undefined || !ts.isStringLiteral(target) || !target.text.startsWith(".")) return [];
    const clause = ts.isImportDeclaration(one) ? one.importClause : one.exportClause;
    const isTypeOnly = ts.isImportDeclaration(one) ? one.importClause?.isTypeOnly : one.isTypeOnly;
    const named = clause && "namedBindings" in clause ? clause.namedBindings : clause;
    const elements = named && (ts.isNamedImports(named) || ts.isNamedExports(named)) ? [...named.elements] : undefined;
    if (isTypeOnly || elements?.every((element) => element.isTypeOnly)) return [];
    return [normalize(join(dirname(file), target.text)).replace(/\.js$/, ".ts")];
  });
}

test("the reference reaches no arithmetic outside its room: errors and the table of nuclides alone", () => {
  const reached = new Set(["certify/reference-state.ts", "certify/reference-quantities.ts"]);
  const outside = new Set<string>();
  for (const file of reached) {
    for (const target of valueImports(file)) {
      if (target.startsWith("certify/")) reached.add(target);
      else outside.add(target);
    }
  }
  expect(reached.size).toBeGreaterThan(20);
  expect([...outside].sort()).toEqual(["errors.ts", "matter/nuclides.ts"]);
});

/**
 * Every ```ts block of the README, of docs/guide and of doc comments in src runs and compiles, each by itself.
 *
 * A line that ends in `// => value` is an assertion on the statement before the mark: its expression, the variable it
 * declares, or what it hands to console.log. Numbers are compared to the digits printed (half a unit of the last one),
 * with 13 digits or more to 1e-12 relative; a whole number without exponent means exactly that number; a unit may
 * follow. Text, booleans, arrays and objects are written as in TypeScript. `// => throws CODE` expects an error.
 */
import { existsSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath, pathToFileURL } from "node:url";
import ts from "typescript";
import { afterAll, beforeAll, describe, expect, test, vi } from "vitest";
import { isFermistateError } from "../src/errors.js";
import type * as ThreadsRoom from "../src/parallel/threads.js";
import { makeWorkshop } from "./parallel/threads-from-source.js";

/** Threads of examples run a bundle of the sources. */
const worker = vi.hoisted(() => ({ file: new URL("file:///nowhere") }));
vi.mock("../src/parallel/threads.js", async (original) => {
  const { startThreads } = await original<typeof ThreadsRoom>();
  const built = (file: URL): URL => new URL(`./${file.pathname.split("/").at(-1)}`, worker.file);
  return { startThreads: (count: number, file: URL) => startThreads(count, built(file)) };
});
beforeAll(async () => {
  const workshop = await makeWorkshop();
  worker.file = workshop.worker;
  return workshop.remove;
});

const root = fileURLToPath(new URL("..", import.meta.url));
const workshop = `${root}.cache/examples`;

/** One block: where it begins and its text. */
interface Block {
  readonly file: string;
  readonly line: number;
  readonly code: string;
}

/** The ```ts blocks of a Markdown text; `line` counts from that of the text's first line. */
function blocksOf(file: string, text: string, firstLine = 1): Block[] {
  const found: Block[] = [];
  let open: { line: number; indent: number; lines: string[] } | undefined;
  for (const [i, line] of text.split("\n").entries()) {
    if (open === undefined) {
      const start = /^(\s*)```ts\s*$/.exec(line);
      if (start !== null) open = { line: firstLine + i, indent: start[1]?.length ?? 0, lines: [] };
    } else if (/^\s*```\s*$/.test(line)) {
      found.push({ file, line: open.line, code: open.lines.join("\n") });
      open = undefined;
    } else open.lines.push(line.slice(open.indent));
  }
  if (open !== undefined) throw new Error(`${file}:${open.line}: the block has no end`);
  return found;
}

/** The blocks of all doc comments of a source file. */
function blocksOfComments(file: string, text: string): Block[] {
  return [...text.matchAll(/^[ \t]*\/\*\*[\s\S]*?\*\//gm)].flatMap((comment) => {
    const firstLine = text.slice(0, comment.index).split("\n").length;
    return blocksOf(file, comment[0].replace(/^[ \t]*(\/\*\*|\*\/|\*) ?/gm, ""), firstLine);
  });
}

function allBlocks(): Block[] {
  const list = (folder: string, ending: string) =>
    existsSync(root + folder)
      ? readdirSync(root + folder, { recursive: true, encoding: "utf8" })
          .filter((file) => file.endsWith(ending))
          .sort()
          .map((file) => `${folder}/${file}`)
      : [];
  const read = (file: string) => readFileSync(root + file, "utf8");
  const pages = [...(existsSync(`${root}README.md`) ? ["README.md"] : []), ...list("docs/guide", ".md")];
  return [
    ...pages.flatMap((file) => blocksOf(file, read(file))),
    ...list("src", ".ts").flatMap((file) => blocksOfComments(file, read(file))),
  ];
}

/** The block with every mark turned into a call of `check(actual, expected)` after its statement. */
function withChecks(code: string): string {
  const source = ts.createSourceFile("block.ts", code, ts.ScriptTarget.ES2022, true);
  const edits: { from: number; to: number; text: string }[] = [];
  for (const mark of code.matchAll(/\/\/ => (.*)$/gm)) {
    const line = code.slice(0, mark.index).split("\n").length;
    const lineOf = (position: number) => source.getLineAndCharacterOfPosition(position).line + 1;
    const statement = source.statements.find((one) => lineOf(one.end) === line && one.end <= mark.index);
    if (statement === undefined) throw new Error(`no top-level statement ends before "${mark[0]}"`);
    edits.push({ from: statement.getStart(), to: statement.end, text: checked(statement, mark[1]?.trim() ?? "") });
  }
  let result = code;
  for (const { from, to, text } of edits.reverse()) result = result.slice(0, from) + text + result.slice(to);
  return result;
}

/** A statement followed by the check of its value. */
function checked(statement: ts.Statement, expected: string): string {
  const text = statement.getText();
  const wanted = JSON.stringify(expected);
  if (expected.startsWith("throws ")) return `await globalThis.checkThrows(async () => { ${text} }, ${wanted});`;
  if (ts.isVariableStatement(statement)) {
    const last = statement.declarationList.declarations.at(-1);
    if (last !== undefined && ts.isIdentifier(last.name)) {
      return `${text} globalThis.check(${last.name.text}, ${wanted});`;
    }
  }
  if (ts.isExpressionStatement(statement)) {
    const { expression } = statement;
    const isPrint = ts.isCallExpression(expression) && expression.expression.getText() === "console.log";
    const value = isPrint ? (expression.arguments[0]?.getText() ?? "undefined") : expression.getText();
    return `globalThis.check(${value}, ${wanted});`;
  }
  throw new Error(`cannot compare "${text}"`);
}

/** What differs between a value and what the page says, in words; undefined when they agree. */
function disagreement(actual: unknown, expected: string): string | undefined {
  const number = /^[+-]?(\d|\.\d)[\d_.]*(e[+-]?\d+)?(?=\s|,|;|$)/i.exec(expected);
  if (number !== null) return compare(actual, ts.factory.createNumericLiteral(0), number[0]);
  const source = ts.createSourceFile("value.ts", `(${expected})`, ts.ScriptTarget.ES2022, true);
  const [statement, more] = source.statements;
  if (statement === undefined || more !== undefined || !ts.isExpressionStatement(statement)) {
    return `"${expected}" is not one value`;
  }
  return compare(actual, statement.expression);
}

/** Compares with a literal; `digits` is the literal's text where it is a number. */
function compare(
  actual: unknown,
  literal: ts.Expression,
  digits = literal.pos < 0 ? "" : literal.getText(),
): string | undefined {
  const not = (wanted: string) => `${show(actual)} is not ${wanted}`;
  if (ts.isParenthesizedExpression(literal)) return compare(actual, literal.expression);
  if (ts.isNumericLiteral(literal) || ts.isPrefixUnaryExpression(literal)) {
    return typeof actual === "number" && agrees(actual, digits) ? undefined : not(digits);
  }
  if (ts.isStringLiteralLike(literal)) return actual === literal.text ? undefined : not(JSON.stringify(literal.text));
  if (ts.isArrayLiteralExpression(literal)) {
    const list = Array.isArray(actual) || ArrayBuffer.isView(actual) ? (actual as ArrayLike<unknown>) : undefined;
    if (list === undefined || list.length !== literal.elements.length) return not(digits);
    return first(literal.elements.map((element, i) => compare(list[i], element)));
  }
  if (ts.isObjectLiteralExpression(literal)) {
    if (typeof actual !== "object" || actual === null) return not(digits);
    const wanted = literal.properties.filter(ts.isPropertyAssignment);
    const names = wanted.map((property) => (property.name as ts.Identifier | ts.StringLiteral).text);
    if (names.length !== literal.properties.length) return `"${digits}" is not plain data`;
    if (Object.keys(actual).sort().join() !== [...names].sort().join()) return not(digits);
    const values = actual as Record<string, unknown>;
    return first(wanted.map((property, i) => compare(values[names[i] ?? ""], property.initializer)));
  }
  const words: Record<string, unknown> = { true: true, false: false, null: null, undefined, Infinity };
  if (!(digits in words)) return `"${digits}" is not a value that can be compared`;
  return Object.is(actual, words[digits]) ? undefined : not(digits);
}

const first = (found: readonly (string | undefined)[]): string | undefined => found.find((one) => one !== undefined);
const show = (value: unknown): string =>
  typeof value === "number" ? String(value) : (JSON.stringify(value) ?? String(value));

/** Whether a number rounds to the digits printed. */
function agrees(actual: number, printed: string): boolean {
  const text = printed.replaceAll("_", "").toLowerCase();
  const expected = Number(text);
  const [mantissa = "", exponent = "0"] = text.split("e");
  const isWhole = !text.includes("e") && !text.includes(".");
  const digits = mantissa.replace(/[+\-.]/g, "").replace(/^0+/, "").length;
  if (isWhole || digits >= 13) return Math.abs(actual - expected) <= 1e-12 * Math.abs(expected);
  const decimals = mantissa.split(".")[1]?.length ?? 0;
  const unit = 10 ** (Number(exponent) - decimals);
  return Math.abs(actual - expected) <= 0.5 * unit * (1 + 1e-9);
}

const blocks = allBlocks();
const fileOf = (i: number): string => `${workshop}/example-${i}.ts`;
const titleOf = ({ file, line }: Block): string => `${file}:${line}`;
const failures: string[] = [];
let marks = 0;

/** What the rewritten blocks call. */
const checks = {
  check(actual: unknown, expected: string): void {
    marks += 1;
    const found = disagreement(actual, expected);
    if (found !== undefined) failures.push(found);
  },
  async checkThrows(action: () => Promise<void>, expected: string): Promise<void> {
    marks += 1;
    try {
      await action();
    } catch (error) {
      const code = isFermistateError(error) ? error.code : String(error);
      if (expected !== `throws ${code}`) failures.push(`threw ${code}, expected ${expected}`);
      return;
    }
    failures.push(`did not throw, expected ${expected}`);
  },
};

describe.skipIf(blocks.length === 0)("the examples", () => {
  const home = process.cwd();
  let scratch = "";

  beforeAll(() => {
    rmSync(workshop, { recursive: true, force: true });
    mkdirSync(workshop, { recursive: true });
    scratch = mkdtempSync(join(tmpdir(), "fermistate-examples-"));
    process.chdir(scratch); // an example that writes a file does not write it here
    Object.assign(globalThis, checks);
  });

  afterAll(() => {
    process.chdir(home);
    rmSync(scratch, { recursive: true, force: true });
  });

  test.each(blocks.map((block, i) => [titleOf(block), block, i] as const))("%s runs", async (_, block, i) => {
    failures.length = 0;
    const before = marks;
    writeFileSync(fileOf(i), `${withChecks(block.code)}\nexport {};\n`);
    const quiet = vi.spyOn(console, "log").mockImplementation(() => {});
    try {
      await import(/* @vite-ignore */ pathToFileURL(fileOf(i)).href);
    } finally {
      quiet.mockRestore();
    }
    expect(failures).toEqual([]);
    expect(marks - before).toBe(block.code.match(/\/\/ => /g)?.length ?? 0);
  });

  test("they compile as they are printed", () => {
    const configFile = `${root}test/tsconfig.json`;
    const config = { ...ts.readConfigFile(configFile, ts.sys.readFile).config, include: [], files: [] };
    const { options } = ts.parseJsonConfigFileContent(config, ts.sys, `${root}test`, undefined, configFile);
    const names = blocks.map((block, i) => {
      const name = fileOf(i).replace("example-", "printed-");
      writeFileSync(name, `${block.code}\nexport {};\n`);
      return name;
    });
    const program = ts.createProgram(names, { ...options, noUnusedLocals: false });
    const complaints = names.flatMap((name, i) => {
      const file = program.getSourceFile(name);
      const block = blocks[i];
      if (file === undefined || block === undefined) return [`${name} was not read`];
      return [...program.getSyntacticDiagnostics(file), ...program.getSemanticDiagnostics(file)].map((one) => {
        const line = block.line + 1 + file.getLineAndCharacterOfPosition(one.start ?? 0).line;
        return `${block.file}:${line}: ${ts.flattenDiagnosticMessageText(one.messageText, " ")}`;
      });
    });
    expect(complaints).toEqual([]);
  });
});

describe("the reader of examples", () => {
  test("finds blocks in Markdown and in doc comments, with their lines", () => {
    const page = "text\n\n```ts\nlet a = 1;\n```\n\n```sh\nls\n```\n";
    expect(blocksOf("a.md", page)).toEqual([{ file: "a.md", line: 3, code: "let a = 1;" }]);
    const source = "const x = 1;\n/**\n * Text.\n *\n * ```ts\n * f(2); // => 4\n * ```\n */\nexport function f() {}\n";
    expect(blocksOfComments("a.ts", source)).toEqual([{ file: "a.ts", line: 5, code: "f(2); // => 4" }]);
    expect(() => blocksOf("a.md", "```ts\nlet a;\n")).toThrow("no end");
  });

  test("turns each mark into a check", () => {
    expect(withChecks("const a = f(\n  1,\n); // => 4")).toBe(
      'const a = f(\n  1,\n); globalThis.check(a, "4"); // => 4',
    );
    expect(withChecks("console.log(a.b); // => 4")).toBe('globalThis.check(a.b, "4"); // => 4');
    expect(withChecks("a; // => 4\nb; // => 5")).toBe(
      'globalThis.check(a, "4"); // => 4\nglobalThis.check(b, "5"); // => 5',
    );
    expect(() => withChecks("// => 4")).toThrow("no top-level statement");
    expect(() => withChecks("if (a) b(); // => 4")).toThrow("cannot compare");
  });

  test.each([
    [1.2345, "1.23"],
    [1.2345e23, "1.23e23 dyn/cm^2"],
    [-1.2345, "-1.234"],
    [4, "4"],
    [0.1 + 0.2, "0.3000000000000"],
    ["a", '"a"'],
    [[1.04, "b"], '[1.0, "b"]'],
    [new Float64Array([1, 2.5]), "[1, 2.5]"],
    [{ a: 1.04, b: { c: true } }, "{ b: { c: true }, a: 1.0 }"],
    [undefined, "undefined"],
    [null, "null"],
  ])("%o agrees with %s", (actual, expected) => expect(disagreement(actual, expected)).toBeUndefined());

  test.each([
    [1.2345, "1.24"],
    [1.2345e23, "1.23e22"],
    [1.23, "-1.23"],
    [4.3, "4"],
    [0.3 * (1 + 1e-11), "0.3000000000000"],
    [Number.NaN, "1.0"],
    ["a", '"b"'],
    ["1", "1"],
    [[1, 2], "[1, 2, 3]"],
    [[1.1, 2], "[1.2, 2]"],
    [{ a: 1 }, "{ a: 1, b: 2 }"],
    [{ a: 1, b: 2 }, "{ a: 1 }"],
    [null, "undefined"],
    [4, "f(2)"],
    [4, ""],
  ])("%o does not agree with %s", (actual, expected) => expect(disagreement(actual, expected)).toBeDefined());
});

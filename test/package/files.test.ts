/** The tarball holds what a user needs and nothing else; its programs load. Times are printed, not judged. */
import { execFileSync } from "node:child_process";
import { readdirSync, readFileSync } from "node:fs";
import { posix } from "node:path";
import { fileURLToPath } from "node:url";
import { expect, inject, test } from "vitest";

const root = fileURLToPath(new URL("../..", import.meta.url));
const about = JSON.parse(readFileSync(`${root}package.json`, "utf8")) as {
  exports: Record<string, Record<string, Record<string, string>> | string>;
  bin: Record<string, string>;
  dependencies: Record<string, string>;
};

test("the tarball holds dist, the guide with its programs, the licences, the README and package.json only", () => {
  const paths = inject("packedFiles").map((file) => file.path);
  const allowed = /^(dist\/[\w.-]+\.(js|cjs|d\.ts|d\.cts)|dist\/THIRD-PARTY-LICENSES\.txt|package\.json)$/;
  const guide = /^docs\/(guide\/[\w-]+\.(md|svg)|examples\/[\w-]+(\.d)?\.ts)$/;
  const programs = ["docs/read_table.py", "docs/electron_table.c", "docs/electron_table.py"];
  const named = ["LICENSE", "README.md", "CHANGELOG.md", ...programs];
  expect(paths.filter((path) => !allowed.test(path) && !guide.test(path) && !named.includes(path))).toEqual([]);
  for (const path of named) expect(paths).toContain(path);
  // Every page that the README leads to comes along.
  const pages = [...readFileSync(`${root}README.md`, "utf8").matchAll(/\]\((docs\/guide\/[^)#]+)\)/g)].map(
    ([, page]) => page,
  );
  expect(pages.length).toBeGreaterThan(15);
  expect(pages.filter((page) => !paths.includes(page as string))).toEqual([]);
  // And what they lead to.
  const lost = paths
    .filter((path) => path.endsWith(".md") && path.startsWith("docs/"))
    .flatMap((path) =>
      [...readFileSync(`${root}${path}`, "utf8").matchAll(/\]\((?![a-z]+:|#)([^)#\s]+)[^)]*\)/g)].map(([, link]) =>
        posix.join(posix.dirname(path), link!),
      ),
    )
    .filter((path) => !paths.includes(path));
  expect(lost).toEqual([]);
});

test("the versions of Node are those that the run-time dependencies take", () => {
  const enginesOf = (folder: string) =>
    (JSON.parse(readFileSync(`${root}${folder}package.json`, "utf8")) as { engines?: { node?: string } }).engines?.node;
  const asked = Object.keys(about.dependencies).map((name) => enginesOf(`node_modules/${name}/`));
  expect([...new Set(asked.filter((range) => range !== undefined))]).toEqual([enginesOf("")]);
});

test("every file named in package.json is in the tarball", () => {
  const paths = new Set(inject("packedFiles").map((file) => file.path));
  const wanted = Object.values(about.bin);
  for (const entry of Object.values(about.exports)) {
    if (typeof entry === "string") wanted.push(entry);
    else for (const files of Object.values(entry)) wanted.push(...Object.values(files));
  }
  expect(wanted.length).toBeGreaterThan(20);
  expect(wanted.map((path) => path.replace(/^\.\//, "")).filter((path) => !paths.has(path))).toEqual([]);
});

test("the licences of bundled packages come along, and no other package is bundled", () => {
  const code = readdirSync(`${root}dist`).filter((file) => file.endsWith(".js"));
  const names = new Set<string>();
  for (const file of code) {
    const text = readFileSync(`${root}dist/${file}`, "utf8");
    for (const match of text.matchAll(/^\/\/ node_modules\/((?:@[\w.-]+\/)?[\w.-]+)\//gm)) names.add(match[1] ?? "");
  }
  expect([...names].filter((name) => !/^(d3-[a-z-]+|internmap)$/.test(name))).toEqual([]);
  if (names.size === 0) return;
  const texts = readFileSync(`${root}dist/THIRD-PARTY-LICENSES.txt`, "utf8");
  for (const name of names) expect(texts).toMatch(new RegExp(`^${name} \\d+\\.\\d+\\.\\d+ \\(`, "m"));
  expect(texts).toContain("Permission to use, copy, modify, and/or distribute this software");
});

test("the command starts with a Node line and is executable", () => {
  const path = about.bin["fermistate"] as string;
  expect(readFileSync(`${root}${path}`, "utf8")).toMatch(/^#!\/usr\/bin\/env node\n/);
  const mode = inject("packedFiles").find((file) => file.path === path)?.mode ?? 0;
  expect(mode & 0o111).toBe(0o111);
});

test("every entry point loads, from both module systems", () => {
  for (const [name, entry] of Object.entries(about.exports)) {
    if (typeof entry === "string") continue;
    for (const kind of ["import", "require"] as const) {
      const file = JSON.stringify(`${root}${entry[kind]?.["default"]}`);
      const load = kind === "import" ? `await import(${file})` : `require(${file})`;
      const code = `(async () => { const t = performance.now(); const m = ${load};
        console.log(performance.now() - t, Object.keys(m).length); })()`;
      const printed = execFileSync(process.execPath, ["--input-type=commonjs", "-e", code], { encoding: "utf8" });
      const [milliseconds, exports] = printed.trim().split(" ").map(Number) as [number, number];
      expect(exports).toBeGreaterThan(0);
      console.log(`${kind} of fermistate${name.slice(1)}: ${milliseconds.toFixed(0)} ms, ${exports} exports`);
    }
  }
});

/** The built core gives the same states in chromium as in Node; it loads without a console error or another request. */
import { execFileSync } from "node:child_process";
import { existsSync } from "node:fs";
import { readFile } from "node:fs/promises";
import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import { fileURLToPath, pathToFileURL } from "node:url";
import { type Browser, chromium } from "playwright-core";
import { afterAll, expect, test } from "vitest";
import { relativeTolerance } from "./probe.mjs";

const root = fileURLToPath(new URL("../..", import.meta.url));
const executablePath = "/usr/bin/chromium";
const inCi = Boolean(process.env["CI"]);
const skip = !existsSync(executablePath) && !inCi;
if (skip) console.log(`skipped: the browser check, as there is no ${executablePath} (with CI set this is a failure)`);

let server: Server | undefined;
let browser: Browser | undefined;

afterAll(async () => {
  await browser?.close();
  server?.close();
});

/** Serves dist and this folder; returns the address. */
async function serve(): Promise<string> {
  server = createServer(async (request, response) => {
    const path = new URL(request.url ?? "/", "http://local").pathname;
    const page = "<!doctype html><title>fermistate</title>";
    if (path === "/") response.setHeader("content-type", "text/html").end(page);
    else if (path === "/favicon.ico") response.writeHead(204).end();
    else if (!/^\/(dist|test\/package)\/[\w.-]+\.m?js$/.test(path)) response.writeHead(404).end();
    else response.setHeader("content-type", "text/javascript").end(await readFile(root + path));
  });
  await new Promise<void>((resolve) => server?.listen(0, "127.0.0.1", resolve));
  return `http://127.0.0.1:${(server.address() as AddressInfo).port}/`;
}

/** The first difference of two pieces of plain data, as a path and both values; undefined when they agree. */
function difference(node: unknown, page: unknown, path = "probe", conditioning = 1): string | undefined {
  if (typeof node === "number" && typeof page === "number") {
    const scale = Math.max(Math.abs(node), Math.abs(page));
    const agree = Object.is(node, page) || Math.abs(node - page) <= relativeTolerance * conditioning * scale;
    return agree ? undefined : `${path}: ${node} in Node, ${page} in the browser (relative ${(page - node) / scale})`;
  }
  if (typeof node === "object" && typeof page === "object" && node !== null && page !== null) {
    const names = [...new Set([...Object.keys(node), ...Object.keys(page)])];
    const [a, b] = [node as Record<string, unknown>, page as Record<string, unknown>];
    const here = typeof a["conditioning"] === "number" ? a["conditioning"] : conditioning;
    for (const name of names) {
      const found = name === "conditioning" ? undefined : difference(a[name], b[name], `${path}.${name}`, here);
      if (found !== undefined) return found;
    }
    return undefined;
  }
  return node === page ? undefined : `${path}: ${String(node)} in Node, ${String(page)} in the browser`;
}

test.skipIf(skip)("chromium and Node agree on every value of the probe", async () => {
  const address = await serve();
  browser = await chromium.launch({
    executablePath,
    args: [
      "--headless",
      "--no-sandbox",
      "--disable-gpu",
      "--disable-quic",
      "--no-first-run",
      "--disable-background-networking",
      "--disable-component-update",
      "--disable-sync",
    ],
  });
  const page = await browser.newPage();
  const complaints: string[] = [];
  page.on("console", (message) => complaints.push(message.text()));
  page.on("pageerror", (error) => complaints.push(error.message));
  page.on("request", (request) => {
    if (!request.url().startsWith(address)) complaints.push(`request to ${request.url()}`);
  });
  await page.goto(address);
  // Both programs are text, so that neither passes through the test runner's own module system.
  const program = (core: string, probe: string) =>
    `Promise.all([import("${core}"), import("${probe}")]).then(([m, p]) => JSON.stringify(p.probe(m)))`;
  const inPage = (await page.evaluate(program("/dist/index.js", "/test/package/probe.mjs"))) as string;
  const files = [`${root}dist/index.js`, `${root}test/package/probe.mjs`].map((file) => pathToFileURL(file).href);
  const code = `${program(files[0] ?? "", files[1] ?? "")}.then(console.log)`;
  const inNode = execFileSync(process.execPath, ["--input-type=module", "-e", code], { encoding: "utf8" });
  expect(difference(JSON.parse(inNode), JSON.parse(inPage))).toBeUndefined();
  expect(inPage.length).toBeGreaterThan(10);
  expect(complaints).toEqual([]);
  console.log(`compared ${inPage.length} characters with chromium ${browser.version()}`);
});

test("the comparison sees a difference in the last digits, a missing member and another text", () => {
  const right = { states: [1, 2.5e20], name: "carbon" };
  expect(difference(right, structuredClone(right))).toBeUndefined();
  const step = 1 + 2 * relativeTolerance;
  expect(difference(right, { states: [1, 2.5e20 * step], name: "carbon" })).toMatch(/^probe\.states\.1: /);
  expect(difference(right, { states: [1], name: "carbon" })).toMatch(/^probe\.states\.1: /);
  expect(difference(right, { states: [1, 2.5e20], name: "oxygen" })).toMatch(/^probe\.name: /);
});

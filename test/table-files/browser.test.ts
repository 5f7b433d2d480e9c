/** Tables in a browser: chromium reads the bytes that Node wrote, and writes the same, in HDF5 and in CSV. */
import { existsSync } from "node:fs";
import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { fileURLToPath } from "node:url";
import { build } from "esbuild";
import { chromium } from "playwright-core";
import { expect, test } from "vitest";
import { tableToCsv, tableToHdf5 } from "../../src/table-files/index.js";
import { inventedTable } from "./table.js";

const root = fileURLToPath(new URL("../..", import.meta.url));
const executablePath = "/usr/bin/chromium";
const skip = !existsSync(executablePath) && !process.env["CI"];
if (skip) console.log(`skipped: tables in a browser, as there is no ${executablePath} (with CI set this is a failure)`);

/** Puts `again` into the page: bytes as base64 and texts there, the same written anew back. */
const program = `
  import { tableFromCsv, tableFromHdf5, tableToCsv, tableToHdf5 } from "./src/table-files/index.js";
  globalThis.again = async ({ bytes, texts }) => {
    const table = await tableFromHdf5(Uint8Array.from(atob(bytes), (one) => one.charCodeAt(0)));
    const written = await tableToHdf5(table);
    return {
      bytes: btoa(Array.from(written, (byte) => String.fromCharCode(byte)).join("")),
      texts: await tableToCsv(await tableFromCsv(texts), "core"),
    };
  };
`;

test.skipIf(skip)("chromium reads and writes as Node does", async () => {
  const bundle = await build({
    stdin: { contents: program, resolveDir: root },
    bundle: true,
    format: "iife",
    platform: "browser",
    external: ["hyparquet-writer"],
    write: false,
    logLevel: "silent",
  });
  const table = inventedTable(2);
  const given = {
    bytes: Buffer.from(await tableToHdf5(table)).toString("base64"),
    texts: await tableToCsv(table, "core"),
  };

  const server = createServer((_, response) => response.end("<!doctype html><title>tables</title>"));
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve)); // crypto.subtle wants a local address
  const browser = await chromium.launch({ executablePath, args: ["--headless", "--no-sandbox", "--disable-gpu"] });
  try {
    const page = await browser.newPage();
    await page.goto(`http://127.0.0.1:${(server.address() as AddressInfo).port}/`);
    await page.addScriptTag({ content: bundle.outputFiles[0]!.text });
    const call = `again(${JSON.stringify(given)})`;
    const back = (await page.evaluate(call)) as typeof given;
    expect(back.bytes).toBe(given.bytes);
    // Densities and temperatures of nodes are for the eye: ten digits, the last of which may be the browser's own.
    const withoutPlaces = (text: string): string => text.replace(/^((?:[^,\n]*,){5})[^,]*,[^,]*/gm, "$1");
    expect(withoutPlaces(back.texts.nodes)).toBe(withoutPlaces(given.texts.nodes));
    expect([back.texts.blocks, back.texts.metadata]).toEqual([given.texts.blocks, given.texts.metadata]);
  } finally {
    await browser.close();
    server.close();
  }
});

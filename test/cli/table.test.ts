/** `fermistate table` and commands on tables, as functions; the numbers are those of the library. */
import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { composition, whiteDwarfMatter } from "fermistate";
import { tableFromHdf5, tableToHdf5 } from "fermistate/table-files";
import { buildTable, tableEquationOfState } from "fermistate/tables";
import { afterAll, beforeAll, expect, test } from "vitest";
import { commandLine } from "./command-line.js";

let cwd: string;
beforeAll(() => {
  cwd = mkdtempSync(join(tmpdir(), "table-command-"));
});
afterAll(() => rmSync(cwd, { recursive: true, force: true }));

const command = commandLine(() => cwd);

const asked = "table --density 1e5..1e7 --temperature 1e7..1e8 --composition C12=1 --accuracy 1e-3";
const matter = composition({ C12: 1 });
const expected = buildTable(whiteDwarfMatter(), matter, {
  density: [1e5, 1e7],
  temperature: [1e7, 1e8],
  accuracy: 1e-3,
});

test("builds a table, says how wrong it is, keeps no strips", async () => {
  const { code, out, err } = await command(`${asked} --out whole`, true);
  expect(code).toBe(0);
  expect(err).toMatch(/table: 2 of 4 strips \(50 %\), about .* left/);
  expect(err.endsWith("\r")).toBe(true); // wiped
  expect(out).toMatch(/4 strips, 0 of them kept/);
  expect(out).toContain("whole.h5");
  expect(out).toContain(expected.certificate.errors.heatCapacityV.largest.toExponential(1));
  expect(readdirSync(cwd)).toEqual(["whole.h5"]);
  const table = await tableFromHdf5(new Uint8Array(readFileSync(join(cwd, "whole.h5"))));
  expect(table).toEqual(expected);
});

test("shares on several machines, merged: the same file; strips that are there are kept", async () => {
  for (const k of [1, 2]) {
    const { out, err } = await command(`${asked} --work part-${k} --shard ${k}/2`);
    expect([out, err]).toEqual([`2 strips made, 0 kept: share ${k} of 2 stands in part-${k}\n`, ""]);
  }
  const early = await command("table --merge part-2 --out merged");
  expect(early).toMatchObject({ code: 2, out: "" });
  expect(early.err).toContain("without 1, 3");
  expect(await command("table --merge part-1,part-2 --out merged")).toMatchObject({ code: 0, err: "" });
  expect(readFileSync(join(cwd, "merged.h5"))).toEqual(readFileSync(join(cwd, "whole.h5")));
  const { out } = await command(`${asked} --work part-1 --out again`);
  expect(out).toMatch(/4 strips, 2 of them kept/);
  expect(readFileSync(join(cwd, "again.h5"))).toEqual(readFileSync(join(cwd, "whole.h5")));
  expect(existsSync(join(cwd, "part-1"))).toBe(true);
});

test("shows a table of either form; a damaged one is refused", async () => {
  const { out } = await command("table --show whole.h5");
  expect(out).toMatch(/holds for +C12/);
  expect(out).toMatch(/tabulated +electrons and positrons, Coulomb plasma/);
  await command("table --merge part-1 --out text --format csv");
  const texts = readdirSync(cwd).filter((name) => name.startsWith("text"));
  expect(texts.length).toBe(4);
  const metadata = texts.find((name) => name.endsWith("-metadata.json"))!;
  expect((await command(`table --show ${metadata}`)).out).toBe(out);
  const bytes = readFileSync(join(cwd, "whole.h5"));
  bytes[bytes.length >> 1]! ^= 1;
  writeFileSync(join(cwd, "damaged.h5"), bytes);
  expect(await command("table --show damaged.h5")).toMatchObject({
    code: 1,
    err: expect.stringMatching(/invalid-file/),
  });
  const nowhere = await command("table --show nowhere.h5");
  expect(nowhere.code).toBe(1);
  expect(nowhere.err).toMatch(/there is no such file.*\(invalid-file\)/);
  expect(await command("table --show core.txt")).toMatchObject({ code: 2 });
});

test("other commands take a table in place of the physics", async () => {
  const at = "--density 2e6 --temperature 3e7 --composition C12=1";
  const state = tableEquationOfState(expected).state(2e6, 3e7, matter);
  const { out, err } = await command(`state ${at} --table whole.h5 --json`);
  expect(err).toBe("");
  expect(JSON.stringify(JSON.parse(out))).toContain(String(state.pressure));
  const printed = String(state.pressure).replace("e", "E");
  expect((await command(`grid ${at} --table whole.h5 --quantities pressure`)).out).toContain(printed);
  const region = "--density 2e5..9e6,4-points --temperature 2e7..9e7,4-points --composition C12=1";
  const compared = await command(`compare ${region} --against-table whole.h5 --quantities pressure --skip-consistency`);
  expect(compared).toMatchObject({ code: 0, err: "" });
  expect(compared.out).toMatch(/pressure/);
  const certified = await command(`certify ${at} --table whole.h5 --quantities pressure`);
  expect(certified).toMatchObject({ code: 0, err: "" });
  const refused = await command(`state ${at} --table whole.h5 --without radiation`);
  expect(refused).toMatchObject({ code: 2 });
  expect(refused.err).toContain("a table holds the physics it was made from");
});

test("refusals before any work", async () => {
  const cases: readonly (readonly [string, RegExp])[] = [
    ["table", /--density/],
    [asked, /--out/],
    [`${asked} --shard 1/2`, /--work/],
    [`${asked} --out x --shard 3/2`, /--shard/],
    [`${asked} --out x --accuracy 1`, /accuracy/],
    [`${asked} --out x --threads 0`, /threads/],
    [`${asked} --out whole`, /exists/],
    ["table --merge part-1", /--out/],
    ["table --density 1e5 --temperature 1e7..1e8 --composition C12=1 --out x", /1e4\.\.1e9/],
  ];
  for (const [line, reason] of cases) {
    const { code, err, out } = await command(line);
    expect(code, line).not.toBe(0);
    expect(out).toBe("");
    expect(err).toMatch(reason);
  }
  expect(readdirSync(cwd).filter((name) => name.startsWith("x"))).toEqual([]);
});

test("the file says again what the table is, to the byte", async () => {
  expect(Buffer.from(await tableToHdf5(expected))).toEqual(readFileSync(join(cwd, "whole.h5")));
});

/** `fermistate certify` as a function: texts, JSON, CSV, progress, refusals. Values are those of the library. */
import { composition, whiteDwarfMatter } from "fermistate";
import { certificateCsv, certify } from "fermistate/certify";
import { expect, test } from "vitest";
import { commandLine } from "./command-line.js";

const command = commandLine();

const core = composition({ C12: 0.5, O16: 0.5 });
const matter = "--composition C12=0.5,O16=0.5";
const region = { density: [1e6, 1e8], temperature: [1e7, 1e9], points: 2, seed: 5 } as const;
const asked = `certify --density 1e6..1e8 --temperature 1e7..1e9 ${matter} --points 2 --seed 5 --quantities pressure`;
const expected = certify(whiteDwarfMatter(), core, { region, quantities: ["pressure"] });

test("a region as JSON and CSV is the library's certificate; as text it says what it means", async () => {
  const json = await command(`${asked} --format json`);
  expect([json.code, json.err]).toEqual([0, ""]);
  expect(JSON.parse(json.out)).toEqual(JSON.parse(JSON.stringify(expected)));
  expect(await command(`${asked} --format csv`)).toEqual({ code: 0, out: certificateCsv(expected), err: "" });
  const { out, err } = await command(asked, true);
  expect(out).toContain("2 of 2 points compared");
  expect(out).toContain("says nothing about how true the formulas are");
  expect(err).toContain("certify: ");
  expect(err.endsWith("\r")).toBe(true); // wiped
});

test("axes give every pair", async () => {
  const { out } = await command(
    `certify --density 1e6,1e7 --temperature 1e8 ${matter} --format csv --quantities gamma1`,
  );
  const rows = out.trimEnd().split("\n").slice(1);
  expect(rows.map((row) => row.split(",").slice(0, 2).map(Number))).toEqual([
    [1e6, 1e8],
    [1e7, 1e8],
  ]);
});

test("one state is audited; infinities in JSON are words", async () => {
  const { out, code } = await command(`certify --density 2e6 --temperature 1e7 ${matter} --digits 20`);
  expect(code).toBe(0);
  // state-liquid.json has no such row; the digits are those of the decimal arithmetic, the double's among them
  expect(out).toContain("7.5001343659803051664e22");
  const cold = await command(
    `certify --density 2e6 --temperature 0 ${matter} --format json --quantities electronDegeneracy`,
  );
  expect(JSON.parse(cold.out)).toMatchObject({ values: [{ value: "INF", reference: "Infinity", relative: 0 }] });
});

test.each([
  [`certify --density 1e6..1e8 --temperature 1e7,1e8 ${matter}`, "--temperature"],
  [`certify --density 1e6 --temperature 1e7 ${matter} --points 3`, "--points"],
  [`certify --density 1e6 --temperature 1e7 ${matter} --seed 3`, "--seed"],
  [`certify --density 1e6,2e6 --temperature 1e7 ${matter} --seed 3`, "--seed"],
  [`certify --density 1e6 --temperature 1e7 ${matter} --format csv`, "--format"],
  [`certify --density 1e8..1e6 --temperature 1e7 ${matter}`, "region.density"],
  [`certify --density x --temperature 1e7 ${matter}`, "--density"],
  [`certify --density 1e6 --temperature 1e7 ${matter} --digits 5`, "digits"],
  [`certify --density 1e6 --temperature 1e7 ${matter} --quantities taste`, "--quantities"],
  [`certify --temperature 1e7 ${matter}`, "--density"],
])("%s is refused", async (line, argument) => {
  const { code, out, err } = await command(line);
  expect([code, out]).toEqual([2, ""]);
  expect(err).toContain(`fermistate: ${argument}`);
  expect(err.split("\n")).toHaveLength(2);
});

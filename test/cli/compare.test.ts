/** The command: what it prints and writes is what the library says. */
import { mkdtempSync, readdirSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { composition, whiteDwarfMatter } from "fermistate";
import { compare, comparisonCsv, comparisonMap, comparisonText } from "fermistate/compare";
import { logarithmicAxis } from "fermistate/grids";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { commandLine } from "./command-line.js";

let cwd = "";
beforeEach(() => {
  cwd = mkdtempSync(join(tmpdir(), "fermistate-compare-"));
});
afterEach(() => rmSync(cwd, { recursive: true, force: true }));

const command = commandLine(() => cwd);

const region = "--density 1e5..1e8,6-points --temperature 1e7..1e9,4-points --composition C12=1";
const found = compare(whiteDwarfMatter({ radiation: false }), whiteDwarfMatter({ coulomb: { exchange: false } }), {
  composition: [composition({ C12: 1 }), composition({ O16: 1 })],
  density: logarithmicAxis({ from: 1e5, to: 1e8, points: 6 }),
  temperature: logarithmicAxis({ from: 1e7, to: 1e9, points: 4 }),
  quantities: ["pressure", "temperatureExponent"],
});
const line =
  `compare ${region} --without radiation --against-without exchange --against-composition O16=1 ` +
  "--quantities pressure,temperatureExponent";

describe("fermistate compare", () => {
  test("prints the report of the two choices", async () => {
    expect(await command(line)).toEqual({ code: 0, out: comparisonText(found), err: "" });
    expect(readdirSync(cwd)).toEqual([]);
  });

  test("prints CSV and JSON", async () => {
    expect((await command(`${line} --format csv`)).out).toBe(comparisonCsv(found));
    const { out } = await command(`${line} --format json --skip-consistency`);
    expect(JSON.parse(out).quantities[1].difference).toEqual([...found.quantities[1]!.difference]);
    expect(JSON.parse(out).consistency).toEqual([[], []]);
  });

  test("writes the report and maps, whole or not at all", async () => {
    const { code, out } = await command(`${line} --out two.txt --map pressure,temperatureExponent`);
    expect(code).toBe(0);
    expect(readdirSync(cwd).sort()).toEqual(["two-pressure.svg", "two-temperatureExponent.svg", "two.txt"]);
    expect(readFileSync(join(cwd, "two.txt"), "utf8")).toBe(comparisonText(found));
    expect(readFileSync(join(cwd, "two-temperatureExponent.svg"), "utf8")).toBe(
      comparisonMap(found, "temperatureExponent"),
    );
    expect(out).toMatch(/24 points compared\n {2}two\.txt +[\d.]+ kB {2}the report\n/);
    const again = await command(`${line} --out two --map pressure`);
    expect([again.code, again.out]).toEqual([1, ""]);
    expect(again.err).toContain("file-not-written");
  });

  test("shows progress on a terminal only, and wipes it", async () => {
    const many = `compare --density 1e5..1e8,30-points --temperature 1e7..1e9,25-points --composition C12=1 --quantities pressure`;
    const { err } = await command(many, true);
    expect(err).toMatch(/\rcompare: \d+ of 750 points \(\d+ %\)/);
    expect(err).toMatch(/\r *\r$/);
  });

  test("help fits a terminal of 80 columns", async () => {
    for (const one of (await command("help compare")).out.split("\n")) expect(one.length, one).toBeLessThanOrEqual(80);
  });

  test.each([
    ["compare", 2, /--density: not given/],
    [`compare ${region} --map pressure`, 2, /--map.*only together with --out/],
    [`compare ${region} --against-without coulomb --against-phase liquid`, 2, /^fermistate: --against-phase: /],
    [`compare ${region} --against-melting-coupling 5`, 2, /^fermistate: --against-melting-coupling: /],
    [`compare ${region} --against-composition C12=0.4`, 2, /with --normalise any sum/],
    [`compare ${region} --against-without nothing`, 2, /--against-without/],
    [`compare ${region} --format svg`, 2, /one of text, json, csv/],
    [`compare ${region} --quantities presure`, 2, /perhaps pressure/],
    [`compare ${region} --maximum-points 9`, 1, /at most 9/],
  ])("fermistate %s", async (words, code, message) => {
    const result = await command(words);
    expect([result.code, result.out]).toEqual([code, ""]);
    expect(result.err).toMatch(message);
    expect(result.err.split("\n")).toHaveLength(2);
  });
});

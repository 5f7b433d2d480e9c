/** `fermistate grid --keep-refused`: rows without a state; the numbers are those of the library. */
import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { composition, whiteDwarfMatter } from "fermistate";
import { grid, gridToCsv, logarithmicAxis } from "fermistate/grids";
import { afterAll, beforeAll, expect, test } from "vitest";
import { commandLine } from "./command-line.js";

let cwd: string;
beforeAll(() => {
  cwd = mkdtempSync(join(tmpdir(), "grid-refused-"));
});
afterAll(() => rmSync(cwd, { recursive: true, force: true }));

const command = commandLine(() => cwd);
const asked = "grid --density 1e-6..1e3,1-per-decade --temperature 1e3,1e7 --composition C12=1";
const expected = grid(whiteDwarfMatter(), composition({ C12: 1 }), {
  density: logarithmicAxis({ from: 1e-6, to: 1e3, pointsPerDecade: 1 }),
  temperature: [1e3, 1e7],
  refused: "keep",
});

test("stops at the first such row by default, also with findings", async () => {
  for (const more of ["", " --findings"]) {
    const { code, out, err } = await command(asked + more);
    expect([code, out]).toEqual([1, ""]);
    expect(err).toMatch(/row 0.*unstable/s);
  }
});

test("keeps them on request: empty fields, numbers of reasons, and a list of these", async () => {
  expect(await command(`${asked} --keep-refused`)).toEqual({ code: 0, out: gridToCsv(expected), err: "" });
  const { code, out } = await command(`${asked} --keep-refused --findings --format both --out kept`);
  expect(code).toBe(0);
  const all = expected.refusedRows!.reduce((sum, one) => sum + one.rows, 0);
  expect(out).toContain(`Refused ${all} of 20 rows`);
  for (const { meaning } of expected.refusedRows!) expect(out).toContain(meaning);
  expect(readFileSync(join(cwd, "kept.csv"), "utf8")).not.toContain("NaN");
  expect(JSON.parse(readFileSync(join(cwd, "kept.json"), "utf8")).refusedRows).toEqual(expected.refusedRows);
});

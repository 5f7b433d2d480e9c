/** `fermistate limiting-mass` as a function: its table, its JSON, its refusals. Values are those of the library. */
import { composition } from "fermistate";
import { limitingMassLadder } from "fermistate/structure";
import { expect, test } from "vitest";
import { commandLine } from "./command-line.js";

const command = commandLine();

test("a table with a line per rung, and what each assumes", async () => {
  const rungs = limitingMassLadder(composition({ C12: 0.5, O16: 0.5 }), { temperature: 1e7 });
  const { code, out, err } = await command("limiting-mass --composition C12=0.5,O16=0.5 --temperature 1e7");
  expect([code, err]).toEqual([0, ""]);
  const lines = out.split("\n");
  for (const [i, rung] of rungs.entries()) {
    const row = lines.find((line) => line.trimStart().startsWith(`${i + 1}  ${rung.name}`));
    expect(row).toContain(rung.solarMasses.toFixed(5));
    expect(row?.endsWith(rung.end)).toBe(true);
    expect(row?.includes(" -  ")).toBe(rung.radius === undefined);
    expect(out.replace(/\s+/g, " ")).toContain(`${rung.assumes}. ${rung.message}`);
  }
  expect(Math.max(...lines.map((line) => line.length))).toBeLessThanOrEqual(80);
});

test("--json with all digits, null where no star has the mass; --cold leaves the last rung out", async () => {
  const rungs = limitingMassLadder(composition({ Fe56: 1 }), { temperature: false });
  const { code, out } = await command("limiting-mass --composition Fe56=1 --cold --json");
  expect(code).toBe(0);
  const document = JSON.parse(out) as { rungs: Record<string, unknown>[]; units: Record<string, string> };
  expect(document.units).toEqual({ mass: "g", solarMasses: "M_sun", radius: "cm", centralDensity: "g/cm^3" });
  expect(document.rungs).toEqual(
    rungs.map(({ matter, radius = null, centralDensity = null, ...rest }) => ({
      ...rest,
      radius,
      centralDensity,
      matter: matter?.name ?? null,
    })),
  );
});

test("refusals: a line on standard error, code 2 for a wrong request, 1 where there is no answer", async () => {
  const wrong = await command("limiting-mass --composition C12=1 --temperature 1e9");
  expect(wrong).toMatchObject({ code: 2, out: "", err: expect.stringContaining("out-of-range") });
  const both = await command("limiting-mass --composition C12=1 --temperature 1e7 --cold");
  expect(both).toMatchObject({ code: 2, out: "", err: expect.stringContaining("--cold") });
  const none = await command("limiting-mass");
  expect(none).toMatchObject({ code: 2, err: expect.stringContaining("--composition") });
  const trace = await command("limiting-mass --composition N14=1");
  expect(trace).toMatchObject({ code: 1, err: expect.stringContaining("N14") });
});

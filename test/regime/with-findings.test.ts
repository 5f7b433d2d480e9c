/** A state carries the findings of its own equation of state and phase, and is otherwise the same state. */
import { expect, test } from "vitest";
import { withPhase } from "../../src/coulomb/transition.js";
import { composition } from "../../src/matter/composition.js";
import { regime } from "../../src/regime/regime.js";
import { withFindings } from "../../src/regime/with-findings.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";

const carbon = composition({ C12: 1 });
const iron = composition({ Fe56: 1 });

test("the state is the same, the findings are those of regime", () => {
  const matter = whiteDwarfMatter();
  const carrying = withFindings(matter);
  // 2e9 g/cm^3 is beyond the capture threshold of Fe56 (3.8 MeV, AME2020: 1.2e9 g/cm^3); carbon there is not.
  const { findings, ...state } = carrying.state(2e9, 1e8, iron);
  expect(state).toEqual(matter.state(2e9, 1e8, iron));
  expect(findings.map(({ code }) => code)).toEqual(["electron-capture"]);
  expect(findings).toEqual(regime(2e9, 1e8, iron, { equationOfState: matter }).findings);
  expect(Object.isFrozen(findings)).toBe(true);
  expect(carrying.state(1e8, 2e8, carbon).findings).toEqual([]);
  expect(carrying.freeEnergy(1e8, 2e8, carbon)).toEqual(matter.freeEnergy(1e8, 2e8, carbon));
});

test("a phase that is forced is the phase that is judged", () => {
  const matter = whiteDwarfMatter();
  const place = [1e9, 1e7, carbon] as const; // Gamma is about 2000: a crystal
  const codes = (phase: "liquid" | "crystal") =>
    withFindings(withPhase(matter, phase))
      .state(...place)
      .findings.map(({ code }) => code);
  const expected = (phase: "liquid" | "crystal") =>
    regime(...place, { equationOfState: withPhase(matter, phase), phase }).findings.map(({ code }) => code);
  expect(codes("liquid")).toEqual(expected("liquid"));
  expect(codes("crystal")).toEqual(expected("crystal"));
  expect(codes("liquid")).not.toEqual(codes("crystal"));
});

test("an ideal gas of ions is judged as one, and refusals are those of the equation of state", () => {
  const ideal = withFindings(whiteDwarfMatter({ coulomb: false }));
  const codes = ideal.state(1e9, 1e6, carbon).findings.map(({ code }) => code);
  expect(codes).toContain("ideal-ions-degenerate");
  expect(() => ideal.state(-1, 1e7, carbon)).toThrow(expect.objectContaining({ code: "out-of-range" }));
});

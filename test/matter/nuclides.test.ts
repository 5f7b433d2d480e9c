/** Nuclides against AME2020 (figures retyped from mass.mas20), CODATA 2022 and printed ground-state spins. */
import { execFileSync } from "node:child_process";
import { readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { describe, expect, test } from "vitest";
import { atomicMassConstant, electronMassInU, electronVolt, protonMass, speedOfLight } from "../../src/constants.js";
import { type FermistateError, isFermistateError } from "../../src/errors.js";
import { type Nuclide, nuclide, nuclides } from "../../src/matter/nuclides.js";

/** u in eV. */
const energyOfU = (atomicMassConstant * speedOfLight ** 2) / electronVolt;

function refusal(label: unknown): FermistateError {
  try {
    nuclide(label as string);
  } catch (error) {
    if (isFermistateError(error)) return error;
    throw error;
  }
  throw new Error(`${String(label)} was accepted`);
}

describe("masses of AME2020", () => {
  // Retyped from the atomic-mass columns: label, mass, uncertainty (u), extrapolated.
  const rows: readonly [string, number, number, boolean][] = [
    ["n", 1.0086649159, 0.00000000047, false],
    ["H1", 1.007825031898, 0.000000000014, false],
    ["H3", 3.01604928132, 0.00000000008, false],
    ["Li3", 3.030775, 0.002147, true],
    ["H4", 4.026431867, 0.000107354, false],
    ["He4", 4.00260325413, 0.00000000016, false],
    ["C12", 12, 0, false],
    ["O16", 15.99491461926, 0.00000000032, false],
    ["Ne20", 19.99244017525, 0.00000000165, false],
    ["Mg24", 23.985041689, 0.000000013, false],
    ["Si28", 27.97692653442, 0.00000000055, false],
    ["Fe56", 55.934935537, 0.000000287, false],
    ["Ni62", 61.928344753, 0.000000455, false],
    ["Pb208", 207.976652005, 0.000001232, false],
    ["U238", 238.050786936, 0.000001601, false],
    ["Ts294", 294.21084, 0.000637, true],
    ["Og295", 295.216178, 0.000703, true],
  ];
  test.each(rows)("%s", (label, atomicMass, atomicMassUncertainty, extrapolated) => {
    expect(nuclide(label)).toMatchObject({ label, atomicMass, atomicMassUncertainty, extrapolated });
  });

  test("3558 nuclides, 1008 of them extrapolated, each found under its own label, in order", () => {
    const all = nuclides().map(nuclide);
    expect(all.length).toBe(3558);
    expect(all.filter(({ extrapolated }) => extrapolated).length).toBe(1008);
    expect(all.map(({ label }) => label)).toEqual(nuclides());
    const order = all.map(({ chargeNumber, massNumber }) => 1000 * chargeNumber + massNumber);
    expect(order).toEqual([...order].sort((a, b) => a - b));
    expect(new Set(order).size).toBe(3558);
  });

  test("Z, N and A belong together; mass excess within the bounds the table knows; nuclei lighter than atoms", () => {
    for (const label of nuclides()) {
      const { massNumber, chargeNumber, neutronNumber, atomicMass, atomicMassUncertainty, nuclearMass } =
        nuclide(label);
      expect(chargeNumber + neutronNumber).toBe(massNumber);
      expect(Math.abs(atomicMass - massNumber)).toBeLessThan(0.25);
      expect(atomicMassUncertainty >= 0 && atomicMassUncertainty < 0.01).toBe(true);
      const ratio = nuclearMass / atomicMassConstant - (atomicMass - chargeNumber * electronMassInU);
      expect(Math.abs(ratio / massNumber)).toBeLessThan(2e-14); // m_e and m_e/u agree to 2.5e-12 of m_e
    }
  });

  test("Ni62 is bound most strongly per nucleon, Fe58 and Fe56 next (trade fact; masses decide)", () => {
    const [h, n] = [nuclide("H1").atomicMass, nuclide("n").atomicMass];
    const binding = ({ atomicMass, chargeNumber: z, neutronNumber, massNumber }: Nuclide) =>
      (z * h + neutronNumber * n - atomicMass) / massNumber;
    const ranked = nuclides()
      .map(nuclide)
      .sort((a, b) => binding(b) - binding(a));
    expect(ranked.slice(0, 3).map(({ label }) => label)).toEqual(["Ni62", "Fe58", "Fe56"]);
    // AME2020 prints 8794.5555 and 8790.3563 keV per nucleon for Ni62 and Fe56; digits of m_u c^2 limit: 3e-10.
    expect((binding(nuclide("Ni62")) * energyOfU) / 1e3).toBeCloseTo(8794.5555, 3);
    expect((binding(nuclide("Fe56")) * energyOfU) / 1e3).toBeCloseTo(8790.3563, 3);
  });

  const file = process.env["FERMISTATE_AME2020"];
  test.skipIf(file === undefined)(
    "the generator makes the committed table (FERMISTATE_AME2020 = path of mass.mas20)",
    () => {
      const root = fileURLToPath(new URL("../../", import.meta.url));
      const made = execFileSync(process.execPath, [`${root}docs/generators/nuclides.mjs`, file ?? ""], {
        encoding: "utf8",
      });
      expect(made).toBe(readFileSync(`${root}src/matter/nuclide-table.ts`, "utf8"));
    },
  );
});

describe("nuclear masses against CODATA 2022", () => {
  // Mass of the bare nucleus in u (CODATA 2022, with uncertainty), and the energy that binds its electrons
  // (NIST Atomic Spectra Database, from memory: 13.598434 eV for H, 24.587389 + 54.417765 eV for He).
  const rows: readonly [string, number, number, number][] = [
    ["H1", 1.0072764665789, 8.3e-12, 13.598],
    ["H2", 2.013553212544, 1.5e-11, 13.602],
    ["H3", 3.01550071597, 1e-10, 13.603],
    ["He3", 3.014932246932, 7.4e-11, 79.0],
    ["He4", 4.001506179129, 6.2e-11, 79.005],
  ];
  test.each(rows)("%s is too light by the electron binding that is left out", (label, bare, uncertainty, binding) => {
    const { atomicMass, atomicMassUncertainty, chargeNumber } = nuclide(label);
    const missing = (bare - (atomicMass - chargeNumber * electronMassInU)) * energyOfU;
    const deviation = Math.hypot(uncertainty, atomicMassUncertainty) * energyOfU;
    expect(Math.abs(missing - binding)).toBeLessThan(deviation);
  });

  test("in grams: H1 is lighter than the proton by 13.6 eV", () => {
    const missing = ((protonMass - nuclide("H1").nuclearMass) * speedOfLight ** 2) / electronVolt;
    // Half a printed digit of m_p and of m_u, 3 meV each, and the uncertainty of AME2020.
    expect(Math.abs(missing - 13.598)).toBeLessThan(0.003 + 0.003 + 0.013);
  });

  test("the free neutron: AME2020 against CODATA 2022 in u", () => {
    const { atomicMass, nuclearMass } = nuclide("n");
    expect(Math.abs(atomicMass - 1.00866491606)).toBeLessThan(Math.hypot(4.7e-10, 4.0e-10));
    expect(nuclearMass).toBe(atomicMass * atomicMassConstant);
  });
});

describe("ground-state spins", () => {
  /**
   * 2J as printed in Rauch & Waschkowski 2003 (Neutron Data Booklet, 2nd ed., pp 1.1-1 ff), read in the table of the
   * Debian package python3-periodictable 1.6.0. Left out: four entries that cannot be (0 for the odd nuclei Se77, Hf177
   * and Hg199, 1/2 for the even-even W182) and Ta180, where 9 is the spin of the isomer.
   */
  const printed: readonly [number, string][] = [
    [1, "n H1 H3 He3 C13 N15 F19 Si29 P31 Fe57 Y89 Rh103 Ag107 Ag109 Cd111 Cd113 Sn115 Sn117 Sn119 Te123 Te125 Xe129"],
    [1, "Tm169 Yb171 W183 Os187 Pt195 Tl203 Tl205 Pb207 Pu239"],
    [2, "H2 Li6 N14"],
    [3, "Li7 Be9 B11 Ne21 Na23 S33 Cl35 Cl37 K39 K41 Cr53 Ni61 Cu63 Cu65 Ga69 Ga71 As75 Br79 Br81 Rb87 Xe131 Ba135"],
    [3, "Ba137 Gd155 Gd157 Tb159 Os189 Ir191 Ir193 Au197 Hg201 Pa231"],
    [5, "O17 Mg25 Al27 Ti47 Mn55 Zn67 Rb85 Zr91 Mo95 Mo97 Ru99 Ru101 Pd105 Sb121 I127 Pr141 Eu151 Eu153 Dy161 Dy163"],
    [5, "Yb173 Re185 Re187 U233 Np237 Am243"],
    [6, "B10"],
    [7, "Ca43 Sc45 Ti49 V51 Co59 Sb123 Cs133 La139 Nd143 Nd145 Pm147 Sm147 Sm149 Ho165 Er167 Lu175 Ta181 U235"],
    [8, "K40"],
    [9, "Ge73 Kr83 Sr87 Nb93 Tc99 In113 In115 Hf179 Bi209"],
    [10, "La138"],
    [12, "V50"],
    [14, "Lu176"],
    [0, "He4 C12 O16 Ne20 Mg24 Si28 S32 Ca40 Fe54 Fe56 Ni58 Ni60 Pb208 U238"],
  ];
  test.each(printed)("2J = %i of %s", (twice, labels) => {
    for (const label of labels.split(" ")) expect([label, nuclide(label).groundStateSpin]).toEqual([label, twice / 2]);
  });

  test("every known spin is integer for even A, half-integer for odd A; unknown ones are undefined", () => {
    const known = nuclides()
      .map(nuclide)
      .filter(({ groundStateSpin }) => groundStateSpin !== undefined);
    for (const { groundStateSpin, massNumber } of known)
      expect((2 * (groundStateSpin ?? 0) - massNumber) % 2).toBeCloseTo(0, 15);
    const odd = known.filter(({ chargeNumber, neutronNumber }) => chargeNumber % 2 === 1 || neutronNumber % 2 === 1);
    expect(odd.length).toBe(230); // every label of the table is a nuclide, and none is even-even
    expect(nuclide("Fe61").groundStateSpin).toBeUndefined();
  });

  test("mirror nuclei have the same spin (charge symmetry)", () => {
    const light = "n H1, H3 He3, Li7 Be7, Li8 B8, Li9 C9, B11 C11, C13 N13, N15 O15, O17 F17, F19 Ne19, Ne21 Na21";
    const heavy =
      "Na23 Mg23, Mg25 Al25, Al27 Si27, Si29 P29, P31 S31, S33 Cl33, Cl35 Ar35, Ar37 K37, K39 Ca39, Ca41 Sc41";
    for (const pair of `${light}, ${heavy}`.split(", ")) {
      const [a = "", b = ""] = pair.split(" ");
      expect([pair, nuclide(a).groundStateSpin]).toEqual([pair, nuclide(b).groundStateSpin]);
    }
  });
});

describe("labels", () => {
  test("a nuclide is frozen and found again", () => {
    expect(nuclide("C12")).toBe(nuclide("C12"));
    expect(Object.isFrozen(nuclide("C12")) && Object.isFrozen(nuclides())).toBe(true);
    expect(nuclide("n")).toMatchObject({ symbol: "n", massNumber: 1, chargeNumber: 0, neutronNumber: 1 });
  });

  const strangers = [
    "",
    "C",
    "12C",
    "c12",
    "C-12",
    "C12 ",
    " C12",
    "C012",
    "C12.0",
    "C1e1",
    "n1",
    "n0",
    "D",
    "T",
    "He4m",
  ];
  const polluting = ["__proto__", "constructor", "toString", "hasOwnProperty"];
  const others = [undefined, null, 12, Number.NaN, {}, ["C12"], Symbol("C12")];
  test.each([...strangers, ...polluting, "C7", "C24", "Og296", "Uue300", ...others])("%o is refused", (label) => {
    const error = refusal(label);
    expect(error).toMatchObject({ code: "unknown-nuclide", argument: "nuclide", given: label });
    expect(error.allowed).toContain("AME2020");
  });

  test.each([
    ["c12", "C12"],
    ["12C", "C12"],
    ["C-12", "C12"],
    ["56fe", "Fe56"],
    ["C24", "C23"],
    ["C40", "C23, Cl40, Ca40"],
    ["Fr56", "Fr197, Cr56, Fe56"],
    ["Fe", "Fe45, Fe76"],
    ["D", "H2"],
    ["p", "H1"],
    ["alpha", "He4"],
    ["neutron", "n"],
  ])("%s: the message names %s", (label, near) => {
    expect(refusal(label).message).toContain(`nearest: ${near}`);
  });

  test("nothing similar, nothing named", () => {
    expect(refusal("__proto__").message).not.toContain("nearest");
    expect(refusal(null).message).not.toContain("nearest");
  });
});

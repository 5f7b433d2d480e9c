/**
 * Constants against CODATA 2022 and IAU 2015 B3 (fixtures/constants.json names the source of each figure), rounding
 * against mpmath, and CODATA's own derived quantities as a test that the set belongs together.
 */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import * as constants from "../src/constants.js";

interface Figure {
  readonly name: constants.ConstantName;
  readonly value: string;
  readonly standardUncertainty?: string;
  readonly powerOfTenToCgs?: number;
}
const fixture = JSON.parse(readFileSync(new URL("fixtures/constants.json", import.meta.url), "utf8")) as {
  readonly [group in "published" | "nominal" | "workedOut" | "derived"]: readonly Figure[];
} & { readonly identities: readonly { readonly name: string; readonly value: string; readonly unit: string }[] };

const single: Readonly<Record<constants.ConstantName, number>> = constants;
const table = constants.constants;
const names = Object.keys(table) as constants.ConstantName[];
const given = fixture.published.filter(({ name }) => table[name].kind !== "derived");

/** The decimal times a power of ten, as text: rounded once. */
function scaled(decimal: string, power = 0): number {
  const [mantissa, exponent = "0"] = decimal.split("e");
  return Number(`${mantissa}e${Number(exponent) + power}`);
}

/** Half a unit of the last printed digit, relative to the number. */
function halfDigit(decimal: string): number {
  const [mantissa = "", exponent = "0"] = decimal.split("e");
  const unit = 10 ** (Number(exponent) - (mantissa.split(".")[1]?.length ?? 0));
  return Math.abs(unit / 2 / Number(decimal));
}

function identity(name: string, unit: string): string {
  const found = fixture.identities.find((figure) => figure.name === name && figure.unit === unit);
  if (found === undefined) throw new Error(`no figure ${name} in ${unit}`);
  return found.value;
}

describe("given constants", () => {
  test.each(given)("$name is the CODATA 2022 value", ({ name, value, standardUncertainty, powerOfTenToCgs }) => {
    expect(single[name]).toBe(scaled(value, powerOfTenToCgs));
    expect(table[name].standardUncertainty).toBe(scaled(standardUncertainty ?? "", powerOfTenToCgs));
    expect(table[name].kind).toBe(Number(standardUncertainty) === 0 ? "exact" : "measured");
  });

  test.each(fixture.nominal)("$name is the nominal value of IAU 2015 B3", ({ name, value, powerOfTenToCgs }) => {
    expect(single[name]).toBe(scaled(value, powerOfTenToCgs));
    expect(table[name]).toMatchObject({ kind: "nominal", standardUncertainty: 0 });
  });

  test("the electron volt is the elementary charge in joule", () => {
    expect(constants.electronVolt).toBe(scaled(String(constants.elementaryCharge), 7));
  });
});

describe("derived constants", () => {
  test.each(fixture.derived)("$name is the double nearest to $value", ({ name, value }) => {
    expect(single[name]).toBe(Number(value));
    expect(table[name].kind).toBe("derived");
  });

  test("every derived constant has a reference", () => {
    const referenced = new Set(fixture.derived.map(({ name }) => name));
    expect(names.filter((name) => table[name].kind === "derived" && !referenced.has(name))).toEqual([]);
  });

  test.each(fixture.workedOut)("$name agrees with the figure $value to its last digit", (figure) => {
    const reference = scaled(figure.value, figure.powerOfTenToCgs);
    const tolerance = halfDigit(figure.value) + Number.EPSILON; // one rounding to double of each
    expect(Math.abs(single[figure.name] / reference - 1)).toBeLessThanOrEqual(tolerance);
  });

  // The printed digits of m_e (5.5e-12 of it) limit the values, the two printed digits of both uncertainties the rest.
  test.each(fixture.published.filter(({ name }) => table[name].kind === "derived"))(
    "$name agrees with the value CODATA derives, and so does its uncertainty",
    ({ name, value, standardUncertainty, powerOfTenToCgs }) => {
      const tolerance = halfDigit(value) + 5.5e-12;
      expect(Math.abs(single[name] / scaled(value, powerOfTenToCgs) - 1)).toBeLessThanOrEqual(tolerance);
      const ratio = table[name].standardUncertainty / scaled(standardUncertainty ?? "", powerOfTenToCgs);
      expect(Math.abs(ratio - 1)).toBeLessThanOrEqual(0.5 / 28 + 0.5 / 12); // 28 and 12: the shortest of those printed
    },
  );

  test("other uncertainties are those of the one measured factor, times its power", () => {
    const relative = (name: constants.ConstantName) => table[name].standardUncertainty / table[name].value;
    const rows: readonly [constants.ConstantName, constants.ConstantName, number][] = [
      ["solarMass", "gravitationalConstant", 1],
      ["elementaryChargeSquared", "fineStructureConstant", 1],
      ["electronRestTemperature", "electronMass", 1],
      ["electronDensityUnit", "electronMass", 3],
      ["electronPressureUnit", "electronMass", 4],
      ["radiationConstant", "planckConstant", 3], // zero
      ["stefanBoltzmannConstant", "planckConstant", 3],
      ["reducedPlanckConstant", "planckConstant", 1],
    ];
    for (const [name, factor, power] of rows) {
      expect(Math.abs(relative(name) - power * relative(factor))).toBeLessThanOrEqual(2e-16 * relative(name));
    }
  });
});

describe("the set belongs together (CODATA 2022 derived quantities, SI)", () => {
  const { electronMass: m, fineStructureConstant: alpha, speedOfLight: c, planckConstant: h } = constants;
  const mev = constants.electronVolt * 1e6;
  // Each line: own expression in SI or eV, CODATA's figure, relative rounding of the inputs beyond the figure's own.
  const mass = 5.5e-12; // half a digit of m_e
  const rows: readonly [string, number, string, number][] = [
    [
      "Rydberg constant alpha^2 m_e c/(2 h)",
      ((alpha ** 2 * m * c) / (2 * h)) * 100,
      identity("rydbergConstant", "m^-1"),
      mass + 1.4e-11,
    ],
    [
      "Hartree energy e^2/a_0",
      constants.elementaryChargeSquared / constants.bohrRadius / constants.electronVolt,
      identity("hartree", "eV"),
      mass + 1.4e-11,
    ],
    [
      "classical electron radius e^2/(m_e c^2)",
      constants.elementaryChargeSquared / constants.electronRestEnergy / 100,
      identity("classicalElectronRadius", "m"),
      mass,
    ],
    [
      "vacuum permittivity e^2/(2 alpha h c)",
      constants.elementaryCharge ** 2 / (2 * alpha * h * c * 1e-9),
      identity("vacuumPermittivity", "F m^-1"),
      7e-12,
    ],
    ["electron rest energy", constants.electronRestEnergy / mev, identity("electronRestEnergy", "MeV"), mass],
    ["proton rest energy", (constants.protonMass * c ** 2) / mev, identity("protonRestEnergy", "MeV"), 3e-12],
    [
      "rest energy of m_u",
      (constants.atomicMassConstant * c ** 2) / mev,
      identity("atomicMassRestEnergy", "MeV"),
      3.1e-12,
    ],
    ["proton mass in u", constants.protonMass / constants.atomicMassConstant, identity("protonMassInU", "u"), 6.1e-12],
    [
      "neutron mass in u",
      constants.neutronMass / constants.atomicMassConstant,
      identity("neutronMassInU", "u"),
      6.1e-12,
    ],
    ["electron mass in u", m / constants.atomicMassConstant, String(constants.electronMassInU), mass + 3.1e-12],
  ];
  test.each(rows)("%s", (_, own, figure, inputs) => {
    expect(Math.abs(own / Number(figure) - 1)).toBeLessThanOrEqual(halfDigit(figure) + inputs);
  });

  test("sigma = a c/4, k T_e = m_e c^2, n_0 = 1/(pi^2 lambdabar^3), each to three roundings", () => {
    const close = (a: number, b: number) => expect(Math.abs(a / b - 1)).toBeLessThanOrEqual(3 * Number.EPSILON);
    close((constants.radiationConstant * c) / 4, constants.stefanBoltzmannConstant);
    close(constants.electronRestTemperature * constants.boltzmannConstant, constants.electronRestEnergy);
    close(1 / (Math.PI ** 2 * constants.electronComptonLength ** 3), constants.electronDensityUnit);
    close(constants.solarMass * constants.gravitationalConstant, constants.solarMassParameter);
  });
});

describe("the table", () => {
  test("has every single export, with the same value, and cannot be changed", () => {
    const exported = Object.entries(constants).filter(([, value]) => typeof value === "number");
    expect(Object.fromEntries(names.map((name) => [name, table[name].value]))).toEqual(Object.fromEntries(exported));
    expect(names.every((name) => Object.isFrozen(table[name]))).toBe(true);
    expect(Object.isFrozen(table)).toBe(true);
  });
});

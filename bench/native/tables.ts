/** The header of the native benchmark: numbers of the TypeScript sources as C, so that none is written down twice. */
import * as constants from "../../src/constants.js";
import { phononFit } from "../../src/coulomb/crystal.js";
import { ANHARMONIC_SUPPRESSION, bcc } from "../../src/coulomb/lattice.js";
import { defaultMeltingCoupling, highestCrystalDensity } from "../../src/coulomb/phase.js";
import * as slots from "../../src/coulomb/slots.js";
import { coulombSpecies } from "../../src/coulomb/species.js";
import * as accuracy from "../../src/fermi-gas/accuracy.js";
import * as coordinates from "../../src/fermi-gas/start-coordinates.js";
import { densityCoefficients, tableCoefficients } from "../../src/fermi-gas/start-table.js";
import type { Composition } from "../../src/matter/composition.js";

/** The text of tables.h for a mixture of at least two species. */
export function tablesFor(composition: Composition): string {
  const species = coulombSpecies(composition, bcc);
  const fit = phononFit(bcc);
  if (species.mixture === undefined) throw new Error("the native benchmark needs a mixture");
  const { amplitude, a, b, alpha, beta, logCoupling } = species.mixture.polarisable;
  const matter: Record<string, number> = {
    electrons_per_gram: composition.electronsPerGram,
    ions_per_gram: composition.ionsPerGram,
    coupling_moment: composition.couplingMoment,
    plasma_frequency_sum: composition.plasmaFrequencySum,
    ion_entropy_constant: composition.ionEntropyConstant,
    ions_boltzmann: species.ionsBoltzmann,
    electrons_boltzmann: species.electronsBoltzmann,
    gamma_e: species.gammaE,
    x: species.x,
    madelung: species.madelung,
    zero_point: species.zeroPoint,
    anharmonic_ground: species.anharmonicGround,
    alloy: species.alloy,
    mixing: species.mixing,
    spin: species.spin,
    crystal_limit: highestCrystalDensity(composition),
  };
  const mixture: Record<string, number> = { amplitude, a, b, alpha, beta, log_coupling: logCoupling };
  const fields = (record: Record<string, number>): string => `  double ${Object.keys(record).join(", ")};`;
  const values = (record: Record<string, number>): string =>
    Object.entries(record)
      .map(([name, value]) => `.${name} = ${number(value)}`)
      .join(", ");
  const rows = species.ions.map((ion) => list(ion));
  return [
    "#pragma once",
    ...definitions(accuracy),
    ...definitions(coordinates),
    ...definitions(constants),
    ...definitions(slots, "ION_"),
    ...definitions({ ANHARMONIC_SUPPRESSION, MELTING_COUPLING: defaultMeltingCoupling, ALPHA_8: fit.alpha8 }),
    array("PATCHES_T", coordinates.PATCHES_T),
    array("PATCHES_U", coordinates.PATCHES_U),
    array("densityCoefficients", densityCoefficients),
    array("tableCoefficients", tableCoefficients),
    array("phononCoefficients", fit.coefficients),
    array("phononExponents", fit.exponents),
    array("anharmonic", bcc.anharmonic),
    `struct mixture {\n${fields(mixture)}\n};`,
    `struct matter {\n${fields(matter)}\n  struct mixture mixture;\n  int ion_count;\n  double ions[${rows.length}][ION_LENGTH];\n};`,
    // Not constant: the compiler must not fold a composition into the code.
    `static struct matter carbon_oxygen = {${values(matter)}, .mixture = {${values(mixture)}}, .ion_count = ${rows.length}, .ions = {${rows.join(", ")}}};`,
    "",
  ].join("\n");
}

/** #define lines for the numbers that a module exports: electronRestEnergy becomes ELECTRON_REST_ENERGY. */
function definitions(module: object, prefix = ""): string[] {
  return Object.entries(module)
    .filter(([name, value]) => typeof value === "number" && name.startsWith(prefix))
    .map(([name, value]) => {
      const snake = name.replace(/([a-z])([A-Z])/g, "$1_$2").toUpperCase();
      return `#define ${snake} ${name === name.toUpperCase() ? String(value) : number(value)}`;
    });
}

function array(name: string, values: ArrayLike<number>): string {
  return `static const double ${name}[] = ${list(values)};`;
}

function list(values: ArrayLike<number>): string {
  return `{${Array.from(values, number).join(", ")}}`;
}

/** A double, never an integer: 1 / 2 is 0 in C. */
function number(value: number): string {
  const text = String(value);
  return /[.e]/.test(text) ? text : `${text}.0`;
}

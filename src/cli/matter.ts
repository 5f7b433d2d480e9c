/** The matter that commands speak of: the equation of state without some of its terms, and a composition. */

import * as z from "zod/mini";
import type { CoulombPlasmaOptions } from "../coulomb/options.js";
import { FermistateError, isFermistateError } from "../errors.js";
import { type Composition, composition, type NucleonFractions } from "../matter/composition.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { type WhiteDwarfMatterOptions, whiteDwarfMatter } from "../white-dwarf-matter.js";
import type { OptionHelp } from "./command.js";
import { flag, fractions, number, oneOf, wordList } from "./readers.js";

/** Terms of the Coulomb plasma that can be left out. */
const terms = ["polarisation", "exchange", "mixture", "anharmonic"] as const;
/** All that can be left out. */
const switches = ["ions", "coulomb", "radiation", ...terms] as const;

/** Options that every command about matter shares. */
export const matterOptions = {
  composition: {
    value: "LABEL=X,...",
    help:
      "nucleon (mass) fractions that sum to 1, such as C12=0.5,O16=0.5; labels are element symbol and mass number, " +
      "n is the free neutron; or a mean nucleus: meanMassNumber=13.7,meanCharge=6.85",
    read: fractions,
  },
  normalise: { help: "scale the fractions to a sum of 1 instead of refusing another sum", read: flag },
  without: {
    value: "NAME,...",
    help:
      "what to leave out: ions (nuclei, with all their Coulomb terms), coulomb (nuclei become an ideal gas), radiation; " +
      "or single Coulomb terms: polarisation (of the electrons by the ions), exchange (and correlation of the " +
      "electrons), mixture (corrections to linear mixing), anharmonic (terms of the crystal)",
    read: z.optional(wordList(switches)),
  },
  phase: {
    value: "liquid|crystal",
    help: "force a phase of the ions, superheated or supercooled too; by default their coupling decides",
    read: z.optional(oneOf(["liquid", "crystal"])),
  },
  "melting-coupling": {
    value: "NUMBER",
    help: "coupling Gamma at which the crystal melts, 100 to 300; 175 by default",
    read: z.optional(number),
  },
} as const satisfies Record<string, OptionHelp & { read: z.ZodMiniType }>;

/** What {@link matterOptions} gives. */
export interface MatterChoice {
  readonly composition: NucleonFractions;
  readonly normalise: boolean;
  readonly without: readonly (typeof switches)[number][] | undefined;
  readonly phase: "liquid" | "crystal" | undefined;
  readonly "melting-coupling": number | undefined;
}

/** The equation of state and the composition of a choice. */
export function matterOf(choice: MatterChoice): { equationOfState: EquationOfState; matter: Composition } {
  return { equationOfState: equationOf(switchesOf(choice)), matter: compositionOf(choice) };
}

/** The options of `whiteDwarfMatter` of a choice: plain data. */
export function switchesOf(choice: Omit<MatterChoice, "composition" | "normalise">): WhiteDwarfMatterOptions {
  const without = choice.without ?? [];
  return {
    coulomb: coulombOf(choice),
    ions: !without.includes("ions"),
    radiation: !without.includes("radiation"),
  };
}

/** The Coulomb terms of a choice; what would have no effect is refused. */
function coulombOf(choice: Omit<MatterChoice, "composition" | "normalise">): CoulombPlasmaOptions | false {
  const { without = [], phase, "melting-coupling": meltingCoupling } = choice;
  const left = terms.filter((name) => without.includes(name));
  const gone = (["ions", "coulomb"] as const).find((name) => without.includes(name));
  const refuse = (argument: string, given: unknown, allowed: string): never => {
    throw new FermistateError("invalid-option", { argument, given, allowed });
  };
  if (gone !== undefined) {
    const allowed = `only with Coulomb terms, which --without ${gone} leaves out`;
    if (phase !== undefined) refuse("--phase", phase, allowed);
    if (meltingCoupling !== undefined) refuse("--melting-coupling", meltingCoupling, allowed);
    if (left[0] !== undefined) refuse("--without", left[0], allowed);
    return false;
  }
  if (phase !== undefined && meltingCoupling !== undefined) {
    refuse("--melting-coupling", meltingCoupling, "only without --phase, which forces the phase");
  }
  return {
    ...Object.fromEntries(left.map((name) => [name, false])),
    ...(phase === undefined ? {} : { phase }),
    ...(meltingCoupling === undefined ? {} : { meltingCoupling }),
  };
}

/** The equation of state; a wrong melting coupling bears the name it has on the command line. */
function equationOf(options: WhiteDwarfMatterOptions): EquationOfState {
  try {
    return whiteDwarfMatter(options);
  } catch (error) {
    if (!isFermistateError(error) || error.argument !== "meltingCoupling") throw error;
    const { code, given, allowed } = error;
    throw new FermistateError(code, { argument: "--melting-coupling", given, allowed });
  }
}

/** The composition; a wrong sum names the switch of the command line. */
export function compositionOf({
  composition: fractions,
  normalise,
}: Pick<MatterChoice, "composition" | "normalise">): Composition {
  try {
    return composition(fractions, { normalise });
  } catch (error) {
    if (!isFermistateError(error) || error.argument !== "sum of fractions" || normalise) throw error;
    const { code, argument, given } = error;
    throw new FermistateError(code, { argument, given, allowed: "1 within 1e-10; with --normalise any sum > 0" });
  }
}

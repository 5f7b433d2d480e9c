/** The matter that commands speak of: the equation of state without some contributions, and a composition. */

import * as z from "zod/mini";
import { FermistateError, isFermistateError } from "../errors.js";
import { type Composition, composition, type NucleonFractions } from "../matter/composition.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { whiteDwarfMatter } from "../white-dwarf-matter.js";
import type { OptionHelp } from "./command.js";
import { flag, fractions, wordList } from "./readers.js";

/** Contributions that can be left out. */
const switches = ["ions", "radiation"] as const;

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
    help: `contributions to leave out: ${switches.join(", ")}`,
    read: z.optional(wordList(switches)),
  },
} as const satisfies Record<string, OptionHelp & { read: z.ZodMiniType }>;

/** What {@link matterOptions} gives. */
export interface MatterChoice {
  readonly composition: NucleonFractions;
  readonly normalise: boolean;
  readonly without: readonly (typeof switches)[number][] | undefined;
}

/** The equation of state and the composition of a choice. */
export function matterOf(choice: MatterChoice): { equationOfState: EquationOfState; matter: Composition } {
  const without = choice.without ?? [];
  return {
    equationOfState: whiteDwarfMatter({ ions: !without.includes("ions"), radiation: !without.includes("radiation") }),
    matter: compositionOf(choice),
  };
}

/** The composition; a wrong sum names the switch of the command line. */
function compositionOf({ composition: fractions, normalise }: MatterChoice): Composition {
  try {
    return composition(fractions, { normalise });
  } catch (error) {
    if (!isFermistateError(error) || error.argument !== "sum of fractions" || normalise) throw error;
    const { code, argument, given } = error;
    throw new FermistateError(code, { argument, given, allowed: "1 within 1e-10; with --normalise any sum > 0" });
  }
}

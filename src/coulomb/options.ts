/** What a Coulomb plasma may leave out or choose, and the check of it. */
import { FermistateError, requireKnown } from "../errors.js";
import type { LatticeName } from "./lattice.js";
import { defaultMeltingCoupling, type Phase } from "./phase.js";

/** Which form the quantum correction of the liquid takes. */
export type QuantumForm = "two-oscillators" | "wigner-kirkwood" | "baiko-yakovlev";

/** Options of {@link coulombPlasma}: what is in, and which phase. */
export interface CoulombPlasmaOptions {
  /**
   * Phase of the ions. "equilibrium" decides by the coupling (see phase.ts); the others force one, also where it is
   * superheated or supercooled: the fits then end at Gamma = 100 and 200.
   * @defaultValue "equilibrium"
   */
  readonly phase?: Phase | "equilibrium";
  /**
   * sum x_j Gamma_j at which matter melts.
   * @defaultValue 175
   */
  readonly meltingCoupling?: number;
  /**
   * Lattice of the crystal. No anharmonic terms are known here for fcc.
   * @defaultValue "bcc"
   */
  readonly lattice?: LatticeName;
  /**
   * Quantum correction of the liquid, or false for a classical liquid.
   * @defaultValue "two-oscillators", whose heat capacity stays within the -3 k of a quantum liquid
   */
  readonly quantum?: QuantumForm | false;
  /**
   * Polarisation of the electrons by the ions.
   * @defaultValue true
   */
  readonly polarisation?: boolean;
  /**
   * Exchange and correlation of the electrons.
   * @defaultValue true
   */
  readonly exchange?: boolean;
  /**
   * Anharmonic terms of the crystal.
   * @defaultValue true
   */
  readonly anharmonic?: boolean;
  /**
   * Corrections to linear mixing in liquid and crystal.
   * @defaultValue true
   */
  readonly mixture?: boolean;
  /**
   * Whether free neutrons count as a classical gas beside the nuclei.
   * @defaultValue true
   */
  readonly freeNeutrons?: boolean;
}

const defaults: Required<CoulombPlasmaOptions> = {
  phase: "equilibrium",
  meltingCoupling: defaultMeltingCoupling,
  lattice: "bcc",
  quantum: "two-oscillators",
  polarisation: true,
  exchange: true,
  anharmonic: true,
  mixture: true,
  freeNeutrons: true,
};

/** The options with defaults; refuses strangers. */
export function checkedOptions(options: CoulombPlasmaOptions): Required<CoulombPlasmaOptions> {
  requireKnown("options", options, Object.keys(defaults));
  const chosen = { ...defaults, ...options };
  const closed: Readonly<Record<string, readonly unknown[]>> = {
    phase: ["equilibrium", "liquid", "crystal"],
    lattice: ["bcc", "fcc"],
    quantum: ["two-oscillators", "wigner-kirkwood", "baiko-yakovlev", false],
    polarisation: [true, false],
    exchange: [true, false],
    anharmonic: [true, false],
    mixture: [true, false],
    freeNeutrons: [true, false],
  };
  for (const [name, value] of Object.entries(chosen)) {
    if (name === "meltingCoupling") continue;
    const allowed = closed[name]!;
    if (allowed.includes(value)) continue;
    throw new FermistateError("invalid-option", {
      argument: name,
      given: value,
      allowed: allowed.map(String).join(", "),
    });
  }
  const coupling: unknown = chosen.meltingCoupling;
  if (!(typeof coupling === "number" && coupling >= 100 && coupling <= 300)) {
    throw new FermistateError("out-of-range", { argument: "meltingCoupling", given: coupling, allowed: "100 to 300" });
  }
  return Object.freeze(chosen);
}

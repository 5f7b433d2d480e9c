/**
 * Findings on the sum of pressures: pairs, photons, classical ions, and the stability of the whole.
 */
import { atomicMassConstant, boltzmannConstant, reducedPlanckConstant } from "../constants.js";
import { FermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { DENSITY, fillPlasma, POINT_LENGTH, TEMPERATURE } from "../matter/plasma.js";
import type { Contribution } from "../thermodynamics/contribution.js";
import type { EquationOfState, State } from "../thermodynamics/equation-of-state.js";
import { MEMBER_COUNT, PRESSURE } from "../thermodynamics/free-energy.js";
import { type Finding, judge } from "./finding.js";
import type { Measured } from "./parameters.js";

/** Adds `pairs-important`, `radiation-dominated` and `photon-plasma-cutoff`. */
export function judgeShares(list: Finding[], temperature: number, measured: Measured): void {
  const { pairFraction, coulombPressureShare, radiationPressureFraction, electronPlasmaTemperature } =
    measured.parameters;
  const perElectron = Number.isFinite(pairFraction);
  judge(list, {
    code: "pairs-important",
    // Pairs alone have no ratio to net electrons.
    value: perElectron ? pairFraction : measured.positronsPerNucleon,
    strained: 0.01,
    ...(coulombPressureShare > 1e-4 ? { outside: 0.1 } : {}),
    name: perElectron ? "positrons over net electrons" : "positrons per nucleon",
    message: "Positrons are a sizeable part of the matter: Coulomb and screening terms count net electrons only.",
  });
  judge(list, {
    code: "radiation-dominated",
    value: radiationPressureFraction,
    strained: 0.5,
    name: "pressure of photons over total pressure",
    message:
      "Photons carry most of the pressure: the matter is close to gamma_1 = 4/3 and must be opaque to hold them.",
  });
  if (!(radiationPressureFraction > 1e-4)) return;
  judge(list, {
    code: "photon-plasma-cutoff",
    value: electronPlasmaTemperature / temperature,
    strained: 1,
    name: "hbar omega_p of the electrons over kT",
    message: "Photons near and below the plasma frequency do not propagate: black-body radiation is too much here.",
  });
}

/**
 * Adds `coulomb-neglected` for a sum that has ideal ions and no interaction. Conventions: at a coupling of 0.1 the
 * correlation energy is 2 % of (3/2) kT per ion (Debye-Hueckel: Gamma^(3/2) sqrt(3)/2 kT), at 1 ions are a liquid.
 */
export function judgeCoupling(list: Finding[], equationOfState: EquationOfState, ionCoupling: number): void {
  const { contributions } = equationOfState;
  const gasAlone = contributions.every((part) => part.ideal === true);
  if (!gasAlone || !contributions.some(({ name }) => name.startsWith("ideal ions"))) return;
  judge(list, {
    code: "coulomb-neglected",
    value: ionCoupling,
    strained: 0.1,
    outside: 1,
    name: "Gamma, mean over the charged nuclei",
    message: {
      strained: "This sum leaves out the Coulomb terms, which are some per cent of the thermal energy of the nuclei.",
      outside: "Nuclei are a liquid or a crystal here, and this sum has them as an ideal gas.",
    },
  });
}

/**
 * Adds `ideal-ions-degenerate`: nuclei as a classical gas need n lambda^3 << 1. Above e^(5/2), less with spins and
 * mixing, the entropy of that gas is negative. At T = 0 there is no classical gas to judge.
 */
export function judgeIdealIons(list: Finding[], density: number, temperature: number, composition: Composition): void {
  if (temperature === 0) return;
  const thermal = (2 * Math.PI * reducedPlanckConstant ** 2) / (atomicMassConstant * boltzmannConstant * temperature);
  const nuclei = Math.log(composition.ionsPerGram * density * thermal ** 1.5);
  const mean = Math.exp(nuclei + composition.ionEntropyConstant); // geometric mean, by number
  let value = 0;
  let label = "";
  for (const one of composition.species) {
    const ratio = atomicMassConstant / one.ionMass;
    const each = Math.exp(nuclei) * ((one.numberFraction / one.spinDegeneracy) * ratio * Math.sqrt(ratio));
    if (each > value) [value, label] = [each, one.label];
  }
  const negative = nuclei + composition.ionEntropyConstant > 2.5;
  judge(list, {
    code: "ideal-ions-degenerate",
    value: negative ? mean : value,
    strained: 0.1,
    ...(negative ? { outside: Math.exp(2.5) } : {}),
    name: negative ? "mean n lambda^3/(2J + 1) of the nuclei" : "largest n lambda^3/(2J + 1) of the nuclei",
    ...(negative ? {} : { species: label }),
    message: {
      strained: `${label} is cold and dense enough for quantum effects: a classical ideal gas of nuclei is doubtful.`,
      outside:
        "The entropy of nuclei as a classical ideal gas is negative here: ion terms of that gas are meaningless.",
    },
  });
}

/** What stability is judged by. */
interface Sum {
  /** P, dyn/cm^2. */
  readonly pressure: number;
  /** dP/drho at constant temperature, erg/g. */
  readonly stiffness: number;
  /** c_v, erg/(g K). */
  readonly heatCapacity: number;
}

/**
 * Adds `thermodynamically-unstable`, by a state or by an equation of state. The sum is judged, whichever term is to blame;
 * at a quarter of the electrons' pressure the non-ideal contributions are large enough to doubt all of them.
 */
export function judgeStability(
  list: Finding[],
  { density, temperature, composition }: Pick<State, "density" | "temperature" | "composition">,
  { electronPressure }: Measured,
  given: { readonly state?: State | undefined; readonly equationOfState?: EquationOfState | undefined },
): void {
  const { state, equationOfState: eos } = given;
  if (state === undefined && eos === undefined) return;
  const sum = state === undefined ? sumOf(eos!, density, temperature, composition) : fromState(state);
  const code = "thermodynamically-unstable";
  const message = "The sum of all terms is not stable matter here: one of them is far outside its range.";
  const zero = (value: number, name: string, unit: string): boolean =>
    // "<= 0": the smallest positive number is the first good one.
    judge(list, { code, value, outside: Number.MIN_VALUE, below: true, name, unit, message });
  if (zero(sum.pressure, "pressure", "dyn/cm^2")) return;
  if (zero(sum.stiffness, "dP/drho at constant temperature", "erg/g")) return;
  if (temperature > 0 && zero(sum.heatCapacity, "heat capacity at constant volume", "erg/(g K)")) return;
  const interactions = (eos?.contributions ?? []).flatMap(termsOf).filter((part) => part.ideal !== true);
  if (interactions.length === 0 || electronPressure === 0) return;
  const pressure = pressureOf(interactions, density, temperature, composition);
  judge(list, {
    code,
    value: pressure / electronPressure,
    strained: -0.25,
    below: true,
    name: "pressure of interactions over that of electrons",
    message:
      "Interactions take away more than a quarter of the electrons' pressure: they are no small correction here.",
  });
}

/** The terms of a contribution that is a sum itself; the ideal gas inside a Coulomb plasma is no interaction. */
const termsOf = (part: Contribution): readonly Contribution[] =>
  part.parts?.filter(({ name }) => name !== "ideal ions") ?? [part];

/** Pressure of some contributions, dyn/cm^2, at a point inside their domain. */
function pressureOf(
  parts: readonly Contribution[],
  density: number,
  temperature: number,
  composition: Composition,
): number {
  const point = new Float64Array(POINT_LENGTH);
  const members = new Float64Array(MEMBER_COUNT);
  point[DENSITY] = density;
  point[TEMPERATURE] = temperature;
  fillPlasma(point, composition);
  for (const part of parts) part.add(point, composition, 2, members);
  return density * members[PRESSURE]!;
}

const fromState = ({ pressure, pressureByDensity, heatCapacityV }: State): Sum => ({
  pressure,
  stiffness: pressureByDensity,
  heatCapacity: heatCapacityV,
});

/** From the state; where the equation of state refuses an unstable sum, from its free energy, which it always gives. */
function sumOf(eos: EquationOfState, density: number, temperature: number, composition: Composition): Sum {
  try {
    return fromState(eos.state(density, temperature, composition));
  } catch (error) {
    if (!(error instanceof FermistateError && error.code === "unstable")) throw error;
    const { f10, f20, f02 } = eos.freeEnergy(density, temperature, composition);
    const heatCapacity = temperature === 0 ? 0 : -f02 / temperature;
    return { pressure: density * f10, stiffness: 2 * f10 + f20, heatCapacity };
  }
}

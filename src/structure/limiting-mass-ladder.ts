/**
 * The limiting mass of white dwarfs of a composition, one assumption after the other.
 *
 * In Newton's theory cold matter without motion of its nuclei has no densest star: electrons, lattice, exchange and
 * screening all grow as rho^(4/3) at the end, so that the mass rises towards that of a polytrope of index 3,
 *
 *     M = (K/K_0)^(3/2) M_Ch,    K = lim P/rho^(4/3),    K_0 that of the ideal gas (Chandrasekhar 1931, ApJ 74, 81),
 *
 * while the radius goes to zero. Relativity makes the mass turn at a finite density (Chandrasekhar & Tooper 1964, ApJ
 * 139, 1396), electron capture may end the sequence before (Hamada & Salpeter 1961, ApJ 134, 683): the lower density decides.
 * The zero-point energy of the nuclei grows as rho^(1/2), faster than that of the electrons, so it has no place in Newton's
 * limit and comes after relativity. The rungs before take the classic terms of coulomb/cold-corrections.ts (Salpeter 1961,
 * ApJ 134, 669), those after the Coulomb plasma.
 */
import type { Barotrope } from "../barotropes/barotrope.js";
import { firstElectronCapture } from "../barotropes/capture-limit.js";
import { barotrope } from "../barotropes/from-equation-of-state.js";
import { degenerateElectrons, polytrope } from "../barotropes/polytrope.js";
import { coldCorrections } from "../coulomb/cold-corrections.js";
import { coulombPlasma } from "../coulomb/coulomb-plasma.js";
import { highestCrystalDensity } from "../coulomb/phase.js";
import { FermistateError, requireFinite, requireKnown } from "../errors.js";
import { electronPositronGas } from "../fermi-gas/electron-positron-gas.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import type { CaptureThreshold } from "../regime/capture.js";
import { combine } from "../thermodynamics/combine.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { whiteDwarfMatter } from "../white-dwarf-matter.js";
import { heaviest, limitOf } from "./ladder-limits.js";
import { type LadderRung, rung, short, shortest } from "./ladder-rung.js";
import { chandrasekharMass, uniformSphereMass } from "./limiting-mass.js";

/** Options of {@link limitingMassLadder}. */
export interface LadderOptions {
  /**
   * Temperature of the isothermal core, K: 1e6 to 5e8; false leaves that rung out.
   * @defaultValue 1e8
   */
  readonly temperature?: number | false;
}

/** Colder: as cold. Hotter: an isothermal star has hardly an end, and carbon has long burnt. */
const temperatures = [1e6, 5e8] as const;
/** Nuclei whose crystal melts by its own vibration below this density, g/cm^3, are no crystal in the stars looked at. */
const densest = 3e10;

/**
 * The limiting mass of a composition under one assumption after the other: nine rungs, from a uniform sphere to a warm star
 * whose nuclei capture electrons.
 *
 * Limits at infinite density are those of P/rho^(4/3) at 1e18 g/cm^3, good to 1e-7; masses of stars to 1e-8 for the
 * matter as it is modelled. Not in it: rotation, magnetic fields, nuclear burning (a carbon core ignites before it
 * collapses). The first capture counts, of however rare a nuclide: leave traces out. Helium is no crystal at
 * these densities: its rung of moving nuclei is formal, and says so. The isothermal core is matter of one
 * temperature out to where radiation alone would carry it: its mass is good,
 * its radius an upper bound for a star whose envelope is cooler.
 *
 * @throws `invalid-composition`, `invalid-option`, `not-a-number`; `out-of-range` for a temperature outside 1e6 to 5e8 K
 * or matter without nuclei; `outside-domain` for nuclei that capture electrons at any density, or below every star here;
 * `unstable` and `outside-domain` where cold matter (hydrogen) or the warm matter (mixtures of very unlike nuclei; light
 * nuclei at 5e8 K, whose star is mostly envelope) has no answer
 * @example
 * ```ts
 * import { composition } from "fermistate";
 * import { limitingMassLadder } from "fermistate/structure";
 * const rungs = limitingMassLadder(composition({ C12: 0.5, O16: 0.5 }));
 * rungs[1]?.solarMasses; // => 1.456298
 * ```
 */
export function limitingMassLadder(composition: Composition, options: LadderOptions = {}): readonly LadderRung[] {
  requireComposition(composition);
  const temperature = temperatureOf(options);
  requireNuclei(composition);
  const capture = captureOf(composition);
  const ideal = barotrope(combine(electronPositronGas()), composition, { temperature: 0 });
  const massPerElectron = 1 / composition.electronsPerNucleon;
  const { ultraRelativistic } = degenerateElectrons(composition);
  const limit = limitOf(ultraRelativistic.constant, chandrasekharMass(massPerElectron));
  const melts = highestCrystalDensity(composition) < densest;
  const [lattice, still, moving] = coldBarotropes(composition);

  const rungs = [
    rung({
      code: "uniform-sphere",
      name: "uniform sphere",
      assumes: "one density throughout, electrons as fast as light, Newton's gravity; energy alone",
      mass: uniformSphereMass(massPerElectron),
      end: "energy",
      message: "Above this mass the energy falls without end as the sphere shrinks; below, it expands.",
      relativity: "newton",
    }),
    rung({
      code: "index-3-polytrope",
      name: "polytrope of index 3",
      assumes: "hydrostatic equilibrium instead of one density; electrons as fast as light at every depth",
      mass: chandrasekharMass(massPerElectron),
      end: "scale-free",
      message: "Stars of every central density have this mass: pressure and gravity grow alike.",
      relativity: "newton",
      matter: polytrope(ultraRelativistic),
    }),
    rung({
      code: "ideal-electrons",
      name: "ideal electrons",
      assumes: "cold ideal electrons with their full relation of energy and momentum",
      ...limit(ideal),
    }),
    rung({
      code: "lattice",
      name: "with the Coulomb lattice",
      assumes: "point nuclei at rest in a bcc lattice, uniform electrons",
      ...limit(lattice!),
    }),
    rung({
      code: "exchange-and-screening",
      name: "with exchange and screening",
      assumes: "exchange and correlation of the electrons, screening after Thomas and Fermi",
      ...limit(still!),
    }),
    rung({
      code: "general-relativity",
      name: "in general relativity",
      assumes: "Einstein's gravity instead of Newton's",
      ...heaviest(still!, undefined),
    }),
    rung({
      code: "moving-nuclei",
      name: "with moving nuclei",
      assumes: melts
        ? "zero-point vibration, screening of real nuclei (formal: nuclei so light are no crystal here)"
        : "zero-point vibration of the crystal, screening of real nuclei",
      ...heaviest(moving!, undefined),
    }),
    rung({
      code: "electron-capture",
      name: "until electron capture",
      assumes:
        capture === undefined
          ? "nuclei keep their charge: no threshold of electron capture is known for them"
          : `nuclei keep their charge up to the first capture (${capture.species} to ${capture.product}, lattice included)`,
      ...heaviest(moving!, capture),
    }),
  ];
  if (temperature !== false) rungs.push(warmRung(composition, temperature, melts, capture, rungs.at(-1)!));
  return Object.freeze(rungs);
}

/** The last rung; where it fails, the refusal says how to do without it. */
function warmRung(
  composition: Composition,
  temperature: number,
  melts: boolean,
  capture: CaptureThreshold | undefined,
  cold: LadderRung,
): LadderRung {
  try {
    const warm = barotrope(warmMatter(melts), composition, { temperature });
    const outcome = heaviest(warm, capture);
    const allowed = `a star not ${mostSwollen} times as wide as the cold one`;
    if (outcome.radius! > mostSwollen * cold.radius!) {
      throw new FermistateError("outside-domain", { argument: "radius", given: outcome.radius, allowed });
    }
    return rung({
      code: "isothermal-core",
      name: "with an isothermal core",
      assumes: `ions, electrons and radiation at ${shortest(temperature)} K instead of 0`,
      ...outcome,
    });
  } catch (error) {
    if (!(error instanceof FermistateError)) throw error;
    const why =
      error.code === "unstable"
        ? "where they freeze, nuclei so unlike have a crystal thinner than the liquid in this model, which no star can have"
        : "so warm, the star is mostly envelope";
    const allowed = `one at which the warm star exists (${why}: ${error.message}); or false, without this rung`;
    throw new FermistateError(error.code, { argument: "temperature", given: temperature, allowed });
  }
}

/** Wider isothermal stars are mostly envelope: their mass says nothing on the core. */
const mostSwollen = 3;

/** The cold barotropes; where the crystal does not carry, the refusal says so. */
function coldBarotropes(composition: Composition): readonly Barotrope[] {
  try {
    return coldMatter().map((matter) => barotrope(matter, composition, { temperature: 0 }));
  } catch (error) {
    if (!(error instanceof FermistateError) || error.code !== "unstable") throw error;
    const allowed =
      "matter whose nuclei make a cold crystal: at the densities of these stars zero-point motion keeps hydrogen, and matter " +
      "with much of it, from being one, and the terms of a crystal leave it no pressure (hydrogen also captures electrons " +
      "from 1.2e7 g/cm^3 on). Without lattice: chandrasekharMass(mu_e), or maximumMass of ideal electrons";
    throw new FermistateError("unstable", { argument: "composition", given: composition.name, allowed });
  }
}

/** Cold matter: the lattice at rest, with exchange and screening, with the motion of the nuclei too. */
function coldMatter(): readonly EquationOfState[] {
  const electrons = electronPositronGas();
  return [
    combine(electrons, coldCorrections({ thomasFermi: false, exchange: false, correlation: false })),
    combine(electrons, coldCorrections()),
    combine(electrons, coulombPlasma({ phase: "crystal" })),
  ];
}

/** All terms; nuclei too light for a crystal at these densities are a liquid at all of them. */
function warmMatter(melts: boolean): EquationOfState {
  return whiteDwarfMatter(melts ? { coulomb: { phase: "liquid" } } : {});
}

function temperatureOf(options: unknown): number | false {
  const allowed = `${shortest(temperatures[0])} to ${shortest(temperatures[1])} K, or false`;
  requireKnown("options", options, ["temperature"]);
  const given = (options as LadderOptions).temperature ?? 1e8;
  if (given === false) return false;
  const temperature = requireFinite("temperature", given, allowed);
  if (temperature >= temperatures[0] && temperature <= temperatures[1]) return temperature;
  throw new FermistateError("out-of-range", { argument: "temperature", given: temperature, allowed });
}

function requireNuclei({ name, meanCharge }: Composition): void {
  if (meanCharge > 0) return;
  const allowed = "matter with charged nuclei";
  throw new FermistateError("out-of-range", { argument: "composition", given: name, allowed });
}

/** The first capture; refuses nuclei that capture where no star of these sequences is. */
function captureOf(composition: Composition): CaptureThreshold | undefined {
  const capture = firstElectronCapture(composition);
  if (capture === undefined || capture.densityWithLattice >= lowestCapture) return capture;
  const given = `${capture.species}, ${short(capture.densityWithLattice)} g/cm^3`;
  const allowed = `nuclides that capture no electrons below ${shortest(lowestCapture)} g/cm^3`;
  throw new FermistateError("outside-domain", { argument: "composition", given, allowed });
}

/** Stars of lower central density are no limit that a white dwarf would know. */
const lowestCapture = 1e7;

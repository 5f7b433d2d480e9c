/**
 * The outer crust of a neutron star: cold catalysed matter from the surface to neutron drip.
 *
 * At each pressure the nuclide with the least Gibbs energy per baryon (Baym, Pethick & Sutherland 1971, ApJ 170, 299),
 * pure, in a bcc lattice. Where two share the least one the density jumps at constant pressure. Neutrons drip where g
 * reaches the mass of the neutron. The layers are the lower envelope of the curves g(P), which cross in pairs at most
 * once: the envelope between two pressures follows from the crossing of the two nuclides at its ends, and the nuclide
 * below it, if there is one.
 */
import { coldCorrections } from "../coulomb/cold-corrections.js";
import { requireFlags } from "../errors.js";
import { electronPositronGas } from "../fermi-gas/electron-positron-gas.js";
import { composition } from "../matter/composition.js";
import { findRoot } from "../numerics/roots.js";
import { combine } from "../thermodynamics/combine.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
} from "./barotrope.js";
import {
  type CrustNuclide,
  candidates,
  crustNuclides,
  neutronMassExcess,
  type PureMatter,
  pureMatterOf,
} from "./crust-nuclei.js";
import { barotrope } from "./from-equation-of-state.js";
import { type Layer, stacked } from "./stacked.js";

/** Options of {@link outerCrust}. */
export interface OuterCrustOptions {
  /**
   * Whether the binding energy of the atom's electrons is put back into the mass of the nucleus. With it there is a
   * thin layer of Fe58, 5 % in pressure; without it, the convention of the rest of this library, 0.1 % are left of it,
   * where it is preferred by 1 eV per baryon, which is less than the masses are known to.
   * @defaultValue true
   */
  readonly electronBinding?: boolean;
  /**
   * Whether nuclides whose mass AME2020 estimates from trends take part.
   * @defaultValue false
   */
  readonly extrapolatedMasses?: boolean;
  /**
   * Electrons and lattice, legal at T = 0 for any one nuclide.
   * @defaultValue ideal electrons and a bcc lattice energy
   */
  readonly equationOfState?: EquationOfState;
}

/** One layer of an outer crust. */
export interface CrustLayer {
  /** Its nuclide, "Fe56". */
  readonly nuclide: string;
  /** True where AME2020 marks the mass as estimated from trends. */
  readonly extrapolated: boolean;
  /** Pressure at its top and at its bottom, dyn/cm^2. */
  readonly pressure: readonly [top: number, bottom: number];
  /** Density there, g/cm^3. */
  readonly density: readonly [top: number, bottom: number];
  /** Chemical potential of the baryons g at its bottom less m_u c^2, erg/g: equal to w there. */
  readonly potential: number;
}

/** An outer crust: a barotrope and its layers. */
export interface OuterCrust extends Barotrope {
  /** From the surface down; the last ends at neutron drip. */
  readonly layers: readonly CrustLayer[];
}

/** Nuclides this close to the least Gibbs energy (0.05 MeV per baryon) are asked of the equation of state. */
const margin = 5e16;
/** Pressure of the first look, dyn/cm^2: there matter is Fe56, at 1e4 g/cm^3. */
const shallow = 1e19;
/** A pressure beyond drip, dyn/cm^2. */
const deep = 3e30;

/**
 * The outer crust of cold catalysed matter, from P = 0 to neutron drip.
 *
 * e and w are measured from m_u c^2 per baryon, nuclear binding included: rho (c^2 + e) is the full density of
 * mass-energy, and e is negative near the surface. Transition pressures follow from the masses to 1e-10; what they are
 * worth is the question: measured masses end at Zn80, and the layers beyond it are those of the nuclides whose masses
 * happen to be known. Below 1e4 g/cm^3 matter is not fully ionised.
 *
 * @throws `invalid-option`, and the errors of the equation of state at T = 0
 * @example
 * ```ts
 * import { outerCrust } from "fermistate/barotropes";
 * const crust = outerCrust();
 * crust.layers[0]?.nuclide; // => "Fe56"
 * crust.layers[0]?.density[1]; // => 8.237e6
 * const iron = crust.layers.find((layer) => layer.nuclide === "Fe58");
 * iron?.density; // => [2.639e8, 2.746e8]
 * ```
 */
export function outerCrust(options: OuterCrustOptions = {}): OuterCrust {
  requireFlags("options", options, ["electronBinding", "extrapolatedMasses"], ["equationOfState"]);
  const { equationOfState = idealElectronsAndLattice(), electronBinding = true, extrapolatedMasses = false } = options;
  const all = crustNuclides(extrapolatedMasses, electronBinding);
  const pure = pureMatterOf(equationOfState);

  /** The nuclide of the least Gibbs energy and that energy, erg/g. */
  function best(pressure: number): { nuclide: CrustNuclide; energy: number } {
    let found: { nuclide: CrustNuclide; energy: number } | undefined;
    for (const nuclide of candidates(all, pressure, margin)) {
      const energy = pure(nuclide, pressure).potential + nuclide.massExcess;
      if (found === undefined || energy < found.energy) found = { nuclide, energy };
    }
    return found as { nuclide: CrustNuclide; energy: number };
  }

  /** Transitions between two pressures with their nuclides, in order. */
  function transitions(low: number, above: CrustNuclide, high: number, below: CrustNuclide): Transition[] {
    if (above === below) return [];
    const difference = (log: number): number => {
      const pressure = Math.exp(log);
      // Masses and potentials apart: each difference keeps its digits.
      const ofPotential = pure(above, pressure).potential - pure(below, pressure).potential;
      return ofPotential + (above.massExcess - below.massExcess);
    };
    const pressure = Math.exp(findRoot(difference, Math.log(low), Math.log(high)).x);
    const { nuclide } = best(pressure);
    if (nuclide === above || nuclide === below) return [{ pressure, above, below }];
    return [...transitions(low, above, pressure, nuclide), ...transitions(pressure, nuclide, high, below)];
  }

  const free = neutronMassExcess();
  const drip = Math.exp(findRoot((log) => best(Math.exp(log)).energy - free, Math.log(1e28), Math.log(deep)).x);
  const found = transitions(shallow, best(shallow).nuclide, drip, best(drip).nuclide);
  return crustOf(equationOfState, pure, found, best(shallow).nuclide, drip);
}

interface Transition {
  readonly pressure: number;
  readonly above: CrustNuclide;
  readonly below: CrustNuclide;
}

/** Electrons at T = 0 and the bcc lattice: what the crust is made of unless told otherwise. */
function idealElectronsAndLattice(): EquationOfState {
  return combine(
    electronPositronGas(),
    coldCorrections({ lattice: "bcc", thomasFermi: false, exchange: false, correlation: false }),
  );
}

/** The barotrope of the layers. */
function crustOf(
  equationOfState: EquationOfState,
  pure: (nuclide: CrustNuclide, pressure: number) => PureMatter,
  found: readonly Transition[],
  outermost: CrustNuclide,
  drip: number,
): OuterCrust {
  const layers: Layer[] = [];
  const described: CrustLayer[] = [];
  const record = new Float64Array(BAROTROPE_LENGTH);
  for (let i = 0; i <= found.length; i++) {
    const nuclide = i === 0 ? outermost : found[i - 1]!.below;
    const top = i === 0 ? 0 : found[i - 1]!.pressure;
    const bottom = i === found.length ? drip : found[i]!.pressure;
    const highest = pure(nuclide, bottom).density;
    const lowest = i === 0 ? equationOfState.domain.density[0] : pure(nuclide, top).density;
    const matter = barotrope(equationOfState, composition({ [nuclide.label]: 1 }), {
      temperature: 0,
      density: [lowest, highest],
    });
    record[BAROTROPE_DENSITY] = matter.density[0];
    matter.fillAtDensity(record);
    const start = record[BAROTROPE_POTENTIAL]! + nuclide.massExcess;
    const first = record[BAROTROPE_PRESSURE]!;
    record[BAROTROPE_DENSITY] = highest;
    matter.fillAtDensity(record);
    const end = record[BAROTROPE_POTENTIAL]! + nuclide.massExcess;
    const pressure = [i === 0 ? first : top, bottom] as const;
    layers.push({ ...raised(matter, nuclide.massExcess), density: matter.density, pressure, potential: [start, end] });
    described.push(
      Object.freeze({
        nuclide: nuclide.label,
        extrapolated: nuclide.extrapolated,
        pressure: Object.freeze(pressure),
        density: matter.density,
        potential: end,
      }),
    );
  }
  const crust = stacked(
    "outer crust of cold catalysed matter",
    "Pure layers of nuclei in a lattice, full ionisation (above 1e4 g/cm^3), no neutrons outside nuclei. Masses are measured up " +
      "to Zn80; deeper layers are those of the nuclides whose masses are known and miss others.",
    layers,
  );
  return Object.freeze({ ...crust, layers: Object.freeze(described) });
}

/** A barotrope with a constant added to e and w. */
function raised(matter: Barotrope, by: number): Pick<Layer, "fillAtDensity" | "fillAtPressure" | "fillAtPotential"> {
  const lift = (record: Float64Array): void => {
    record[BAROTROPE_ENERGY]! += by;
    record[BAROTROPE_POTENTIAL]! += by;
  };
  return {
    fillAtDensity(record): void {
      matter.fillAtDensity(record);
      lift(record);
    },
    fillAtPressure(record): void {
      matter.fillAtPressure(record);
      lift(record);
    },
    fillAtPotential(record): void {
      const given = record[BAROTROPE_POTENTIAL]!;
      record[BAROTROPE_POTENTIAL] = given - by;
      matter.fillAtPotential(record);
      lift(record);
      record[BAROTROPE_POTENTIAL] = given;
    },
  };
}

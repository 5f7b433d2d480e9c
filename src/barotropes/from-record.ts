/** The parts every barotrope shares: an immutable state from a record, the check of a density, a frozen object. */
import { speedOfLight } from "../constants.js";
import { FermistateError, requireFinite } from "../errors.js";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_GAMMA,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
  type BarotropeState,
  type DensityJump,
} from "./barotrope.js";

const PER_LIGHT_SPEED_SQUARED = 1 / (speedOfLight * speedOfLight);

/** A barotrope without its `state`, which follows from the record. */
export type BarotropeParts = Omit<Barotrope, "state">;

/** The barotrope of its parts; frozen. */
export function completeBarotrope(parts: BarotropeParts): Barotrope {
  const record = new Float64Array(BAROTROPE_LENGTH);
  return Object.freeze({
    ...parts,
    state(density: number): BarotropeState {
      requireDensity(parts, density);
      record[BAROTROPE_DENSITY] = density;
      parts.fillAtDensity(record);
      return stateOf(record);
    },
  });
}

/** The state that a filled record holds. */
function stateOf(record: Float64Array): BarotropeState {
  const density = record[BAROTROPE_DENSITY]!;
  const pressure = record[BAROTROPE_PRESSURE]!;
  const specificEnergy = record[BAROTROPE_ENERGY]!;
  return Object.freeze({
    density,
    pressure,
    specificEnergy,
    potential: record[BAROTROPE_POTENTIAL]!,
    gamma1: record[BAROTROPE_GAMMA]!,
    soundSpeed: Math.sqrt(soundSpeedSquared(record)),
  });
}

/** c_s^2 = gamma P/rho/(1 + (e + P/rho)/c^2) of a filled record, cm^2/s^2; 0 at density 0. */
export function soundSpeedSquared(record: Float64Array): number {
  const density = record[BAROTROPE_DENSITY]!;
  if (density === 0) return 0;
  const specificPressure = record[BAROTROPE_PRESSURE]! / density;
  const inertia = 1 + (record[BAROTROPE_ENERGY]! + specificPressure) * PER_LIGHT_SPEED_SQUARED;
  return (record[BAROTROPE_GAMMA]! * specificPressure) / inertia;
}

/** Throws unless the barotrope answers at the density. @throws `not-a-number`, `out-of-range`, `outside-domain` */
export function requireDensity(
  { name, density: [lowest, highest], jumps }: Pick<Barotrope, "name" | "density" | "jumps">,
  given: unknown,
): void {
  const density = requireFinite("density", given, "a finite number >= 0, g/cm^3");
  if (density < 0) throw new FermistateError("out-of-range", { argument: "density", given, allowed: ">= 0 g/cm^3" });
  if (density < lowest || density > highest) {
    const allowed = `${lowest} to ${highest} g/cm^3 (${name})`;
    throw new FermistateError("outside-domain", { argument: "density", given, allowed });
  }
  const jump = jumpOver(jumps, density);
  if (jump === undefined) return;
  const [below, above] = jump.densities;
  const allowed = `up to ${below} or from ${above} g/cm^3: the density jumps there at constant pressure (${name})`;
  throw new FermistateError("outside-domain", { argument: "density", given, allowed });
}

function jumpOver(jumps: readonly DensityJump[], density: number): DensityJump | undefined {
  return jumps.find(({ densities: [below, above] }) => density > below && density < above);
}

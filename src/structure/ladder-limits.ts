/** How the ladder of limiting masses finds a limit: at infinite density in Newton's theory, along the stars in Einstein's. */
import type { Barotrope } from "../barotropes/barotrope.js";
import { FermistateError } from "../errors.js";
import type { CaptureThreshold } from "../regime/capture.js";
import { type Outcome, short, shortest } from "./ladder-rung.js";
import { maximumMass } from "./maximum-mass.js";
import { hydrostaticStar } from "./star.js";

/** Central densities among which relativity turns the mass; it does at 1e10 to 3e10 g/cm^3. */
const range = [1e9, 2e11] as const;
/** Relative error of the stars. */
const tolerance = 1e-10;

/** The limit of Newtonian masses of matter that tends to a polytrope of index 3. */
export function limitOf(idealConstant: number, idealMass: number): (matter: Barotrope) => Outcome {
  return (matter) => {
    const { pressure, density } = matter.state(matter.density[1]);
    const ratio = pressure / (idealConstant * density * Math.cbrt(density));
    return {
      mass: idealMass * ratio * Math.sqrt(ratio),
      end: "infinite-density",
      message: "The mass rises towards this limit as the central density grows without end; no star has it.",
      relativity: "newton",
      matter,
    };
  };
}

/** The heaviest star in general relativity, up to a capture. */
export function heaviest(matter: Barotrope, capture: CaptureThreshold | undefined): Outcome {
  const threshold = capture?.densityWithLattice ?? Number.POSITIVE_INFINITY;
  const most = maximumMass(matter, { range: [range[0], Math.min(range[1], matter.density[1])], tolerance });
  const turns = most.turningPoints.find(({ kind }) => kind === "maximum");
  if (turns !== undefined && turns.centralDensity <= threshold) {
    const { mass, radius, centralDensity } = turns;
    const message =
      capture === undefined
        ? "The mass turns at this central density: denser stars collapse by general relativity."
        : `The mass turns before ${capture.species} captures electrons (at ${short(threshold)} g/cm^3): relativity decides.`;
    return { mass, radius, centralDensity, end: "relativity", message, relativity: "general", matter };
  }
  if (turns === undefined || capture === undefined) {
    const allowed = `matter whose mass turns between ${shortest(range[0])} and ${shortest(range[1])} g/cm^3`;
    throw new FermistateError("outside-domain", { argument: "composition", given: matter.name, allowed });
  }
  const { mass, radius, centralDensity } = hydrostaticStar(matter, { centralDensity: threshold, tolerance });
  const turn = short(turns.centralDensity);
  const message = `${capture.species} captures electrons at this central density, before relativity turns the mass (at ${turn} g/cm^3).`;
  return { mass, radius, centralDensity, end: "electron-capture", message, relativity: "general", matter };
}

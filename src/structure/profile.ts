/** The inside of a star: the dense output of its integration, and the matter at each potential. */
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
} from "../barotropes/barotrope.js";
import { speedOfLight } from "../constants.js";
import { FermistateError, requireFinite } from "../errors.js";
import type { DenseSolution } from "../numerics/dense-solution.js";
import { BINDING, U, V } from "./hydrostatic-equations.js";

/** A star at one radius. */
export interface StarPoint {
  /** Radius (of area), cm. */
  readonly radius: number;
  /** Gravitational mass within it, g. */
  readonly mass: number;
  /** Baryon mass within it, g. */
  readonly baryonMass: number;
  /** Baryon mass density, g/cm^3. */
  readonly density: number;
  /** dyn/cm^2. */
  readonly pressure: number;
  /** erg/g, without rest mass. */
  readonly specificEnergy: number;
  /** Potential w of the matter, erg/g. */
  readonly potential: number;
}

/** Columns of a profile, from the centre to the surface; units as in {@link StarPoint}. */
export type ProfileColumns = { readonly [Name in keyof StarPoint]: Float64Array };

/** The inside of a star. */
export interface StarProfile {
  /** The star at a radius from 0 to its surface. @throws `not-a-number`, `outside-domain` */
  at(radius: number): StarPoint;
  /**
   * The star at `count` radii, the first at the centre, the last at the surface, close together at both.
   * @throws `out-of-range` for fewer than 2
   */
  columns(count: number): ProfileColumns;
}

/** What a profile is made from. */
export interface ProfileParts {
  readonly barotrope: Barotrope;
  readonly solution: DenseSolution;
  readonly centre: Float64Array;
  readonly surface: Float64Array;
  readonly surfacePotential: number;
  readonly isGeneral: boolean;
}

/** The profile of an integrated star. */
export function starProfile(parts: ProfileParts): StarProfile {
  const { barotrope, solution, centre, surface, surfacePotential, isGeneral } = parts;
  const outer = Math.sqrt(surface[U]!);
  const innermost = new Float64Array(surface.length);
  innermost[0] = solution.bounds[0]!;
  solution.fill(innermost);
  const record = new Float64Array(BAROTROPE_LENGTH);
  const point = new Float64Array(surface.length);
  const top = centre[BAROTROPE_POTENTIAL]! - surfacePotential;

  /** The star at the point filled; within the series at the centre w is parabolic in r and m/r^3 constant. */
  function starPoint(radius: number): StarPoint {
    const isInside = radius * radius < innermost[U]!;
    const depth = top - innermost[0]! ** 2;
    const s2 = isInside ? top - depth * (radius ** 2 / innermost[U]!) : point[0]! ** 2;
    record[BAROTROPE_POTENTIAL] = Math.max(surfacePotential + s2, surfacePotential);
    barotrope.fillAtPotential(record);
    const cube = radius ** 3;
    const mass = (isInside ? innermost[V]! : point[V]!) * cube;
    const binding = (isInside ? innermost[BINDING]! : point[BINDING]!) * cube;
    return {
      radius,
      mass,
      baryonMass: isGeneral ? mass + binding / speedOfLight ** 2 : mass,
      density: record[BAROTROPE_DENSITY]!,
      pressure: record[BAROTROPE_PRESSURE]!,
      specificEnergy: record[BAROTROPE_ENERGY]!,
      potential: record[BAROTROPE_POTENTIAL]!,
    };
  }

  return Object.freeze({
    at(radius: number): StarPoint {
      const allowed = `0 <= radius <= ${outer} cm`;
      requireFinite("radius", radius, allowed);
      if (radius < 0 || radius > outer) {
        throw new FermistateError("outside-domain", { argument: "radius", given: radius, allowed });
      }
      solution.fillWhere(U, radius * radius, point);
      return starPoint(radius);
    },
    columns(count: number): ProfileColumns {
      const allowed = "a whole number from 2 to 1e6";
      if (!Number.isInteger(count) || count < 2 || count > 1e6) {
        throw new FermistateError("out-of-range", { argument: "count", given: count, allowed });
      }
      const names = ["radius", "mass", "baryonMass", "density", "pressure", "specificEnergy", "potential"] as const;
      const columns = Object.fromEntries(names.map((name) => [name, new Float64Array(count)])) as ProfileColumns;
      for (let i = 0; i < count; i++) {
        // Equal steps of an angle: r is proportional to it near the centre, s to its complement near the surface.
        const angle = (0.5 * Math.PI * i) / (count - 1);
        point[0] = Math.sqrt(top) * Math.cos(angle);
        const isInside = point[0] > innermost[0]!;
        if (!isInside) solution.fill(point);
        const near = Math.sqrt(innermost[U]! * Math.max(0, (top - point[0] ** 2) / (top - innermost[0]! ** 2)));
        const values = starPoint(i === count - 1 ? outer : isInside ? near : Math.sqrt(point[U]!));
        for (const name of names) columns[name][i] = values[name];
      }
      return Object.freeze(columns);
    },
  });
}

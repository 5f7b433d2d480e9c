/** The electron-positron gas at given net electron density and temperature, per volume in cgs, straight from its members. */
import { electronDensityUnit, electronRestTemperature } from "../../src/constants.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { FERMI_MOMENTUM, KINETIC_MU, NET_DENSITY, THETA } from "../../src/fermi-gas/record.js";
import { composition } from "../../src/matter/composition.js";
import {
  DENSITY,
  ELECTRON_DEGENERACY,
  ELECTRON_DENSITY,
  FERMI_ENERGY,
  POINT_LENGTH,
  POSITRON_DENSITY,
  RELATIVITY,
  TEMPERATURE,
} from "../../src/matter/plasma.js";
import {
  ENERGY,
  ENTROPY,
  HEAT,
  HEAT_T,
  MEMBER_COUNT,
  type Order,
  PRESSURE,
  PRESSURE_R,
  PRESSURE_RR,
  PRESSURE_RT,
  PRESSURE_RTT,
  PRESSURE_T,
  PRESSURE_TT,
} from "../../src/thermodynamics/free-energy.js";

const gas = electronPositronGas();
const point = new Float64Array(POINT_LENGTH);
const members = new Float64Array(MEMBER_COUNT);
const hydrogen = composition({ H1: 1 });

export interface Gas {
  readonly eta: number;
  readonly positrons: number;
  readonly P: number;
  readonly e: number;
  readonly s: number;
  readonly dPdn: number;
  readonly dPdT: number;
  readonly cv: number;
  readonly d2Pdn2: number;
  readonly d2PdndT: number;
  readonly d2PdT2: number;
  readonly d2sdT2: number;
  readonly d3PdndT2: number;
}

/** n [cm^-3], T [K] -> quantities per volume; at density 1 g/cm^3 members per gram are per cm^3. */
export function gasAt(n: number, temperature: number, order: Order): Gas {
  const x = Math.cbrt((3 * n) / electronDensityUnit);
  point[DENSITY] = 1;
  point[TEMPERATURE] = temperature;
  point[ELECTRON_DENSITY] = n;
  point[RELATIVITY] = x;
  point[FERMI_ENERGY] = (x * x) / (1 + Math.sqrt(1 + x * x));
  members.fill(0);
  gas.add(point, hydrogen, order, members);
  gas.addDetail!(point, hydrogen);
  const t = temperature;
  return {
    eta: point[ELECTRON_DEGENERACY]!,
    positrons: point[POSITRON_DENSITY]!,
    P: members[PRESSURE]!,
    e: members[ENERGY]!,
    s: members[ENTROPY]! / t,
    dPdn: members[PRESSURE_R]! / n,
    dPdT: members[PRESSURE_T]! / t,
    cv: members[HEAT]! / t,
    d2Pdn2: members[PRESSURE_RR]! / n / n,
    d2PdndT: members[PRESSURE_RT]! / n / t,
    d2PdT2: members[PRESSURE_TT]! / t / t,
    d2sdT2: members[HEAT_T]! / t / t / t,
    d3PdndT2: members[PRESSURE_RTT]! / n / t / t,
  };
}

/** Fills a record of the pair gas for solveDensity, in natural units. */
export function fillRecord(record: Float64Array, n: number, temperature: number): void {
  const x = Math.cbrt((3 * n) / electronDensityUnit);
  record[NET_DENSITY] = n / electronDensityUnit;
  record[THETA] = temperature / electronRestTemperature;
  record[FERMI_MOMENTUM] = x;
  record[KINETIC_MU] = (x * x) / (1 + Math.sqrt(1 + x * x));
}

/**
 * Tables for tests of files: the structure of true ones, with an invented surface (smooth, of the size of real numbers,
 * but of no matter). Nothing physical may be read from them.
 */
import { type Composition, composition } from "../../src/matter/composition.js";
import type { CertifiedError, FreeEnergyTable, TableSheet } from "../../src/tables/table.js";

const density = { lowest: 1e4, highest: 1e8, blocks: 2 };
const temperature = { lowest: 1e6, highest: 1e8, blocks: 3 };

/** d^(i+j)/(du^i dv^j) of the invented L = a - 0.2 u + 1.8 v + 0.05 sin(0.9 u + 0.5 v). */
function inventedSurface(a: number, u: number, v: number, i: number, j: number): number {
  const polynomial = [
    [a - 0.2 * u + 1.8 * v, 1.8, 0],
    [-0.2, 0, 0],
    [0, 0, 0],
  ];
  const phase = 0.9 * u + 0.5 * v;
  const n = i + j;
  const wave = [Math.sin(phase), Math.cos(phase), -Math.sin(phase), -Math.cos(phase)][n % 4]!;
  return polynomial[i]![j]! + 0.05 * 0.9 ** i * 0.5 ** j * wave;
}

/** F_0, F_0' and F_0'' of the invented cold curve 1e15 exp(u/3), erg/g. */
function inventedCold(u: number): [number, number, number] {
  const value = 1e15 * Math.exp(u / 3);
  return [value, value / 3, value / 9];
}

function sheet(
  phase: TableSheet["phase"],
  a: number,
  levels: readonly (readonly [number, number, number])[],
): TableSheet {
  const nodes: number[] = [];
  const stepU = Math.log(density.highest / density.lowest) / density.blocks;
  const stepV = Math.log(temperature.highest / temperature.lowest) / temperature.blocks;
  for (const [block, [m, n, k]] of levels.entries()) {
    if (m < 0) continue;
    const p = Math.floor(block / temperature.blocks);
    const q = block % temperature.blocks;
    for (let x = 0; x <= 2 ** m; x++) {
      for (let y = 0; y <= 2 ** n; y++) {
        const u = Math.log(density.lowest) + (p + x / 2 ** m) * stepU;
        const v = Math.log(temperature.lowest) + (q + y / 2 ** n) * stepV;
        for (let i = 0; i < 3; i++) {
          for (let j = 0; j < 3; j++) {
            nodes.push(inventedSurface(a, u, v, i, j) - (i + j === 0 ? k * Math.LN2 : 0));
          }
        }
      }
    }
  }
  return {
    phase,
    densityLevels: Int8Array.from(levels.map(([m]) => m)),
    temperatureLevels: Int8Array.from(levels.map(([, n]) => n)),
    exponents: Int16Array.from(levels.map(([, , k]) => k)),
    nodes: Float64Array.from(nodes),
  };
}

function certifiedError(largest: number): CertifiedError {
  return { bound: 2 * largest, largest, percentile99: largest / 3, median: largest / 1e4, worst: [3.3e5, 2.1e7] };
}

/** A table with one sheet, or with a liquid and a crystal one, of which the crystal lacks blocks. */
export function inventedTable(
  phases: 1 | 2,
  matter: Composition = composition({ C12: 0.3, O16: 0.7 }),
): FreeEnergyTable {
  const coldNodes = Array.from({ length: 9 }, (_, i) =>
    inventedCold(Math.log(density.lowest) + (i / 8) * Math.log(density.highest / density.lowest)),
  );
  const everywhere = [[1, 0, 3], [0, 1, 3], [2, 1, 4], [1, 1, 5], [0, 0, 5], [1, 2, 6]] as const; // biome-ignore format: a matrix
  const partly = [[1, 1, 3], [0, 0, 3], [-1, -1, 0], [1, 0, 4], [2, 0, 4], [-1, -1, 0]] as const; // biome-ignore format: a matrix
  const sheets =
    phases === 1
      ? [sheet("single", 8.5, everywhere)]
      : [sheet("liquid", 8.5, everywhere), sheet("crystal", 8.4, partly)];
  return {
    layout: 1,
    holdsFor: "one composition",
    composition: matter,
    density,
    temperature,
    cold: { temperature: phases === 1 ? 1e5 : 0, nodes: Float64Array.from(coldNodes.flat()) },
    sheets,
    ...(phases === 1 ? {} : { freezing: { factor: 123456.789, highestDensity: 2.5e7 } }),
    source: {
      tabulated: ["ideal electrons and positrons", "ideal ions"],
      beside: phases === 1 ? [] : ["radiation"],
      physics: [{ model: "invented", options: { strength: 0.1, colour: "blue", warm: true } }],
      validity: ["Invented numbers: there is no such matter, not even at 10 µK."],
      version: "0.1.0",
    },
    certificate: {
      places: 1234,
      target: 1e-6,
      blocksAboveTarget: 0,
      errors: {
        pressure: certifiedError(1e-7),
        specificEnergy: certifiedError(2e-7),
        specificEntropy: certifiedError(3e-7),
        heatCapacityV: certifiedError(4e-7),
        pressureByDensity: certifiedError(5e-7),
        pressureByTemperature: certifiedError(6e-7),
      },
    },
  };
}

/** The regions of the plane that are timed: temperature [K] and rho Y_e [g/cm^3], as powers of ten. */
export const regions = [
  { name: "white dwarf", temperature: [6, 9], density: [2, 10] },
  { name: "hot, pairs", temperature: [9, 11], density: [4, 12] },
  { name: "whole plane", temperature: [2, 13], density: [-15, 15] },
];

/** Points per batch: the columns stay in the second-level cache. */
export const count = 4096;

/** Random points of a region, the same in every process. */
export function pointsOf(region) {
  let seed = 12345;
  const random = () => {
    seed = (seed * 48271) % 2147483647;
    return seed / 2147483647;
  };
  const between = ([low, high]) => 10 ** (low + (high - low) * random());
  const density = new Float64Array(count);
  const temperature = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    temperature[i] = between(region.temperature);
    density[i] = 2 * between(region.density); // Y_e = 1/2
  }
  return { density, temperature };
}

/** The columns that a solver asks for. */
export const usual = [
  "pressure",
  "specificEnergy",
  "specificEntropy",
  "heatCapacityV",
  "densityExponent",
  "temperatureExponent",
  "gamma1",
  "soundSpeed",
];

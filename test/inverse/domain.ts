/** Random points of the valid domain: where the library itself raises no finding of the kind "outside its physics". */
import type { Composition, State } from "../../src/index.js";

/** The library: its sources, or what is built of them. */
type Library = typeof import("../../src/index.js");

/** Compositions of the round trips. */
export const compositionsOf = ({ composition }: Library): readonly Composition[] => [
  composition({ C12: 0.5, O16: 0.5 }),
  composition({ He4: 1 }),
  composition({ Fe56: 1 }),
  composition({ H1: 0.7, He4: 0.3 }),
  composition({ C12: 0.3, O16: 0.6, Ne22: 0.1 }),
];

/** Findings that put a number outside its physics, or where the cold liquid's terms are strained so far that c_v has no one sign. */
const excluded = new Set([
  "partial-ionisation",
  "linear-response",
  "liquid-fit-range",
  "superheated-crystal",
  "thermodynamically-unstable",
]);
const strainedToo = new Set(["liquid-quantum-range", "quantum-melting"]);

/** States drawn at random, one composition after the other: density 1e-2 to 1e11 g/cm^3, temperature 1e6 to 1e11 K, both even in the logarithm. */
export function randomStates(library: Library, count: number, random: () => number): State[] {
  const compositions = compositionsOf(library);
  const eos = library.whiteDwarfMatter();
  return Array.from({ length: count }, (_, i) => {
    const matter = compositions[i % compositions.length] as Composition;
    for (;;) {
      const state = drawn(library, eos, matter, random);
      if (state !== undefined) return state;
    }
  });
}

/** A state, or undefined where the place drawn is outside the domain of the test. */
function drawn(
  library: Library,
  eos: ReturnType<Library["whiteDwarfMatter"]>,
  matter: Composition,
  random: () => number,
): State | undefined {
  const density = 10 ** (-2 + 13 * random());
  const temperature = 10 ** (6 + 5 * random());
  // Protons capture electrons above 1.2e7 g/cm^3: no hydrogen there.
  if (matter.species.some(({ label }) => label === "H1") && density > 1e7) return undefined;
  const { findings } = library.regime(density, temperature, matter);
  const outside = findings.some(
    ({ code, severity }) => strainedToo.has(code) || (severity === "outside" && excluded.has(code)),
  );
  if (outside) return undefined;
  const state = eos.state(density, temperature, matter);
  // At the freezing boundary the two sides overlap in pressure: phases.test.ts. Where polarisation is strained the crystal has
  // the higher pressure of the two, so that two temperatures give one pressure farther off.
  const strained = findings.some(({ code }) => code === "linear-response");
  return Math.abs(state.ionCoupling / 175 - 1) > (strained ? 0.06 : 2e-3) ? state : undefined;
}

/** A linear congruential generator: the same points in every run. */
export function generator(seed: number): () => number {
  let now = seed;
  return () => {
    now = (now * 48271) % 2147483647;
    return now / 2147483647;
  };
}

/** `fermistate certify`: errors of states against an independent evaluation, over a region or of one state. */
import { resolve } from "node:path";
import * as z from "zod/mini";
import { certificateCsv, certificateText, stateCertificateText } from "../certify/certificate-text.js";
import { type CertifyOptions, certify } from "../certify/certify.js";
import { certifyState } from "../certify/certify-state.js";
import { certificateMap } from "../certify/error-map.js";
import type { CertifiedQuantity } from "../certify/reference-quantities.js";
import { derivativeNames } from "../certify/reference-quantities.js";
import { FermistateError } from "../errors.js";
import { checkTargets } from "../files/target.js";
import { quantityNames } from "../thermodynamics/quantities.js";
import { type Command, command } from "./command.js";
import { matterOptions } from "./matter.js";
import { writeEntries } from "./output.js";
import { progressOn } from "./progress.js";
import { flag, number, oneOf, path, spanOrAxis, wordList } from "./readers.js";
import { chosenMatter, tableOption } from "./table-file.js";

/** Densities or temperatures: a span to sample, or an axis. */
type Places = z.output<typeof spanOrAxis>;

const defaultPoints = 50;

export const certifyCommand: Command = command({
  name: "certify",
  summary: "errors against an independent evaluation",
  usage: "certify --density AXIS --temperature AXIS --composition LABEL=X,... [--points NUMBER]",
  options: {
    density: {
      value: "AXIS",
      help: "densities, g/cm^3: LOW..HIGH to sample, one value, or an axis, whose every value is taken",
      read: spanOrAxis,
    },
    temperature: { value: "AXIS", help: "temperatures, K, written like the densities", read: spanOrAxis },
    ...matterOptions,
    ...tableOption,
    points: {
      value: "NUMBER",
      help: `how many points of a region, ${defaultPoints} by default; one takes about half a second`,
      read: z.optional(number),
    },
    seed: {
      value: "NUMBER",
      help: "whole number that chooses among the sets of points; 1 by default",
      read: z.optional(number),
    },
    digits: {
      value: "NUMBER",
      help: "digits of the reference, 17 to 60; 20 by default, 25 for one state",
      read: z.optional(number),
    },
    quantities: {
      value: "NAME,...",
      help:
        "quantities of a state, or scaled derivatives of the free energy: f00, f10, f01, f20, f11, f02, f30, f21, f12, " +
        "f03, f22 (orders in density and in temperature)",
      read: z.optional(wordList<CertifiedQuantity>([...quantityNames, ...derivativeNames])),
    },
    format: {
      value: "text|json|csv",
      help: "text by default; csv lists the errors point by point",
      read: z._default(oneOf(["text", "json", "csv"]), "text"),
    },
    map: {
      value: "NAME,...",
      help: "quantities whose errors are drawn over density and temperature, each in PATH-NAME.svg",
      read: z.optional(wordList<CertifiedQuantity>([...quantityNames, ...derivativeNames])),
    },
    out: { value: "PATH", help: "where maps go", read: z.optional(path) },
    overwrite: { help: "replace files that exist", read: flag },
  },
  examples: [
    [
      "certify --density 1e4..1e9,4-points --temperature 1e7..1e9,3-points --composition C12=1 --quantities pressure " +
        "--map pressure --out errors",
      "twelve states, with a map of the errors",
    ],
    [
      "certify --density 1e4..1e9 --temperature 1e6..1e9 --composition C12=0.5,O16=0.5 --points 4",
      "a carbon-oxygen core, four points",
    ],
    [
      "certify --density 2e6 --temperature 1e7 --composition C12=0.5,O16=0.5 --digits 30",
      "one state, every quantity to 30 digits",
    ],
  ],
  remarks:
    "Errors are of arithmetic and implementation: both sides evaluate the same formulas, on independent ways. How true the " +
    "formulas are is a question for fermistate regime.",
  async run(options, io) {
    const { map = [], out } = options;
    if (map.length > 0 !== (out !== undefined))
      throw refused(out === undefined ? "--map" : "--out", out ?? map.join(","), "--map and --out together");
    const maps = map.map((name) => ({ name, path: `${out}-${name}.svg`, about: `map of the error of ${name}` }));
    const files = { overwrite: options.overwrite, createFolders: false };
    await checkTargets(
      maps.map((one) => ({ path: resolve(io.cwd, one.path) })),
      files,
    );
    const { equationOfState, matter } = await chosenMatter(options, io);
    const { density, temperature, points, seed, digits, quantities, format } = options;
    const shared = {
      ...(digits === undefined ? {} : { digits }),
      ...(quantities === undefined ? {} : { quantities: [...new Set([...quantities, ...map])] }),
    };
    const rho = onlyValue(density);
    const kelvin = onlyValue(temperature);
    if (rho !== undefined && kelvin !== undefined) {
      if (points !== undefined) throw refused("--points", points, "only with a region LOW..HIGH");
      if (seed !== undefined) throw refused("--seed", seed, "only with a region LOW..HIGH");
      if (format === "csv") throw refused("--format", format, "text or json for one state");
      if (map.length > 0) throw refused("--map", map.join(","), "only with more than one point");
      const audit = certifyState(equationOfState, matter, rho, kelvin, shared);
      io.out(format === "json" ? `${JSON.stringify(finite(audit), null, 2)}\n` : stateCertificateText(audit));
      return;
    }
    const progress = progressOn(io, "certify");
    try {
      const where = placesOf(density, temperature, points, seed);
      const made = certify(equationOfState, matter, { ...where, ...shared, onProgress: progress.report });
      progress.done();
      if (format === "csv") io.out(certificateCsv(made));
      else io.out(format === "json" ? `${JSON.stringify(made, null, 2)}\n` : certificateText(made));
      if (maps.length === 0) return;
      const entries = maps.map(({ name, ...file }) => ({ ...file, text: certificateMap(made, name) }));
      const list = await writeEntries(entries, io.cwd, files);
      if (format === "text") io.out(`\n${list}\n`);
    } finally {
      progress.done();
    }
  },
});

/** A region to sample, or all pairs of two axes. */
function placesOf(
  density: Places,
  temperature: Places,
  points: number | undefined,
  seed: number | undefined,
): Pick<CertifyOptions, "region"> | Pick<CertifyOptions, "points"> {
  const [rho, kelvin] = [spanOf(density), spanOf(temperature)];
  if (rho !== undefined && kelvin !== undefined) {
    const region = { density: rho, temperature: kelvin, points: points ?? defaultPoints };
    return { region: seed === undefined ? region : { ...region, seed } };
  }
  if (points !== undefined) throw refused("--points", points, "only with a region LOW..HIGH");
  if (seed !== undefined) throw refused("--seed", seed, "only with a region LOW..HIGH");
  if (!("values" in density) || !("values" in temperature)) {
    throw refused("--temperature", "a region beside an axis", "two regions LOW..HIGH or two axes");
  }
  const pairs = [...temperature.values].flatMap((t) => [...density.values].map((r) => [r, t] as const));
  return { points: { density: pairs.map(([r]) => r), temperature: pairs.map(([, t]) => t) } };
}

function onlyValue(given: Places): number | undefined {
  return "values" in given && given.values.length === 1 ? given.values[0] : undefined;
}

function spanOf(given: Places): readonly [number, number] | undefined {
  const value = onlyValue(given);
  if (value !== undefined) return [value, value];
  return "values" in given ? undefined : [given.from, given.to];
}

/** Infinities, which JSON has no number for, as text. */
function finite(value: unknown): unknown {
  if (typeof value === "number" && !Number.isFinite(value)) return value > 0 ? "INF" : "-INF";
  if (Array.isArray(value)) return value.map(finite);
  if (typeof value !== "object" || value === null) return value;
  return Object.fromEntries(Object.entries(value).map(([name, one]) => [name, finite(one)]));
}

function refused(argument: string, given: unknown, allowed: string): FermistateError {
  return new FermistateError("invalid-option", { argument, given, allowed });
}

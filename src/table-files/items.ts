/**
 * A table of the free energy as items. The list says everything of the table and a little more than it needs (names, mass and
 * charge numbers), for readers that do not have this library.
 */
import { type Composition, composition } from "../matter/composition.js";
import { certifiedQuantities } from "../tables/errors-at.js";
import {
  COLD_LENGTH,
  type FreeEnergyTable,
  NODE_LENGTH,
  type SheetPhase,
  type TableAxis,
  type TableSheet,
} from "../tables/table.js";
import type { Physics } from "../thermodynamics/contribution.js";
import { float64, type Item, integer, number, numbers, type ReadItem, text, texts } from "./item.js";

/** Version of {@link FreeEnergyTable.layout} that this library writes and reads. */
export const LAYOUT = 1;

/** Columns of a certificate with one number by quantity. */
const errorColumns = ["bound", "largest", "percentile99", "median"] as const;

/** All items of a table, in the order of the checksum. */
export function itemsOf(table: FreeEnergyTable): Item[] {
  const { composition: matter, source, certificate, freezing, cold } = table;
  const errors = certifiedQuantities.map((name) => certificate.errors[name]);
  return [
    integer("format/layout", table.layout),
    text("composition/holds_for", table.holdsFor),
    text("composition/name", matter.name),
    texts(
      "composition/label",
      matter.species.map((one) => one.label),
    ),
    numbers(
      "composition/mass_number",
      matter.species.map((one) => one.massNumber),
    ),
    numbers(
      "composition/charge_number",
      matter.species.map((one) => one.chargeNumber),
    ),
    numbers(
      "composition/nucleon_fraction",
      matter.species.map((one) => one.nucleonFraction),
    ),
    ...axisItems("axes/density", table.density),
    ...axisItems("axes/temperature", table.temperature),
    number("cold/temperature", cold.temperature),
    float64("cold/nodes", cold.nodes, [cold.nodes.length / COLD_LENGTH, COLD_LENGTH]),
    texts(
      "sheets/phase",
      table.sheets.map((sheet) => sheet.phase),
    ),
    ...table.sheets.flatMap((sheet) => sheetItems(sheet, [table.density.blocks, table.temperature.blocks])),
    ...(freezing === undefined
      ? []
      : [
          number("sheets/freezing/factor", freezing.factor),
          number("sheets/freezing/highest_density", freezing.highestDensity),
        ]),
    texts("source/tabulated", source.tabulated),
    texts("source/beside", source.beside),
    texts(
      "source/physics",
      source.physics.map(({ model, options }) => JSON.stringify({ model, options })),
    ),
    texts("source/validity", source.validity),
    text("source/version", source.version),
    integer("certificate/places", certificate.places),
    number("certificate/target", certificate.target),
    integer("certificate/blocks_above_target", certificate.blocksAboveTarget),
    texts("certificate/quantity", certifiedQuantities),
    ...errorColumns.map((column) =>
      numbers(
        `certificate/errors/${column}`,
        errors.map((one) => one[column]),
      ),
    ),
    float64("certificate/errors/worst", Float64Array.from(errors.flatMap((one) => one.worst)), [errors.length, 2]),
  ];
}

/** The object that items describe: of a table's form, nothing checked beyond kinds and shapes. */
export function tableOfItems(read: ReadItem): FreeEnergyTable {
  const layout = read("format/layout", "int32", [])[0] as 1;
  const axis = (name: string): TableAxis => ({
    lowest: read(`${name}/lowest`, "float64", [])[0]!,
    highest: read(`${name}/highest`, "float64", [])[0]!,
    blocks: read(`${name}/blocks`, "int32", [])[0]!,
  });
  const holdsFor = read("composition/holds_for", "text", [])[0] as FreeEnergyTable["holdsFor"];
  const matter = readComposition(read);
  const density = axis("axes/density");
  const temperature = axis("axes/temperature");
  const cold = {
    temperature: read("cold/temperature", "float64", [])[0]!,
    nodes: read("cold/nodes", "float64", [undefined, COLD_LENGTH]),
  };
  const phases = read("sheets/phase", "text", [undefined]) as readonly SheetPhase[];
  const sheets = phases.map((phase) => readSheet(read, phase, [density.blocks, temperature.blocks]));
  const freezing =
    phases.length === 2
      ? {
          freezing: {
            factor: read("sheets/freezing/factor", "float64", [])[0]!,
            highestDensity: read("sheets/freezing/highest_density", "float64", [])[0]!,
          },
        }
      : {};
  const source = {
    tabulated: read("source/tabulated", "text", [undefined]),
    beside: read("source/beside", "text", [undefined]),
    physics: read("source/physics", "text", [undefined]).map(physicsOf),
    validity: read("source/validity", "text", [undefined]),
    version: read("source/version", "text", [])[0]!,
  };
  const places = read("certificate/places", "int32", [])[0]!;
  const target = read("certificate/target", "float64", [])[0]!;
  const blocksAboveTarget = read("certificate/blocks_above_target", "int32", [])[0]!;
  const columns = errorColumns.map((column) =>
    read(`certificate/errors/${column}`, "float64", [certifiedQuantities.length]),
  );
  const worst = read("certificate/errors/worst", "float64", [certifiedQuantities.length, 2]);
  const errors = Object.fromEntries(
    certifiedQuantities.map((quantity, i) => [
      quantity,
      {
        ...(Object.fromEntries(errorColumns.map((column, k) => [column, columns[k]![i]!])) as Record<
          (typeof errorColumns)[number],
          number
        >),
        worst: [worst[2 * i]!, worst[2 * i + 1]!] as const,
      },
    ]),
  ) as FreeEnergyTable["certificate"]["errors"];
  const certificate = { places, target, blocksAboveTarget, errors };
  return {
    layout,
    holdsFor,
    composition: matter,
    density,
    temperature,
    cold,
    sheets,
    ...freezing,
    source,
    certificate,
  };
}

/** A line of `source/physics`; what is no JSON is left to the check of the table. */
function physicsOf(line: string): Physics {
  try {
    return JSON.parse(line) as Physics;
  } catch {
    return { model: "", options: {} };
  }
}

function readComposition(read: ReadItem): Composition {
  const labels = read("composition/label", "text", [undefined]);
  const column = (name: string): Float64Array => read(`composition/${name}`, "float64", [labels.length]);
  const fractions = column("nucleon_fraction");
  if (labels[0] !== "mean") return composition(Object.fromEntries(labels.map((label, i) => [label, fractions[i]!])));
  return composition({ meanMassNumber: column("mass_number")[0]!, meanCharge: column("charge_number")[0]! });
}

function readSheet(read: ReadItem, phase: SheetPhase, blocks: readonly number[]): TableSheet {
  const name = (column: string): string => `sheets/${phase}/${column}`;
  return {
    phase,
    densityLevels: read(name("density_level"), "int8", blocks),
    temperatureLevels: read(name("temperature_level"), "int8", blocks),
    exponents: read(name("exponent"), "int16", blocks),
    nodes: read(name("nodes"), "float64", [undefined, 3, 3]),
  };
}

function sheetItems(sheet: TableSheet, blocks: readonly number[]): Item[] {
  const name = (column: string): string => `sheets/${sheet.phase}/${column}`;
  return [
    { name: name("density_level"), kind: "int8", shape: blocks, values: sheet.densityLevels },
    { name: name("temperature_level"), kind: "int8", shape: blocks, values: sheet.temperatureLevels },
    { name: name("exponent"), kind: "int16", shape: blocks, values: sheet.exponents },
    float64(name("nodes"), sheet.nodes, [sheet.nodes.length / NODE_LENGTH, 3, 3]),
  ];
}

function axisItems(name: string, axis: TableAxis): Item[] {
  return [
    number(`${name}/lowest`, axis.lowest),
    number(`${name}/highest`, axis.highest),
    integer(`${name}/blocks`, axis.blocks),
  ];
}

/**
 * Where a thread gets its equation of state from: functions cannot be sent to a thread, so each makes its own.
 */
import { isAbsolute } from "node:path";
import { pathToFileURL } from "node:url";
import { FermistateError } from "../errors.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { type WhiteDwarfMatterOptions, whiteDwarfMatter } from "../white-dwarf-matter.js";

/** An equation of state that a module exports; every thread imports the module. */
export interface MatterModule {
  /**
   * A URL, such as `new URL("./matter.js", import.meta.url)`, or an absolute path. Not the module that asks: it would
   * run again in every thread.
   */
  readonly module: string | { readonly href: string };
  /**
   * Name of the export: an equation of state, or a function without arguments that returns one or promises one.
   * @defaultValue "default"
   */
  readonly export?: string;
}

/** The matter of a white dwarf, by its options: plain data. */
export interface WhiteDwarfMatterSource {
  /** Options of `whiteDwarfMatter`; `{}` for all of its physics. */
  readonly whiteDwarfMatter: WhiteDwarfMatterOptions;
}

/** How a thread makes its equation of state. */
export type MatterSource = MatterModule | WhiteDwarfMatterSource;

/** The same as it is sent to a thread. */
export type PlainSource = { readonly module: string; readonly export: string } | WhiteDwarfMatterSource;

const allowed =
  "{ module: new URL('./matter.js', import.meta.url), export: 'name' } or { whiteDwarfMatter: { ... } }, plain data";

/** Checks a source and makes it plain data. */
export function plainSource(source: MatterSource): PlainSource {
  const given: Readonly<Record<string, unknown>> = typeof source === "object" && source !== null ? { ...source } : {};
  const { module, export: name = "default", whiteDwarfMatter: options, ...others } = given;
  const [stranger] = Object.keys(others);
  const both = module !== undefined && options !== undefined;
  if (stranger !== undefined || both || (module === undefined && options === undefined)) {
    throw new FermistateError("invalid-option", { argument: "matter", given: stranger ?? source, allowed });
  }
  if (options !== undefined) {
    const switches = options as WhiteDwarfMatterOptions;
    whiteDwarfMatter(switches); // its own errors for its own options
    try {
      return { whiteDwarfMatter: structuredClone(switches) };
    } catch {
      throw new FermistateError("invalid-option", { argument: "matter.whiteDwarfMatter", given: options, allowed });
    }
  }
  if (typeof name !== "string" || name === "") {
    throw new FermistateError("invalid-option", {
      argument: "matter.export",
      given: name,
      allowed: "name of an export",
    });
  }
  return { module: addressOf(module), export: name };
}

function addressOf(module: unknown): string {
  const text = typeof module === "object" && module !== null ? (module as { href: unknown }).href : module;
  if (typeof text === "string") {
    if (isAbsolute(text)) return pathToFileURL(text).href;
    if (URL.canParse(text)) return new URL(text).href;
  }
  throw new FermistateError("invalid-option", {
    argument: "matter.module",
    given: module,
    allowed: "a URL, such as new URL('./matter.js', import.meta.url), or an absolute path",
  });
}

/**
 * The equation of state of a source, made in the thread that asks.
 *
 * @throws `worker-failed` with the reason where the module does not load or its function throws; `invalid-option` where
 * what it exports is no equation of state
 */
export async function loadMatter(source: PlainSource): Promise<EquationOfState> {
  if ("whiteDwarfMatter" in source) return whiteDwarfMatter(source.whiteDwarfMatter);
  let made: unknown;
  try {
    const exports = (await import(/* @vite-ignore */ source.module)) as Record<string, unknown>;
    const found = exportOf(exports, source.export);
    made = typeof found === "function" ? await found() : found;
  } catch (error) {
    throw asFailure(error, "matter.module", "a module that loads in every thread and makes an equation of state");
  }
  if (isEquationOfState(made)) return made;
  const given = made === undefined ? `${source.export}: no such export, or nothing returned` : made;
  const wanted = "an export that is an equation of state or a function that returns one";
  throw new FermistateError("invalid-option", { argument: "matter.export", given, allowed: wanted });
}

/** Throws `invalid-option`: a thread's module opens threads. */
export function refuseNesting(): never {
  throw new FermistateError("invalid-option", {
    argument: "matter.module",
    given: "a module that opens threads itself",
    allowed: "a module of its own that only makes the equation of state",
  });
}

/** An export of a module; a CommonJS module keeps its own in `default`. */
function exportOf(exports: Readonly<Record<string, unknown>>, name: string): unknown {
  const inner = exports["default"];
  const isHolder = typeof inner === "object" && inner !== null && Object.hasOwn(inner, name);
  if (isHolder && (name === "default" || !Object.hasOwn(exports, name)))
    return (inner as Record<string, unknown>)[name];
  return Object.hasOwn(exports, name) ? exports[name] : undefined;
}

function isEquationOfState(value: unknown): value is EquationOfState {
  const { evaluate, domain, contributions } = (value ?? {}) as Partial<EquationOfState>;
  return typeof evaluate === "function" && typeof domain === "object" && Array.isArray(contributions);
}

/** The error itself where it is typed, else `worker-failed` that carries its words. */
export function asFailure(error: unknown, argument: string, wanted: string): Error {
  if (error instanceof Error && error.name === "FermistateError") return error;
  const given = error instanceof Error ? `${error.name}: ${error.message}` : String(error);
  return new FermistateError("worker-failed", { argument, given, allowed: wanted });
}

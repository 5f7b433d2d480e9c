/**
 * Findings: which assumption is strained at a point, by what number, against what threshold.
 *
 * Thresholds are conventions with a reason, stated where each finding is made. "Strained" means: the numbers still come
 * from a formula inside or near its range, but an effect of some per cent or more is missing. "Outside" means: the
 * assumption does not describe this matter.
 */

/** Which assumption; stable, meant for programs. */
export type FindingCode =
  | "partial-ionisation"
  | "linear-response"
  | "crystal-screening-range"
  | "liquid-fit-range"
  | "superheated-crystal"
  | "liquid-quantum-range"
  | "quantum-melting"
  | "exchange-correlation-range"
  | "mixture-range"
  | "alloy-demixing"
  | "electron-capture"
  | "neutron-drip"
  | "burning-expected"
  | "pairs-important"
  | "radiation-dominated"
  | "ideal-ions-degenerate"
  | "coulomb-neglected"
  | "photon-plasma-cutoff"
  | "thermodynamically-unstable";

/** How bad it is. */
export type Severity = "strained" | "outside";

/** What a finding measures and in what unit. */
export interface FindingQuantity {
  /** The number in words. */
  readonly name: string;
  /** Unit in cgs, "1" for a pure number. */
  readonly unit: string;
}

/** One strained assumption; frozen. */
export interface Finding {
  /** Which assumption. */
  readonly code: FindingCode;
  /** How bad it is. */
  readonly severity: Severity;
  /** The number judged, in the unit of `quantity`. Infinity only where a phase is forced at T = 0. */
  readonly value: number;
  /** The limit it has crossed, in the same unit. */
  readonly threshold: number;
  /** What `value` and `threshold` are. */
  readonly quantity: FindingQuantity;
  /** Label of the species at fault, where it is one. */
  readonly species?: string;
  /** One plain sentence: what it means for the user. */
  readonly message: string;
}

/** A finding before it is judged: its limits may be passed upwards or, with `below`, downwards. */
export interface Judgement {
  readonly code: FindingCode;
  readonly value: number;
  /** Limit of "strained"; undefined where there is none. */
  readonly strained?: number;
  /** Limit of "outside"; undefined where there is none. */
  readonly outside?: number;
  /** True where small values are the bad ones. */
  readonly below?: boolean;
  readonly name: string;
  readonly unit?: string;
  readonly species?: string;
  /** Messages by severity; a string serves both. */
  readonly message: string | Readonly<Record<Severity, string>>;
}

/** Adds the finding to `list` if a limit is passed; returns whether it is. */
export function judge(list: Finding[], judgement: Judgement): boolean {
  const { code, value, name, unit = "1", species, message } = judgement;
  const passed = (limit: number | undefined): limit is number =>
    limit !== undefined && (judgement.below === true ? value < limit : value > limit);
  const severity: Severity = passed(judgement.outside) ? "outside" : "strained";
  const threshold = severity === "outside" ? judgement.outside : judgement.strained;
  if (!passed(threshold)) return false;
  const text = typeof message === "string" ? message : message[severity];
  const quantity = Object.freeze({ name, unit });
  const found: Finding = { code, severity, value, threshold, quantity, message: text };
  list.push(Object.freeze(species === undefined ? found : { ...found, species }));
  return true;
}

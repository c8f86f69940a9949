import type { CampaignDocument, Prior, Scale } from "@weighhouse/campaign/document";
import type { Expression } from "@weighhouse/campaign/expression";
import type { LinearUnknown } from "./block/problem";

/**
 * What may be said of a measurand's true value, in scoring space. `noise` is an index of the
 * measurand's `noises`. A level is common to all measurements; on a circle it is one of the circle,
 * and a uniform one may run through the period's end (upper then is lower + width).
 */
export type Role =
  | NormalRole
  | UniformRole
  | PolynomialRole
  | RateRole
  | { kind: "event"; probability: number }
  /** What hangs on its hypothesis's parameters or ensemble, or is of another form than the others. */
  | { kind: "predicted"; prediction: PredictionFrame };

/** A level of N(mean, sd^2); sd 0 is a known one. */
export interface NormalRole {
  kind: "normal";
  mean: number;
  sd: number;
  noise: number;
}

export interface UniformRole {
  kind: "uniform";
  lower: number;
  upper: number;
  width: number;
  noise: number;
}

/**
 * Legendre polynomials, unnormalised, over the condition's range mapped to [-1, 1], each with a
 * coefficient of N(0, sd^2); `centre` is added to the constant.
 */
export interface PolynomialRole {
  kind: "polynomial";
  /** Index of the observable's conditions. */
  condition: number;
  lower: number;
  upper: number;
  degree: number;
  centre: number;
  sd: number;
  noise: number;
}

/** The rate of counts: known, or spread by a gamma or a uniform density. */
export type RateRole =
  | { kind: "rate"; family: "exact"; rate: number }
  | { kind: "rate"; family: "gamma"; mean: number; sd: number }
  | { kind: "rate"; family: "uniform"; lower: number; upper: number };

export interface MeasurandFrame {
  key: string;
  /** `/measurands/{i}` or `/derived/{i}`. */
  pointer: string;
  unit: string | null;
  scale: Scale;
  /** Of a cyclic scale, else 0. */
  period: number;
  curve: boolean;
  /** Keys of the observable's conditions. */
  conditions: readonly string[];
  closed: boolean;
  scatterVariance: number;
  /** What may be said of it; 0 is its reference. */
  roles: Role[];
  /** The bounds of a uniform reference, in the observable's unit. */
  natural: { lower: number; upper: number } | null;
  /** Variances that roles add to each measurement; 0 is none. `Role.noise` is an index here. */
  noises: number[];
  /** Its readings can't be summed up: something said of it tells each measurement apart. */
  apart: boolean;
  /** Of a curve, per role: what an ordinary reading is there as an equation; null where none is. */
  designs: readonly (FixedDesign | null)[];
  thresholds: { key: string; value: number }[];
  firstPostedAt: string | null;
  firstObservedAt: string | null;
  /** Null for what is measured itself. */
  derived: DerivedFrame | null;
  /** Derived values that are computed from it. */
  usedBy: number[];
}

/**
 * A role under which a reading is an equation with normal noise whose coefficients and variance hang
 * on its conditions alone: many are then as good as the triangular factor of all.
 *
 *   y = base + sum of coefficient_c (unknown_c - origin_c) + noise
 */
export interface FixedDesign {
  columns: readonly DesignColumn[];
  /**
   * @param conditions in the order of the observable's
   * @param centre what readings are counted from
   * @param into filled wholly
   */
  put(conditions: readonly number[], centre: number, into: DesignRow): void;
}

/** `base` isn't finite where an expression has no value; `variance` is what isn't the reading's own. */
export interface DesignRow {
  coefficients: Float64Array;
  base: number;
  variance: number;
}

/** What a coefficient multiplies, by its key among a block's unknowns; origins in the unknown's unit. */
export type DesignColumn = { key: string } & (
  | { kind: "normal"; origin: number; sd: number }
  /** A level with bounds, from the centre of the sums. */
  | { kind: "flat"; lower: number; upper: number; width: number }
  | { kind: "split"; plus: number; minus: number }
  /** From where a linear parameter counts, or its log10 where that is meant. */
  | {
      kind: "parameter";
      slot: number;
      unknown: LinearUnknown;
      from: number;
      step: number;
      logged: boolean;
    }
);

/** A value computed from others' combined values. */
export interface DerivedFrame {
  expression: string;
  /** Names in the expression with their measurands. */
  from: { name: string; measurand: number }[];
  /** Enters the evidence in place of its inputs. */
  scored: boolean;
}

/** `expected` as a function of slots: the hypothesis's parameters, its columns, the conditions. */
export interface Expectation {
  expression: Expression;
  /** The same over the log10 of parameters whose priors are plain in it (`log-parameters.ts`). */
  inLogs: Expression;
  /** What stands in each slot. */
  slots: readonly string[];
  /** The slots that it reads, in increasing order. */
  uses: readonly number[];
  /** In the observable's unit; NaN or infinite where there is no value. */
  evaluate(slots: Float64Array): number;
}

/** Widths and bounds in scoring space, but for a relative sd. */
export type ToleranceFrame =
  | { family: "exact" }
  /**
   * `relative`: sd is a fraction of |expected|, in the observable's unit, which hangs on slots.
   * Never on log10, where it is in dex.
   */
  | { family: "normal"; sd: number; relative: boolean; sharing: "common" | "each" }
  | {
      family: "normal";
      sd: number;
      relative: boolean;
      sharing: "smooth";
      /** Index of the observable's conditions. */
      condition: number;
      length: number;
    }
  | {
      /** One-sided ones run to the reference's far end. */
      family: "interval" | "atMost" | "atLeast";
      lower: number;
      upper: number;
      width: number;
      sharing: "common" | "each";
    }
  | { family: "splitNormal"; plus: number; minus: number }
  | { family: "gamma"; mean: number; sd: number }
  | { family: "event"; probability: number };

export interface PredictionFrame {
  pointer: string;
  /** Index of `Frame.hypotheses`. */
  hypothesis: number;
  measurand: number;
  role: number;
  tolerance: ToleranceFrame;
  /** Null where a number is expected, or nothing. */
  expectation: Expectation | null;
  /**
   * What is expected where that is one number, as given in the observable's unit (on counts a
   * rate), and in scoring space; null where it hangs on slots, or nothing is expected.
   */
  natural: number | null;
  expected: number | null;
  /**
   * Where a number is expected, the sd of a normal tolerance in scoring space, and 0 for an exact
   * prediction; null for every other.
   */
  sd: number | null;
  /**
   * Where the true value is to lie, in scoring space, as far as it hangs on no slots: coverage x sd
   * about what is expected, an interval, from -Infinity to a bound, from a bound to Infinity; null
   * where a density has to be asked.
   */
  interval: { lower: number; upper: number } | null;
  decisive: boolean;
  registeredAt: string | null;
  given: Given | null;
}

/** A condition of a prediction: an event's measurand, and whether it has to have occurred. */
export interface Given {
  measurand: number;
  occurred: boolean;
}

export interface ParameterFrame {
  key: string;
  prior: Prior;
}

/** Rows are joint draws of all columns. */
export interface EnsembleFrame {
  /** Per column, its values by row. */
  columns: Float64Array[];
  /** ln of the rows' weights, which add up to 1; -Infinity for a weight of 0. */
  logWeights: Float64Array;
}

export interface HypothesisFrame {
  key: string;
  pointer: string;
  /** Its weight, divided by the number of its group's members. */
  share: number;
  /** Slots 0 .. parameters.length - 1; after them the ensemble's columns. */
  parameters: ParameterFrame[];
  ensemble: EnsembleFrame | null;
  /** Between common normal tolerances, as places in `predictions`. */
  toleranceCorrelations: { a: number; b: number; coefficient: number }[];
  predictions: PredictionFrame[];
  withheld: number[];
  registeredAt: string | null;
}

export interface SharedErrorFrame {
  key: string;
  sd: number;
  perBatch: boolean;
  relative: boolean;
}

/** A campaign without its measurements, ready to score: numbers in scoring space, keys as indices. */
export interface Frame {
  document: CampaignDocument;
  /** The document's measurands, then its derived values. */
  measurands: MeasurandFrame[];
  measurandIndex: Map<string, number>;
  errors: SharedErrorFrame[];
  errorIndex: Map<string, number>;
  hypotheses: HypothesisFrame[];
  /** Ids of measurements that are correlated with others. */
  correlated: Set<string>;
}

/** Where the conditions' slots begin. */
export function ownSlots({ parameters, ensemble }: HypothesisFrame): number {
  return parameters.length + (ensemble?.columns.length ?? 0);
}

/** The place of a variance among a measurand's noises, added if new. */
export function noiseIndex(measurand: MeasurandFrame, variance: number): number {
  const there = measurand.noises.indexOf(variance);
  return there >= 0 ? there : measurand.noises.push(variance) - 1;
}

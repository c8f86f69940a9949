/**
 * One block of a hypothesis as numbers: rows that share unknowns, in scoring space.
 *
 *   mu_i = base_i(outer) + sum_k X_ik(outer) z_k,   ln L = sum_i ln L_i(mu_i) + outerFactor
 *
 * with z the linear unknowns, integrated in closed form where they may be, and the outer ones
 * integrated numerically. Nothing here knows of campaigns. Indices of rows, of linear and of outer
 * unknowns and of scenarios count from 0.
 */
export interface BlockProblem {
  rows: BlockRows;
  linear: readonly LinearUnknown[];
  /** The columns of linear unknowns that hang on nothing. */
  design: SparseDesign;
  /** Correlations between normal linear unknowns; positive definite together. */
  correlations: readonly { first: number; second: number; value: number }[];
  outer: readonly OuterUnknown[];
  /** ln of the weights of an ensemble's rows; [0] where there is no ensemble. */
  scenarios: Float64Array;
  /** Linear unknowns whose columns `evaluate` fills; `design` has nothing in those. */
  varying: readonly number[];
  /**
   * What is expected of every row at these values of the outer unknowns, in this scenario.
   *
   * @param outer values (not coordinates) of the outer unknowns
   * @param into filled wholly: `base`, counted from the same centre as `rows.observed`, and
   *   `columns[v]`, N long, the column of linear unknown `varying[v]`
   * @returns false where an expression has no value: the likelihood is zero there
   */
  evaluate(outer: Float64Array, scenario: number, into: Evaluated): boolean;
  /** ln of factors that no row has (counts and events whose chances hang on parameters). */
  outerFactor?: (outer: Float64Array, scenario: number) => number;
  /** Loadings that are a share of a fitted level; see AtFit. */
  atFit: readonly AtFit[];
  /** Of the nested sampling, the only part that draws. */
  seed: number;
}

export interface Evaluated {
  base: Float64Array;
  columns: readonly Float64Array[];
}

/** A normal density about mu of variance `variance`. */
export const NORMAL = 0;
/** Barlow's linear variance, clamped (asymmetric.ts); `variance` is extra, added to V. */
export const ASYMMETRIC = 1;
/** Noise of `variance` about mu + t, t flat over [lower, upper], one t of its own for each row. */
export const EACH_FLAT = 2;
/** Any other likelihood of mu: `factors[i]`. `variance` isn't looked at: the factor holds all. */
export const FACTOR = 3;

/** Structure of arrays, each N long. */
export interface BlockRows {
  count: number;
  /** Readings minus a centre of the caller's choosing (one per measurand keeps the digits). */
  observed: Float64Array;
  /** NORMAL, ASYMMETRIC, EACH_FLAT or FACTOR. */
  kind: Uint8Array;
  /** Own, scatter's and each one's tolerance's, added up. */
  variance: Float64Array;
  /** Of ASYMMETRIC rows; null without any. */
  asymmetric: { plus: Float64Array; minus: Float64Array } | null;
  /** Of EACH_FLAT rows, relative to mu; null without any. */
  eachFlat: { lower: Float64Array; upper: Float64Array } | null;
  /** Of FACTOR rows, null elsewhere; null without any. */
  factors: readonly (Factor | null)[] | null;
  /** observed - base is brought into (-period / 2, period / 2]; 0: not cyclic. Null: none is. */
  period: Float64Array | null;
  /** Rows of NORMAL or ASYMMETRIC kind whose noises are correlated, each in one group at most. */
  groups: readonly CorrelationGroup[];
  /** Gaussian processes that rows of any kind add to their mu, each row in one at most. */
  smooth: readonly SmoothProcess[];
}

/**
 * Covariance of rows' noises, n x n row by row, its diagonal with all that `variance` has. For
 * ASYMMETRIC rows the diagonal is the extra variance plus plus x minus; the correlations are kept
 * where V moves.
 */
export interface CorrelationGroup {
  rows: Int32Array;
  covariance: Float64Array;
}

/** Covariance sd^2 exp(-|x_i - x_j| / length). */
export interface SmoothProcess {
  sd: number;
  length: number;
  rows: Int32Array;
  /** As long as `rows`; any order. */
  x: Float64Array;
}

/**
 * A likelihood of a row that isn't Gaussian in mu, mu counted from the row's centre. factors.ts
 * makes them.
 */
export interface Factor {
  ln(mu: number): number;
  /** Where it varies, and over what distance. */
  centre: number;
  scale: number;
  /** Where it has kinks. */
  breaks: readonly number[];
  /** Its residual in chi-square, squared there; null where it isn't counted. */
  residual: ((mu: number) => number) | null;
  /** The same as exp(lnScale) P(lower < mu + sd n < upper), n ~ N(0, 1); null where it isn't. */
  box: { lower: number; upper: number; sd: number; lnScale: number } | null;
}

/** `normal`: N(0, 1). `flat`: constant over its bounds; `width` as well as the two can tell it. */
export type LinearUnknown =
  { kind: "normal" } | { kind: "flat"; lower: number; upper: number; width: number };

/** Row i has entries [start[i], start[i + 1]): columns and values. `start` is N + 1 long. */
export interface SparseDesign {
  start: Int32Array;
  column: Int32Array;
  value: Float64Array;
}

/**
 * An unknown that is integrated numerically, in a coordinate c of its own. outer-unknowns.ts makes
 * those of each family.
 */
export interface OuterUnknown {
  /** Bounds of c; infinities allowed. */
  lower: number;
  upper: number;
  /** ln of the prior's density over c, normalised; -Infinity outside the bounds. */
  lnPrior(c: number): number;
  /** Quantile function of the prior over c, u in (0, 1). */
  quantile(u: number): number;
  /** The unknown's value, not decreasing in c. */
  valueAt(c: number): number;
  /** Whether chi-square charges c^2 (normal, lognormal, halfnormal, splitNormal) or nothing (flat). */
  penalised: boolean;
  /** Coordinates at which prior or likelihood have kinks or jumps. */
  breaks: readonly number[];
  /** Whether a row that chi-square counts hangs on it. */
  counted: boolean;
}

/**
 * A loading that is a share of what is fitted: of linear unknown `unknown` on row i,
 *
 *   coefficient_i (level_i + sum over k of `of` X_ik z_k),   at the penalised best fit
 *
 * level_i is counted from 0, not from the row's centre. `design` has nothing in that column.
 */
export interface AtFit {
  unknown: number;
  coefficient: Float64Array;
  level: Float64Array;
  of: readonly number[];
}

/** Why a block has no number. */
export type BlockRefusal =
  /** The covariance of these rows, in increasing order, isn't positive definite. */
  | { kind: "singular"; rows: number[] }
  /** More numerical dimensions than `limit`. */
  | { kind: "too-many-unknowns"; dimensions: number; limit: number };

/** ln Z of a block: -Infinity where the likelihood is zero everywhere. */
export interface BlockEvidence {
  ok: true;
  ln: number;
  /** Standard error or a quadrature's bound; 0 for closed forms. */
  error: number;
  /** Posterior share of each scenario. */
  scenarioShares: Float64Array;
  /** Numbers of outer and of linear unknowns. */
  unknowns: { outer: number; linear: number };
  /** The posterior, worked out when it is asked for; none where the likelihood is zero. */
  posterior(): readonly PosteriorPiece[];
  /** Posterior quantile of an outer unknown's value; null where only the pieces tell it. */
  outerQuantile: ((unknown: number, p: number) => number) | null;
  /** Posterior quantile of a flat linear unknown; null where only the pieces tell it. */
  flatQuantile(unknown: number, p: number): number | null;
}

/** A part of the posterior: values of the outer unknowns with a weight. Weights add up to 1. */
export interface PosteriorPiece {
  weight: number;
  scenario: number;
  outer: Float64Array;
  linear(): LinearPosterior;
}

/**
 * The linear unknowns as a Gaussian, given a piece's outer values (and given those linear unknowns
 * that were integrated numerically, in whose directions the spread is 0).
 */
export interface LinearPosterior {
  mean: Float64Array;
  /** Standard deviation of sum_k loadings_k z_k. */
  spread(loadings: Float64Array): number;
}

/** The penalised minimum (section 5 of the statistics) over everything unknown. */
export interface BlockFit {
  ok: true;
  chiSquare: number;
  /** Flat unknowns that touch counted rows and whose minimum is inside their bounds. */
  flatInside: number;
  scenario: number;
  /** Values at the minimum. */
  outer: Float64Array;
  linear: Float64Array;
}

export type BlockOutcome<Answer> = Answer | { ok: false; refusal: BlockRefusal };

/** Something read off a posterior: constant + sum of loadings_k z_k, at given outer values. */
export interface Query {
  /**
   * @param outer values of the outer unknowns
   * @param loadings filled, one per linear unknown (given as zeros)
   * @returns the constant
   */
  (outer: Float64Array, scenario: number, loadings: Float64Array): number;
}

/** A mixture of normals; an sd may be 0. Weights add up to 1. */
export interface Mixture {
  weights: Float64Array;
  means: Float64Array;
  sds: Float64Array;
}

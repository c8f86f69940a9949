import type { Measurement } from "@weighhouse/campaign/document";
import { below } from "@weighhouse/campaign/pointer";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import type { Frame } from "./frame";
import { unsupportedMeasurement } from "./not-yet-supported";
import { readResult } from "./results";
import { relativeSd } from "./scoring-space";
import { MOST_SD } from "./sizes";

export interface Loading {
  error: number;
  batch: string | null;
  /** coefficient x sd: what one standard deviation of the shared error does to the reading. */
  value: number;
  /** Times what is expected, in the observable's unit: on linear, of a relative shared error. */
  relative: boolean;
}

/** What a measurement says of its measurand, in scoring space. Variances are without scatter. */
export type Told =
  | { form: "value"; y: number; variance: number }
  /** `plus` is the upward standard deviation of the true value, as Barlow's linear variance takes it. */
  | { form: "asymmetric"; y: number; plus: number; minus: number }
  /** Compatible with zero: a reading of 0, which is no value that a residual can be taken of. */
  | { form: "zero"; y: number; variance: number }
  /** Phi((y - mu) / sd) for an upper limit y, Phi((mu - y) / sd) for a lower one. */
  | { form: "censored"; side: "upper" | "lower"; y: number; sd: number }
  /** On log10: N(value; 10^mu, sd^2), both in the observable's unit; `limit` where it is one. */
  | { form: "linear-noise"; value: number; sd: number; limit: boolean }
  /** On magnitude: phi(sigmas 10^(-0.4 (mu - y))), phi the standard normal density. */
  | { form: "fainter"; y: number; sigmas: number }
  | { form: "event"; occurred: boolean; efficiency: number; falseAlarm: number }
  | { form: "count"; count: number; exposure: number; background: number };

/** A measurement that counts. */
export interface Reading {
  id: string;
  measurand: number;
  told: Told;
  /** In the order of the observable's conditions, NaN where not given; empty but on curves. */
  conditions: number[];
  loadings: Loading[];
  provisional: boolean;
  /** No conversion was possible: the value stands as it was given. */
  unknownUnit: string | null;
}

/**
 * Whether a reading goes into its measurand's sums: an ordinary value of a constant measurand on a
 * line, not correlated with another. Any other is kept as it is.
 */
export function isSummed(frame: Frame, { id, measurand, told }: Reading): boolean {
  const { curve, period } = frame.measurands[measurand]!;
  return told.form === "value" && !curve && period === 0 && !frame.correlated.has(id);
}

/** A value that a residual can be taken of: it counts in chi-square. */
export function isValue(told: Told): boolean {
  return (
    told.form === "value" ||
    told.form === "asymmetric" ||
    (told.form === "linear-noise" && !told.limit)
  );
}

/** Brings a measurement into scoring space, or says why it can't be scored. */
export function readMeasurement(
  frame: Frame,
  measurement: Measurement,
  pointer: string,
): Result<Reading> {
  const measurand = frame.measurandIndex.get(measurement.measurand)!;
  const own = frame.measurands[measurand]!;
  const problems = unsupportedMeasurement(
    measurement,
    pointer,
    new Set(frame.errors.filter(({ relative }) => relative).map(({ key }) => key)),
  );
  if (problems.length > 0) return { ok: false, problems };
  const read = readResult(measurement, own, pointer);
  if ("pointer" in read) return { ok: false, problems: [read] };
  const loadings = readLoadings(frame, measurement, { pointer, told: read.told });
  if ("pointer" in loadings) return { ok: false, problems: [loadings] };
  const { conditions } = measurement;
  const value: Reading = {
    id: measurement.id,
    measurand,
    ...read,
    conditions: own.curve ? own.conditions.map((key) => conditions[key] ?? Number.NaN) : [],
    loadings,
    provisional: measurement.status === "provisional",
  };
  return { ok: true, value };
}

function readLoadings(
  frame: Frame,
  measurement: Measurement,
  { pointer, told }: { pointer: string; told: Told },
): Loading[] | Problem {
  const loadings: Loading[] = [];
  const { scale } = frame.measurands[frame.measurandIndex.get(measurement.measurand)!]!;
  const most = MOST_SD * Math.min(1, "variance" in told ? Math.sqrt(told.variance) : 1);
  for (const [position, { error: key, coefficient }] of measurement.shared.entries()) {
    const error = frame.errorIndex.get(key);
    if (error === undefined) {
      const found = `"${key}"`;
      const allowed = "a shared error of the campaign";
      return { pointer: below(pointer, "shared"), code: "unknown-key", found, allowed };
    }
    const { sd, perBatch, relative } = frame.errors[error]!;
    if (perBatch && measurement.batch === null) {
      const allowed = `a batch, as "${key}" is drawn per batch`;
      return { pointer: below(pointer, "batch"), code: "missing", found: "none", allowed };
    }
    const batch = perBatch ? measurement.batch : null;
    const constant = relative ? relativeSd(sd, scale) : sd;
    const value = coefficient * (constant ?? sd);
    if (!(Math.abs(value) <= most)) {
      const found = `${coefficient}, a loading of ${value}`;
      const at = below(pointer, "shared", position, "coefficient");
      const allowed = `a loading of at most ${most}`;
      return { pointer: at, code: "out-of-range", found, allowed };
    }
    loadings.push({ error, batch, value, relative: constant === null });
  }
  return loadings;
}

import type { Frame } from "./frame";

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
 * Whether a reading goes into its measurand's sums: an ordinary value, not correlated with another,
 * of a constant measurand on a line.
 */
export function isSummed(frame: Frame, { id, measurand, told }: Reading): boolean {
  return told.form === "value" && !frame.measurands[measurand]!.apart && !frame.correlated.has(id);
}

/**
 * Whether a reading of a curve goes into its triangular factors: an ordinary value, not correlated
 * with another, whose shared errors load it by numbers.
 */
export function isFactored(frame: Frame, { id, measurand, told, loadings }: Reading): boolean {
  return (
    told.form === "value" &&
    frame.measurands[measurand]!.designs.some((design) => design !== null) &&
    !frame.correlated.has(id) &&
    !loadings.some(({ relative }) => relative)
  );
}

/** Whether a reading is kept as it is: nothing holds it, or a role of its measurand asks for each one. */
export function isKept(frame: Frame, reading: Reading): boolean {
  if (isSummed(frame, reading)) return false;
  return !isFactored(frame, reading) || frame.measurands[reading.measurand]!.designs.includes(null);
}

/** A value that a residual can be taken of: it counts in chi-square. */
export function isValue(told: Told): boolean {
  return (
    told.form === "value" ||
    told.form === "asymmetric" ||
    (told.form === "linear-noise" && !told.limit)
  );
}

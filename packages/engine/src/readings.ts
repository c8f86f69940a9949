import type { Measurement } from "@weighhouse/campaign/document";
import { below } from "@weighhouse/campaign/pointer";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import { conversion } from "@weighhouse/campaign/units";
import type { Frame, MeasurandFrame } from "./frame";
import { unsupportedMeasurement } from "./not-yet-supported";
import { sdInScoringSpace, toScoringSpace } from "./scoring-space";
import { LEAST_SD, MOST_SD } from "./sizes";

export interface Loading {
  error: number;
  batch: string | null;
  /** coefficient x sd: what one standard deviation of the shared error does to the reading. */
  value: number;
}

/** A measurement that counts, in scoring space. */
export interface Reading {
  measurand: number;
  y: number;
  /** Its own variance, without scatter. */
  variance: number;
  loadings: Loading[];
  provisional: boolean;
  /** No conversion was possible: the value stands as it was given. */
  unknownUnit: string | null;
}

/** Brings a measurement into scoring space, or says why it can't be scored. */
export function readMeasurement(
  frame: Frame,
  measurement: Measurement,
  pointer: string,
): Result<Reading> {
  const measurand = frame.measurandIndex.get(measurement.measurand)!;
  const problems = unsupportedMeasurement(measurement, pointer, frame.relativeErrors);
  if (problems.length > 0) return { ok: false, problems };
  const read = readValue(measurement, frame.measurands[measurand]!, pointer);
  if ("pointer" in read) return { ok: false, problems: [read] };
  const loadings: Loading[] = [];
  const most = MOST_SD * Math.min(1, Math.sqrt(read.variance));
  for (const [position, { error: key, coefficient }] of measurement.shared.entries()) {
    const error = frame.errorIndex.get(key);
    if (error === undefined) {
      const found = `"${key}"`;
      const allowed = "a shared error of the campaign";
      const at = below(pointer, "shared");
      return { ok: false, problems: [{ pointer: at, code: "unknown-key", found, allowed }] };
    }
    const { sd, perBatch } = frame.errors[error]!;
    if (perBatch && measurement.batch === null) {
      const allowed = `a batch, as "${key}" is drawn per batch`;
      return { ok: false, problems: [missing(below(pointer, "batch"), allowed)] };
    }
    const batch = perBatch ? measurement.batch : null;
    const value = coefficient * sd;
    if (!(Math.abs(value) <= most)) {
      const found = `${coefficient}, a loading of ${value}`;
      const at = below(pointer, "shared", position, "coefficient");
      const allowed = `a loading of at most ${most}`;
      return { ok: false, problems: [{ pointer: at, code: "out-of-range", found, allowed }] };
    }
    loadings.push({ error, batch, value });
  }
  const provisional = measurement.status === "provisional";
  return { ok: true, value: { measurand, ...read, loadings, provisional } };
}

function readValue(
  measurement: Measurement,
  { unit, scale }: MeasurandFrame,
  pointer: string,
): Pick<Reading, "y" | "variance" | "unknownUnit"> | Problem {
  const { value: given, sd: givenSd, sdDex } = measurement;
  if (given === null) return missing(below(pointer, "value"), "a value");
  let factor = 1;
  let offset = 0;
  let unknownUnit: string | null = null;
  if (measurement.unit !== null && unit !== null && measurement.unit !== unit) {
    const converted = conversion(measurement.unit, unit);
    if (converted.kind === "other-dimension") {
      const at = below(pointer, "unit");
      return { pointer: at, code: "wrong-dimension", found: measurement.unit, allowed: unit };
    }
    if (converted.kind === "unknown") unknownUnit = measurement.unit;
    else ({ factor, offset } = converted);
  }
  const value = factor * given + offset;
  if (scale === "log10" && !(value > 0)) {
    const at = below(pointer, "value");
    return { pointer: at, code: "not-positive", found: String(given), allowed: "a value above 0" };
  }
  const dex = scale === "log10" && sdDex !== null;
  if (!dex && givenSd === null) return missing(below(pointer, "sd"), "a standard uncertainty");
  const sd = dex ? sdDex : sdInScoringSpace(Math.abs(factor) * givenSd!, value, scale);
  const y = toScoringSpace(value, scale);
  if (!(sd >= LEAST_SD && sd <= MOST_SD && Math.abs(y) <= MOST_SD * sd)) {
    const at = below(pointer, dex ? "sdDex" : "sd");
    const allowed = `${LEAST_SD} to ${MOST_SD}, and no less than the value / ${MOST_SD}`;
    return { pointer: at, code: "out-of-range", found: String(dex ? sdDex : givenSd), allowed };
  }
  return { y, variance: sd * sd, unknownUnit };
}

function missing(pointer: string, allowed: string): Problem {
  return { pointer, code: "missing", found: "none", allowed };
}

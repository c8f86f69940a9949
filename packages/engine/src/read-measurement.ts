import type { Measurement } from "@weighhouse/campaign/document";
import { below } from "@weighhouse/campaign/pointer";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import type { Frame } from "./frame";
import type { Loading, Reading, Told } from "./readings";
import { readResult } from "./results";
import { relativeSd } from "./scoring-space";
import { MOST_SD } from "./sizes";

/** Brings a measurement into scoring space, or says why it can't be scored. */
export function readMeasurement(
  frame: Frame,
  measurement: Measurement,
  pointer: string,
): Result<Reading> {
  const measurand = frame.measurandIndex.get(measurement.measurand)!;
  const own = frame.measurands[measurand]!;
  const read = readResult(measurement, own, pointer);
  if ("pointer" in read) return { ok: false, problems: [read] };
  if (frame.correlated.has(measurement.id) && !hasNoise(read.told)) {
    const found = `a correlation of ${measurement.id}, whose noise isn't normal about its value`;
    const allowed = "correlations between values";
    return { ok: false, problems: [{ pointer, code: "not-applicable", found, allowed }] };
  }
  const loadings = readLoadings(frame, measurement, { pointer, told: read.told });
  if ("pointer" in loadings) return { ok: false, problems: [loadings] };
  const { conditions } = measurement;
  const value: Reading = {
    id: measurement.id,
    measurand,
    told: read.told,
    unknownUnit: read.unknownUnit,
    conditions: own.curve ? own.conditions.map((key) => conditions[key] ?? Number.NaN) : [],
    loadings,
    provisional: measurement.status === "provisional",
  };
  return { ok: true, value };
}

/** A noise that can be correlated with another's. */
function hasNoise({ form }: Told): boolean {
  return form === "value" || form === "zero" || form === "asymmetric";
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

import type { Measurement } from "@weighhouse/campaign/document";
import { below } from "@weighhouse/campaign/pointer";
import type { Problem } from "@weighhouse/campaign/problem";
import { conversion } from "@weighhouse/campaign/units";
import { normalQuantile } from "@weighhouse/numerics/normal";
import type { MeasurandFrame } from "./frame";
import type { Reading, Told } from "./readings";
import { sdInScoringSpace, sidesInScoringSpace, toScoringSpace } from "./scoring-space";
import { LEAST_SD, MOST_SD } from "./sizes";

type Read = Pick<Reading, "told" | "unknownUnit">;

/** What a measurement says, in scoring space; or what is wrong with it. */
export function readResult(
  measurement: Measurement,
  frame: MeasurandFrame,
  pointer: string,
): Read | Problem {
  const { occurred, count } = measurement;
  if (frame.scale === "event") {
    if (occurred === null) return missing(below(pointer, "occurred"), "whether it occurred");
    const { efficiency, falseAlarm } = measurement;
    const told: Told = {
      form: "event",
      occurred,
      efficiency: efficiency ?? 1,
      falseAlarm: falseAlarm ?? 0,
    };
    return { told, unknownUnit: null };
  }
  if (frame.scale === "count") {
    if (count === null) return missing(below(pointer, "count"), "a count");
    const { exposure, background } = measurement;
    const told: Told = {
      form: "count",
      count,
      exposure: exposure ?? 1,
      background: background ?? 0,
    };
    return { told, unknownUnit: null };
  }
  return readQuantity(measurement, frame, pointer);
}

/** In the observable's unit. */
interface Quantity {
  value: number;
  sd: number | null;
  sdDex: number | null;
  plus: number | null;
  minus: number | null;
}

function readQuantity(
  measurement: Measurement,
  { unit, scale }: MeasurandFrame,
  pointer: string,
): Read | Problem {
  const given = measurement.value;
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
  const width = (one: number | null) => (one === null ? null : Math.abs(factor) * one);
  const quantity: Quantity = {
    value: factor * given + offset,
    sd: width(measurement.sd),
    sdDex: measurement.sdDex,
    plus: width(measurement.plus),
    minus: width(measurement.minus),
  };
  if (scale === "log10" && measurement.noise === null && !(quantity.value > 0)) {
    const at = below(pointer, "value");
    return { pointer: at, code: "not-positive", found: String(given), allowed: "a value above 0" };
  }
  const told = toldOf(measurement, quantity, scale);
  if (told === null) return missing(below(pointer, "sd"), "a standard uncertainty");
  return problemOf(measurement, told, pointer) ?? { told, unknownUnit };
}

function toldOf(
  measurement: Measurement,
  { value, sd, sdDex, plus, minus }: Quantity,
  scale: MeasurandFrame["scale"],
): Told | null {
  const { limit, noise } = measurement;
  const y = toScoringSpace(value, scale);
  const scaledSd =
    scale === "log10" && sdDex !== null
      ? sdDex
      : sd === null
        ? null
        : sdInScoringSpace(sd, value, scale);
  if (limit !== null) {
    const sigmas = sigmasOf(measurement);
    if (sigmas !== null) {
      if (scale === "magnitude") return { form: "fainter", y, sigmas };
      const zeroSd = value / sigmas;
      if (scale === "log10") return { form: "linear-noise", value: 0, sd: zeroSd, limit: true };
      return { form: "zero", y: 0, variance: zeroSd * zeroSd };
    }
    if (scaledSd === null) return null;
    // A larger magnitude is less light: `fainter` is a lower bound of the magnitude.
    const side = limit === "upper" || limit === "brighter" ? "upper" : "lower";
    return { form: "censored", side, y, sd: scaledSd };
  }
  if (noise === "linear") {
    return sd === null ? null : { form: "linear-noise", value, sd, limit: false };
  }
  if (plus !== null && minus !== null) {
    if (scale === "log10" && !(minus < value)) return null;
    return { form: "asymmetric", y, ...sidesInScoringSpace({ plus, minus }, value, scale) };
  }
  return scaledSd === null ? null : { form: "value", y, variance: scaledSd * scaledSd };
}

/** How many standard deviations a limit compatible with zero lies above it; null for others. */
function sigmasOf({ confidence, sigmas }: Measurement): number | null {
  if (sigmas !== null) return sigmas;
  return confidence === null ? null : normalQuantile(confidence);
}

/** A width whose square or weight is no ordinary double is refused. */
function problemOf(measurement: Measurement, told: Told, pointer: string): Problem | null {
  for (const { field, sd, y } of widthsOf(measurement, told)) {
    if (sd >= LEAST_SD && sd <= MOST_SD && Math.abs(y) <= MOST_SD * sd) continue;
    const allowed = `${LEAST_SD} to ${MOST_SD}, and no less than the value / ${MOST_SD}`;
    const found = String(measurement[field]);
    return { pointer: below(pointer, field), code: "out-of-range", found, allowed };
  }
  return null;
}

function widthsOf(
  { sdDex, confidence }: Measurement,
  told: Told,
): { field: keyof Measurement; sd: number; y: number }[] {
  const compatible = confidence === null ? "sigmas" : "confidence";
  const field = sdDex === null ? "sd" : "sdDex";
  switch (told.form) {
    case "value":
      return [{ field, sd: Math.sqrt(told.variance), y: told.y }];
    case "zero":
      return [{ field: compatible, sd: Math.sqrt(told.variance), y: told.y }];
    case "censored":
      return [{ field, sd: told.sd, y: told.y }];
    case "linear-noise":
      return [{ field: told.limit ? compatible : "sd", sd: told.sd, y: told.value }];
    case "asymmetric":
      return [
        { field: "plus", sd: told.plus, y: told.y },
        { field: "minus", sd: told.minus, y: told.y },
      ];
    default:
      return [];
  }
}

function missing(pointer: string, allowed: string): Problem {
  return { pointer, code: "missing", found: "none", allowed };
}

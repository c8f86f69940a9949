import type { Hypothesis, Prediction } from "@weighhouse/campaign/document";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import { expectationOf, type Expected } from "./expectation";
import {
  noiseIndex,
  type Given,
  type MeasurandFrame,
  type PredictionFrame,
  type Role,
  type ToleranceFrame,
} from "./frame";
import { toScoringSpace } from "./scoring-space";
import { gammaProblem, MOST_SD } from "./sizes";
import { toleranceFrame } from "./tolerance-frame";

export interface PredictionContext {
  pointer: string;
  hypothesis: number;
  declared: Hypothesis;
  measurand: number;
  frame: MeasurandFrame;
  given: Given | null;
  /** Its tolerance is correlated with another's. */
  correlated: boolean;
  /** Half the width of a normal tolerance's interval, in its sd. */
  coverage: number;
}

/** A prediction in scoring space; adds its role to the measurand's. */
export function predictionFrame(
  prediction: Prediction,
  context: PredictionContext,
): Result<PredictionFrame> {
  const { pointer, frame } = context;
  const compiled = expectationOf(prediction, context);
  if (!compiled.ok) return compiled;
  const given = compiled.value;
  const tolerance = toleranceFrame(prediction, frame, given);
  const expected = given.natural === null ? null : toScoringSpace(given.natural, frame.scale);
  if (expected !== null && !Number.isFinite(expected)) {
    const allowed = frame.scale === "log10" ? "a number above 0" : "a finite number";
    return refused(`${pointer}/expected`, String(given.natural), allowed);
  }
  if (tolerance.family === "normal" && !(tolerance.sd <= MOST_SD)) {
    const allowed = `a tolerance of at most ${MOST_SD}`;
    return refused(`${pointer}/tolerance/sd`, String(tolerance.sd), allowed);
  }
  const gamma =
    tolerance.family === "gamma" ? gammaProblem(tolerance, `${pointer}/tolerance`) : null;
  if (gamma !== null) return { ok: false, problems: [gamma] };
  const value: PredictionFrame = {
    pointer,
    hypothesis: context.hypothesis,
    measurand: context.measurand,
    role: -1,
    tolerance,
    expectation: given.expectation,
    natural: given.natural,
    expected,
    sd: sdOf(tolerance, expected),
    interval: intervalOf(tolerance, expected, context.coverage),
    decisive: prediction.decisive,
    registeredAt: prediction.registeredAt,
    given: context.given,
  };
  if (tellsApart(tolerance)) frame.apart = true;
  if (tolerance.family === "normal" && tolerance.sharing === "each" && !tolerance.relative) {
    noiseIndex(frame, tolerance.sd * tolerance.sd);
  }
  value.role = roleIndex(frame, roleOf(value, given, context));
  return { ok: true, value };
}

function refused(pointer: string, found: string, allowed: string): Result<never> {
  const problem: Problem = { pointer, code: "out-of-range", found, allowed };
  return { ok: false, problems: [problem] };
}

/** Whether each measurement has something of its own that isn't one normal noise for all. */
function tellsApart(tolerance: ToleranceFrame): boolean {
  if (!("sharing" in tolerance) || tolerance.sharing !== "each") return false;
  return tolerance.family !== "normal" || tolerance.relative;
}

function sdOf(tolerance: ToleranceFrame, expected: number | null): number | null {
  if (expected === null) return null;
  if (tolerance.family === "exact") return 0;
  return tolerance.family === "normal" ? tolerance.sd : null;
}

function intervalOf(
  tolerance: ToleranceFrame,
  expected: number | null,
  coverage: number,
): PredictionFrame["interval"] {
  switch (tolerance.family) {
    case "exact":
      return expected === null ? null : { lower: expected, upper: expected };
    case "normal": {
      const reach = coverage * tolerance.sd;
      return expected === null ? null : { lower: expected - reach, upper: expected + reach };
    }
    case "interval":
      return { lower: tolerance.lower, upper: tolerance.upper };
    case "atMost":
      return { lower: -Infinity, upper: tolerance.upper };
    case "atLeast":
      return { lower: tolerance.lower, upper: Infinity };
    default:
      return null;
  }
}

/** The plain role that says the same, where there is one; else the prediction itself. */
function roleOf(
  prediction: PredictionFrame,
  { natural }: Expected,
  { frame, correlated }: PredictionContext,
): Role {
  const { tolerance, expected } = prediction;
  if (tolerance.family === "event") return { kind: "event", probability: tolerance.probability };
  if (tolerance.family === "gamma") {
    return { kind: "rate", family: "gamma", mean: tolerance.mean, sd: tolerance.sd };
  }
  const role: Role = { kind: "predicted", prediction };
  if (correlated) return role;
  if (frame.scale === "count") {
    return natural === null ? role : { kind: "rate", family: "exact", rate: natural };
  }
  switch (tolerance.family) {
    case "exact":
      return expected === null ? role : { kind: "normal", mean: expected, sd: 0, noise: 0 };
    case "normal": {
      if (expected === null || tolerance.sharing === "smooth") return role;
      const { sd, sharing } = tolerance;
      return sharing === "each"
        ? { kind: "normal", mean: expected, sd: 0, noise: noiseIndex(frame, sd * sd) }
        : { kind: "normal", mean: expected, sd, noise: 0 };
    }
    case "interval":
    case "atMost":
    case "atLeast": {
      const { lower, upper, width, sharing } = tolerance;
      return sharing === "each" ? role : { kind: "uniform", lower, upper, width, noise: 0 };
    }
    default:
      return role;
  }
}

function roleIndex(frame: MeasurandFrame, role: Role): number {
  const there = frame.roles.findIndex((other, i) => i > 0 && sameRole(role, other));
  return there >= 0 ? there : frame.roles.push(role) - 1;
}

/**
 * Predictions that say the same of a measurand are one role, whoever says it. A reference stays by
 * itself: relative shared errors are a share of its level, but of what is expected in a prediction.
 */
function sameRole(a: Role, b: Role): boolean {
  if (a.kind === "normal" && b.kind === "normal") {
    return a.mean === b.mean && a.sd === b.sd && a.noise === b.noise;
  }
  if (a.kind === "uniform" && b.kind === "uniform") {
    return a.lower === b.lower && a.width === b.width && a.noise === b.noise;
  }
  if (a.kind === "event" && b.kind === "event") return a.probability === b.probability;
  return false;
}

import { linearParameters } from "@weighhouse/campaign/expression-linearity";
import type { Prior } from "@weighhouse/campaign/document";
import type { HypothesisFrame, PredictionFrame, Role } from "../frame";
import {
  halfNormalUnknown,
  loguniformUnknown,
  lognormalUnknown,
  normalUnknown,
  uniformUnknown,
  type OuterPlace,
} from "../block/outer-unknowns";
import type { LinearUnknown, OuterUnknown } from "../block/problem";
import type { Component } from "./block-parts";

/**
 * Parameters of one hypothesis that enter every expectation of a component linearly in scoring
 * space, together: those of normal and of uniform priors are then linear unknowns, and so are the
 * logarithms of those whose priors are normal or uniform in them.
 *
 * One that scales something else (a relative tolerance or shared error, the rate of counts), or
 * that decides where a circle is cut, is none.
 *
 * @param bars whether what a measurand expects scales something of its rows
 */
export function linearIn(
  { parts }: Component,
  { parameters }: HypothesisFrame,
  { bars, scaleOf }: { bars(measurand: number): boolean; scaleOf(measurand: number): string },
): Set<number> {
  const predictions = parts.flatMap(({ role }) => predictionOf(role));
  const candidates = new Set<number>();
  parameters.forEach(({ prior }, p) => {
    if (prior.family !== "halfnormal" && prior.family !== "fixed") candidates.add(p);
  });
  const barredFrom = predictions.filter(({ measurand }) => bars(measurand));
  for (const { expectation } of barredFrom) {
    for (const slot of expectation!.uses) candidates.delete(slot);
  }
  for (let before = -1; before !== candidates.size;) {
    before = candidates.size;
    for (const { expectation, measurand } of predictions) {
      const used = expectation!.uses.filter((slot) => candidates.has(slot));
      const names = used.map((slot) => expectation!.slots[slot]!);
      const inLog10 = scaleOf(measurand) === "log10";
      const linear = new Set(linearParameters(expectation!.inLogs, names, inLog10));
      used.forEach((slot, i) => {
        if (!linear.has(names[i]!)) candidates.delete(slot);
      });
    }
  }
  return candidates;
}

function predictionOf(role: Role): PredictionFrame[] {
  if (role.kind !== "predicted" || role.prediction.expectation === null) return [];
  return [role.prediction];
}

export interface LinearParameter {
  unknown: LinearUnknown;
  /** In the parameter's unit. */
  from: number;
  step: number;
  logged: boolean;
}

/** A linear parameter is `from + step z`, z the unknown; `from 10^(step z)` where it is logged. */
export function linearUnknown(prior: Prior): LinearParameter {
  switch (prior.family) {
    case "normal":
      return { unknown: { kind: "normal" }, from: prior.mean, step: prior.sd, logged: false };
    case "lognormal":
      return { unknown: { kind: "normal" }, from: prior.median, step: prior.sdLog10, logged: true };
    case "uniform": {
      const { lower, upper } = prior;
      return { unknown: flatOver(upper - lower), from: lower, step: 1, logged: false };
    }
    case "loguniform": {
      const { lower, upper } = prior;
      return { unknown: flatOver(Math.log10(upper / lower)), from: lower, step: 1, logged: true };
    }
    default:
      throw new TypeError(`a linear ${prior.family} parameter`);
  }
}

function flatOver(width: number): LinearUnknown {
  return { kind: "flat", lower: 0, upper: width, width };
}

export function outerUnknown(prior: Prior, place: OuterPlace): OuterUnknown {
  switch (prior.family) {
    case "normal":
      return normalUnknown(prior.mean, prior.sd, place);
    case "lognormal":
      return lognormalUnknown(Math.log(prior.median), prior.sdLog10 * Math.LN10, place);
    case "uniform":
      return uniformUnknown(prior, place);
    case "loguniform":
      return loguniformUnknown(prior, place);
    case "halfnormal":
      return halfNormalUnknown(prior.sd, place);
    case "fixed":
      throw new TypeError("a fixed parameter is no unknown");
  }
}

import { normalCdf } from "@weighhouse/numerics/normal";
import type { VerdictWord } from "@weighhouse/campaign/standings";
import { fit } from "./chi-square-fit";
import { combine } from "./combination";
import type { Combination } from "./combination/combination";
import { countsOf, exactRateP } from "./combination/counts";
import { meanOf, quantile, sdOf, type Distribution } from "./distribution/distribution";
import { givenState, occurredProbability, reportsOf } from "./events";
import { evidence } from "./evidence";
import type { Frame, PredictionFrame } from "./frame";
import { predictiveOf } from "./predictive";
import { shareOfReference } from "./reference-range";
import { wrapped } from "./scoring-space";
import {
  calledProbability,
  eventWord,
  exactWord,
  intervalWord,
  placesOf,
  tensionOfBounds,
} from "./verdict-rules";
import { onlyMeasurand, type Workspace } from "./workspace";

/** Below this the measurements of a measurand disagree with one another. */
export const DISAGREEING = 0.01;

/** In scoring space. */
export interface Verdict {
  word: VerdictWord;
  conformance: number | null;
  tension: number | null;
  value: number | null;
  sd: number | null;
  inflated: boolean;
}

/** Bounds in scoring space; on a circle upper is lower + width. */
export interface Interval {
  lower: number;
  upper: number;
}

/** A prediction against its measurand's measurements (section 7, JCGM 106:2012). */
export function verdictOf(workspace: Workspace, prediction: PredictionFrame): Verdict {
  const { measurand, given, tolerance } = prediction;
  const state = given === null ? "met" : givenState(workspace, given);
  if (state === "contradicted") return withoutResult("void");
  if (isClosed(workspace, measurand)) return withoutResult("notMeasured");
  if (state === "open" || !isMeasured(workspace, measurand)) return withoutResult("awaiting");
  if (tolerance.family === "event") return ofEvent(workspace, prediction, tolerance.probability);
  const combination = combine(workspace, measurand);
  const interval = isExact(workspace, prediction) ? null : intervalOf(workspace.frame, prediction);
  return combination === null || interval === null
    ? ofExact(workspace, prediction, combination)
    : ofInterval(workspace, prediction, { combination, interval });
}

/** A sealed prediction: what was measured is shown, what was predicted isn't known. */
export function verdictOfWithheld(workspace: Workspace, measurand: number): Verdict {
  if (isClosed(workspace, measurand)) return withoutResult("notMeasured");
  if (!isMeasured(workspace, measurand)) return withoutResult("awaiting");
  const combination = combine(workspace, measurand);
  const { value = null, sd = null } = combination ?? {};
  return { ...withoutResult("withheld"), value, sd };
}

function withoutResult(word: VerdictWord): Verdict {
  return { word, conformance: null, tension: null, value: null, sd: null, inflated: false };
}

/** A derived value can't be had any more when one of its inputs was closed. */
function isClosed({ frame }: Workspace, measurand: number): boolean {
  const { closed, derived } = frame.measurands[measurand]!;
  return closed || (derived?.from.some((one) => frame.measurands[one.measurand]!.closed) ?? false);
}

/** Something counted is there; of a derived value, all of its inputs. */
export function isMeasured(workspace: Workspace, measurand: number): boolean {
  return workspace.frame.measurands[measurand]!.derived === null
    ? workspace.sums.measurands[measurand]!.counted > 0
    : combine(workspace, measurand) !== null;
}

/** Judged by p and a Bayes factor: a curve, or what is expected exactly and hangs on nothing free. */
function isExact(
  { frame }: Workspace,
  { measurand, tolerance, expected, natural }: PredictionFrame,
) {
  if (frame.measurands[measurand]!.curve) return true;
  return tolerance.family === "exact" && (expected !== null || natural !== null);
}

/**
 * Where the true value is to lie: bounds as given, coverage x sd about what is expected, or the
 * central interval of probability erf(coverage / sqrt 2) of the prior predictive.
 *
 * @returns null on curves and for events
 */
export function intervalOf(frame: Frame, prediction: PredictionFrame): Interval | null {
  if (frame.measurands[prediction.measurand]!.curve) return null;
  if (prediction.interval !== null) return prediction.interval;
  const there = central.get(prediction);
  if (there !== undefined) return there;
  const predictive = predictiveOf(frame, prediction);
  const outside = normalCdf(-frame.document.campaign.rule.coverage);
  const interval =
    predictive === null
      ? null
      : { lower: quantile(predictive, outside), upper: quantile(predictive, 1 - outside) };
  central.set(prediction, interval);
  return interval;
}

/** Neither a prediction nor the campaign's rule changes. */
const central = new WeakMap<PredictionFrame, Interval | null>();

function ofInterval(
  workspace: Workspace,
  prediction: PredictionFrame,
  { combination, interval }: { combination: Combination; interval: Interval },
): Verdict {
  const { frame } = workspace;
  const { measurand, role, tolerance } = prediction;
  const { period } = frame.measurands[measurand]!;
  const { rule } = frame.document.campaign;
  const { value, birgeRatio, pValue } = combination;
  const inflated = pValue !== null && pValue < DISAGREEING;
  const sd = inflated ? combination.sd * birgeRatio! : combination.sd;
  const trueValue: Distribution = inflated
    ? { kind: "normal", mean: value, sd }
    : combination.trueValue;
  const places = placesOf(trueValue, interval, { value, period });
  const ownP =
    tolerance.family === "normal"
      ? (fit(workspace, onlyMeasurand(workspace, measurand, role))?.pValue ?? null)
      : null;
  const referenceShare = combination.limitsOnly
    ? shareOfReference(frame, measurand, interval)
    : null;
  const word = intervalWord(places, rule, { ownP, referenceShare });
  const tension = tensionOf(workspace, prediction, { value, sd, interval });
  return { word, conformance: places.inside, tension, value, sd, inflated };
}

/** The distance from what is expected in the two uncertainties together; from hard bounds in u. */
function tensionOf(
  { frame }: Workspace,
  prediction: PredictionFrame,
  { value, sd, interval }: { value: number; sd: number; interval: Interval },
): number | null {
  const { period } = frame.measurands[prediction.measurand]!;
  if ("width" in prediction.tolerance) {
    return tensionOfBounds(interval, { value, sd, period });
  }
  const predictive = predictiveOf(frame, prediction);
  if (predictive === null) return null;
  return wrapped(value - meanOf(predictive), period) / Math.hypot(sd, sdOf(predictive));
}

function ofExact(
  workspace: Workspace,
  prediction: PredictionFrame,
  combination: Combination | null,
): Verdict {
  const { frame, sums } = workspace;
  const { measurand, role, expected, natural } = prediction;
  const { scale, period } = frame.measurands[measurand]!;
  const lnB = logBayesFactor(workspace, measurand, role);
  const p =
    scale === "count" && natural !== null
      ? exactRateP(natural, countsOf(sums.measurands[measurand]!.kept))
      : (fit(workspace, onlyMeasurand(workspace, measurand, role))?.pValue ?? null);
  const word = exactWord(p, lnB);
  if (combination === null) return withoutResult(word);
  const { value, sd } = combination;
  const tension = expected === null ? null : wrapped(value - expected, period) / sd;
  return { word, conformance: null, tension, value, sd, inflated: false };
}

function ofEvent(
  workspace: Workspace,
  { measurand, role }: PredictionFrame,
  probability: number,
): Verdict {
  const occurred = occurredProbability(reportsOf(workspace, measurand));
  const lnB = logBayesFactor(workspace, measurand, role);
  const { rule } = workspace.frame.document.campaign;
  const word = eventWord(probability, rule, { occurred, lnB });
  return { ...withoutResult(word), conformance: calledProbability(probability, occurred) };
}

/** Against the reference, on this measurand alone. */
function logBayesFactor(workspace: Workspace, measurand: number, role: number): number {
  const own = evidence(workspace, onlyMeasurand(workspace, measurand, role)).ln;
  return own - evidence(workspace, onlyMeasurand(workspace, measurand, 0)).ln;
}

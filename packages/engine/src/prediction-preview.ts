import type { CampaignDocument, Hypothesis, Prediction } from "@weighhouse/campaign/document";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import { compileFrame } from "./compile-frame";
import { quantile } from "./distribution/distribution";
import type { Frame, PredictionFrame } from "./frame";
import { naturalInterval } from "./natural-interval";
import { predictiveOf } from "./predictive";
import { edgesOf } from "./preview-edges";
import { isOutsideReference, referenceRange, shareOfReference } from "./reference-range";
import { toNatural } from "./scoring-space";
import { outcomeOf, type Supposed } from "./supposed-reading";
import { intervalOf } from "./verdict";

export interface PredictionDraft {
  measurand: string;
  expected: Prediction["expected"];
  tolerance: Prediction["tolerance"];
  /** Of an event. */
  probability?: Prediction["probability"];
  /** What its expression names, beside conditions. */
  hypothesis?: Pick<Hypothesis, "parameters" | "tables" | "ensemble">;
}

/** Values in the observable's unit (natural also on log10); an unbounded end is null. */
export interface ValueRange {
  lower: number | null;
  upper: number | null;
}

export interface PredictionPreview {
  /** The number expected; else the predictive's median, of hard bounds the middle; an event's probability. */
  expected: number;
  /** What the verdict takes as the prediction's interval; lower = upper for an exact prediction. */
  interval: ValueRange;
  /** The reference's range: its bounds, or 4 sd about its mean. */
  reference: ValueRange;
  /** Share of the reference's probability inside the interval, 0 to 1; 0 for an exact prediction. */
  shareOfReference: number;
  /** The value expected lies outside the reference's range. */
  outsideReference: boolean;
  /**
   * Measured values that would pass, an end that none is beyond null; null where a measurement so
   * coarse can't pass. Counts for a rate; 1 and 0 are an event's yes and no.
   */
  passes: ValueRange | null;
  /** Measured values at or below `below`, or at or above `above`, would fail; null where none would. */
  fails: { below: number | null; above: number | null };
  /** log10 B against the reference if the value measured is the one expected. */
  hit: { log10BayesFactor: number };
  /** log10 B against the reference at the failing value nearest to the expected one; null where none would. */
  miss: { value: number; log10BayesFactor: number } | null;
}

/**
 * What one measurement would make of a prediction, by the same steps that score one.
 *
 * @param supposed its sd in the observable's unit (dex on log10); of a count its exposure (1 unless
 *   given), of an event its efficiency and false alarm (1 and 0 unless given); on a curve its
 *   conditions (the middle of the measurand's ranges unless given)
 */
export function previewPrediction(
  document: CampaignDocument,
  draft: PredictionDraft,
  supposed: Supposed,
): Result<PredictionPreview> {
  const { sd } = supposed;
  if (!(sd > 0 && Number.isFinite(sd))) return refused("/sd", String(sd), "a number above 0");
  if (![...document.measurands, ...document.derived].some(({ key }) => key === draft.measurand)) {
    return refused("/measurand", `"${draft.measurand}"`, "a measurand of the campaign");
  }
  const compiled = compileFrame(documentOf(document, draft));
  if (!compiled.ok) return { ok: false, problems: compiled.problems.map(ofDraft) };
  const frame = compiled.value;
  return { ok: true, value: preview(frame, frame.hypotheses[0]!.predictions[0]!, supposed) };
}

function refused(pointer: string, found: string, allowed: string): Result<never> {
  return { ok: false, problems: [{ pointer, code: "out-of-range", found, allowed }] };
}

/**
 * The campaign with this measurand and a hypothesis of this prediction only. A derived value is
 * looked at as if it were measured itself.
 */
function documentOf(document: CampaignDocument, draft: PredictionDraft): CampaignDocument {
  const { measurand, expected, tolerance, probability = null, hypothesis } = draft;
  const prediction: Prediction = {
    measurand,
    expected,
    tolerance,
    probability,
    given: null,
    decisive: false,
    registeredAt: null,
  };
  const derived = document.derived.find(({ key }) => key === measurand);
  const own = document.measurands.filter(({ key }) => key === measurand);
  return {
    ...document,
    measurands: derived === undefined ? own : [asMeasured(derived)],
    derived: [],
    correlations: [],
    measurements: [],
    hypotheses: [
      {
        key: "draft",
        title: "draft",
        statement: null,
        team: null,
        group: null,
        weight: 1,
        withheld: [],
        parameters: hypothesis?.parameters ?? [],
        tables: hypothesis?.tables ?? [],
        ensemble: hypothesis?.ensemble ?? null,
        toleranceCorrelations: [],
        registeredAt: null,
        predictions: [prediction],
      },
    ],
  };
}

function asMeasured({
  key,
  observable,
  title,
  reference,
}: CampaignDocument["derived"][number]): CampaignDocument["measurands"][number] {
  return {
    key,
    observable,
    title,
    window: { from: null, to: null },
    where: {},
    shape: "constant",
    scatter: 0,
    reference,
    thresholds: [],
    closed: null,
    firstPostedAt: null,
    firstObservedAt: null,
  };
}

/** Pointers below the one prediction become pointers into the draft. */
function ofDraft(problem: Problem): Problem {
  return { ...problem, pointer: problem.pointer.replace(/^\/hypotheses\/0\/predictions\/0/, "") };
}

function preview(frame: Frame, prediction: PredictionFrame, supposed: Supposed): PredictionPreview {
  if (prediction.tolerance.family === "event") return ofEvent(frame, prediction, supposed);
  const { scale } = frame.measurands[0]!;
  const middle = middleOf(frame, prediction);
  const range = referenceRange(frame, 0);
  const interval = naturalInterval(frame, prediction);
  const bounds = intervalOf(frame, prediction);
  const counting = scale === "count";
  const exposure = supposed.exposure ?? 1;
  const measured = (y: number) => outcomeOf(frame, prediction, { y, supposed });
  // Of counts everything is looked at in whole ones.
  const expected = counting ? Math.round(middle * exposure) : middle;
  const edges = edgesOf(measured, {
    middle: expected,
    reach: reachOf(frame, { bounds, range, sd: supposed.sd }) * (counting ? exposure : 1),
    whole: counting,
  });
  const natural = (y: number | null) => (y === null ? null : toNatural(y, scale));
  const nearest = nearestTo(expected, edges.failsBelow, edges.failsAbove);
  return {
    expected: prediction.natural ?? toNatural(middle, scale),
    interval: { lower: finite(interval.lower), upper: finite(interval.upper) },
    reference: { lower: finite(natural(range.lower)), upper: finite(natural(range.upper)) },
    shareOfReference: bounds === null ? 0 : shareOfReference(frame, 0, bounds),
    outsideReference: isOutsideReference(frame, 0, { y: middle }),
    passes:
      edges.passes === null
        ? null
        : { lower: natural(edges.passes.lower), upper: natural(edges.passes.upper) },
    fails: { below: natural(edges.failsBelow), above: natural(edges.failsAbove) },
    hit: { log10BayesFactor: measured(expected).log10B() },
    miss:
      nearest === null
        ? null
        : { value: toNatural(nearest, scale), log10BayesFactor: measured(nearest).log10B() },
  };
}

/** What is expected, in scoring space; the middle of hard bounds. */
function middleOf(frame: Frame, prediction: PredictionFrame): number {
  const { expected, tolerance } = prediction;
  if (expected !== null) return expected;
  if ("width" in tolerance) return tolerance.lower + tolerance.width / 2;
  const predictive = predictiveOf(frame, prediction);
  if (predictive !== null) return quantile(predictive, 0.5);
  const range = referenceRange(frame, 0);
  return (range.lower + range.upper) / 2;
}

/** Beyond this nothing changes any more: further out every verdict is the same. */
function reachOf(
  frame: Frame,
  {
    bounds,
    range,
    sd,
  }: {
    bounds: { lower: number; upper: number } | null;
    range: { lower: number; upper: number };
    sd: number;
  },
): number {
  const { period } = frame.measurands[0]!;
  if (period > 0) return period / 2;
  const width = bounds === null ? 0 : bounds.upper - bounds.lower;
  const wide = [width, range.upper - range.lower].filter(Number.isFinite);
  return 50 * sd + 15 * Math.max(0, ...wide);
}

/** A report that comes out as called, or not. */
function ofEvent(frame: Frame, prediction: PredictionFrame, supposed: Supposed): PredictionPreview {
  const { tolerance } = prediction;
  const probability = tolerance.family === "event" ? tolerance.probability : 0.5;
  const called = probability >= 0.5 ? 1 : 0;
  const [hit, miss] = [called, 1 - called].map((y) =>
    outcomeOf(frame, prediction, { y, supposed }),
  );
  const none = { lower: null, upper: null };
  return {
    expected: probability,
    interval: none,
    reference: none,
    shareOfReference: 0,
    outsideReference: false,
    passes: hit!.word() === "pass" ? { lower: called, upper: called } : null,
    fails: {
      below: miss!.word() === "fail" && called === 1 ? 0 : null,
      above: miss!.word() === "fail" && called === 0 ? 1 : null,
    },
    hit: { log10BayesFactor: hit!.log10B() },
    miss: { value: 1 - called, log10BayesFactor: miss!.log10B() },
  };
}

function finite(value: number | null): number | null {
  return value !== null && Number.isFinite(value) ? value : null;
}

function nearestTo(expected: number, a: number | null, b: number | null): number | null {
  if (a === null || b === null) return a ?? b;
  return Math.abs(a - expected) < Math.abs(b - expected) ? a : b;
}

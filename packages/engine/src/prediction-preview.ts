import type { CampaignDocument, Prediction, Scale } from "@weighhouse/campaign/document";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import type { VerdictWord } from "@weighhouse/campaign/standings";
import { evidence } from "./evidence";
import { compileFrame } from "./compile-frame";
import type { Frame, PredictionFrame } from "./frame";
import { naturalInterval, toNatural } from "./scoring-space";
import { addReading, createSums } from "./sums";
import { isOutsideReference, referenceRange } from "./tally";
import { verdictOf } from "./verdict";
import { shareOfReference } from "./warnings";
import { createWorkspace, onlyMeasurand } from "./workspace";

export interface PredictionDraft {
  measurand: string;
  expected: Prediction["expected"];
  tolerance: Prediction["tolerance"];
}

/** Values in the observable's unit (natural also on log10); an unbounded end is null. */
export interface ValueRange {
  lower: number | null;
  upper: number | null;
}

export interface PredictionPreview {
  expected: number;
  /** What the verdict takes as the prediction's interval; lower = upper for an exact prediction. */
  interval: ValueRange;
  /** The reference's range: its bounds, or 4 sd about its mean. */
  reference: ValueRange;
  /** Share of the reference's probability inside the interval, 0 to 1; 0 for an exact prediction. */
  shareOfReference: number;
  /** The value expected lies outside the reference's range. */
  outsideReference: boolean;
  /** Measured values that would pass; null where a measurement so coarse can't pass. */
  passes: ValueRange | null;
  /** Measured values at or below `below`, or at or above `above`, would fail; null where none would. */
  fails: { below: number | null; above: number | null };
  /** log10 B against the reference if the value measured is the one expected. */
  hit: { log10BayesFactor: number };
  /** log10 B against the reference at the failing value nearest to the expected one; null where none would. */
  miss: { value: number; log10BayesFactor: number } | null;
}

/**
 * What one measurement of that sd (in the observable's unit; dex on log10) would make of a
 * prediction, by the same steps that score one.
 */
export function previewPrediction(
  document: CampaignDocument,
  draft: PredictionDraft,
  { sd }: { sd: number },
): Result<PredictionPreview> {
  if (!(sd > 0 && Number.isFinite(sd))) return refused("/sd", String(sd), "a number above 0");
  if (!document.measurands.some(({ key }) => key === draft.measurand)) {
    return refused("/measurand", `"${draft.measurand}"`, "a measurand of the campaign");
  }
  const compiled = compileFrame(documentOf(document, draft));
  if (!compiled.ok) return { ok: false, problems: compiled.problems.map(ofDraft) };
  const frame = compiled.value;
  return { ok: true, value: preview(frame, frame.hypotheses[0]!.predictions[0]!, sd) };
}

function refused(pointer: string, found: string, allowed: string): Result<never> {
  return { ok: false, problems: [{ pointer, code: "out-of-range", found, allowed }] };
}

/** The campaign with this measurand and a hypothesis of this prediction only. */
function documentOf(document: CampaignDocument, draft: PredictionDraft): CampaignDocument {
  const prediction: Prediction = {
    ...draft,
    probability: null,
    given: null,
    decisive: false,
    registeredAt: null,
  };
  return {
    ...document,
    measurands: document.measurands.filter(({ key }) => key === draft.measurand),
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
        parameters: [],
        tables: [],
        ensemble: null,
        toleranceCorrelations: [],
        registeredAt: null,
        predictions: [prediction],
      },
    ],
  };
}

/** Pointers below the one prediction become pointers into the draft. */
function ofDraft(problem: Problem): Problem {
  return { ...problem, pointer: problem.pointer.replace(/^\/hypotheses\/0\/predictions\/0/, "") };
}

function preview(frame: Frame, prediction: PredictionFrame, sd: number): PredictionPreview {
  const { scale } = frame.measurands[0]!;
  const expected = prediction.expected!;
  const measured = (y: number) => ifMeasured(frame, prediction, { y, sd });
  const range = referenceRange(frame, 0);
  // Beyond this nothing changes any more: further out every verdict is the same.
  const reach = 50 * (sd + prediction.sd!) + 2 * (range.upper - range.lower);
  const failsAbove = edgeOfFailing(measured, expected, reach);
  const failsBelow = edgeOfFailing(measured, expected, -reach);
  const natural = (y: number | null) => (y === null ? null : toNatural(y, scale));
  const nearest = nearestTo(expected, failsBelow, failsAbove);
  return {
    expected: prediction.natural!,
    interval: naturalInterval(prediction, scale),
    reference: naturalRange(range, scale),
    shareOfReference: shareOfReference(frame, 0, prediction.interval!),
    outsideReference: isOutsideReference(frame, 0, expected),
    passes:
      measured(expected).word === "pass"
        ? naturalRange(
            {
              lower: edgeOfPassing(measured, expected, -reach),
              upper: edgeOfPassing(measured, expected, reach),
            },
            scale,
          )
        : null,
    fails: { below: natural(failsBelow), above: natural(failsAbove) },
    hit: { log10BayesFactor: measured(expected).log10B },
    miss:
      nearest === null
        ? null
        : { value: toNatural(nearest, scale), log10BayesFactor: measured(nearest).log10B },
  };
}

function naturalRange({ lower, upper }: { lower: number; upper: number }, scale: Scale) {
  return { lower: toNatural(lower, scale), upper: toNatural(upper, scale) };
}

interface Outcome {
  word: VerdictWord;
  log10B: number;
}

function ifMeasured(
  frame: Frame,
  prediction: PredictionFrame,
  { y, sd }: { y: number; sd: number },
): Outcome {
  const sums = createSums(frame.measurands);
  const told = { form: "value" as const, y, variance: sd * sd };
  const reading = { id: "measured", measurand: 0, told, conditions: [], loadings: [] };
  addReading(sums, { ...reading, unknownUnit: null, provisional: false }, frame);
  const workspace = createWorkspace(frame, sums);
  const own = evidence(workspace, onlyMeasurand(workspace, 0, prediction.role)).ln;
  const reference = evidence(workspace, onlyMeasurand(workspace, 0, 0)).ln;
  return {
    word: verdictOf(workspace, prediction).word,
    log10B: (own - reference) / Math.LN10,
  };
}

/** The furthest value from the expected one, that way, that still passes. */
function edgeOfPassing(measured: (y: number) => Outcome, from: number, reach: number): number {
  return bisect((y) => measured(y).word === "pass", from, from + reach);
}

/** The nearest value to the expected one, that way, that fails; null where even the far end doesn't. */
function edgeOfFailing(
  measured: (y: number) => Outcome,
  from: number,
  reach: number,
): number | null {
  if (measured(from + reach).word !== "fail") return null;
  if (measured(from).word === "fail") return from;
  return bisect((y) => measured(y).word === "fail", from + reach, from);
}

/** The last value on the way from `inside`, where the test holds, to `outside`, where it doesn't. */
function bisect(holds: (y: number) => boolean, inside: number, outside: number): number {
  let [a, b] = [inside, outside];
  for (let step = 0; step < 200; step += 1) {
    const middle = (a + b) / 2;
    if (middle === a || middle === b) break;
    if (holds(middle)) a = middle;
    else b = middle;
  }
  return a;
}

function nearestTo(expected: number, a: number | null, b: number | null): number | null {
  if (a === null || b === null) return a ?? b;
  return Math.abs(a - expected) < Math.abs(b - expected) ? a : b;
}

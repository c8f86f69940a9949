import type {
  CampaignDocument,
  Hypothesis,
  Measurand,
  Observable,
} from "@weighhouse/campaign/document";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import {
  noiseIndex,
  type Frame,
  type HypothesisFrame,
  type MeasurandFrame,
  type PredictionFrame,
} from "./frame";
import { unsupportedParts } from "./not-yet-supported";
import { predictionFrame } from "./prediction-frame";
import { toScoringSpace, widthInScoringSpace, type ScoredScale } from "./scoring-space";
import { oversizedParts } from "./sizes";

/** @returns the frame, or everything in the document that this version can't score */
export function compileFrame(whole: CampaignDocument): Result<Frame> {
  const problems = [...unsupportedParts(whole), ...oversizedParts(whole)];
  if (problems.length > 0) return { ok: false, problems };
  const document = { ...whole, measurements: [] };
  const measurands = compileMeasurands(document);
  const measurandIndex = indexOf(measurands);
  const hypotheses: HypothesisFrame[] = [];
  for (let i = 0; i < document.hypotheses.length; i += 1) {
    const compiled = compileHypothesis(document, i, { measurands, measurandIndex });
    if (compiled.ok) hypotheses.push(compiled.value);
    else problems.push(...compiled.problems);
  }
  if (problems.length > 0) return { ok: false, problems };
  const errors = document.sharedErrors.map(({ key, sd, per }) => ({
    key,
    sd,
    perBatch: per === "batch",
  }));
  const relative = document.sharedErrors.filter((error) => error.relative);
  const value: Frame = {
    document,
    measurands,
    measurandIndex,
    errors,
    errorIndex: indexOf(errors),
    relativeErrors: new Set(relative.map(({ key }) => key)),
    hypotheses,
  };
  return { ok: true, value };
}

function indexOf(parts: { key: string }[]): Map<string, number> {
  return new Map(parts.map(({ key }, i) => [key, i]));
}

function compileMeasurands(document: CampaignDocument): MeasurandFrame[] {
  const observables = new Map(document.observables.map((one) => [one.key, one]));
  return document.measurands.map((measurand) =>
    compileMeasurand(measurand, observables.get(measurand.observable)!),
  );
}

function compileMeasurand(measurand: Measurand, observable: Observable): MeasurandFrame {
  const scale = observable.scale as ScoredScale;
  const frame: MeasurandFrame = {
    key: measurand.key,
    unit: observable.unit,
    scale,
    closed: measurand.closed !== null,
    scatterVariance: measurand.scatter ** 2,
    roles: [],
    noises: [0],
    thresholds: measurand.thresholds.map(({ key, value }) => ({
      key,
      value: toScoringSpace(value, scale),
    })),
    firstPostedAt: measurand.firstPostedAt,
    firstObservedAt: measurand.firstObservedAt,
  };
  const reference = measurand.reference!;
  const noise = noiseIndex(frame, reference.scatter ** 2);
  if (reference.family === "uniform") {
    const lower = toScoringSpace(reference.lower, scale);
    const upper = toScoringSpace(reference.upper, scale);
    const width = widthInScoringSpace(reference, scale);
    frame.roles.push({ kind: "uniform", lower, upper, width, noise });
  } else if (reference.family === "normal") {
    const mean = toScoringSpace(reference.mean, scale);
    frame.roles.push({ kind: "normal", mean, sd: reference.sd, noise });
  }
  return frame;
}

function compileHypothesis(
  document: CampaignDocument,
  i: number,
  { measurands, measurandIndex }: Pick<Frame, "measurands" | "measurandIndex">,
): Result<HypothesisFrame> {
  const hypothesis = document.hypotheses[i]!;
  const pointer = `/hypotheses/${i}`;
  const problems: Problem[] = [];
  const predictions: PredictionFrame[] = [];
  hypothesis.predictions.forEach((prediction, j) => {
    const measurand = measurandIndex.get(prediction.measurand)!;
    const compiled = predictionFrame(prediction, {
      pointer: `${pointer}/predictions/${j}`,
      tables: hypothesis.tables,
      measurand,
      frame: measurands[measurand]!,
      coverage: document.campaign.rule.coverage,
    });
    if (compiled.ok) predictions.push(compiled.value);
    else problems.push(...compiled.problems);
  });
  if (problems.length > 0) return { ok: false, problems };
  const value: HypothesisFrame = {
    key: hypothesis.key,
    pointer,
    share: hypothesis.weight / groupSize(document.hypotheses, hypothesis),
    predictions,
    withheld: hypothesis.withheld.map((key) => measurandIndex.get(key)!),
    registeredAt: hypothesis.registeredAt,
  };
  return { ok: true, value };
}

function groupSize(hypotheses: Hypothesis[], { group }: Hypothesis): number {
  return group === null ? 1 : hypotheses.filter((other) => other.group === group).length;
}

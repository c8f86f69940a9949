import type {
  CampaignDocument,
  Ensemble,
  Hypothesis,
  Observable,
  Reference,
} from "@weighhouse/campaign/document";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import type {
  EnsembleFrame,
  Frame,
  HypothesisFrame,
  MeasurandFrame,
  PredictionFrame,
} from "./frame";
import { designsOf } from "./model/fixed-designs";
import { predictionFrame } from "./prediction-frame";
import { referenceRole } from "./reference-role";
import { toScoringSpace } from "./scoring-space";
import { oversizedParts } from "./sizes";

/** @returns the frame, or everything in the document that can't be scored */
export function compileFrame(whole: CampaignDocument): Result<Frame> {
  const problems = oversizedParts(whole);
  if (problems.length > 0) return { ok: false, problems };
  const document = { ...whole, measurements: [] };
  const measurands = compileMeasurands(document);
  measurands.forEach(({ derived }, m) => {
    for (const { measurand } of derived?.from ?? []) measurands[measurand]!.usedBy.push(m);
  });
  const measurandIndex = indexOf(measurands);
  const hypotheses: HypothesisFrame[] = [];
  for (let i = 0; i < document.hypotheses.length; i += 1) {
    const compiled = compileHypothesis(document, i, { measurands, measurandIndex });
    if (compiled.ok) hypotheses.push(compiled.value);
    else problems.push(...compiled.problems);
  }
  if (problems.length > 0) return { ok: false, problems };
  measurands.forEach((one, m) => (one.designs = designsOf(one, m, hypotheses)));
  const errors = document.sharedErrors.map(({ key, sd, per, relative }) => ({
    key,
    sd,
    perBatch: per === "batch",
    relative,
  }));
  const value: Frame = {
    document,
    measurands,
    measurandIndex,
    errors,
    errorIndex: indexOf(errors),
    hypotheses,
    correlated: new Set(document.correlations.flatMap(({ a, b }) => [a, b])),
  };
  return { ok: true, value };
}

function indexOf(parts: { key: string }[]): Map<string, number> {
  return new Map(parts.map(({ key }, i) => [key, i]));
}

function compileMeasurands(document: CampaignDocument): MeasurandFrame[] {
  const observables = new Map(document.observables.map((one) => [one.key, one]));
  const { measurands, derived } = document;
  const places = new Map(measurands.map(({ key }, i) => [key, i]));
  return [
    ...measurands.map((one, i) => {
      const observable = observables.get(one.observable)!;
      const { scale } = observable;
      return withReference(observable, one.reference, one.where, {
        ...frameOf(one.key, `/measurands/${i}`, observable),
        curve: one.shape === "curve",
        apart: one.shape === "curve" || scale === "cyclic",
        closed: one.closed !== null,
        scatterVariance: one.scatter ** 2,
        thresholds: one.thresholds.map(({ key, value }) => ({
          key,
          value: toScoringSpace(value, scale),
        })),
        firstPostedAt: one.firstPostedAt,
        firstObservedAt: one.firstObservedAt,
      });
    }),
    ...derived.map((one, i) => {
      const observable = observables.get(one.observable)!;
      const { expression, scored } = one;
      const from = Object.entries(one.from).map(([name, key]) => ({
        name,
        measurand: places.get(key)!,
      }));
      return withReference(
        observable,
        one.reference,
        {},
        {
          ...frameOf(one.key, `/derived/${i}`, observable),
          derived: { expression, from, scored },
        },
      );
    }),
  ];
}

function frameOf(key: string, pointer: string, observable: Observable): MeasurandFrame {
  return {
    key,
    pointer,
    unit: observable.unit,
    scale: observable.scale,
    period: observable.scale === "cyclic" ? observable.period! : 0,
    curve: false,
    conditions: observable.conditions.map(({ key: condition }) => condition),
    closed: false,
    scatterVariance: 0,
    roles: [],
    natural: null,
    noises: [0],
    apart: false,
    designs: [],
    thresholds: [],
    firstPostedAt: null,
    firstObservedAt: null,
    derived: null,
    usedBy: [],
  };
}

function withReference(
  observable: Observable,
  reference: Reference | null,
  where: Record<string, [number | null, number | null]>,
  frame: MeasurandFrame,
): MeasurandFrame {
  frame.roles.push(referenceRole(frame, { reference, observable, where }));
  if (reference?.family === "uniform") {
    frame.natural = { lower: reference.lower, upper: reference.upper };
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
  const correlated = new Set(hypothesis.toleranceCorrelations.flatMap(({ a, b }) => [a, b]));
  hypothesis.predictions.forEach((prediction, j) => {
    const measurand = measurandIndex.get(prediction.measurand)!;
    const { given } = prediction;
    const compiled = predictionFrame(prediction, {
      pointer: `${pointer}/predictions/${j}`,
      hypothesis: i,
      declared: hypothesis,
      measurand,
      frame: measurands[measurand]!,
      given:
        given === null
          ? null
          : { measurand: measurandIndex.get(given.measurand)!, occurred: given.occurred },
      correlated: correlated.has(prediction.measurand),
      coverage: document.campaign.rule.coverage,
    });
    if (compiled.ok) predictions.push(compiled.value);
    else problems.push(...compiled.problems);
  });
  if (problems.length > 0) return { ok: false, problems };
  const place = (key: string) => hypothesis.predictions.findIndex((one) => one.measurand === key);
  const value: HypothesisFrame = {
    key: hypothesis.key,
    pointer,
    share: hypothesis.weight / groupSize(document.hypotheses, hypothesis),
    parameters: hypothesis.parameters.map(({ key, prior }) => ({ key, prior })),
    ensemble: ensembleFrame(hypothesis.ensemble),
    toleranceCorrelations: hypothesis.toleranceCorrelations.map(({ a, b, coefficient }) => ({
      a: place(a),
      b: place(b),
      coefficient,
    })),
    predictions,
    withheld: hypothesis.withheld.map((key) => measurandIndex.get(key)!),
    registeredAt: hypothesis.registeredAt,
  };
  return { ok: true, value };
}

function groupSize(hypotheses: Hypothesis[], { group }: Hypothesis): number {
  return group === null ? 1 : hypotheses.filter((other) => other.group === group).length;
}

/** @returns null for no columns, which say nothing */
function ensembleFrame(ensemble: Ensemble | null): EnsembleFrame | null {
  const columns = Object.values(ensemble?.columns ?? {}).map((column) => Float64Array.from(column));
  const rows = columns[0]?.length ?? 0;
  if (rows === 0) return null;
  const weights = Float64Array.from(ensemble!.weights ?? columns[0]!.map(() => 1));
  let total = 0;
  for (const weight of weights) total += weight;
  return { columns, logWeights: weights.map((weight) => Math.log(weight / total)) };
}

import type { CampaignDocument, Measurement, Prediction } from "@weighhouse/campaign/document";
import { below } from "@weighhouse/campaign/pointer";
import type { Problem } from "@weighhouse/campaign/problem";

/** What this version can't score yet, refused by name, which stands in the line of text too. */
export function notYetSupported(pointer: string, found: string, allowed: string): Problem {
  const code = "not-yet-supported";
  return { pointer, code, found: `${found} (${code})`, allowed: `${allowed} in this version` };
}

/**
 * Everything in a document, its measurements apart, that this version would have to score and
 * can't. Parts that nothing scored touches are let through: they change no number.
 */
export function unsupportedParts(document: CampaignDocument): Problem[] {
  return [
    ...unsupportedMeasurands(document),
    ...document.derived.map((_, i) =>
      notYetSupported(`/derived/${i}`, "a derived value", "measurands only"),
    ),
    ...(document.correlations.length > 0
      ? [notYetSupported("/correlations", "correlated measurements", "an empty list")]
      : []),
    ...document.hypotheses.flatMap((_, i) => unsupportedHypothesis(document, i)),
  ];
}

function unsupportedMeasurands(document: CampaignDocument): Problem[] {
  const problems: Problem[] = [];
  const used = new Set(document.measurands.map(({ observable }) => observable));
  document.observables.forEach(({ key, scale }, i) => {
    if (!used.has(key) || scale === "linear" || scale === "log10") return;
    problems.push(notYetSupported(`/observables/${i}/scale`, `"${scale}"`, '"linear" or "log10"'));
  });
  document.measurands.forEach(({ shape, reference }, i) => {
    if (shape === "curve") {
      problems.push(notYetSupported(`/measurands/${i}/shape`, '"curve"', '"constant"'));
    }
    if (reference?.family === "polynomial" || reference?.family === "gamma") {
      const at = `/measurands/${i}/reference/family`;
      problems.push(notYetSupported(at, `"${reference.family}"`, '"uniform" or "normal"'));
    }
  });
  return problems;
}

function unsupportedHypothesis(document: CampaignDocument, i: number): Problem[] {
  const hypothesis = document.hypotheses[i]!;
  const at = `/hypotheses/${i}`;
  const problems: Problem[] = [];
  if (hypothesis.parameters.length > 0) {
    const allowed = "predictions without parameters";
    problems.push(notYetSupported(`${at}/parameters`, "free parameters", allowed));
  }
  if (hypothesis.ensemble !== null) {
    problems.push(notYetSupported(`${at}/ensemble`, "an ensemble", "predictions without one"));
  }
  if (hypothesis.toleranceCorrelations.length > 0) {
    const found = "correlated tolerances";
    problems.push(notYetSupported(`${at}/toleranceCorrelations`, found, "an empty list"));
  }
  hypothesis.predictions.forEach((prediction, j) => {
    problems.push(...unsupportedPrediction(prediction, `${at}/predictions/${j}`));
  });
  return problems;
}

function unsupportedPrediction(prediction: Prediction, at: string): Problem[] {
  const problems: Problem[] = [];
  if (prediction.probability !== null) {
    problems.push(notYetSupported(`${at}/probability`, "a probability", "an expected value"));
  }
  if (prediction.given !== null) {
    const allowed = "predictions without a condition";
    problems.push(notYetSupported(`${at}/given`, "a conditional prediction", allowed));
  }
  const { tolerance } = prediction;
  if (tolerance === null) return problems;
  if (tolerance.family !== "normal") {
    const allowed = 'no tolerance (exact) or "normal"';
    problems.push(notYetSupported(`${at}/tolerance/family`, `"${tolerance.family}"`, allowed));
  } else if (tolerance.sharing === "smooth") {
    const allowed = '"common" or "each"';
    problems.push(notYetSupported(`${at}/tolerance/sharing`, '"smooth"', allowed));
  }
  return problems;
}

/** The measurements that count and can't be scored yet, whatever else is wrong with the document. */
export function unsupportedMeasurements(document: CampaignDocument): Problem[] {
  const closed = new Set(
    document.measurands.filter((one) => one.closed !== null).map(({ key }) => key),
  );
  const relative = new Set(
    document.sharedErrors.filter((error) => error.relative).map(({ key }) => key),
  );
  return document.measurements.flatMap((measurement, i) =>
    measurement.setAside !== null || closed.has(measurement.measurand)
      ? []
      : unsupportedMeasurement(measurement, `/measurements/${i}`, relative),
  );
}

const OTHER_FORMS: readonly [keyof Measurement, string][] = [
  ["limit", "a limit"],
  ["plus", "an asymmetric uncertainty"],
  ["minus", "an asymmetric uncertainty"],
  ["noise", "linear noise on a log10 scale"],
  ["occurred", "a report of an event"],
  ["count", "a count"],
];

/** The same for one measurement that counts; `relative` names the relative shared errors. */
export function unsupportedMeasurement(
  measurement: Measurement,
  at: string,
  relative: ReadonlySet<string>,
): Problem[] {
  const problems: Problem[] = [];
  for (const [field, found] of OTHER_FORMS) {
    if (measurement[field] === null) continue;
    problems.push(notYetSupported(below(at, field), found, "a value with sd"));
  }
  if (relative.size === 0) return problems;
  measurement.shared.forEach(({ error }, i) => {
    if (!relative.has(error)) return;
    const found = `"${error}", a relative shared error`;
    problems.push(notYetSupported(below(at, "shared", i, "error"), found, "absolute ones"));
  });
  return problems;
}

import type {
  CampaignDocument,
  Hypothesis,
  Observable,
  Parameter,
  Prior,
  Reference,
  Tolerance,
} from "@weighhouse/campaign/document";

/** All that is uncertain by declaration, made wider or narrower by a factor about its middle. */
export function withTolerances(document: CampaignDocument, factor: number): CampaignDocument {
  const hypotheses = document.hypotheses.map((hypothesis): Hypothesis => ({
    ...hypothesis,
    predictions: hypothesis.predictions.map((prediction) => ({
      ...prediction,
      tolerance:
        prediction.tolerance === null
          ? null
          : widerTolerance(
              prediction.tolerance,
              observableOf(document, prediction.measurand),
              factor,
            ),
    })),
  }));
  return { ...document, hypotheses };
}

/** One-sided tolerances have no width: they stay. */
function widerTolerance(tolerance: Tolerance, observable: Observable, factor: number): Tolerance {
  switch (tolerance.family) {
    case "normal":
    case "gamma":
      return { ...tolerance, sd: tolerance.sd * factor };
    case "interval":
      return { ...tolerance, ...widerRange(tolerance, observable, factor) };
    case "splitNormal":
      return { ...tolerance, plus: tolerance.plus * factor, minus: tolerance.minus * factor };
    case "atMost":
    case "atLeast":
      return tolerance;
  }
}

/** Every reference's width; its scatter stays. */
export function withReferences(document: CampaignDocument, factor: number): CampaignDocument {
  const wider = <Part extends { key: string; reference: Reference | null }>(part: Part): Part => ({
    ...part,
    reference:
      part.reference === null
        ? null
        : widerReference(part.reference, observableOf(document, part.key), factor),
  });
  return {
    ...document,
    measurands: document.measurands.map(wider),
    derived: document.derived.map(wider),
  };
}

function widerReference(reference: Reference, observable: Observable, factor: number): Reference {
  if (reference.family !== "uniform") return { ...reference, sd: reference.sd * factor };
  const { lower, upper } = widerRange(reference, observable, factor);
  return { ...reference, lower: observable.scale === "count" ? Math.max(0, lower) : lower, upper };
}

/** A range about its middle in scoring space; on a circle never more than the whole of it. */
function widerRange(
  { lower, upper }: { lower: number; upper: number },
  { scale, period }: Observable,
  factor: number,
): { lower: number; upper: number } {
  if (scale === "log10") {
    const middle = Math.sqrt(lower) * Math.sqrt(upper);
    const half = (upper / lower) ** (factor / 2);
    return { lower: middle / half, upper: middle * half };
  }
  if (scale === "cyclic" && period !== null) {
    const span = (((upper - lower) % period) + period) % period || period;
    const half = Math.min((span * factor) / 2, (period * (1 - 1e-12)) / 2);
    return { lower: lower + span / 2 - half, upper: lower + span / 2 + half };
  }
  const half = ((upper - lower) * factor) / 2;
  const middle = lower + (upper - lower) / 2;
  return { lower: middle - half, upper: middle + half };
}

/** One parameter's prior. */
export function withPrior(
  document: CampaignDocument,
  { hypothesis, parameter }: { hypothesis: string; parameter: string },
  factor: number,
): CampaignDocument {
  const change = (one: Parameter): Parameter =>
    one.key === parameter ? { ...one, prior: widerPrior(one.prior, factor) } : one;
  const hypotheses = document.hypotheses.map((one) =>
    one.key === hypothesis ? { ...one, parameters: one.parameters.map(change) } : one,
  );
  return { ...document, hypotheses };
}

function widerPrior(prior: Prior, factor: number): Prior {
  switch (prior.family) {
    case "normal":
    case "halfnormal":
      return { ...prior, sd: prior.sd * factor };
    case "lognormal":
      return { ...prior, sdLog10: prior.sdLog10 * factor };
    case "uniform": {
      const half = ((prior.upper - prior.lower) * factor) / 2;
      const middle = prior.lower + (prior.upper - prior.lower) / 2;
      return { ...prior, lower: middle - half, upper: middle + half };
    }
    case "loguniform": {
      const middle = Math.sqrt(prior.lower) * Math.sqrt(prior.upper);
      const half = (prior.upper / prior.lower) ** (factor / 2);
      return { ...prior, lower: middle / half, upper: middle * half };
    }
    case "fixed":
      return prior;
  }
}

function observableOf({ measurands, derived, observables }: CampaignDocument, key: string) {
  const part = [...measurands, ...derived].find((one) => one.key === key)!;
  return observables.find((one) => one.key === part.observable)!;
}

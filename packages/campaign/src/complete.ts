import { conditionFromTime } from "./conditions";
import type {
  CampaignDocument,
  DerivedForm,
  DocumentForm,
  Hypothesis,
  Measurand,
  Measurement,
  Observable,
} from "./document";
import { earlier } from "./instants";

/**
 * Fills what depends on other parts: units, conditions computed from time, posting times,
 * registration times, the first dates of measurands, which derived values are scored. Both a
 * document read from a file and one folded from a ledger pass through here.
 *
 * @param form the caller's own: its measurements, which may be very many, are filled in place
 */
export function completeDocument(form: DocumentForm): CampaignDocument {
  const observables = new Map(form.observables.map((one) => [one.key, one]));
  const observableOf = new Map<string, Observable>();
  for (const measurand of form.measurands) {
    const observable = observables.get(measurand.observable);
    if (observable !== undefined) observableOf.set(measurand.key, observable);
  }
  for (const one of form.measurements) completeMeasurement(one, observableOf.get(one.measurand));
  return {
    ...form,
    measurands: completeMeasurands(form.measurands, form.measurements),
    derived: form.derived.map((one) => completeDerived(one, form.hypotheses)),
    hypotheses: form.hypotheses.map(completeHypothesis),
  };
}

function completeMeasurement(measurement: Measurement, observable: Observable | undefined): void {
  measurement.postedAt ??= measurement.observedAt;
  if (observable === undefined) return;
  measurement.unit ??= observable.unit;
  const { observedAt } = measurement;
  if (observedAt === null) return;
  for (const condition of observable.conditions) {
    if (condition.time === null || condition.key in measurement.conditions) continue;
    const computed = conditionFromTime(condition, observedAt);
    if (computed === null) continue;
    measurement.conditions = { ...measurement.conditions, [condition.key]: computed };
  }
}

function completeMeasurands(given: Measurand[], measurements: Measurement[]): Measurand[] {
  const dates = new Map<string, { posted: string | null; observed: string | null }>();
  for (const { measurand, postedAt, observedAt } of measurements) {
    if (postedAt === null && observedAt === null) continue;
    const first = dates.get(measurand);
    if (first === undefined) {
      dates.set(measurand, { posted: postedAt, observed: observedAt });
    } else {
      if (first.posted !== postedAt) first.posted = earlier(first.posted, postedAt);
      if (first.observed !== observedAt) first.observed = earlier(first.observed, observedAt);
    }
  }
  return given.map((one) => ({
    ...one,
    firstPostedAt: one.firstPostedAt ?? dates.get(one.key)?.posted ?? null,
    firstObservedAt: one.firstObservedAt ?? dates.get(one.key)?.observed ?? null,
  }));
}

function completeDerived(given: DerivedForm, hypotheses: Hypothesis[]) {
  if (given.scored !== null) return { ...given, scored: given.scored };
  const inputs = new Set(Object.values(given.from));
  const predicted = hypotheses.some(({ predictions }) =>
    predictions.some(({ measurand }) => inputs.has(measurand)),
  );
  return { ...given, scored: !predicted };
}

function completeHypothesis(given: Hypothesis): Hypothesis {
  const predictions = given.predictions.map((one) => ({
    ...one,
    registeredAt: one.registeredAt ?? given.registeredAt,
  }));
  return { ...given, predictions };
}

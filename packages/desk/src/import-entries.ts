import type {
  CampaignDocument,
  Hypothesis,
  Measurand,
  Measurement,
  Prediction,
} from "@weighhouse/campaign/document";
import type { MeasurementContent, Payload } from "@weighhouse/campaign/entries";
import type { NewEntry } from "./document-after";
import { measurementEntries } from "./measurement-entries";
import { isPast } from "./time";

/**
 * The entries, after the opening one, that make a ledger of a campaign document: declarations, then
 * hypotheses, then registration's close where its date has passed, then measurements. So every
 * prediction stands before every measurement, as the document has it of most; what the document
 * says of its own dates is kept as claimed and counts for nothing.
 *
 * @param now an instant; registration closed before it is closed by an entry
 */
export function entriesOfDocument(document: CampaignDocument, now: string): NewEntry[] {
  const { campaign, measurands } = document;
  return [
    ...document.observables.map(declared("observable.declared")),
    ...measurands.map(measurandEntry),
    ...document.derived.map(declared("derived.declared")),
    ...document.sharedErrors.map(declared("shared-error.declared")),
    ...document.facilities.map(declared("facility.declared")),
    ...document.teams.map(declared("team.joined")),
    ...document.hypotheses.map(hypothesisEntry),
    ...(isPast(campaign.registrationCloses, now)
      ? [{ kind: "registration.closed", payload: { by: "coordinator" } } as const]
      : []),
    ...measurementEntries(document.measurements.map(measurementContent), document.correlations),
    ...measurands.flatMap(closingEntry),
  ];
}

type Declared =
  | "observable.declared"
  | "derived.declared"
  | "shared-error.declared"
  | "facility.declared"
  | "team.joined";

const declared =
  <K extends Declared>(kind: K) =>
  (payload: Payload<K>) =>
    ({ kind, payload }) as NewEntry;

function measurandEntry(measurand: Measurand): NewEntry {
  const { closed: _, firstPostedAt, firstObservedAt, ...content } = measurand;
  const dated = firstPostedAt !== null || firstObservedAt !== null;
  const claimed = dated ? { firstPostedAt, firstObservedAt } : null;
  return { kind: "measurand.declared", payload: { ...content, claimed } };
}

function hypothesisEntry(hypothesis: Hypothesis): NewEntry {
  const { registeredAt, predictions, ...content } = hypothesis;
  const dates = predictions.flatMap((one) =>
    one.registeredAt !== null && one.registeredAt !== registeredAt
      ? [[one.measurand, one.registeredAt] as const]
      : [],
  );
  const dated = registeredAt !== null || dates.length > 0;
  return {
    kind: "hypothesis.registered",
    payload: {
      ...content,
      predictions: predictions.map(undated),
      claimed: dated ? { registeredAt, predictions: Object.fromEntries(dates) } : null,
    },
  };
}

function undated(prediction: Prediction) {
  const { registeredAt: _, ...content } = prediction;
  return content;
}

function measurementContent({ postedAt, ...content }: Measurement): MeasurementContent {
  return { ...content, claimed: postedAt === null ? null : { postedAt } };
}

/** Closed after its measurements: they stay on record, not counted. */
function closingEntry({ key, closed }: Measurand): NewEntry[] {
  return closed ? [{ kind: "measurand.closed", payload: { key, ...closed } }] : [];
}

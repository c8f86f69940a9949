import type { EntryKind } from "./entries";
import {
  amendedCampaign,
  citedStandings,
  closedRegistration,
  restoredLedger,
} from "./entry-rules/campaign";
import {
  closedMeasurand,
  declaredAgain,
  declaredMeasurand,
  objectedReference,
  proposedMeasurand,
} from "./entry-rules/declarations";
import {
  amendedHypothesis,
  registeredHypothesis,
  retiredHypothesis,
} from "./entry-rules/hypotheses";
import {
  correctedMeasurement,
  postedMeasurements,
  setAsideMeasurement,
  withdrawnMeasurements,
} from "./entry-rules/measurements";
import { fault } from "./entry-rules/rule";
import type { Rule } from "./entry-rules/rule";
import {
  revealedMeasurement,
  revealedPrediction,
  sealedMeasurement,
  sealedPrediction,
} from "./entry-rules/seals";
import type { RecordOf } from "./ledger-record";
import { CAMPAIGN_PART } from "./parts";
import type { PartsBefore } from "./parts";
import type { Problem } from "./problem";

/**
 * The rules that bind an entry to those before it. One function for all: a use-case asks it before
 * it appends, the store under the campaign's lock, and whoever folds a ledger that he was given.
 *
 * @param record its payload already read
 * @returns the fault, with its pointer into the payload, or null
 */
export function brokenRule(before: PartsBefore, record: RecordOf<EntryKind>): Problem | null {
  const opened = before.get("campaign", CAMPAIGN_PART) !== null;
  if (opened === (record.kind === "campaign.opened")) {
    return fault("", "contradiction", record.kind, "campaign.opened first, and there only");
  }
  const rule = rules[record.kind] as Rule<EntryKind>;
  return rule(before, record);
}

const rules: { [K in EntryKind]: Rule<K> } = {
  "campaign.opened": () => null,
  "campaign.amended": amendedCampaign,
  "observable.declared": (before, { payload }) => declaredAgain(before, "observable", payload),
  "measurand.declared": declaredMeasurand,
  "measurand.closed": closedMeasurand,
  "derived.declared": (before, { payload }) =>
    before.get("measurand", payload.key) === null
      ? declaredAgain(before, "derived", payload)
      : fault("/key", "duplicate", payload.key, "a key that no measurand has"),
  "shared-error.declared": (before, { payload }) => declaredAgain(before, "sharedError", payload),
  "facility.declared": (before, { payload }) => declaredAgain(before, "facility", payload),
  "team.joined": (before, { payload }) => declaredAgain(before, "team", payload),
  "measurand.proposed": proposedMeasurand,
  "reference.objected": objectedReference,
  "hypothesis.registered": registeredHypothesis,
  "hypothesis.amended": amendedHypothesis,
  "hypothesis.retired": retiredHypothesis,
  "prediction.sealed": sealedPrediction,
  "prediction.revealed": revealedPrediction,
  "registration.closed": closedRegistration,
  "measurements.posted": postedMeasurements,
  "measurement.corrected": correctedMeasurement,
  "measurements.withdrawn": withdrawnMeasurements,
  "measurement.set-aside": setAsideMeasurement,
  "measurement.sealed": sealedMeasurement,
  "measurement.revealed": revealedMeasurement,
  "remark.made": (_before, { seq, payload: { on } }) =>
    on < seq ? null : fault("/on", "out-of-range", String(on), `an earlier entry, below ${seq}`),
  "standings.cited": citedStandings,
  "ledger.restored": restoredLedger,
};

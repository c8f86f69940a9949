import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { HypothesisContent, MeasurementContent, Payload } from "@weighhouse/campaign/entries";
import { compareInstants } from "@weighhouse/campaign/instants";
import type { Order, Standings } from "@weighhouse/campaign/standings";
import { counted, judged } from "./line";
import type { CheckLine } from "./line";
import { STANDINGS } from "../layout";

/** When something was put on record. */
type Filed = { seq: number; at: string };

/** What the ledger knows of the measurements of one measurand, withdrawn and corrected ones too. */
type Posted = { measurand: string; first: Filed; observedAt: (string | null)[] };

/**
 * Each verdict's order, by the numbers and times of the entries themselves: not by the document's
 * dates, which the fold made, and not by the engine.
 */
export function checkOrder(
  records: readonly LedgerRecord[],
  document: CampaignDocument,
  standings: Standings,
): CheckLine {
  const postings = postingsOf(records);
  const inputs = new Map(document.derived.map(({ key, from }) => [key, Object.values(from)]));
  const closes = document.campaign.registrationCloses;
  const faults: string[] = [];
  let after = 0;
  for (const [index, row] of standings.verdicts.entries()) {
    const filed = filedAt(records, document, row);
    if (filed === "no prediction") continue;
    const place = `${STANDINGS}, /verdicts/${index}/order (${row.hypothesis} on ${row.measurand})`;
    if (filed === "not in the ledger") {
      faults.push(`${place}: no entry files this prediction at the time in the document`);
      continue;
    }
    const posted = (inputs.get(row.measurand) ?? [row.measurand]).flatMap(
      (measurand) => postings.get(measurand) ?? [],
    );
    const known = knownTimes(document, posted);
    const found = orderOf(filed, { posted, known, closes });
    if (found.order === "after") after += 1;
    if (found.order !== row.order) {
      faults.push(`${place}: found ${row.order}, but ${found.because}`);
    }
  }
  const detail = `${counted(standings.verdicts.length, "verdict")}, ${after} of them on predictions filed after data`;
  return judged("before and after data", faults, detail);
}

/** A measurement that a correction moves here was on record since it was posted elsewhere. */
function postingsOf(records: readonly LedgerRecord[]): Map<string, Posted> {
  const postings = new Map<string, Posted>();
  const firstOf = new Map<string, Filed>();
  for (const record of records) {
    for (const { id, measurand, observedAt } of measurementsIn(record)) {
      const first = firstOf.get(id) ?? { seq: record.seq, at: record.at };
      firstOf.set(id, first);
      const posted = postings.get(measurand) ?? { measurand, first, observedAt: [] };
      posted.observedAt.push(observedAt);
      if (first.seq < posted.first.seq) posted.first = first;
      postings.set(measurand, posted);
    }
  }
  return postings;
}

type Dated = { id: string; measurand: string; observedAt: string | null };

/** A sealed measurement counts as posted when it is revealed; a correction may change its time. */
function measurementsIn({ kind, payload }: LedgerRecord): Dated[] {
  switch (kind) {
    case "measurements.posted":
      return (payload as Payload<"measurements.posted">).measurements;
    case "measurement.corrected":
      return [(payload as Payload<"measurement.corrected">).measurement];
    case "measurement.revealed": {
      const { content } = payload as Payload<"measurement.revealed">;
      const { id, measurand, observedAt = null } = content as Partial<MeasurementContent>;
      return id === undefined || measurand === undefined ? [] : [{ id, measurand, observedAt }];
    }
    default:
      return [];
  }
}

/** The entry that filed a prediction as it stands in the document. */
function filedAt(
  records: readonly LedgerRecord[],
  document: CampaignDocument,
  row: { hypothesis: string; measurand: string },
): Filed | "no prediction" | "not in the ledger" {
  const prediction = document.hypotheses
    .find(({ key }) => key === row.hypothesis)
    ?.predictions.find(({ measurand }) => measurand === row.measurand);
  if (prediction === undefined) return "no prediction";
  const record = records.find(
    (one) => one.at === prediction.registeredAt && files(one, row.hypothesis, row.measurand),
  );
  return record === undefined ? "not in the ledger" : { seq: record.seq, at: record.at };
}

/** A sealed prediction is filed by its seal, though its content comes later. */
function files({ kind, payload }: LedgerRecord, hypothesis: string, measurand: string): boolean {
  if (kind === "hypothesis.registered" || kind === "hypothesis.amended") {
    return (payload as HypothesisContent).key === hypothesis;
  }
  if (kind !== "prediction.sealed") return false;
  const sealed = payload as Payload<"prediction.sealed">;
  return sealed.hypothesis === hypothesis && sealed.measurand === measurand;
}

/** Since when results that still stand were known before they were posted, by their own word. */
function knownTimes({ measurements }: CampaignDocument, posted: readonly Posted[]): string[] {
  const measurands = new Set(posted.map(({ measurand }) => measurand));
  return measurements.flatMap(({ measurand, knownSince }) =>
    knownSince !== null && measurands.has(measurand) ? [knownSince] : [],
  );
}

function orderOf(
  filed: Filed,
  {
    posted,
    known,
    closes,
  }: { posted: readonly Posted[]; known: readonly string[]; closes: string | null },
): { order: Order; because: string } {
  const by = `entry ${filed.seq} of ${filed.at} files it`;
  if (closes !== null && compareInstants(filed.at, closes) > 0) {
    return { order: "after", because: `${by}, after registration's close at ${closes}` };
  }
  const first = posted.find((one) => one.first.seq < filed.seq)?.first;
  if (first !== undefined) {
    return { order: "after", because: `${by}, after entry ${first.seq} posted a measurement` };
  }
  const since = known.find((time) => compareInstants(time, filed.at) <= 0);
  if (since !== undefined) {
    return { order: "after", because: `${by}, when a measurement was known since ${since}` };
  }
  // An undated observation can't be said to come before the filing; its posting didn't.
  const seen = posted
    .flatMap(({ observedAt }) => observedAt)
    .find((at) => at !== null && compareInstants(at, filed.at) <= 0);
  if (seen === undefined) {
    return { order: "before-observation", because: `${by}, before every dated observation` };
  }
  return {
    order: "before-posting",
    because: `${by}, before the posting and not before the observation of ${seen}`,
  };
}

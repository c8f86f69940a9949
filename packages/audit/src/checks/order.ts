import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { HypothesisContent, Payload } from "@weighhouse/campaign/entries";
import { compareInstants } from "@weighhouse/campaign/instants";
import type { Order, Standings } from "@weighhouse/campaign/standings";
import { counted, judged } from "./line";
import type { CheckLine } from "./line";
import { STANDINGS } from "../layout";

/** When something was put on record. */
type Filed = { seq: number; at: string };

/** What the ledger knows of the measurements of one measurand. */
type Posted = { first: Filed; observedAt: (string | null)[]; knownSince: string[] };

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
    const found = orderOf(filed, posted, closes);
    if (found.order === "after") after += 1;
    if (found.order !== row.order) {
      faults.push(`${place}: found ${row.order}, but ${found.because}`);
    }
  }
  const detail = `${counted(standings.verdicts.length, "verdict")}, ${after} of them on predictions filed after data`;
  return judged("before and after data", faults, detail);
}

function postingsOf(records: readonly LedgerRecord[]): Map<string, Posted> {
  const postings = new Map<string, Posted>();
  for (const { kind, seq, at, payload } of records) {
    if (kind !== "measurements.posted") continue;
    for (const measurement of (payload as Payload<"measurements.posted">).measurements) {
      const posted = postings.get(measurement.measurand) ?? {
        first: { seq, at },
        observedAt: [],
        knownSince: [],
      };
      posted.observedAt.push(measurement.observedAt);
      if (measurement.knownSince !== null) posted.knownSince.push(measurement.knownSince);
      postings.set(measurement.measurand, posted);
    }
  }
  return postings;
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
    ({ kind, at, payload }) =>
      at === prediction.registeredAt &&
      (kind === "hypothesis.registered" || kind === "hypothesis.amended") &&
      (payload as HypothesisContent).key === row.hypothesis,
  );
  return record === undefined ? "not in the ledger" : { seq: record.seq, at: record.at };
}

function orderOf(
  filed: Filed,
  posted: readonly Posted[],
  closes: string | null,
): { order: Order; because: string } {
  const by = `entry ${filed.seq} of ${filed.at} files it`;
  if (closes !== null && compareInstants(filed.at, closes) > 0) {
    return { order: "after", because: `${by}, after registration's close at ${closes}` };
  }
  for (const { first, knownSince } of posted) {
    if (first.seq < filed.seq) {
      return { order: "after", because: `${by}, after entry ${first.seq} posted a measurement` };
    }
    const known = knownSince.find((since) => compareInstants(since, filed.at) <= 0);
    if (known !== undefined) {
      return { order: "after", because: `${by}, when a measurement was known since ${known}` };
    }
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

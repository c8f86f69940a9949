import type { CampaignDocument } from "@weighhouse/campaign/document";
import { LEDGER_ID } from "./archive-input";
import type { Posting } from "./synthetic-ledger";

/**
 * A campaign document as the transactions that would have made it: what was declared, the hypotheses,
 * then the measurements, so that all was predicted before it was measured.
 */
export function transactionsOf(document: CampaignDocument, perPosting = 100): Posting[][] {
  const declare = (kind: Posting["kind"], parts: readonly object[]): Posting[] =>
    parts.map((payload) => ({ kind, payload }));
  const opened = { ...document.campaign, ledger: LEDGER_ID, clock: "real", visibility: "public" };
  const measurands = document.measurands.map(
    ({ closed: _closed, firstPostedAt: _posted, firstObservedAt: _observed, ...one }) => one,
  );
  const hypotheses = document.hypotheses.map(({ registeredAt: _filed, predictions, ...one }) => ({
    ...one,
    predictions: predictions.map(({ registeredAt: _at, ...prediction }) => prediction),
  }));
  const measurements = document.measurements.map(({ postedAt: _posted, ...one }) => one);
  return [
    [
      { kind: "campaign.opened", payload: opened },
      ...declare("observable.declared", document.observables),
      ...declare("measurand.declared", measurands),
      ...declare("derived.declared", document.derived),
      ...declare("shared-error.declared", document.sharedErrors),
      ...declare("facility.declared", document.facilities),
      ...declare("team.joined", document.teams),
    ],
    ...declare("hypothesis.registered", hypotheses).map((posting) => [posting]),
    ...chunks(measurements, perPosting).map((chunk): Posting[] => [
      { kind: "measurements.posted", payload: { measurements: chunk } },
    ]),
  ];
}

function chunks<T>(list: readonly T[], size: number): T[][] {
  return Array.from({ length: Math.ceil(list.length / size) }, (_, index) =>
    list.slice(index * size, (index + 1) * size),
  );
}

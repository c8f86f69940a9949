import type { CampaignDocument } from "@weighhouse/campaign/document";
import { postMeasurements as storeMeasurements } from "@weighhouse/store/post-measurements";
import type { Posted } from "@weighhouse/store/post-measurements";
import { readEverything } from "@weighhouse/store/read-document";
import type { Access } from "./access";
import { checkAfter } from "./check-after";
import type { Desk } from "./desk";
import { invalid } from "./desk-error";
import { judgeRows } from "./judge-rows";
import type { JudgedRow } from "./judge-rows";
import { measurementEntries } from "./measurement-entries";
import { inConflict } from "./posted-rows";
import type { Correlations } from "./posted-rows";
import type { ReadRows } from "./read-rows";
import { authorOf } from "./record-entries";
import type { Place } from "./row-source";
import { onStore } from "./store-refusals";
import { timeAt } from "./time";

/** Rows that are all at hand. */
export async function postTable(
  desk: Desk,
  access: Access,
  input: {
    document: CampaignDocument;
    table: ReadRows;
    place: Place;
    correlations: Correlations;
  },
): Promise<Posted> {
  const { document, table, place, correlations } = input;
  const campaign = access.campaign.key;
  const by = authorOf(access);
  const at = timeAt(desk);
  const judged = await judgeRows(desk, table, { document, access, at });
  const faults = [
    ...table.problems.map(({ line, ...fault }) => place.text(fault, line)),
    ...judged.rows.flatMap(({ problems, line }) => problems.map((one) => place.row(one, line))),
    ...judged.problems,
  ];
  if (faults.length > 0) throw invalid(faults);
  if (correlations.length > 0) await checkCorrelations(desk, access, judged.rows, correlations);
  const posted = await onStore(() =>
    storeMeasurements(desk.store, {
      campaign,
      by,
      measurements: judged.rows.flatMap(({ measurement }) => measurement ?? []),
      correlations,
      clock: desk.clock,
    }),
  );
  if (posted.conflicts.length > 0) throw inConflict(posted.conflicts, place);
  return posted;
}

/** Correlations are judged with all that they are between, also what was posted before. */
async function checkCorrelations(
  desk: Desk,
  access: Access,
  rows: JudgedRow[],
  correlations: Correlations,
): Promise<void> {
  const { key } = access.campaign;
  const { parts, size } = await onStore(() => readEverything(desk.store, key));
  const fresh = rows.flatMap(({ fate, measurement }) =>
    fate === "new" && measurement !== null ? [measurement] : [],
  );
  // Those that are there already are compared, and their rules were asked when they came.
  const known = new Set(
    parts.flatMap(({ part, key: pair }) => (part === "correlation" ? pair : [])),
  );
  const between = correlations.filter(({ a, b }) => !known.has(`${a} ${b}`));
  if (fresh.length === 0 || between.length === 0) return;
  const moment = { by: authorOf(access), at: timeAt(desk), size };
  checkAfter(parts, measurementEntries(fresh, between), { ...moment, fields: [] });
}

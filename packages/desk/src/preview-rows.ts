import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Problem } from "@weighhouse/campaign/problem";
import { scoreCampaign } from "@weighhouse/engine/score";
import { readDocument } from "@weighhouse/store/read-document";
import type { TableColumn, TableProblem } from "@weighhouse/tables/table";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { documentAfter, partsOf } from "./document-after";
import type { Moment } from "./document-after";
import { judgeRows } from "./judge-rows";
import type { JudgedRow } from "./judge-rows";
import { measurementEntries } from "./measurement-entries";
import { noneRefused } from "./post-rows";
import type { Correlations, TellProgress } from "./post-rows";
import type { ReadRows } from "./read-rows";
import { authorOf } from "./record-entries";
import type { RowSource } from "./row-source";
import { standingsChanges } from "./standings-changes";
import type { StandingsChanges } from "./standings-changes";
import { onStore } from "./store-refusals";
import { timeAt } from "./time";

export type PreviewedRows = {
  /** The ledger's size that this was found at. */
  size: number;
  /** The file's columns in order, and the field that each is read as; null: kept in `extra`. */
  columns: TableColumn[];
  counts: Record<JudgedRow["fate"], number>;
  /** What is wrong with the text as a whole, or with its rows taken together. */
  problems: TableProblem[];
  /** Whether posting would be taken: nothing refused, nothing in conflict, something new. */
  postable: boolean;
  /** What posting would change; null where it would not be taken. */
  changes: StandingsChanges | null;
};

/**
 * What posting rows would do, to each and to the standings. Enters nothing.
 *
 * @param row told of each, in the rows' order, once all are judged
 */
export async function previewRows(
  desk: Desk,
  actor: Actor,
  input: {
    key: string;
    source: RowSource;
    correlations?: Correlations;
    row: (row: JudgedRow) => void | Promise<void>;
    tell?: TellProgress;
  },
): Promise<PreviewedRows> {
  const { key, source, correlations = [], row: told, tell = () => {} } = input;
  const access = await enter(desk, actor, key, "preview-measurements");
  const { document, size } = await onStore(() => readDocument(desk.store, key));
  const { pieces, columns, problems: unreadable } = source(document);
  const rows: ReadRows["rows"] = [];
  for await (const piece of pieces) {
    for (const row of piece.rows) rows.push(row);
    tell({ stage: "read", rows: rows.length, bytes: piece.bytes });
  }
  const at = timeAt(desk);
  const table = { rows, columns, problems: noneRefused(rows, unreadable) };
  const judged = await judgeRows(desk, table, { document, access, at });
  for (const row of judged.rows) await told(row);
  const problems = [...table.problems, ...judged.problems.map(wholeProblem)];
  const counts = countFates(judged.rows);
  const postable =
    problems.length === 0 && counts.refused === 0 && counts.conflict === 0 && counts.new > 0;
  const moment = { by: authorOf(access), at, size };
  const changes = postable ? changesOf(document, judged.rows, { correlations, moment }) : null;
  return { size, columns, counts, problems, postable, changes };
}

function countFates(rows: JudgedRow[]): PreviewedRows["counts"] {
  const counts = { new: 0, alreadyThere: 0, conflict: 0, refused: 0 };
  for (const { fate } of rows) counts[fate] += 1;
  return counts;
}

function wholeProblem({ found, allowed }: Problem): TableProblem {
  return { line: null, column: null, found, allowed };
}

/** The standings with and without the new rows, both scored now so that nothing else differs. */
function changesOf(
  document: CampaignDocument,
  rows: JudgedRow[],
  { correlations, moment }: { correlations: Correlations; moment: Moment },
): StandingsChanges | null {
  const fresh = rows.flatMap(({ fate, measurement }) =>
    fate === "new" && measurement ? [measurement] : [],
  );
  const entries = measurementEntries(fresh, correlations);
  const before = scoreCampaign(document);
  const after = scoreCampaign(documentAfter(partsOf(document), entries, moment));
  return before.ok && after.ok ? standingsChanges(before.value, after.value) : null;
}

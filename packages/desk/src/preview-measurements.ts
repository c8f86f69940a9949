import * as z from "zod";
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
import { measurementSource } from "./measurement-source";
import { parseInput } from "./parse-input";
import { readRows } from "./read-rows";
import { authorOf } from "./record-entries";
import { standingsChanges } from "./standings-changes";
import type { StandingsChanges } from "./standings-changes";
import { onStore } from "./store-refusals";
import { timeAt } from "./time";

export const previewMeasurementsInput = z.strictObject({
  key: z.string(),
  source: measurementSource,
});

export type MeasurementsPreview = {
  /** The ledger's size that this was found at. */
  size: number;
  rows: JudgedRow[];
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

/** What posting would do, row by row and to the standings. Enters nothing. */
export async function previewMeasurements(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof previewMeasurementsInput>,
): Promise<MeasurementsPreview> {
  const { key, source } = parseInput(previewMeasurementsInput, input);
  const access = await enter(desk, actor, key, "preview-measurements");
  const by = authorOf(access);
  const { document, size } = await onStore(() => readDocument(desk.store, key));
  const moment = { by, at: timeAt(desk), size };
  const table = readRows(source, document);
  const judged = await judgeRows(desk, table, { document, access, at: moment.at });
  const problems = [...table.problems, ...judged.problems.map(wholeProblem)];
  const counts = countFates(judged.rows);
  const postable =
    problems.length === 0 && counts.refused === 0 && counts.conflict === 0 && counts.new > 0;
  return {
    size,
    rows: judged.rows,
    columns: table.columns,
    counts,
    problems,
    postable,
    changes: postable ? changesOf(document, judged.rows, moment) : null,
  };
}

function countFates(rows: JudgedRow[]): MeasurementsPreview["counts"] {
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
  moment: Moment,
): StandingsChanges | null {
  const fresh = rows.flatMap(({ fate, measurement }) =>
    fate === "new" && measurement ? [measurement] : [],
  );
  const before = scoreCampaign(document);
  const after = scoreCampaign(documentAfter(partsOf(document), measurementEntries(fresh), moment));
  return before.ok && after.ok ? standingsChanges(before.value, after.value) : null;
}

import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Problem } from "@weighhouse/campaign/problem";
import { scoreCampaign } from "@weighhouse/engine/score";
import { readDocument } from "@weighhouse/store/read-document";
import type { TableColumn, TableProblem } from "@weighhouse/tables/table";
import { enter } from "./access";
import type { Access } from "./access";
import type { Actor, Desk } from "./desk";
import { documentAfter, partsOf } from "./document-after";
import type { Moment } from "./document-after";
import { judgeRows } from "./judge-rows";
import type { JudgedRow } from "./judge-rows";
import { measurementEntries } from "./measurement-entries";
import { previewUpload } from "./preview-upload";
import type { Correlations, TellProgress } from "./posted-rows";
import type { PreviewedRow, PreviewedRows } from "./previewed-rows";
import { authorOf } from "./record-entries";
import type { RowSource } from "./row-source";
import { standingsChanges } from "./standings-changes";
import type { StandingsChanges } from "./standings-changes";
import { noneRefused, takeFew } from "./take-few";
import { withUpload } from "./with-upload";
import type { Piece } from "./stage-lines";
import { stageRows } from "./stage-rows";
import { onStore } from "./store-refusals";
import { timeAt } from "./time";

type PreviewInput = {
  key: string;
  source: RowSource;
  correlations?: Correlations;
  row: (row: PreviewedRow) => void | Promise<void>;
  tell?: TellProgress;
};

/**
 * What posting rows would do, to each and to the standings. Enters nothing.
 *
 * @param row told of each, in the rows' order, once all are judged
 */
export async function previewRows(
  desk: Desk,
  actor: Actor,
  input: PreviewInput,
): Promise<PreviewedRows> {
  const { key, source, correlations = [], row: told, tell = () => {} } = input;
  const access = await enter(desk, actor, key, "preview-measurements");
  const { document, size } = await onStore(() => readDocument(desk.store, key));
  const { pieces, columns, problems: unreadable } = source(document);
  const { rows, rest, bytes } = await takeFew(pieces, tell);
  if (rest !== null && unreadable.length === 0 && correlations.length === 0) {
    return previewStaged(desk, { document, access }, { ...input, tell, pieces: rest, columns });
  }
  for await (const piece of rest ?? []) for (const row of piece.rows) rows.push(row);
  tell({ stage: "check", rows: rows.length, bytes });
  const at = timeAt(desk);
  const table = { rows, columns, problems: noneRefused(rows, unreadable) };
  const judged = await judgeRows(desk, table, { document, access, at });
  for (const row of judged.rows) {
    await told({ ...row, measurand: row.measurement?.measurand ?? null });
  }
  const problems = [...table.problems, ...judged.problems.map(wholeProblem)];
  const counts = countFates(judged.rows);
  const postable =
    problems.length === 0 && counts.refused === 0 && counts.conflict === 0 && counts.new > 0;
  const moment = { by: authorOf(access), at, size };
  const changes = postable ? changesOf(document, judged.rows, { correlations, moment }) : null;
  return { size, columns, counts, problems, postable, changes };
}

/** Many rows are staged, as for a posting, and cleared away again. */
async function previewStaged(
  desk: Desk,
  against: { document: CampaignDocument; access: Access },
  input: Pick<PreviewInput, "row"> & {
    tell: TellProgress;
    pieces: AsyncIterable<Piece>;
    columns: TableColumn[];
  },
): Promise<PreviewedRows> {
  const { tell, pieces, columns, row } = input;
  return withUpload(desk, against.access, async (upload) => {
    const to = { ...upload, part: 0 };
    const staged = await stageRows(desk, against, { to, pieces, columns, tell });
    const { problems, bytes } = staged;
    const together = async () => problems;
    const { document } = against;
    const preview = await previewUpload(desk, document, { upload, together, bytes, row, tell });
    return { ...preview, columns };
  });
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

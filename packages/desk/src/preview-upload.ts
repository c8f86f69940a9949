import { completeDocument } from "@weighhouse/campaign/complete";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { addMeasurements, createState, standingsOf } from "@weighhouse/engine/state";
import type { EngineState } from "@weighhouse/engine/state";
import { compareStaged } from "@weighhouse/store/compare-staged";
import { countStaged, stagedContents, stagedRows } from "@weighhouse/store/read-staged";
import type { StagedRow } from "@weighhouse/store/read-staged";
import type { Upload } from "@weighhouse/store/uploads";
import { documentMeasurement } from "./apply-rules";
import type { Desk } from "./desk";
import { rowProblems } from "./post-upload";
import type { Together } from "./post-upload";
import type { TellProgress } from "./posted-rows";
import type { PreviewedRow, PreviewedRows } from "./previewed-rows";
import { standingsChanges } from "./standings-changes";
import type { StandingsChanges } from "./standings-changes";
import { onStore } from "./store-refusals";
import { timeAt } from "./time";

/** What posting what is staged would do, row by row and to the standings. Enters nothing. */
export async function previewUpload(
  desk: Desk,
  document: CampaignDocument,
  input: {
    upload: Upload;
    together: Together;
    bytes: number;
    row: (row: PreviewedRow) => void | Promise<void>;
    tell: TellProgress;
  },
): Promise<Omit<PreviewedRows, "columns">> {
  const { upload, bytes, row: told, tell } = input;
  const { store } = desk;
  tell({ stage: "check", rows: 0, bytes });
  const { size, counts: found } = await onStore(() => compareStaged(store, upload));
  for await (const rows of stagedRows(store, upload, "all")) {
    for (const row of rows) await told(previewedRow(row));
  }
  const { rows, refused } = await countStaged(store, upload);
  const { alreadyThere, conflict, repeated } = found;
  const counts = {
    new: rows - refused - alreadyThere - conflict - repeated,
    alreadyThere,
    conflict,
    refused: refused + repeated,
  };
  const problems = (await input.together()).map((one) => ({
    line: null,
    column: null,
    found: one.found,
    allowed: one.allowed,
  }));
  const postable =
    problems.length === 0 && counts.refused === 0 && conflict === 0 && counts.new > 0;
  const changes = postable ? await changesOf(desk, document, upload) : null;
  return { size, counts, problems, postable, changes };
}

function previewedRow(row: StagedRow): PreviewedRow {
  const { part, line, id, measurand, notes, fate } = row;
  return {
    ...(part === 0 ? {} : { part }),
    line,
    id,
    fate: fate === "repeated" ? "refused" : fate,
    problems: rowProblems(row),
    conflict: row.fate === "conflict" ? row.about : null,
    measurand,
    measurement: null,
    notes,
  };
}

/** The new rows are taken into the engine's state some at a time, as the scorer takes postings. */
async function changesOf(
  desk: Desk,
  document: CampaignDocument,
  upload: Upload,
): Promise<StandingsChanges | null> {
  const created = createState(document);
  if (!created.ok) return null;
  const before = standingsOf(created.value);
  const at = timeAt(desk);
  let state: EngineState = created.value;
  for await (const contents of stagedContents(desk.store, upload)) {
    const measurements = contents.map((content) => documentMeasurement(content, at));
    const completed = completeDocument({ ...document, measurements, correlations: [] });
    const added = addMeasurements(state, completed.measurements);
    if (!added.ok) return null;
    state = added.value;
  }
  return standingsChanges(before, standingsOf(state));
}

import type { CampaignDocument } from "@weighhouse/campaign/document";
import { readDeclarations } from "@weighhouse/store/read-document";
import { enter } from "./access";
import type { Access } from "./access";
import { appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { postTable } from "./post-table";
import { postUpload } from "./post-upload";
import type { Correlations, PostedRows, TellProgress } from "./posted-rows";
import type { ReadRows } from "./read-rows";
import type { Place, RowSource } from "./row-source";
import type { Piece } from "./stage-lines";
import { stageRows } from "./stage-rows";
import { onStore } from "./store-refusals";
import { noneRefused, takeFew } from "./take-few";
import { withUpload } from "./with-upload";

const MOST_IDS = 1000;

/**
 * Enters the measurements of a table, a list or a stream, all of them or none.
 *
 * @throws {DeskError} `invalid` with a problem for each field that is refused; `conflict` with one
 *   for each measurement whose id is taken by another content
 */
export async function postRows(
  desk: Desk,
  actor: Actor,
  input: { key: string; source: RowSource; correlations?: Correlations; tell?: TellProgress },
): Promise<PostedRows> {
  const { key, source, correlations = [], tell = () => {} } = input;
  const access = await enter(desk, actor, key, "post-measurements");
  const { document } = await onStore(() => readDeclarations(desk.store, key));
  const { pieces, columns, problems, place } = source(document);
  const { rows, rest, bytes } = await takeFew(pieces, tell);
  if (rest !== null && problems.length === 0 && correlations.length === 0) {
    return postStaged(desk, { document, access }, { pieces: rest, columns, place, tell });
  }
  for await (const piece of rest ?? []) for (const row of piece.rows) rows.push(row);
  tell({ stage: "enter", rows: rows.length, bytes });
  const posted = await postTable(desk, access, {
    document,
    table: { rows, columns, problems: noneRefused(rows, problems) },
    place,
    correlations,
  });
  return {
    key,
    posted: posted.posted.length,
    alreadyThere: posted.alreadyThere.length,
    appended: posted.appended && appended(key, posted.appended),
    ids: posted.posted.length > MOST_IDS ? null : posted.posted,
  };
}

async function postStaged(
  desk: Desk,
  against: { document: CampaignDocument; access: Access },
  input: {
    pieces: AsyncIterable<Piece>;
    columns: ReadRows["columns"];
    place: Place;
    tell: TellProgress;
  },
): Promise<PostedRows> {
  const { pieces, columns, place, tell } = input;
  return withUpload(desk, against.access, async (upload) => {
    const to = { ...upload, part: 0 };
    const staged = await stageRows(desk, against, { to, pieces, columns, tell });
    const { problems, bytes } = staged;
    const together = async () => problems;
    return postUpload(desk, against.access, { upload, together, place: () => place, bytes, tell });
  });
}

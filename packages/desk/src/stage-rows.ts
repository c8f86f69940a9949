import type { CampaignDocument } from "@weighhouse/campaign/document";
import { measurandFinder, unitFinder } from "@weighhouse/campaign/measurand-of";
import type { Problem } from "@weighhouse/campaign/problem";
import { PartStaging } from "@weighhouse/store/stage-rows";
import type { Upload } from "@weighhouse/store/uploads";
import type { Access } from "./access";
import { RowRules } from "./apply-rules";
import type { Desk } from "./desk";
import { judgeRow } from "./judge-row";
import type { TellProgress } from "./posted-rows";
import type { ReadRows } from "./read-rows";
import { inColumns } from "./row-source";
import type { Piece } from "./stage-lines";
import { timeAt } from "./time";

export type Staged = {
  rows: number;
  bytes: number;
  /** What is wrong with the rows taken together. */
  problems: Problem[];
};

/**
 * Judges the rows of one part by themselves, as they come, and stages them with their texts and
 * digests: before any lock, and holding a piece or two whatever their number.
 */
export async function stageRows(
  desk: Desk,
  against: { document: CampaignDocument; access: Access },
  input: {
    to: Upload & { part: number };
    pieces: AsyncIterable<Piece>;
    columns: ReadRows["columns"];
    tell: TellProgress;
  },
): Promise<Staged> {
  const { to, pieces, columns, tell } = input;
  const { access, document } = against;
  const find = measurandFinder(document);
  const unitOf = unitFinder(document);
  const rules = new RowRules({ document, at: timeAt(desk) });
  const staging = new PartStaging(desk.store, to);
  const problems: Problem[] = [];
  let read = 0;
  try {
    for await (const { rows, bytes } of pieces) {
      read = bytes;
      const judged = rows.map((row) => judgeRow(row, { access, find, unitOf }));
      const fresh = judged.map(({ row }) => row).filter(({ fate }) => fate === "new");
      problems.push(...rules.apply(fresh));
      await staging.push(
        judged.map(({ row, text }) => {
          const { line, id, measurement, problems: faults, notes } = inColumns(row, columns);
          return { line, id, content: measurement, text, problems: faults, notes };
        }),
      );
      tell({ stage: "read", rows: staging.rows, bytes });
    }
    await staging.end();
  } catch (error) {
    await staging.settle();
    throw error;
  }
  problems.push(...rules.finish());
  return { rows: staging.rows, bytes: read, problems };
}

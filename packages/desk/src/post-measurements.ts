import * as z from "zod";
import { below } from "@weighhouse/campaign/pointer";
import { problemLine } from "@weighhouse/campaign/problem";
import type { Problem } from "@weighhouse/campaign/problem";
import { postMeasurements as storeMeasurements } from "@weighhouse/store/post-measurements";
import type { Conflict } from "@weighhouse/store/post-measurements";
import { readDeclarations } from "@weighhouse/store/read-document";
import { enter } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { DeskError, invalid } from "./desk-error";
import { judgeRows } from "./judge-rows";
import type { JudgedRow } from "./judge-rows";
import { measurementSource } from "./measurement-source";
import type { MeasurementSource } from "./measurement-source";
import { parseInput } from "./parse-input";
import { readRows } from "./read-rows";
import type { RowProblem } from "./read-rows";
import { authorOf } from "./record-entries";
import { onStore } from "./store-refusals";
import { timeAt } from "./time";

export const postMeasurementsInput = z.strictObject({
  key: z.string(),
  source: measurementSource,
});

export type PostedMeasurements = {
  key: string;
  /** Ids of the measurements that were entered. */
  posted: string[];
  /** Ids of those that were there already with the same content. */
  alreadyThere: string[];
  /** The entries that were made; null where everything was there already. */
  appended: Appended | null;
};

/**
 * Enters measurements, all of them or none.
 *
 * @throws {DeskError} `invalid` with a problem for each field that is refused; `conflict` with one
 *   for each measurement whose id is taken by another content
 */
export async function postMeasurements(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof postMeasurementsInput>,
): Promise<PostedMeasurements> {
  const { key, source } = parseInput(postMeasurementsInput, input);
  const access = await enter(desk, actor, key, "post-measurements");
  const by = authorOf(access);
  const { document } = await onStore(() => readDeclarations(desk.store, key));
  const table = readRows(source, document);
  const judged = await judgeRows(desk, table, { document, access, at: timeAt(desk) });
  const place = placeIn(source.from);
  const faults = [
    ...table.problems.map(({ line, ...fault }) => place.text(fault, line)),
    ...judged.rows.flatMap((row) => rowFaults(row, place)),
    ...judged.problems,
  ];
  if (faults.length > 0) throw invalid(faults);
  const posted = await onStore(() =>
    storeMeasurements(desk.store, {
      campaign: key,
      by,
      measurements: judged.rows.flatMap(({ measurement }) => measurement ?? []),
      clock: desk.clock,
    }),
  );
  if (posted.conflicts.length > 0) throw inConflict(posted.conflicts);
  return {
    key,
    posted: posted.posted,
    alreadyThere: posted.alreadyThere,
    appended: posted.appended && appended(key, posted.appended),
  };
}

type Place = {
  row(problem: RowProblem, row: JudgedRow): Problem;
  text(problem: RowProblem, line: number | null): Problem;
};

/** Where a row's fault is in the input: a draft's field, or the text, whose line stands in words. */
function placeIn(from: MeasurementSource["from"]): Place {
  const inText = ({ column, found, allowed }: RowProblem, line: number | null): Problem => {
    const words = [line === null ? "" : `line ${line}`, column === null ? "" : `column ${column}`];
    const where = words.filter((word) => word !== "").join(", ");
    return {
      pointer: "/source/text",
      code: "bad-format",
      found: where ? `${found} (${where})` : found,
      allowed,
    };
  };
  const inDraft = ({ column, found, allowed }: RowProblem, { line }: JudgedRow): Problem => ({
    pointer: below("/source/drafts", line - 1, ...(column?.split(".") ?? [])),
    code: "bad-format",
    found,
    allowed,
  });
  return from === "csv"
    ? { row: (problem, { line }) => inText(problem, line), text: inText }
    : { row: inDraft, text: inText };
}

/** A row in conflict is no fault here: the store finds those under its lock. */
function rowFaults(row: JudgedRow, place: Place): Problem[] {
  return row.problems.map((problem) => place.row(problem, row));
}

function inConflict(conflicts: Conflict[]): DeskError {
  const problems = conflicts.map(({ id, field, there, posted }) => ({
    pointer: "/source",
    code: "duplicate" as const,
    found: `${id} with ${field} ${JSON.stringify(posted)}`,
    allowed: `${field} ${JSON.stringify(there)}, as it is there, or another id`,
  }));
  return new DeskError("conflict", problems.map(problemLine).join("\n"), { problems });
}

import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Payload } from "@weighhouse/campaign/entries";
import { problemLine } from "@weighhouse/campaign/problem";
import { postMeasurements as storeMeasurements } from "@weighhouse/store/post-measurements";
import type { Conflict, Posted } from "@weighhouse/store/post-measurements";
import { readDeclarations, readEverything } from "@weighhouse/store/read-document";
import { enter } from "./access";
import type { Access } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import { checkAfter } from "./check-after";
import type { Actor, Desk } from "./desk";
import { DeskError, invalid } from "./desk-error";
import { judgeRows } from "./judge-rows";
import type { JudgedRow } from "./judge-rows";
import { measurementEntries } from "./measurement-entries";
import type { ReadRows } from "./read-rows";
import { authorOf } from "./record-entries";
import type { Place, RowSource } from "./row-source";
import { onStore } from "./store-refusals";
import { timeAt } from "./time";

export type Correlations = Payload<"measurements.posted">["correlations"];

/** What a posting of many rows is doing, told now and then. */
export type RowProgress = { stage: "read" | "check" | "enter"; rows: number; bytes: number };
export type TellProgress = (progress: RowProgress) => void;

export type PostedRows = {
  key: string;
  /** How many were entered, and how many were there already with the same content. */
  posted: number;
  alreadyThere: number;
  appended: Appended | null;
  /** Ids of those entered, where they are few. */
  ids: string[] | null;
};

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
  const rows: ReadRows["rows"] = [];
  for await (const piece of pieces) {
    for (const row of piece.rows) rows.push(row);
    tell({ stage: "read", rows: rows.length, bytes: piece.bytes });
  }
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

/** No row at all is a problem of the whole. */
export function noneRefused(rows: unknown[], problems: ReadRows["problems"]): ReadRows["problems"] {
  if (rows.length > 0 || problems.length > 0) return problems;
  return [{ line: null, column: null, found: "no row", allowed: "one measurement or more" }];
}

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

/** A row in conflict is found by the store, under its lock. */
export function inConflict(conflicts: Conflict[], place: Place): DeskError {
  const problems = conflicts.map(({ id, field, there, posted }) => ({
    pointer: place.text({ column: null, found: "", allowed: "" }, null).pointer,
    code: "duplicate" as const,
    found: `${id} with ${field} ${JSON.stringify(posted)}`,
    allowed: `${field} ${JSON.stringify(there)}, as it is there, or another id`,
  }));
  return new DeskError("conflict", problems.map(problemLine).join("\n"), { problems });
}

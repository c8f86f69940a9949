import type { CampaignDocument } from "@weighhouse/campaign/document";
import { measurandFinder, unitFinder } from "@weighhouse/campaign/measurand-of";
import type { Problem } from "@weighhouse/campaign/problem";
import { comparePosting } from "@weighhouse/store/post-measurements";
import type { Access } from "./access";
import { RowRules } from "./apply-rules";
import type { Desk } from "./desk";
import { judgeRow } from "./judge-row";
import type { JudgedRow } from "./judge-row";
import type { ReadRows } from "./read-rows";
import { inColumns } from "./row-source";

export type { JudgedRow } from "./judge-row";

export type Judgement = {
  rows: JudgedRow[];
  /** What is wrong with the rows taken together. */
  problems: Problem[];
};

/** Judges rows against the campaign as it is: each new, already there, in conflict or refused. */
export async function judgeRows(
  desk: Desk,
  table: ReadRows,
  against: { document: CampaignDocument; access: Access; at: string },
): Promise<Judgement> {
  const { access, document } = against;
  const find = measurandFinder(document);
  const unitOf = unitFinder(document);
  const judged = table.rows.map((row) => judgeRow(row, { access, find, unitOf }).row);
  const distinct = refuseRepeated(judged);
  await compareWithThere(desk, access, distinct);
  const problems = new RowRules(against).apply(distinct.filter(({ fate }) => fate === "new"));
  return { rows: distinct.map((row) => inColumns(row, table.columns)), problems };
}

function refuseRepeated(rows: JudgedRow[]): JudgedRow[] {
  const lines = new Map<string, number>();
  return rows.map((row) => {
    if (row.id === null || row.fate === "refused") return row;
    const first = lines.get(row.id);
    if (first !== undefined) return repeated(row, first);
    lines.set(row.id, row.line);
    return row;
  });
}

/** A row whose id a line before it has. */
export function repeated(row: JudgedRow, first: number): JudgedRow {
  const found = `${row.id}, which line ${first} has already`;
  return { ...row, fate: "refused", problems: [{ column: "id", found, allowed: "each id once" }] };
}

/** The store's own comparison, so that a preview promises what posting then does. */
async function compareWithThere(desk: Desk, access: Access, rows: JudgedRow[]): Promise<void> {
  const campaign = access.campaign.key;
  const measurements = rows.flatMap(({ fate, measurement }) =>
    fate === "new" && measurement ? [measurement] : [],
  );
  const found = await comparePosting(desk.store, { campaign, measurements });
  const byId = new Map(rows.filter(({ fate }) => fate === "new").map((row) => [row.id, row]));
  for (const id of found.alreadyThere) byId.get(id)!.fate = "alreadyThere";
  for (const conflict of found.conflicts) {
    const row = byId.get(conflict.id)!;
    row.fate = "conflict";
    row.conflict ??= conflict;
  }
}

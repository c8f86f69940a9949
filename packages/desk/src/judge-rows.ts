import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { measurementContentSchema } from "@weighhouse/campaign/entries";
import { readForm } from "@weighhouse/campaign/form";
import type { Problem } from "@weighhouse/campaign/problem";
import { readCampaign } from "@weighhouse/campaign/read";
import { createState } from "@weighhouse/engine/state";
import { payloadText } from "@weighhouse/ledger/entry";
import { LedgerError } from "@weighhouse/ledger/ledger-error";
import { comparePosting, defaultMeasurementId } from "@weighhouse/store/post-measurements";
import type { Conflict } from "@weighhouse/store/post-measurements";
import type { Access } from "./access";
import type { Desk } from "./desk";
import type { ReadRow, ReadRows, RowProblem } from "./read-rows";

/** What would become of one row, were it posted now. */
export type JudgedRow = {
  /** The line in the text, from 1; for drafts their number, from 1. */
  line: number;
  id: string | null;
  fate: "new" | "alreadyThere" | "conflict" | "refused";
  /** Why it is refused, by field; empty otherwise. */
  problems: RowProblem[];
  /** The first field that differs from what is there under that id. */
  conflict: Conflict | null;
  /** As it would be entered; null for a row that doesn't read. */
  measurement: MeasurementContent | null;
};

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
  const judged = refuseRepeated(table.rows.map((row) => readRow(row, against.access)));
  await compareWithThere(desk, against.access, judged);
  const fresh = judged.filter(({ fate }) => fate === "new");
  const problems = applyRules(fresh, against);
  return { rows: judged.map((row) => inColumns(row, table.columns)), problems };
}

/** Stands for an id that is made from the content once that reads. */
const PLACEHOLDER = "-";

/** A row's content with its id and its team filled in, or why it can't be read. */
function readRow({ line, draft, problems }: ReadRow, access: Access): JudgedRow {
  const refused: JudgedRow = {
    line,
    id: null,
    fate: "refused",
    problems,
    conflict: null,
    measurement: null,
  };
  if (draft === null || problems.length > 0) return refused;
  const content = { ...draft, team: draft["team"] ?? access.team };
  const given = draft["id"] ?? null;
  const read = readContent({ ...content, id: given ?? PLACEHOLDER });
  const faults = read.problems.map(rowProblem);
  if (access.role === "member" && content.team !== access.team) {
    const found = JSON.stringify(content.team);
    const own = access.team === null ? "no team: you are of none" : `${access.team}: your own team`;
    faults.push({ column: "team", found, allowed: own });
  }
  if (faults.length > 0) {
    return { ...refused, id: typeof given === "string" ? given : null, problems: faults };
  }
  const unwritable = ledgerFault(read.value!);
  if (unwritable !== null) {
    return { ...refused, id: typeof given === "string" ? given : null, problems: [unwritable] };
  }
  const id = typeof given === "string" ? given : defaultMeasurementId(content);
  const measurement = { ...read.value!, id };
  return { ...refused, id, fate: "new", measurement };
}

/** What no payload can hold: U+0000, half a surrogate pair, more than a payload's size. */
function ledgerFault(measurement: MeasurementContent): RowProblem | null {
  try {
    payloadText({ measurements: [measurement], correlations: [] });
    return null;
  } catch (error) {
    if (!(error instanceof LedgerError)) throw error;
    const [, field, found, allowed] =
      /^\/measurements\/0\/([^/:]+)[^:]*: found (.*); allowed is (.*)$/s.exec(error.message) ?? [];
    if (field !== undefined && found !== undefined && allowed !== undefined) {
      return { column: field, found, allowed };
    }
    return { column: null, found: error.message, allowed: "what a ledger's entry can hold" };
  }
}

/** Most rows are good, and the quick reading tells; only what fails it is read for its words. */
function readContent(content: unknown): { value: MeasurementContent | null; problems: Problem[] } {
  const quick = measurementContentSchema.safeParse(content);
  if (quick.success) return { value: quick.data, problems: [] };
  return { value: null, problems: readForm(measurementContentSchema, content, "").problems };
}

function refuseRepeated(rows: JudgedRow[]): JudgedRow[] {
  const lines = new Map<string, number>();
  return rows.map((row) => {
    if (row.id === null || row.fate === "refused") return row;
    const first = lines.get(row.id);
    if (first === undefined) {
      lines.set(row.id, row.line);
      return row;
    }
    const found = `${row.id}, which line ${first} has already`;
    return {
      ...row,
      fate: "refused",
      problems: [{ column: "id", found, allowed: "each id once" }],
    };
  });
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

/**
 * The rules of the document and what the engine can score, for the rows that would be new, beside
 * the declarations alone: what was posted before was judged before.
 */
function applyRules(
  fresh: JudgedRow[],
  { document, at }: { document: CampaignDocument; at: string },
): Problem[] {
  const measurements = fresh.map((row) => documentMeasurement(row.measurement!, at));
  const read = readCampaign({ ...document, measurements, correlations: [] });
  const outcome = read.ok ? createState(read.value) : read;
  const problems: Problem[] = [];
  for (const problem of outcome.ok ? [] : outcome.problems) {
    const [, index, within] = /^\/measurements\/(\d+)(.*)$/.exec(problem.pointer) ?? [];
    const row = fresh[Number(index)];
    if (!row) problems.push(problem);
    else {
      row.fate = "refused";
      row.problems = [...row.problems, rowProblem({ ...problem, pointer: within ?? "" })];
    }
  }
  return problems;
}

function documentMeasurement(measurement: MeasurementContent, postedAt: string) {
  const { claimed: _, ...content } = measurement;
  return { ...content, postedAt };
}

/** `/sd` is the field sd; `/conditions/depth` is conditions.depth, as in a table's columns. */
function rowProblem({ pointer, found, allowed }: Problem): RowProblem {
  const [, field, within] = pointer.split("/");
  const column = field === "conditions" && within ? `conditions.${within}` : (field ?? null);
  return { column, found, allowed };
}

/** Problems by the columns' own names, where a field was read from a column. */
function inColumns(row: JudgedRow, columns: ReadRows["columns"]): JudgedRow {
  const names = new Map(columns.map(({ column, field }) => [field, column]));
  const named = row.problems.map((problem) => ({
    ...problem,
    column: names.get(problem.column) ?? problem.column,
  }));
  return { ...row, problems: named };
}

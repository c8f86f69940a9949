import { addConditions } from "./draft-conditions";
import { readCommon } from "./draft-common";
import type { Common } from "./draft-common";
import { formProblems } from "./draft-form";
import { observableOfPart, planDrafts } from "./draft-plan";
import type { DraftPlan, Part } from "./draft-plan";
import { readResult } from "./draft-result";
import { draftFinisher } from "./ndjson";
import { placeDraft } from "./place-draft";
import type { DraftRow, DraftTable, RawRow, RawTable } from "./raw-table";
import type { MeasurementDraft, TableProblem } from "./table";
import type { ColumnMatch, TableChoices, TableContext } from "./table-match";

export type Drafts = { rows: DraftRow[]; problems: TableProblem[]; notes: string[] };

/**
 * The drafts of a table's rows; with a problem of the table or of a column's match there are none.
 * A table with several measurands side by side gives several for one line. A row in which every
 * cell of a result is missing gives none for it, and the notes say so.
 *
 * What a row says is checked for its form here; whether it fits the campaign (its scale, its unit,
 * its conditions) is for the campaign's rules.
 */
export function draftsOf(
  table: RawTable | DraftTable,
  matches: readonly ColumnMatch[],
  context: TableContext,
  choices: Partial<TableChoices> = {},
): Drafts {
  if (isDraftTable(table)) {
    const { problems, notes } = table;
    const rows = problems.length > 0 ? [] : table.rows.map(draftFinisher(context));
    return { rows, problems, notes };
  }
  if (table.problems.length > 0) return { rows: [], problems: table.problems, notes: table.notes };
  const plan = planDrafts(table, matches, context, choices);
  const unmatched = matchProblems(matches);
  // What lacks its value may do so because of a column that can't be read: of cells all is told.
  const others = plan.problems.filter(({ line }) => unmatched.length === 0 || line !== null);
  const problems = [...unmatched, ...others];
  if (problems.length > 0) return { rows: [], problems, notes: table.notes };
  const rows: DraftRow[] = [];
  const empty: number[] = [];
  for (const row of table.rows) {
    const drafts = draftsOfRow(plan, row);
    for (const draft of drafts) rows.push(draft);
    if (drafts.length === 0) empty.push(row.line);
  }
  return { rows, problems: [], notes: [...table.notes, ...plan.notes, ...emptyNote(empty)] };
}

/** Whether a table's rows are drafts already, without columns to match. */
export function isDraftTable(table: RawTable | DraftTable): table is DraftTable {
  return table.format === "ndjson" || table.format === "document";
}

function matchProblems(matches: readonly ColumnMatch[]): TableProblem[] {
  return matches.flatMap(({ column, problem }) =>
    problem === null ? [] : [{ line: null, column, ...problem }],
  );
}

function emptyNote(lines: number[]): string[] {
  if (lines.length === 0) return [];
  const listed = lines.length > 10 ? `${lines.slice(0, 10).join(", ")}, …` : lines.join(", ");
  const rows = lines.length === 1 ? "1 row has no result" : `${lines.length} rows have no result`;
  return [`${rows}, and nothing is posted for it: line ${listed}.`];
}

function draftsOfRow(plan: DraftPlan, row: RawRow): DraftRow[] {
  const { line } = row;
  if (row.problems !== undefined && row.problems.length > 0) {
    return [{ line, draft: null, problems: row.problems, notes: [] }];
  }
  const common = readCommon(plan, row);
  return plan.parts.flatMap((part) => draftOfPart(plan, part, { row, common }));
}

/** Stands where a measurand isn't known, so that the other fields are checked all the same. */
const UNKNOWN = "none";
const RESULTS = ["value", "count", "occurred"];

function draftOfPart(
  plan: DraftPlan,
  part: Part,
  { row, common }: { row: RawRow; common: Common },
): DraftRow[] {
  const { line, cells } = row;
  const said = { measurand: common.fields["measurand"], observable: common.observable };
  const observable = observableOfPart(plan, part, said);
  const result = readResult(plan, part, { cells, observable });
  if (result === null) return [];
  const draft: Record<string, unknown> = { ...common.fields, ...result.fields };
  if (Object.keys(result.extra).length > 0) {
    draft["extra"] = { ...(draft["extra"] as object), ...result.extra };
  }
  const notes = [...result.notes];
  const problems = [
    ...common.problems,
    ...addConditions(draft, common.conditions, { plan, observable }),
    ...result.problems,
  ];
  if (part.target !== null && plan.parts.length > 1 && typeof draft["id"] === "string") {
    draft["id"] = `${draft["id"]}:${part.target.key}`;
  }
  const refused = new Set(problems.map(({ column }) => column));
  const column = columnOf(plan, part, "measurand") ?? "measurand";
  if (RESULTS.some((field) => draft[field] !== undefined)) {
    const placed = place(plan, part, { draft, observable: common.observable });
    notes.push(...placed.notes);
    if (placed.problem !== null) {
      problems.push({ ...placed.problem, column });
      draft["measurand"] = UNKNOWN;
    }
  } else {
    // Without a result nothing is looked for that it could fall in.
    refused.add(column);
  }
  for (const problem of formProblems(draft, (field) => columnOf(plan, part, field))) {
    if (!refused.has(problem.column)) problems.push(problem);
  }
  const good = problems.length === 0;
  return [{ line, draft: good ? (draft as MeasurementDraft) : null, problems, notes }];
}

/** Fills the measurand in where the row, or its column, says only what was measured. */
function place(
  { context, find }: DraftPlan,
  { target }: Part,
  { draft, observable }: { draft: Record<string, unknown>; observable: string | null },
) {
  if (target === null) return placeDraft(draft, { observable, find });
  const isMeasurand = context.document.measurands.some(({ key }) => key === target.key);
  draft["measurand"] = isMeasurand ? target.key : null;
  return placeDraft(draft, { observable: target.key, find });
}

/** The column that fills a field, in a part or for all. */
function columnOf(plan: DraftPlan, part: Part, field: string): string | null {
  const role = field.replace(/\.$/, "");
  const slot = part.slots.get(role) ?? plan.common.find((one) => one.match.field === role);
  if (slot !== undefined) return slot.column.name;
  if (role === "limit")
    return (part.slots.get("upperLimit") ?? part.slots.get("lowerLimit"))?.column.name ?? null;
  if (!role.startsWith("extra.")) return null;
  const name = role.slice("extra.".length);
  return (
    plan.common.find(
      ({ match, column }) =>
        match.field === "extra" &&
        (name === column.name || name === `${column.name} [${match.unit}]`),
    )?.column.name ?? null
  );
}

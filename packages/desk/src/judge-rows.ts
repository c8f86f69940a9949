import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { measurementContentSchema } from "@weighhouse/campaign/entries";
import { readForm } from "@weighhouse/campaign/form";
import type { Problem } from "@weighhouse/campaign/problem";
import { readCampaign } from "@weighhouse/campaign/read";
import { createState } from "@weighhouse/engine/state";
import { defaultMeasurementId } from "@weighhouse/store/post-measurements";
import type { Access } from "./access";
import { documentAfter } from "./document-after";
import type { Moment } from "./document-after";
import { firstDifference } from "./measurement-difference";
import type { Difference } from "./measurement-difference";
import { measurementEntries } from "./measurement-entries";
import type { ReadRow, RowProblem } from "./read-rows";

/** What would become of one row, were it posted now. */
export type JudgedRow = {
  /** The line in the text, from 1; for drafts their number, from 1. */
  line: number;
  id: string | null;
  fate: "new" | "alreadyThere" | "conflict" | "refused";
  /** Why it is refused, by field; empty otherwise. */
  problems: RowProblem[];
  /** The first field that differs from what is there under that id. */
  conflict: Difference | null;
  /** As it would be entered; null for a row that doesn't read. */
  measurement: MeasurementContent | null;
};

export type Judgement = {
  rows: JudgedRow[];
  /** What is wrong with the rows taken together. */
  problems: Problem[];
};

/** Judges rows against the campaign as it is: each new, already there, in conflict or refused. */
export function judgeRows(
  document: CampaignDocument,
  rows: ReadRow[],
  poster: { access: Access; moment: Moment },
): Judgement {
  const judged = refuseRepeated(rows.map((row) => readRow(row, poster.access)));
  const completed = completedMeasurements(document, contentsOf(judged), poster.moment);
  const there = new Map(document.measurements.map((one) => [one.id, one]));
  for (const row of judged) {
    const before = there.get(row.id ?? "");
    const posted = completed.get(row.id ?? "");
    if (row.fate !== "new" || !before || !posted) continue;
    row.conflict = firstDifference(before, posted);
    row.fate = row.conflict ? "conflict" : "alreadyThere";
  }
  return applyRules(document, judged, poster.moment);
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
  const read = readForm(measurementContentSchema, { ...content, id: given ?? PLACEHOLDER }, "");
  const faults = read.problems.map(rowProblem);
  if (access.role === "member" && content.team !== access.team) {
    const found = JSON.stringify(content.team);
    faults.push({ column: "team", found, allowed: `${access.team}: your own team` });
  }
  if (faults.length > 0) {
    return { ...refused, id: typeof given === "string" ? given : null, problems: faults };
  }
  const id = typeof given === "string" ? given : defaultMeasurementId(content);
  const measurement = { ...(read.value as MeasurementContent), id };
  return { ...refused, id, fate: "new", measurement };
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

/** The measurements as the document would hold them, with units and conditions filled in. */
function completedMeasurements(
  document: CampaignDocument,
  contents: MeasurementContent[],
  moment: Moment,
): Map<string, Measurement> {
  const alone = documentOf(document, contents, moment);
  return new Map(alone.measurements.map((one) => [one.id, one]));
}

/** The rules of the document and what the engine can score, for the rows that would be new. */
function applyRules(document: CampaignDocument, rows: JudgedRow[], moment: Moment): Judgement {
  const fresh = rows.filter(({ fate }) => fate === "new");
  const alone = documentOf(document, contentsOf(fresh), moment);
  const read = readCampaign(alone);
  const outcome = read.ok ? createState(read.value) : read;
  const problems: Problem[] = [];
  for (const problem of outcome.ok ? [] : outcome.problems) {
    const [, index, within] = /^\/measurements\/(\d+)(.*)$/.exec(problem.pointer) ?? [];
    const row = fresh[Number(index)];
    if (!row) problems.push(problem);
    else {
      row.fate = "refused";
      row.problems.push(rowProblem({ ...problem, pointer: within ?? "" }));
    }
  }
  return { rows, problems };
}

/** The campaign with these measurements alone: what was posted before was judged before. */
function documentOf(document: CampaignDocument, contents: MeasurementContent[], moment: Moment) {
  const bare = { ...document, measurements: [], correlations: [] };
  return documentAfter(bare, measurementEntries(contents), moment);
}

function contentsOf(rows: JudgedRow[]): MeasurementContent[] {
  return rows.flatMap(({ measurement, fate }) =>
    measurement && fate !== "refused" ? [measurement] : [],
  );
}

/** `/sd` is the field sd; `/conditions/depth` is conditions.depth, as in a table's columns. */
function rowProblem({ pointer, found, allowed }: Problem): RowProblem {
  const [, field, within] = pointer.split("/");
  const column = field === "conditions" && within ? `conditions.${within}` : (field ?? null);
  return { column, found, allowed };
}

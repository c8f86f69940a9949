import type { TableProblem } from "@weighhouse/tables/table";

/** A row that keeps the posting out, as the server tells it. */
type FaultyRow = {
  part?: number;
  line: number;
  id: string | null;
  fate: "new" | "alreadyThere" | "conflict" | "refused";
  problems: { column: string | null; found: string; allowed: string }[];
  conflict: { id: string; field: string; there: unknown; posted: unknown } | null;
};

export type Standing = { key: string; rank: number; log10BayesFactor: number | null };

/** What posting would do, as the server tells it. */
export type Preview = {
  counts: { new: number; alreadyThere: number; conflict: number; refused: number };
  problems: TableProblem[];
  postable: boolean;
  changes: {
    before: { hypotheses: Standing[] };
    after: { hypotheses: Standing[] };
    verdicts: {
      hypothesis: string;
      measurand: string;
      before: string | null;
      after: string | null;
    }[];
    ranks: { hypothesis: string; before: number | null; after: number | null }[];
  } | null;
};

/** Where a row of a part stands in the file. */
export type LineFinder = (part: number, line: number) => number;

/** What is wrong with a row, at its line of the file. */
function rowFaults(row: FaultyRow, lineOf: LineFinder): TableProblem[] {
  const line = lineOf(row.part ?? 1, row.line);
  if (row.conflict === null) return row.problems.map((problem) => ({ line, ...problem }));
  const { id, field, there, posted } = row.conflict;
  const found = `${JSON.stringify(posted)} under the id ${id}, which is there with ${JSON.stringify(there)}`;
  const allowed = "the same content, another id, or a correction";
  return [{ line, column: field, found, allowed }];
}

export function faultsOfLine(answer: Record<string, unknown>, lineOf: LineFinder): TableProblem[] {
  return "row" in answer ? rowFaults(answer["row"] as FaultyRow, lineOf) : [];
}

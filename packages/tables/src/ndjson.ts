import { measurandFinder } from "@weighhouse/campaign/measurand-of";
import { parseJson } from "@weighhouse/campaign/json-text";
import { formProblems } from "./draft-form";
import { placeDraft } from "./place-draft";
import { MAX_LINE } from "./limits";
import type { DraftRow } from "./raw-table";
import type { MeasurementDraft } from "./table";
import type { TableContext } from "./table-match";

/**
 * One line of NDJSON as a draft that nothing is filled in yet; null for a blank one. A pure
 * function of the line, for streams of any length.
 *
 * @param line its number, from 1
 */
export function parseDraftLine(text: string, line: number): DraftRow | null {
  const refused = (found: string, allowed: string): DraftRow => ({
    line,
    draft: null,
    problems: [{ column: null, found, allowed }],
    notes: [],
  });
  if (text.length > MAX_LINE) {
    return refused(`a line of ${text.length} characters`, `at most ${MAX_LINE}`);
  }
  if (text.trim() === "") return null;
  const { value, problems } = parseJson(text);
  const [first] = problems;
  if (first !== undefined) {
    // Each line is a text of its own: within it only the column says where.
    return refused(
      first.found.replace(/ at line 1, column (\d+)$/, " at character $1"),
      first.allowed,
    );
  }
  return draftOfValue(value, line);
}

/** A JSON value as a draft that nothing is filled in yet. */
export function draftOfValue(value: unknown, line: number): DraftRow {
  if (typeof value === "object" && value !== null && !Array.isArray(value)) {
    return { line, draft: value as MeasurementDraft, problems: [], notes: [] };
  }
  const found = Array.isArray(value) ? "a list" : JSON.stringify(value);
  const allowed = "an object with a measurement's fields";
  return { line, draft: null, problems: [{ column: null, found, allowed }], notes: [] };
}

/** Drafts with what their context fills in, and what is wrong with their form. */
export function draftFinisher({ document, defaults }: TableContext): (row: DraftRow) => DraftRow {
  const find = measurandFinder(document);
  return (row) => {
    if (row.draft === null || row.problems.length > 0) return row;
    const { observable, ...draft }: Record<string, unknown> = { ...row.draft };
    for (const field of ["measurand", "facility", "team", "batch"] as const) {
      const given = defaults?.[field];
      // A row that names what was measured falls in a measurand of that.
      const isNamed = field === "measurand" && (observable ?? null) !== null;
      if (given && !isNamed) draft[field] ??= given;
    }
    const placed = placeDraft(draft, { observable: observable ?? null, find });
    const problems = formProblems(draft, () => null).filter(
      ({ column }) => column !== "measurand" || placed.problem === null,
    );
    if (placed.problem !== null) problems.push(placed.problem);
    return {
      line: row.line,
      draft: problems.length === 0 ? (draft as MeasurementDraft) : null,
      problems,
      notes: [...row.notes, ...placed.notes],
    };
  };
}

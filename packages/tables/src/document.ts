import { CAMPAIGN_FORMAT } from "@weighhouse/campaign/document";
import { parseJson } from "@weighhouse/campaign/json-text";
import { draftOfValue } from "./ndjson";
import type { DraftRow, DraftTable } from "./raw-table";
import type { TableProblem } from "./table";

/**
 * The measurements of a JSON text as drafts: a campaign document, an object with a list
 * `measurements`, a list of measurements, or a single one. A row's line is its number in the list,
 * from 1.
 */
export function readDocument(text: string): DraftTable {
  const empty: DraftTable = { format: "document", columns: [], rows: [], problems: [], notes: [] };
  const { value, problems } = parseJson(text);
  if (problems.length > 0)
    return {
      ...empty,
      problems: problems.map(({ pointer, found, allowed }) =>
        whole(`${found}${pointer === "" ? "" : ` at ${pointer}`}`, allowed),
      ),
    };
  if (Array.isArray(value))
    return { ...empty, rows: value.map((one, i) => draftOfValue(one, i + 1)) };
  const members = (typeof value === "object" && value !== null ? value : {}) as Record<
    string,
    unknown
  >;
  const list = members["measurements"];
  if (list === undefined && "measurand" in members) {
    return { ...empty, rows: [draftOfValue(value, 1)] };
  }
  if (!Array.isArray(list)) {
    const allowed = `a campaign document (${CAMPAIGN_FORMAT}), or measurements in a list`;
    return { ...empty, problems: [whole("no list of measurements", allowed)] };
  }
  const rows = list.map((one, index) => draftOfValue(one, index + 1)).map(withoutPosting);
  return { ...empty, rows, notes: notesOf(members, rows) };
}

function whole(found: string, allowed: string): TableProblem {
  return { line: null, column: null, found, allowed };
}

/** When a measurement was posted is what the ledger says. */
function withoutPosting(row: DraftRow): DraftRow {
  if (row.draft === null || !("postedAt" in row.draft)) return row;
  const { postedAt: _, ...draft } = row.draft;
  return { ...row, draft, notes: [...row.notes, "postedAt is left out: posting gives it."] };
}

function notesOf(members: Record<string, unknown>, rows: DraftRow[]): string[] {
  const notes = [`${rows.length} measurements of the document are read; what it declares is not.`];
  const { correlations } = members;
  if (Array.isArray(correlations) && correlations.length > 0) {
    notes.push(
      `Its ${correlations.length} correlations are not read here: import the document for them.`,
    );
  }
  return notes;
}

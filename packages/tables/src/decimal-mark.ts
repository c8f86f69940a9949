import type { DecimalMark } from "./number-cells";
import type { RawTable } from "./raw-table";
import type { TableProblem } from "./table";

export type FoundMark = { mark: DecimalMark; problem: TableProblem | null; note: string | null };

type Place = { line: number; column: string; text: string };

const COMMA = /^[<>≤≥=~]*\s*[+\-\u2212\u2013]?\d*,\d+(?:[eE][+-]?\d+)?(?!\d)/;
/** One that is either grouped in thousands or has three decimals. */
const EITHER = /^[<>≤≥=~]*\s*[+\-\u2212\u2013]?[1-9]\d{0,2},\d{3}$/;
const POINT = /^[<>≤≥=~]*\s*[+\-\u2212\u2013]?(?:\d+\.\d*|\.\d+)(?:[eE][+-]?\d+)?(?![\d,.])/;

/**
 * The decimal mark of a table's numbers, told from all of them together: commas where a number
 * with a comma can't be thousands and none has a point. Where commas could be either, or both
 * marks are there, it is asked.
 *
 * @param indices the columns that hold numbers
 * @param chosen what was chosen for the table: then nothing is guessed
 */
export function findDecimalMark(
  table: Pick<RawTable, "columns" | "rows">,
  indices: readonly number[],
  chosen: DecimalMark | null,
): FoundMark {
  if (chosen !== null) return { mark: chosen, problem: null, note: null };
  const places: { comma?: Place; either?: Place; point?: Place } = {};
  for (const { line, cells } of table.rows) {
    for (const index of indices) {
      const text = cells[index];
      if (typeof text !== "string") continue;
      const place = { line, column: table.columns[index]!.name, text };
      if (EITHER.test(text)) places.either ??= place;
      else if (COMMA.test(text)) places.comma ??= place;
      else if (POINT.test(text)) places.point ??= place;
    }
  }
  return judge(places);
}

function judge({
  comma,
  either,
  point,
}: {
  comma?: Place;
  either?: Place;
  point?: Place;
}): FoundMark {
  const first = comma ?? either;
  if (first === undefined) return { mark: "point", problem: null, note: null };
  if (point !== undefined) {
    return asked(first, `${quoted(first)} beside ${quoted(point)} in line ${point.line}`, [
      "one decimal mark in the whole table, and no marks between thousands",
    ]);
  }
  if (comma === undefined) {
    return asked(first, `${quoted(first)}, which may be a thousand or a decimal comma`, [
      "numbers without marks between thousands; or choose the decimal comma for the table",
    ]);
  }
  const read = comma.text.replace(",", ".");
  const note = `Decimal commas: ${comma.text} in line ${comma.line} is read as ${read}.`;
  return { mark: "comma", problem: null, note };
}

function quoted({ text }: Place): string {
  return JSON.stringify(text);
}

function asked({ line, column }: Place, found: string, [allowed = ""]: string[]): FoundMark {
  return { mark: "point", problem: { line, column, found, allowed }, note: null };
}

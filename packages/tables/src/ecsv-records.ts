import { MAX_CELL } from "./limits";
import { rowRefusal } from "./row-limit";
import type { TableProblem } from "./table";

export type EcsvRecord = {
  /** The record's first line in the text, from 1. */
  line: number;
  cells: string[];
};

const COMMA = 44;
const HASH = 35;
const QUOTE = 34;
const SPACE = 32;
const TAB = 9;
const LINE_FEED = 10;
const RETURN = 13;

/**
 * The records below an ECSV header: cells parted by commas or by runs of spaces, in quotes where
 * they hold such, a line break or nothing. Blank lines and lines that begin with # stand between
 * records only; in quotes they are the cell's. The CSV parser knows no runs of spaces.
 */
export function ecsvRecords(
  text: string,
  start: { at: number; line: number },
  { delimiter, columns }: { delimiter: " " | ","; columns: number },
): { records: EcsvRecord[]; comments: number; problem: TableProblem | null } {
  const scan = new Scan(text, start, delimiter === "," ? COMMA : SPACE);
  const records: EcsvRecord[] = [];
  let problem: TableProblem | null = null;
  while (problem === null && scan.toRecord()) {
    // The first record is the names'.
    const refusal = rowRefusal(records.length - 1, columns);
    if (refusal !== null) {
      problem = scan.problem(refusal.found, refusal.allowed);
    } else {
      const { line } = scan;
      const cells: string[] = [];
      problem = scan.record(cells);
      records.push({ line, cells });
    }
  }
  return { records, comments: scan.comments, problem };
}

class Scan {
  readonly #text: string;
  readonly #delimiter: number;
  #at: number;
  line: number;
  comments = 0;

  constructor(text: string, start: { at: number; line: number }, delimiter: number) {
    this.#text = text;
    this.#delimiter = delimiter;
    this.#at = start.at;
    this.line = start.line;
  }

  problem(found: string, allowed: string): TableProblem {
    return { line: this.line, column: null, found, allowed };
  }

  /** Past blank lines and comments, to the next record's first character. */
  toRecord(): boolean {
    for (;;) {
      this.#blanks();
      const code = this.#code();
      if (Number.isNaN(code)) return false;
      if (code === HASH) {
        this.comments += 1;
        while (!Number.isNaN(this.#code()) && !this.#isLineEnd()) this.#at += 1;
      } else if (!this.#isLineEnd()) {
        return true;
      }
      this.#lineEnd();
    }
  }

  /** Fills `cells` up to the record's end, or says what is wrong. */
  record(cells: string[]): TableProblem | null {
    for (;;) {
      const cell = this.#code() === QUOTE ? this.#quoted() : this.#plain();
      if (typeof cell !== "string") return cell;
      cells.push(cell);
      const blanks = this.#blanks();
      if (Number.isNaN(this.#code()) || this.#isLineEnd()) {
        this.#lineEnd();
        return null;
      }
      if (this.#delimiter === COMMA && this.#code() === COMMA) {
        this.#at += 1;
        this.#blanks();
      } else if (this.#delimiter === COMMA || blanks === 0) {
        return this.problem(
          "text after a closing quote",
          "a quoted cell with its own quotes doubled",
        );
      }
    }
  }

  #quoted(): string | TableProblem {
    const opened = this.line;
    const wrong = (found: string, allowed: string) => ({
      line: opened,
      column: null,
      found,
      allowed,
    });
    let from = this.#at + 1;
    let cell = "";
    for (;;) {
      const close = this.#text.indexOf('"', from);
      if (close === -1) {
        return wrong("a quoted cell that is never closed", "a closing quote");
      }
      cell += this.#text.slice(from, close);
      if (cell.length > MAX_CELL) return wrong(...tooLong(cell.length));
      from = close + 1;
      if (this.#text.charCodeAt(from) !== QUOTE) break;
      cell += '"';
      from += 1;
    }
    this.#at = from;
    this.line += lineEndsIn(cell);
    return cell;
  }

  #plain(): string | TableProblem {
    const from = this.#at;
    for (;;) {
      const code = this.#code();
      if (Number.isNaN(code) || code === this.#delimiter || this.#isLineEnd()) break;
      if (code === QUOTE) {
        return this.problem(
          "a quote inside a cell that isn't quoted",
          "the whole cell in quotes, its own doubled",
        );
      }
      this.#at += 1;
    }
    if (this.#at - from > MAX_CELL) return this.problem(...tooLong(this.#at - from));
    let end = this.#at;
    while (end > from && isBlank(this.#text.charCodeAt(end - 1))) end -= 1;
    return this.#text.slice(from, end);
  }

  #code(): number {
    return this.#text.charCodeAt(this.#at);
  }

  #isLineEnd(): boolean {
    return this.#code() === LINE_FEED || this.#code() === RETURN;
  }

  #lineEnd(): void {
    if (this.#code() === RETURN) {
      this.#at += 1;
      if (this.#code() === LINE_FEED) this.#at += 1;
      this.line += 1;
    } else if (this.#code() === LINE_FEED) {
      this.#at += 1;
      this.line += 1;
    }
  }

  #blanks(): number {
    const from = this.#at;
    while (isBlank(this.#code())) this.#at += 1;
    return this.#at - from;
  }
}

function isBlank(code: number): boolean {
  return code === SPACE || code === TAB;
}

function lineEndsIn(cell: string): number {
  return cell.match(/\r\n|\n|\r/g)?.length ?? 0;
}

function tooLong(length: number): [found: string, allowed: string] {
  return [`a cell of ${length} characters`, `at most ${MAX_CELL}`];
}

import { changesOf } from "@weighhouse/campaign/changes";
import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { Part, PartContent, PartName, PartsBefore } from "@weighhouse/campaign/parts";
import type { Reads } from "@weighhouse/campaign/reads";
import { canonicalJson } from "@weighhouse/ledger/canonical";

/** One version of one part: it holds for the sizes [fromSize, toSize). */
export type ProjectedRow = {
  part: PartName;
  key: string;
  fromSize: number;
  toSize: number | null;
  firstSeq: number;
  firstPlace: number;
  content: PartContent;
  /** Canonical JSON of the content, as stored. */
  text: string;
};

/** What was read before an append: the rows, and all that was asked for, there or not. */
export type RowsRead = { rows: Iterable<ProjectedRow>; reads: Reads };

/**
 * Applies entries to rows in memory, the same way for an append and for a rebuild. It starts from
 * the current rows that the entries' rules and effects look at, or for a rebuild from none.
 */
export class Projector implements PartsBefore {
  /** Rows that are not in the database yet. */
  readonly made: ProjectedRow[] = [];
  /** Rows in the database that hold no longer, with their toSize set. */
  readonly closed: ProjectedRow[] = [];
  readonly #current = new Map<string, ProjectedRow>();
  readonly #fresh = new Set<ProjectedRow>();
  /** Null: nothing is in the database, so what isn't here isn't there. */
  readonly #read: ReadRows | null;

  constructor(read: RowsRead | null = null) {
    this.#read = read && readRows(read.reads);
    for (const row of read?.rows ?? []) this.#current.set(idOf(row), row);
  }

  get(part: PartName, key: string): PartContent | null {
    const id = idOf({ part, key });
    const row = this.#current.get(id);
    if (row === undefined && this.#read !== null && !this.#read.has(part, id)) {
      throw new Error(`the ${part} ${key} was not read before the append`);
    }
    return row?.content ?? null;
  }

  *all(part: PartName): Generator<Part> {
    if (this.#read !== null && !this.#read.whole.has(part)) {
      throw new Error(`not every ${part} was read before the append`);
    }
    const rows = [...this.#current.values()].filter((row) => row.part === part);
    rows.sort((a, b) => a.firstSeq - b.firstSeq || a.firstPlace - b.firstPlace);
    yield* rows;
  }

  *measurementsOf(facility: string): Generator<Part> {
    if (this.#read !== null && !this.#read.facilities.has(facility)) {
      throw new Error(`the measurements of ${facility} were not read before the append`);
    }
    for (const row of this.#current.values()) {
      if (row.part === "measurement" && row.content["facility"] === facility) yield row;
    }
  }

  /** What the entry changes; it shows from size `seq + 1` on. */
  apply(record: LedgerRecord): void {
    changesOf(record, this).forEach((change, place) => this.#put(change, record.seq, place));
  }

  #put({ part, key, content }: Part, seq: number, place: number): void {
    const before = this.#current.get(idOf({ part, key }));
    const text = canonicalJson(content);
    if (before?.text === text) return;
    const fromSize = seq + 1;
    if (before !== undefined && before.fromSize === fromSize) {
      Object.assign(before, { content, text });
      return;
    }
    if (before !== undefined) {
      before.toSize = fromSize;
      if (!this.#fresh.has(before)) this.closed.push(before);
    }
    const row: ProjectedRow = {
      part,
      key,
      fromSize,
      toSize: null,
      firstSeq: before?.firstSeq ?? seq,
      firstPlace: before?.firstPlace ?? place,
      content,
      text,
    };
    this.#current.set(idOf(row), row);
    this.#fresh.add(row);
    this.made.push(row);
  }
}

type ReadRows = {
  has(part: PartName, id: string): boolean;
  whole: Set<PartName>;
  facilities: Set<string>;
};

function readRows({ keys, whole, facilities }: Reads): ReadRows {
  const ids = new Set(keys.map(idOf));
  const parts = new Set(whole);
  return {
    has: (part, id) => ids.has(id) || parts.has(part),
    whole: parts,
    facilities: new Set(facilities),
  };
}

function idOf({ part, key }: { part: PartName; key: string }): string {
  return `${part} ${key}`;
}

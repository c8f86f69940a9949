import { contentAfter } from "@weighhouse/campaign/changes";
import type { Change, PartContent, PartName } from "@weighhouse/campaign/changes";
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

/**
 * Applies changes to rows in memory, the same way for an append and for a rebuild. It starts from
 * the current rows of the keys that the changes touch.
 */
export class Projector {
  /** Rows that are not in the database yet. */
  readonly made: ProjectedRow[] = [];
  /** Rows in the database that hold no longer, with their toSize set. */
  readonly closed: ProjectedRow[] = [];
  readonly #current = new Map<string, ProjectedRow>();
  readonly #fresh = new Set<ProjectedRow>();

  constructor(current: Iterable<ProjectedRow> = []) {
    for (const row of current) this.#current.set(idOf(row), row);
  }

  /** What entry `seq` changes; it shows from size `seq + 1` on. */
  apply(seq: number, changes: Change[]): void {
    changes.forEach((change, place) => this.#change(change, seq, place));
  }

  #change(change: Change, seq: number, place: number): void {
    const before = this.#current.get(idOf(change));
    const content = contentAfter(change, before?.content ?? null);
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
      part: change.part,
      key: change.key,
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

function idOf({ part, key }: { part: PartName; key: string }): string {
  return `${part} ${key}`;
}

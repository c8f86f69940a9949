import { once } from "node:events";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { MEASUREMENTS_PER_ENTRY } from "@weighhouse/campaign/entries";
import { compareInstants } from "@weighhouse/campaign/instants";
import { MAX_PAYLOAD_BYTES, payloadDigest } from "@weighhouse/ledger/entry";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import type { ContentText } from "./content-text";
import type { Store } from "./open-store";
import type { Queries } from "./queries";
import type { Upload } from "./uploads";

/** A row as it was judged by itself; `content` and `text` null where it couldn't be read. */
export type StageRow = {
  line: number;
  id: string | null;
  content: MeasurementContent | null;
  text: ContentText | null;
  problems: unknown[];
  notes: string[];
};

/** A measurement of an entry to be, with its content's text. */
export type EntryRow = {
  line: number;
  measurand: string;
  observedAt: string | null;
  text: string;
};

export type StagedEntry = {
  firstLine: number;
  lastLine: number;
  rows: number;
  payload: string;
  sha256: string;
  dated: string;
};

/** The payload's own letters around its measurements; its members in canonical order. */
const BEFORE = '{"correlations":[],"measurements":[';
const BEHIND = "]}";

/**
 * Stages one part of an upload: rows by COPY, and beside them the payloads of the entries that they
 * will be, digested. At most 1,000 measurements go into an entry, and what fits into a payload.
 *
 * While the database takes one batch the next may be read and judged: what is held is two batches.
 */
export class PartStaging {
  rows = 0;
  #entry = 0;
  /** New rows that don't fill an entry yet. */
  #waiting: (StageRow & { text: ContentText })[] = [];
  #waitingBytes = 0;
  readonly #earliest = new Map<string, string | null>();
  #writing: Promise<unknown> = Promise.resolve();

  constructor(
    private readonly store: Store,
    private readonly to: Upload & { part: number },
  ) {}

  /** Resolves once the batch before is written. */
  async push(rows: StageRow[]): Promise<void> {
    const batch: Batch = { lines: [], entries: [] };
    for (const row of rows) {
      this.rows += 1;
      if (row.text === null || row.problems.length > 0) batch.lines.push(this.#line(row, null));
      else this.#put({ ...row, text: row.text }, batch);
    }
    await this.#write(batch);
  }

  /** Resolves once everything is written. */
  async end(): Promise<void> {
    const batch: Batch = { lines: [], entries: [] };
    this.#fill(batch);
    await this.#write(batch);
    await this.#writing;
  }

  /** Resolves once nothing is being written any more, for who gives up. */
  async settle(): Promise<void> {
    await this.#writing.catch(() => {});
  }

  #put(row: StageRow & { text: ContentText }, batch: Batch): void {
    const bytes = Buffer.byteLength(row.text.head) + Buffer.byteLength(row.text.tail) + 1;
    const full =
      this.#waiting.length === MEASUREMENTS_PER_ENTRY ||
      this.#waitingBytes + bytes > MAX_PAYLOAD_BYTES - BEFORE.length - BEHIND.length;
    if (full) this.#fill(batch);
    this.#waiting.push(row);
    this.#waitingBytes += bytes;
  }

  #fill(batch: Batch): void {
    if (this.#waiting.length === 0) return;
    const rows = this.#waiting.map(({ line, content, text }) => ({
      line,
      measurand: content!.measurand,
      observedAt: content!.observedAt,
      text: text.head + text.tail,
    }));
    batch.entries.push({ ...stagedEntry(rows, this.#earliest), entry: this.#entry });
    this.#waiting.forEach((row, place) => batch.lines.push(this.#line(row, place)));
    this.#entry += 1;
    this.#waiting = [];
    this.#waitingBytes = 0;
  }

  async #write(batch: Batch): Promise<void> {
    await this.#writing;
    this.#writing = writeBatch(this.store, this.to, batch);
    // A failure is told by whoever awaits next; until then it isn't nobody's.
    this.#writing.catch(() => {});
  }

  #line(row: StageRow, place: number | null): string {
    const { content, text, problems, notes } = row;
    const { campaignId, upload, part } = this.to;
    return copyLine([
      campaignId,
      upload,
      part,
      row.line,
      place === null ? null : this.#entry,
      place,
      row.id,
      content?.measurand,
      content?.facility,
      content?.team,
      content?.batch,
      content?.observedAt,
      content?.value,
      content?.sd,
      content?.unit,
      content === null ? null : content.setAside !== null,
      text?.head,
      text?.tail,
      problems.length === 0 ? null : JSON.stringify(problems),
      notes.length === 0 ? null : JSON.stringify(notes),
    ]);
  }
}

/**
 * An entry's payload and digest, and those of its measurements that can be a measurand's first or its
 * earliest observed one.
 *
 * @param earliest by measurand, of the rows before it in its part; brought up to date
 */
export function stagedEntry(rows: EntryRow[], earliest: Map<string, string | null>): StagedEntry {
  const payload = `${BEFORE}${rows.map(({ text }) => text).join(",")}${BEHIND}`;
  const sha256 = payloadDigest(nodeHasher, payload);
  const own = new Map<string, EntryRow>();
  for (const row of rows) {
    const before = own.get(row.measurand);
    if (before === undefined || isEarlier(row.observedAt, before.observedAt)) {
      own.set(row.measurand, row);
    }
  }
  const dated: string[] = [];
  for (const [measurand, { observedAt, text }] of own) {
    const before = earliest.get(measurand);
    if (before !== undefined && !isEarlier(observedAt, before)) continue;
    earliest.set(measurand, observedAt);
    dated.push(text);
  }
  return {
    firstLine: rows[0]!.line,
    lastLine: rows.at(-1)!.line,
    rows: rows.length,
    payload,
    sha256,
    dated: `[${dated.join(",")}]`,
  };
}

function isEarlier(one: string | null, than: string | null): boolean {
  return one !== null && (than === null || compareInstants(one, than) < 0);
}

type Batch = { lines: string[]; entries: (StagedEntry & { entry: number })[] };

async function writeBatch(
  store: Store,
  to: Upload & { part: number },
  { lines, entries }: Batch,
): Promise<void> {
  if (lines.length > 0) await copyRows(store, lines);
  if (entries.length > 0) await insertStagedEntries(store.sql, to, entries);
}

async function copyRows(store: Store, lines: string[]): Promise<void> {
  const sink = await store.sql`
    copy staged_measurements (campaign_id, upload, part, line, entry, place, id, measurand, facility,
      team, batch, observed_at, value, sd, unit, set_aside, head, tail, problems, notes)
    from stdin`.writable();
  const ended = new Promise<void>((resolve, reject) => {
    sink.once("error", reject);
    sink.once("finish", resolve);
  });
  for (let begin = 0; begin < lines.length; begin += LINES_AT_A_TIME) {
    if (!sink.write(lines.slice(begin, begin + LINES_AT_A_TIME).join(""))) {
      await Promise.race([once(sink, "drain"), ended]);
    }
  }
  sink.end();
  await ended;
}

const LINES_AT_A_TIME = 500;

export async function insertStagedEntries(
  sql: Queries,
  { campaignId, upload, part }: Upload & { part: number },
  entries: (StagedEntry & { entry: number })[],
): Promise<void> {
  await sql`
    insert into staged_entries
      (campaign_id, upload, part, entry, first_line, last_line, rows, payload, sha256, dated)
    select ${campaignId}::int, ${upload}::uuid, ${part}::int, entry, first_line, last_line, rows,
      payload, sha256, dated::json
    from unnest(
      ${entries.map(({ entry }) => entry)}::int[], ${entries.map((one) => one.firstLine)}::int[],
      ${entries.map((one) => one.lastLine)}::int[], ${entries.map(({ rows }) => rows)}::int[],
      ${entries.map(({ payload }) => payload)}::text[],
      ${entries.map(({ sha256 }) => sha256)}::text[], ${entries.map(({ dated }) => dated)}::text[]
    ) as e(entry, first_line, last_line, rows, payload, sha256, dated)`;
}

type CopyField = string | number | boolean | null | undefined;

/** A line of COPY's text format, in which a backslash stands before what would else end a field. */
function copyLine(fields: CopyField[]): string {
  let line = "";
  for (let index = 0; index < fields.length; index += 1) {
    if (index > 0) line += "\t";
    const field = fields[index];
    if (field === null || field === undefined) line += "\\N";
    else if (typeof field === "string") line += escaped(field);
    else line += String(field);
  }
  return `${line}\n`;
}

const SPECIAL = /[\\\t\n\r]/;
const LETTERS: Record<string, string> = { "\\": "\\\\", "\t": "\\t", "\n": "\\n", "\r": "\\r" };

function escaped(text: string): string {
  return SPECIAL.test(text) ? text.replaceAll(/[\\\t\n\r]/g, (sign) => LETTERS[sign]!) : text;
}

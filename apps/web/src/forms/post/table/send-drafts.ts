import type { Problem } from "@weighhouse/campaign/problem";
import type { StandingsChanges } from "@weighhouse/desk/standings-changes";
import type { RowProblem } from "@weighhouse/tables/table";
import type { Refusal } from "../../refusal";
import { answerLines } from "./answer-lines";
import type { Judged } from "./open-table";
import type { Progress } from "./protocol";

/** A refusal of the server, or a line that broke: what the page shows as it is. */
export class Refused extends Error {
  constructor(
    readonly refusal: Refusal,
    /** The server has answered: another try is another try. */
    readonly answered = true,
  ) {
    super(refusal.message);
  }
}

/** What of a preview is not about one row. */
export interface WholePreview {
  problems: { found: string; allowed: string }[];
  postable: boolean;
  changes: StandingsChanges | null;
}

export interface Posted {
  posted: number;
  alreadyThere: number;
  entries: { from: number; to: number } | null;
}

interface Sending {
  campaign: string;
  /** One draft a line (NDJSON). */
  body: Blob;
  signal: AbortSignal;
  progress: (progress: Progress) => void;
}

const rowsAtOnce = 1000;

/** Drafts as NDJSON, put together in pieces: one text of a hundred thousand rows is held twice. */
export function draftLines(count: number, draft: (index: number) => unknown): Blob {
  const pieces: string[] = [];
  for (let from = 0; from < count; from += rowsAtOnce) {
    let piece = "";
    for (let index = from; index < Math.min(count, from + rowsAtOnce); index += 1) {
      piece += `${JSON.stringify(draft(index))}\n`;
    }
    pieces.push(piece);
  }
  return new Blob(pieces, { type: "application/x-ndjson" });
}

/** Asks what would become of each draft. Enters nothing, so that it may be asked again at will. */
export async function previewDrafts(
  sending: Sending & { row: (index: number, judged: Judged) => void },
): Promise<WholePreview> {
  const lines = ask("measurements/preview", sending, {});
  for await (const line of heard(lines, sending, notPreviewed)) {
    if (line["row"] !== undefined) {
      const { line: at, ...judged } = line["row"] as RowAnswer;
      sending.row(at - 1, judgedOf(judged));
    } else if (line["preview"] !== undefined) return line["preview"] as WholePreview;
  }
  throw lost(notPreviewed);
}

/** Enters the drafts, all or none. */
export async function postDrafts(sending: Sending & { attempt: string }): Promise<Posted> {
  const lines = ask("measurements", sending, { "idempotency-key": sending.attempt });
  for await (const line of heard(lines, sending, perhapsPosted)) {
    if (line["done"] !== undefined) return line["done"] as Posted;
  }
  throw lost(perhapsPosted);
}

const notPreviewed =
  "The connection broke before the preview was whole. Nothing was entered; your table is kept. Preview it again.";
const perhapsPosted =
  "The connection broke before the server had answered: the rows may be on record or not. Your table is kept. Post it again: what is there already is not entered twice.";

type RowAnswer = Omit<Judged, "problems" | "notes"> & {
  line: number;
  problems?: RowProblem[];
  notes?: string[];
};

function judgedOf(row: Omit<RowAnswer, "line">): Judged {
  return {
    fate: row.fate,
    id: row.id ?? null,
    measurand: row.measurand ?? null,
    problems: row.problems ?? [],
    conflict: row.conflict ?? null,
    notes: row.notes ?? [],
  };
}

async function* ask(
  path: string,
  { campaign, body, signal, progress }: Sending,
  headers: Record<string, string>,
): AsyncGenerator<Record<string, unknown>> {
  progress({ stage: "sending", done: body.size, total: null });
  const response = await fetch(`/api/v1/campaigns/${campaign}/${path}`, {
    method: "POST",
    headers: {
      accept: "application/x-ndjson",
      "content-type": "application/x-ndjson",
      ...headers,
    },
    body,
    signal,
  });
  if (!response.ok || response.body === null) {
    throw new Refused(refusalOf(await response.json().catch(() => null), response));
  }
  yield* answerLines(response.body);
}

/** Passes on what is asked for, tells the progress, and says what a broken line means. */
async function* heard(
  lines: AsyncGenerator<Record<string, unknown>>,
  { signal, progress }: Sending,
  broken: string,
): AsyncGenerator<Record<string, unknown>> {
  try {
    for await (const line of lines) {
      if (line["problem"] !== undefined) throw new Refused(refusalOf(line["problem"], null));
      const at = line["progress"] as { stage: Progress["stage"]; rows: number } | undefined;
      if (at === undefined) yield line;
      else progress({ stage: at.stage, done: at.rows, total: null });
    }
  } catch (error) {
    if (error instanceof Refused || signal.aborted) throw error;
    throw lost(broken);
  }
}

function lost(message: string): Refused {
  return new Refused({ message, problems: [], signedOut: false }, false);
}

/** Problem details (RFC 9457) as a refusal; without any, the status is all that there is to say. */
function refusalOf(details: unknown, response: Response | null): Refusal {
  const said = (typeof details === "object" && details !== null ? details : {}) as {
    title?: string;
    detail?: string;
    code?: string;
    problems?: Problem[];
  };
  const status = response === null ? "" : ` (${response.status} ${response.statusText})`;
  const wait = response?.headers.get("retry-after");
  const again = wait ? ` Try again in ${wait} seconds.` : "";
  return {
    message: `${said.detail ?? said.title ?? `The server refused this${status}.`}${again}`,
    problems: said.problems ?? [],
    signedOut: said.code === "not-signed-in" || response?.status === 401,
  };
}

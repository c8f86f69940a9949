import { OpenTable } from "./open-table";
import type { Call, Calls, FromWorker, PreviewedTable, Progress, ToWorker } from "./protocol";
import { draftLines, postDrafts, previewDrafts, Refused } from "./send-drafts";
import type { WholePreview } from "./send-drafts";

// A worker of its own: reading a hundred thousand rows would hold the page still.
const scope = self as unknown as {
  addEventListener(type: "message", listener: (event: MessageEvent<ToWorker>) => void): void;
  postMessage(message: FromWorker): void;
};

const tell = (message: FromWorker) => {
  // oxlint-disable-next-line unicorn/require-post-message-target-origin -- a worker has one listener, the rule takes it for a window
  scope.postMessage(message);
};

let lastTold = 0;
/** At most some twenty a second: each costs the page a drawing. */
const progress = (at: Progress) => {
  const now = performance.now();
  if (now - lastTold < 50 && at.total === null && at.stage !== "sending") return;
  lastTold = now;
  tell({ progress: at });
};

let table: OpenTable | null = null;
/** What was previewed last: that, and nothing else, is posted. */
let previewed: { body: Blob; leftOut: number } | null = null;
let sending = new AbortController();

const answers: { [C in Call]: (input: Calls[C]["takes"]) => Promise<Calls[C]["gives"]> } = {
  async open({ file, name, document }) {
    previewed = null;
    progress({ stage: "file", done: 0, total: file.size });
    const bytes = new Uint8Array(await file.arrayBuffer());
    progress({ stage: "reading", done: bytes.length, total: bytes.length });
    table = new OpenTable(name, bytes, document);
    return table.opened;
  },

  async match(settings) {
    previewed = null;
    const there = open();
    progress({ stage: "rows", done: there.opened.rows, total: there.opened.rows });
    return there.match(settings);
  },

  async preview({ campaign, leaveOut }) {
    previewed = null;
    const there = open();
    const places = there.sendable(leaveOut);
    const body = draftLines(places.length, (index) => there.draft(places[index]!));
    there.forget(places);
    const total = places.length;
    const whole = await previewRows(there, places, { campaign, body, total });
    const counts = there.counts();
    const faults = counts.refused + counts.conflict;
    const leftOut = leaveOut ? there.size - total : 0;
    const postable = whole.postable && (leaveOut || faults === 0);
    if (postable) previewed = { body, leftOut };
    const { problems } = whole;
    const changes = postable ? whole.changes : null;
    return { counts, leftOut, problems, postable, changes } satisfies PreviewedTable;
  },

  async post({ campaign, attempt }) {
    if (previewed === null) throw new Error("nothing was previewed");
    const { body, leftOut } = previewed;
    const { signal } = (sending = new AbortController());
    const done = await postDrafts({ campaign, body, attempt, signal, progress });
    const { posted, alreadyThere, entries } = done;
    return { posted, alreadyThere, entries, leftOut };
  },

  conflicts: async () => open().conflicts(),
  rows: async ({ show, from, count }) => open().shown(show, from, count),
  nextFault: async ({ show, after }) => open().nextFault(show, after),

  async stop() {
    sending.abort();
    return null;
  },
};

async function previewRows(
  there: OpenTable,
  places: readonly number[],
  sent: { campaign: string; body: Blob; total: number },
): Promise<WholePreview> {
  const { campaign, body, total } = sent;
  if (total === 0) return { problems: [], postable: false, changes: null };
  const { signal } = (sending = new AbortController());
  let seen = 0;
  return previewDrafts({
    campaign,
    body,
    signal,
    progress,
    row: (index, judged) => {
      there.judge(places[index]!, judged);
      seen += 1;
      progress({ stage: "check", done: seen, total: null });
    },
  });
}

function open(): OpenTable {
  if (table === null) throw new Error("no table is open");
  return table;
}

scope.addEventListener("message", ({ data }) => {
  const answer = answers[data.call] as (input: unknown) => Promise<unknown>;
  answer(data.input).then(
    (gives) => tell({ number: data.number, gives }),
    (error: unknown) =>
      tell(
        error instanceof Refused
          ? { number: data.number, refusal: error.refusal, answered: error.answered }
          : {
              number: data.number,
              failure: error instanceof Error ? error.message : String(error),
            },
      ),
  );
});

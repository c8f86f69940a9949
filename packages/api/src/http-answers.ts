import { exportAuditTrail } from "@weighhouse/desk/export-audit-trail";
import { readCampaign } from "@weighhouse/desk/read-campaign";
import { readConsistency } from "@weighhouse/desk/read-consistency";
import { readEntry } from "@weighhouse/desk/read-entry";
import { readLedgerLines } from "@weighhouse/desk/read-ledger-lines";
import { readStandings } from "@weighhouse/desk/read-standings";
import { readTreeHead } from "@weighhouse/desk/read-tree-head";
import type { Context } from "./context";

export type Question = Context & {
  request: Request;
  key: string;
  /** Whole numbers of the query, such as `?size=12`. */
  numbers: Record<string, number | undefined>;
  /** The number in the path, where there is one. */
  seq: number;
};
export type Answer = (question: Question) => Promise<Response>;

export const auditZip: Answer = async ({ desk, actor, request, key, numbers }) => {
  const { name, bytes, size, treeHead } = await exportAuditTrail(desk, actor, {
    key,
    size: numbers["size"],
  });
  return respond(request, bytes as Uint8Array<ArrayBuffer>, {
    type: "application/zip",
    tag: `${size}-${treeHead}`,
    headers: { "content-disposition": `attachment; filename="${name}"` },
  });
};

export const documentJson: Answer = async ({ desk, actor, request, key, numbers }) => {
  const read = await readCampaign(desk, actor, { key, size: numbers["size"] });
  return json(request, read.document, `${read.size}-${read.treeHead}`);
};

/** The newest, scored now where the scorer is behind: a program asks once, it doesn't watch. */
export const standingsJson: Answer = async ({ desk, actor, request, key, numbers }) => {
  const size = numbers["size"] ?? (await readTreeHead(desk, actor, { key })).size;
  const { standings } = await readStandings(desk, actor, { key, size });
  const { engine, asOf } = standings;
  return json(request, standings, `${engine}-${asOf?.size}-${asOf?.treeHead}`);
};

export const ledgerHead: Answer = async ({ desk, actor, request, key }) => {
  const { note, size } = await readTreeHead(desk, actor, { key });
  return respond(request, note, { type: "text/plain; charset=utf-8", tag: `head-${size}` });
};

export const ledgerEntries: Answer = async ({ desk, actor, request, key, numbers }) => {
  const { from, to } = numbers;
  const lines = await readLedgerLines(desk, actor, { key, from, to });
  const more = lines.to < Math.min(to ?? lines.size, lines.size);
  const next = `/api/v1/campaigns/${key}/ledger/entries?from=${lines.to}${to ? `&to=${to}` : ""}`;
  return respond(request, lines.text, {
    type: "application/x-ndjson",
    tag: `entries-${lines.from}-${lines.to}`,
    headers: more ? { link: `<${next}>; rel="next"` } : {},
  });
};

export const ledgerEntry: Answer = async ({ desk, actor, request, key, seq }) => {
  // A name is no part of the ledger: it is shown on pages, and forgotten with the person.
  const { name: _, ...entry } = await readEntry(desk, actor, { key, seq });
  return json(request, entry, `entry-${seq}-${entry.head.size}`);
};

export const ledgerConsistency: Answer = async ({ desk, actor, request, key, numbers }) => {
  const { from = 1, to } = numbers;
  const proved = await readConsistency(desk, actor, { key, from, to });
  return json(request, proved, `consistency-${proved.from}-${proved.to}`);
};

function json(request: Request, value: unknown, tag: string): Response {
  return respond(request, `${JSON.stringify(value)}\n`, { type: "application/json", tag });
}

/** Answers that a cache may keep and must ask about; one that it has already isn't sent again. */
function respond(
  request: Request,
  body: string | Uint8Array<ArrayBuffer>,
  about: { type: string; tag: string; headers?: Record<string, string> },
): Response {
  const etag = `"${about.tag}"`;
  const headers = { etag, "cache-control": "private, no-cache", ...about.headers };
  if (request.headers.get("if-none-match") === etag) {
    return new Response(null, { status: 304, headers });
  }
  return new Response(body, { headers: { "content-type": about.type, ...headers } });
}

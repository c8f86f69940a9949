import type * as z from "zod";
import { parseJson } from "@weighhouse/campaign/json-text";
import { DeskError, invalid } from "@weighhouse/desk/desk-error";
import { exportAuditTrail } from "@weighhouse/desk/export-audit-trail";
import { openSeal } from "@weighhouse/desk/open-seal";
import type { openSealInput } from "@weighhouse/desk/open-seal";
import { readCampaign } from "@weighhouse/desk/read-campaign";
import { readConsistency } from "@weighhouse/desk/read-consistency";
import { readEntry } from "@weighhouse/desk/read-entry";
import { readLedgerLines } from "@weighhouse/desk/read-ledger-lines";
import { readStandings } from "@weighhouse/desk/read-standings";
import { readTimeStamps } from "@weighhouse/desk/read-time-stamps";
import { readTreeHead } from "@weighhouse/desk/read-tree-head";
import { sealMeasurement } from "@weighhouse/desk/seal-measurement";
import { sealPrediction } from "@weighhouse/desk/seal-prediction";
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

export const ledgerTimeStamps: Answer = async ({ desk, actor, request, key }) => {
  const stamps = await readTimeStamps(desk, actor, { key });
  const { stamped, missing } = stamps;
  const tag = [stamped.length, ...missing.map(({ size }) => size)].join("-");
  return json(request, stamps, `time-stamps-${tag}`);
};

/** Files a kept seal: a prediction's where the body names a hypothesis, else a measurement's. */
export const sealedDigest: Answer = async ({ desk, actor, request, key }) => {
  const { hypothesis, until, digest, measurand, ...others } = await readJson(request);
  const seal = { keeping: "kept", digest, measurand, ...others } as never;
  const kept = { key, until: until as string, seal };
  const sealed =
    hypothesis === undefined || hypothesis === null
      ? await sealMeasurement(desk, actor, kept)
      : await sealPrediction(desk, actor, { ...kept, hypothesis: hypothesis as string });
  return created(sealed);
};

export const openedSeal: Answer = async ({ desk, actor, request, key }) => {
  const opening = (await readJson(request)) as Omit<z.input<typeof openSealInput>, "key">;
  return created(await openSeal(desk, actor, { ...opening, key }));
};

/** The JSON object that was sent; the use-case reads what is in it. */
async function readJson(request: Request): Promise<Record<string, unknown>> {
  const type = request.headers.get("content-type") ?? "nothing";
  if (!/^application\/json\b/.test(type)) {
    throw new DeskError("invalid", `found content of type ${type}; allowed is application/json`);
  }
  const parsed = parseJson(await request.text());
  if (parsed.problems.length > 0) throw invalid(parsed.problems);
  const { value } = parsed;
  if (typeof value === "object" && value !== null && !Array.isArray(value)) {
    return value as Record<string, unknown>;
  }
  throw new DeskError("invalid", "found no object in the body; allowed is a JSON object");
}

function created(value: unknown): Response {
  return new Response(`${JSON.stringify(value)}\n`, {
    status: 201,
    headers: { "content-type": "application/json", "cache-control": "no-store" },
  });
}

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

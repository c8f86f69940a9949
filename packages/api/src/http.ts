import { DeskError } from "@weighhouse/desk/desk-error";
import type { Context } from "./context";
import * as answers from "./http-answers";
import type { Answer } from "./http-answers";
import { details, problemResponse } from "./problem-details";

/** What stands below `/api/v1/campaigns/{key}/`, with the numbers that its query may hold. */
const routes: { path: RegExp; takes: string[]; answer: Answer }[] = [
  { path: /^audit\.zip$/, takes: ["size"], answer: answers.auditZip },
  { path: /^document\.json$/, takes: ["size"], answer: answers.documentJson },
  { path: /^standings\.json$/, takes: ["size"], answer: answers.standingsJson },
  { path: /^ledger\/head$/, takes: [], answer: answers.ledgerHead },
  { path: /^ledger\/entries$/, takes: ["from", "to"], answer: answers.ledgerEntries },
  { path: /^ledger\/entries\/(\d{1,15})$/, takes: [], answer: answers.ledgerEntry },
  { path: /^ledger\/consistency$/, takes: ["from", "to"], answer: answers.ledgerConsistency },
];

/**
 * Answers a GET below `/api/v1/campaigns/{key}/`: of public campaigns to everyone, of others to
 * those who have a place in them. Refusals are problem details (RFC 9457).
 */
export async function answerHttp(ctx: Context, request: Request): Promise<Response> {
  if (request.method !== "GET" && request.method !== "HEAD") {
    return details({ status: 405, title: "Method Not Allowed" }, { allow: "GET, HEAD" });
  }
  try {
    return await route(ctx, request);
  } catch (error) {
    return problemResponse(error, ctx.log);
  }
}

async function route(ctx: Context, request: Request): Promise<Response> {
  const url = new URL(request.url);
  const [, key, below] = /^\/api\/v1\/campaigns\/([^/]+)\/(.+)$/.exec(url.pathname) ?? [];
  for (const { path, takes, answer } of routes) {
    const match = path.exec(below ?? "");
    if (!key || !match) continue;
    const numbers = readQuery(url.searchParams, takes);
    return answer({ ...ctx, request, key, numbers, seq: Number(match[1] ?? 0) });
  }
  throw new DeskError("not-found", `found nothing at ${url.pathname}`);
}

/** Whole numbers of the query; anything else in it is refused, as it would be overlooked else. */
function readQuery(query: URLSearchParams, takes: string[]): Record<string, number | undefined> {
  const read: Record<string, number | undefined> = {};
  for (const [name, text] of query) {
    if (!takes.includes(name) || !/^\d{1,15}$/.test(text)) {
      const allowed = takes.length > 0 ? `${takes.join(", ")} as whole numbers` : "no query";
      throw new DeskError("invalid", `found ${name}=${text} in the query; allowed ${allowed}`);
    }
    read[name] = Number(text);
  }
  return read;
}

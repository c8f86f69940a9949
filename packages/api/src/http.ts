import { DeskError } from "@weighhouse/desk/desk-error";
import type { Context } from "./context";
import * as answers from "./http-answers";
import type { Answer } from "./http-answers";
import { details, problemResponse } from "./problem-details";

type Route = { method: "GET" | "POST"; path: RegExp; takes: string[]; answer: Answer };

/** What stands below `/api/v1/campaigns/{key}/`, with the numbers that its query may hold. */
const routes: Route[] = [
  { method: "GET", path: /^audit\.zip$/, takes: ["size"], answer: answers.auditZip },
  { method: "GET", path: /^document\.json$/, takes: ["size"], answer: answers.documentJson },
  { method: "GET", path: /^standings\.json$/, takes: ["size"], answer: answers.standingsJson },
  { method: "GET", path: /^ledger\/head$/, takes: [], answer: answers.ledgerHead },
  {
    method: "GET",
    path: /^ledger\/entries$/,
    takes: ["from", "to"],
    answer: answers.ledgerEntries,
  },
  { method: "GET", path: /^ledger\/entries\/(\d{1,15})$/, takes: [], answer: answers.ledgerEntry },
  {
    method: "GET",
    path: /^ledger\/consistency$/,
    takes: ["from", "to"],
    answer: answers.ledgerConsistency,
  },
  { method: "GET", path: /^ledger\/time-stamps$/, takes: [], answer: answers.ledgerTimeStamps },
  { method: "POST", path: /^seals$/, takes: [], answer: answers.sealedDigest },
  { method: "POST", path: /^seals\/openings$/, takes: [], answer: answers.openedSeal },
];

/**
 * Answers what is asked below `/api/v1/campaigns/{key}/`: of public campaigns everyone reads, of
 * others those who have a place in them; what is sent is entered for who may enter it. Refusals are
 * problem details (RFC 9457).
 */
export async function answerHttp(ctx: Context, request: Request): Promise<Response> {
  try {
    return await route(ctx, request);
  } catch (error) {
    return problemResponse(error, ctx.log);
  }
}

async function route(ctx: Context, request: Request): Promise<Response> {
  const url = new URL(request.url);
  const [, key, below = ""] = /^\/api\/v1\/campaigns\/([^/]+)\/(.+)$/.exec(url.pathname) ?? [];
  const method = request.method === "HEAD" ? "GET" : request.method;
  const there = routes.filter(({ path }) => path.test(below));
  const found = there.find((one) => one.method === method);
  if (!key || there.length === 0) {
    throw new DeskError("not-found", `found nothing at ${url.pathname}`);
  }
  if (found === undefined) {
    const allow = there.map((one) => (one.method === "GET" ? "GET, HEAD" : one.method)).join(", ");
    return details({ status: 405, title: "Method Not Allowed" }, { allow });
  }
  const numbers = readQuery(url.searchParams, found.takes);
  const seq = Number(found.path.exec(below)?.[1] ?? 0);
  const context = method === "GET" ? ctx : onPrimary(ctx);
  return found.answer({ ...context, request, key, numbers, seq });
}

/** A replica lags, and who decides on it decides on yesterday. */
function onPrimary(ctx: Context): Context {
  const { store } = ctx.desk;
  return { ...ctx, desk: { ...ctx.desk, store: { ...store, readDb: store.db } } };
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

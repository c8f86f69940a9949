import { DeskError } from "@weighhouse/desk/desk-error";
import type { Log } from "@weighhouse/store/open-store";
import { answers } from "./desk-error-codes";
import { ApiError, apiAnswers } from "./http/api-error";

/** RFC 9457, of a type that says no more than the status; the code and the fields at fault beside. */
export type ProblemDetails = { type: "about:blank"; status: number; title: string } & Partial<{
  code: string;
  detail: string;
  problems: DeskError["problems"];
}>;

/** A refusal as problem details, also for a line of an answer that has begun already. */
export function problemDetails(error: unknown, log: Log): ProblemDetails {
  if (error instanceof DeskError) {
    const { status, title } = answers[error.code];
    const { code, message: detail, problems } = error;
    const faults = problems.length > 0 ? { problems } : {};
    return { type: "about:blank", status, title, code, detail, ...faults };
  }
  if (error instanceof ApiError) {
    const { code, message: detail } = error;
    return { type: "about:blank", ...apiAnswers[code], code, detail };
  }
  // What nobody foresaw is told in no words of its own: they may hold what is nobody's business.
  log.error({ error: String(error), stack: error instanceof Error ? error.stack : null }, "HTTP");
  return { type: "about:blank", status: 500, title: "Internal Server Error" };
}

export function problemResponse(error: unknown, log: Log): Response {
  const problem = problemDetails(error, log);
  const headers = {
    "content-type": "application/problem+json",
    "cache-control": "no-store",
    ...fieldsOf(error),
  };
  return new Response(JSON.stringify(problem), { status: problem.status, headers });
}

/** What a client needs beside the words: which credentials would do (RFC 6750), when to come again. */
function fieldsOf(error: unknown): Record<string, string> {
  if (error instanceof ApiError) return error.headers;
  if (!(error instanceof DeskError)) return {};
  switch (error.code) {
    case "not-signed-in":
      return { "www-authenticate": "Bearer" };
    case "insufficient-scope":
      return { "www-authenticate": 'Bearer error="insufficient_scope"' };
    case "busy":
      return { "retry-after": "1" };
    default:
      return {};
  }
}

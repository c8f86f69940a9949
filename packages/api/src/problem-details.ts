import { DeskError } from "@weighhouse/desk/desk-error";
import type { Log } from "@weighhouse/store/open-store";
import { answers } from "./desk-error-codes";

const INTERNAL = { status: 500, title: "Internal Server Error" };

/** A refusal as problem details (RFC 9457), the desk's code and the fields at fault beside them. */
export function problemResponse(error: unknown, log: Log): Response {
  if (error instanceof DeskError) {
    const { status, title } = answers[error.code];
    const { code, message: detail, problems } = error;
    return details({ status, title, detail, code, ...(problems.length > 0 ? { problems } : {}) });
  }
  log.error({ error: String(error), stack: error instanceof Error ? error.stack : null }, "HTTP");
  return details(INTERNAL);
}

/** Problem details of a type that says no more than the status itself. */
export function details(
  problem: { status: number; title: string } & Record<string, unknown>,
  headers: Record<string, string> = {},
): Response {
  const body = JSON.stringify({ type: "about:blank", ...problem });
  const fixed = { "content-type": "application/problem+json", "cache-control": "no-store" };
  return new Response(body, { status: problem.status, headers: { ...fixed, ...headers } });
}

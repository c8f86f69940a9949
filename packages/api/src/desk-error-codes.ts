import type { TRPCError } from "@trpc/server";
import type { DeskErrorCode } from "@weighhouse/desk/desk-error";

type Answer = { status: number; title: string; trpc: TRPCError["code"] };

/**
 * What each refusal of the desk is on the wire. Total: a new code must be given its answer here.
 * Titles are the status phrases of RFC 9110, as RFC 9457 asks of problems of type about:blank.
 */
export const answers: Record<DeskErrorCode, Answer> = {
  "not-signed-in": { status: 401, title: "Unauthorized", trpc: "UNAUTHORIZED" },
  "not-allowed": { status: 403, title: "Forbidden", trpc: "FORBIDDEN" },
  "insufficient-scope": { status: 403, title: "Forbidden", trpc: "FORBIDDEN" },
  "not-found": { status: 404, title: "Not Found", trpc: "NOT_FOUND" },
  invalid: { status: 422, title: "Unprocessable Content", trpc: "UNPROCESSABLE_CONTENT" },
  conflict: { status: 409, title: "Conflict", trpc: "CONFLICT" },
  closed: { status: 412, title: "Precondition Failed", trpc: "PRECONDITION_FAILED" },
  busy: { status: 503, title: "Service Unavailable", trpc: "SERVICE_UNAVAILABLE" },
};

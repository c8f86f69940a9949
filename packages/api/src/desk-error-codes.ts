import type { TRPCError } from "@trpc/server";
import type { DeskErrorCode } from "@weighhouse/desk/desk-error";

type Answer = { status: number; trpc: TRPCError["code"]; title: string };

/** What each refusal of the desk is on the wire. Total: a new code must be given its answer here. */
export const answers: Record<DeskErrorCode, Answer> = {
  "not-signed-in": { status: 401, trpc: "UNAUTHORIZED", title: "Sign in first" },
  "not-allowed": { status: 403, trpc: "FORBIDDEN", title: "Not allowed" },
  "not-found": { status: 404, trpc: "NOT_FOUND", title: "Not found" },
  invalid: { status: 422, trpc: "UNPROCESSABLE_CONTENT", title: "Not valid" },
  conflict: { status: 409, trpc: "CONFLICT", title: "In conflict with what is there" },
  closed: { status: 409, trpc: "PRECONDITION_FAILED", title: "Closed" },
  busy: { status: 503, trpc: "SERVICE_UNAVAILABLE", title: "Busy, try again" },
};

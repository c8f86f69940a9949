import { initTRPC, TRPCError } from "@trpc/server";
import superjson from "superjson";
import type { z } from "zod";
import { DeskError } from "@weighhouse/desk/desk-error";
import type { Problem } from "@weighhouse/campaign/problem";
import type { Context } from "./context";
import { answers } from "./desk-error-codes";

/** What a failed call tells the browser beside its message: the desk's code, and field by field. */
export type Refusal = { code: DeskError["code"]; problems: Problem[] };

const trpc = initTRPC.context<Context>().create({
  transformer: superjson,
  errorFormatter({ shape, error }) {
    const refused = error.cause instanceof DeskError ? error.cause : null;
    const refusal: Refusal | null = refused && { code: refused.code, problems: refused.problems };
    // What nobody foresaw is logged where it happened; its words may hold what is nobody's business.
    const message =
      refused || error.code !== "INTERNAL_SERVER_ERROR" ? shape.message : "Internal error";
    const { stack: _, ...data } = shape.data;
    return { ...shape, message, data: { ...data, refusal } };
  },
  sse: {
    ping: { enabled: true, intervalMs: 15_000 },
    client: { reconnectAfterInactivityMs: 40_000 },
  },
});

/** Gives the desk's refusals their code on the wire. */
const refusals = trpc.middleware(async ({ next }) => {
  const result = await next();
  if (result.ok || !(result.error.cause instanceof DeskError)) return result;
  const cause = result.error.cause;
  throw new TRPCError({ code: answers[cause.code].trpc, message: cause.message, cause });
});

/** A replica lags, and what is decided on it may be out of date: whoever writes reads the primary. */
const decisionsOnPrimary = trpc.middleware(({ ctx, type, next }) => {
  if (type !== "mutation") return next();
  const { store } = ctx.desk;
  return next({ ctx: { desk: { ...ctx.desk, store: { ...store, readDb: store.db } } } });
});

export const router = trpc.router;

export const procedure = trpc.procedure.use(refusals).use(decisionsOnPrimary);

/**
 * Gives a procedure its input type without reading it: the use-case reads it, once, by this same
 * schema, and refuses it with a JSON Pointer to each field at fault.
 */
export function takes<S extends z.ZodType>(_schema: S) {
  return (raw: unknown) => raw as z.input<S>;
}

import { readEntries, readEntriesInput } from "@weighhouse/desk/read-entries";
import { readEntry, readEntryInput } from "@weighhouse/desk/read-entry";
import { procedure, router, takes } from "../trpc";

export const ledgerRouter = router({
  entries: procedure
    .input(takes(readEntriesInput))
    .query(({ ctx, input }) => readEntries(ctx.desk, ctx.actor, input)),
  entry: procedure
    .input(takes(readEntryInput))
    .query(({ ctx, input }) => readEntry(ctx.desk, ctx.actor, input)),
});

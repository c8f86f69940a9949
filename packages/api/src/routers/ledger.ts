import { makeRemark, makeRemarkInput } from "@weighhouse/desk/make-remark";
import { readEntries, readEntriesInput } from "@weighhouse/desk/read-entries";
import { readEntry, readEntryInput } from "@weighhouse/desk/read-entry";
import { readRemarks, readRemarksInput } from "@weighhouse/desk/read-remarks";
import { readTimeStamps, readTimeStampsInput } from "@weighhouse/desk/read-time-stamps";
import { procedure, router, takes } from "../trpc";

export const ledgerRouter = router({
  entries: procedure
    .input(takes(readEntriesInput))
    .query(({ ctx, input }) => readEntries(ctx.desk, ctx.actor, input)),
  entry: procedure
    .input(takes(readEntryInput))
    .query(({ ctx, input }) => readEntry(ctx.desk, ctx.actor, input)),
  remark: procedure
    .input(takes(makeRemarkInput))
    .mutation(({ ctx, input }) => makeRemark(ctx.desk, ctx.actor, input)),
  remarks: procedure
    .input(takes(readRemarksInput))
    .query(({ ctx, input }) => readRemarks(ctx.desk, ctx.actor, input)),
  timeStamps: procedure
    .input(takes(readTimeStampsInput))
    .query(({ ctx, input }) => readTimeStamps(ctx.desk, ctx.actor, input)),
});

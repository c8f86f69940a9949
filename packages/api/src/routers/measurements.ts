import { correctMeasurement, correctMeasurementInput } from "@weighhouse/desk/correct-measurement";
import {
  correctMeasurements,
  correctMeasurementsInput,
  previewCorrections,
} from "@weighhouse/desk/correct-measurements";
import { postMeasurements, postMeasurementsInput } from "@weighhouse/desk/post-measurements";
import {
  previewMeasurements,
  previewMeasurementsInput,
} from "@weighhouse/desk/preview-measurements";
import { readMatches, readMatchesInput } from "@weighhouse/desk/read-match";
import {
  readMeasurementHistory,
  readMeasurementHistoryInput,
} from "@weighhouse/desk/read-measurement-history";
import {
  forgetMatch,
  forgetMatchInput,
  rememberMatch,
  rememberMatchInput,
} from "@weighhouse/desk/remember-match";
import {
  setAsideMeasurement,
  setAsideMeasurementInput,
} from "@weighhouse/desk/set-aside-measurement";
import {
  previewWithdrawal,
  previewWithdrawalInput,
  withdrawMeasurements,
  withdrawMeasurementsInput,
} from "@weighhouse/desk/withdraw-measurements";
import { procedure, router, takes } from "../trpc";

export const measurementsRouter = router({
  // A mutation for its size alone: a table doesn't fit into an address. It changes nothing.
  preview: procedure
    .input(takes(previewMeasurementsInput))
    .mutation(({ ctx, input }) => previewMeasurements(ctx.desk, ctx.actor, input)),
  post: procedure
    .input(takes(postMeasurementsInput))
    .mutation(({ ctx, input }) => postMeasurements(ctx.desk, ctx.actor, input)),
  // A mutation for its size alone: two hundred columns don't fit into an address.
  matches: procedure
    .input(takes(readMatchesInput))
    .mutation(({ ctx, input }) => readMatches(ctx.desk, ctx.actor, input)),
  rememberMatch: procedure
    .input(takes(rememberMatchInput))
    .mutation(({ ctx, input }) => rememberMatch(ctx.desk, ctx.actor, input)),
  forgetMatch: procedure
    .input(takes(forgetMatchInput))
    .mutation(({ ctx, input }) => forgetMatch(ctx.desk, ctx.actor, input)),
  setAside: procedure
    .input(takes(setAsideMeasurementInput))
    .mutation(({ ctx, input }) => setAsideMeasurement(ctx.desk, ctx.actor, input)),
  correct: procedure
    .input(takes(correctMeasurementInput))
    .mutation(({ ctx, input }) => correctMeasurement(ctx.desk, ctx.actor, input)),
  correctMany: procedure
    .input(takes(correctMeasurementsInput))
    .mutation(({ ctx, input }) => correctMeasurements(ctx.desk, ctx.actor, input)),
  previewCorrections: procedure
    .input(takes(correctMeasurementsInput))
    .mutation(({ ctx, input }) => previewCorrections(ctx.desk, ctx.actor, input)),
  previewWithdrawal: procedure
    .input(takes(previewWithdrawalInput))
    .mutation(({ ctx, input }) => previewWithdrawal(ctx.desk, ctx.actor, input)),
  withdraw: procedure
    .input(takes(withdrawMeasurementsInput))
    .mutation(({ ctx, input }) => withdrawMeasurements(ctx.desk, ctx.actor, input)),
  history: procedure
    .input(takes(readMeasurementHistoryInput))
    .query(({ ctx, input }) => readMeasurementHistory(ctx.desk, ctx.actor, input)),
});

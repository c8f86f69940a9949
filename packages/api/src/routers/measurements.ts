import { postMeasurements, postMeasurementsInput } from "@weighhouse/desk/post-measurements";
import {
  previewMeasurements,
  previewMeasurementsInput,
} from "@weighhouse/desk/preview-measurements";
import {
  setAsideMeasurement,
  setAsideMeasurementInput,
} from "@weighhouse/desk/set-aside-measurement";
import { procedure, router, takes } from "../trpc";

export const measurementsRouter = router({
  // A mutation for its size alone: a table doesn't fit into an address. It changes nothing.
  preview: procedure
    .input(takes(previewMeasurementsInput))
    .mutation(({ ctx, input }) => previewMeasurements(ctx.desk, ctx.actor, input)),
  post: procedure
    .input(takes(postMeasurementsInput))
    .mutation(({ ctx, input }) => postMeasurements(ctx.desk, ctx.actor, input)),
  setAside: procedure
    .input(takes(setAsideMeasurementInput))
    .mutation(({ ctx, input }) => setAsideMeasurement(ctx.desk, ctx.actor, input)),
});

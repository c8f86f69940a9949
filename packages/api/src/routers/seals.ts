import { openSeal, openSealInput } from "@weighhouse/desk/open-seal";
import { readSeals, readSealsInput } from "@weighhouse/desk/read-seals";
import { sealMeasurement, sealMeasurementInput } from "@weighhouse/desk/seal-measurement";
import { sealPrediction, sealPredictionInput } from "@weighhouse/desk/seal-prediction";
import { procedure, router, takes } from "../trpc";

export const sealsRouter = router({
  list: procedure
    .input(takes(readSealsInput))
    .query(({ ctx, input }) => readSeals(ctx.desk, ctx.actor, input)),
  prediction: procedure
    .input(takes(sealPredictionInput))
    .mutation(({ ctx, input }) => sealPrediction(ctx.desk, ctx.actor, input)),
  measurement: procedure
    .input(takes(sealMeasurementInput))
    .mutation(({ ctx, input }) => sealMeasurement(ctx.desk, ctx.actor, input)),
  open: procedure
    .input(takes(openSealInput))
    .mutation(({ ctx, input }) => openSeal(ctx.desk, ctx.actor, input)),
});

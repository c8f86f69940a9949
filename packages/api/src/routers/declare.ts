import * as desk from "@weighhouse/desk/declare";
import { procedure, router, takes } from "../trpc";

export const declareRouter = router({
  observable: procedure
    .input(takes(desk.declareObservableInput))
    .mutation(({ ctx, input }) => desk.declareObservable(ctx.desk, ctx.actor, input)),
  measurand: procedure
    .input(takes(desk.declareMeasurandInput))
    .mutation(({ ctx, input }) => desk.declareMeasurand(ctx.desk, ctx.actor, input)),
  sharedError: procedure
    .input(takes(desk.declareSharedErrorInput))
    .mutation(({ ctx, input }) => desk.declareSharedError(ctx.desk, ctx.actor, input)),
  facility: procedure
    .input(takes(desk.declareFacilityInput))
    .mutation(({ ctx, input }) => desk.declareFacility(ctx.desk, ctx.actor, input)),
});

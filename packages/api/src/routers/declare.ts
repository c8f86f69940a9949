import { closeMeasurand, closeMeasurandInput } from "@weighhouse/desk/close-measurand";
import * as desk from "@weighhouse/desk/declare";
import { objectToReference, objectToReferenceInput } from "@weighhouse/desk/object-to-reference";
import { proposeMeasurand, proposeMeasurandInput } from "@weighhouse/desk/propose-measurand";
import { procedure, router, takes } from "../trpc";

export const declareRouter = router({
  observable: procedure
    .input(takes(desk.declareObservableInput))
    .mutation(({ ctx, input }) => desk.declareObservable(ctx.desk, ctx.actor, input)),
  measurand: procedure
    .input(takes(desk.declareMeasurandInput))
    .mutation(({ ctx, input }) => desk.declareMeasurand(ctx.desk, ctx.actor, input)),
  amendMeasurand: procedure
    .input(takes(desk.amendMeasurandInput))
    .mutation(({ ctx, input }) => desk.amendMeasurand(ctx.desk, ctx.actor, input)),
  closeMeasurand: procedure
    .input(takes(closeMeasurandInput))
    .mutation(({ ctx, input }) => closeMeasurand(ctx.desk, ctx.actor, input)),
  proposeMeasurand: procedure
    .input(takes(proposeMeasurandInput))
    .mutation(({ ctx, input }) => proposeMeasurand(ctx.desk, ctx.actor, input)),
  objectToReference: procedure
    .input(takes(objectToReferenceInput))
    .mutation(({ ctx, input }) => objectToReference(ctx.desk, ctx.actor, input)),
  derived: procedure
    .input(takes(desk.declareDerivedInput))
    .mutation(({ ctx, input }) => desk.declareDerived(ctx.desk, ctx.actor, input)),
  sharedError: procedure
    .input(takes(desk.declareSharedErrorInput))
    .mutation(({ ctx, input }) => desk.declareSharedError(ctx.desk, ctx.actor, input)),
  facility: procedure
    .input(takes(desk.declareFacilityInput))
    .mutation(({ ctx, input }) => desk.declareFacility(ctx.desk, ctx.actor, input)),
});

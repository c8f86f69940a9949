import { amendHypothesis, amendHypothesisInput } from "@weighhouse/desk/amend-hypothesis";
import { readRetired, readRetiredInput } from "@weighhouse/desk/read-retired";
import { registerHypothesis, registerHypothesisInput } from "@weighhouse/desk/register-hypothesis";
import { retireHypothesis, retireHypothesisInput } from "@weighhouse/desk/retire-hypothesis";
import { procedure, router, takes } from "../trpc";

export const hypothesesRouter = router({
  register: procedure
    .input(takes(registerHypothesisInput))
    .mutation(({ ctx, input }) => registerHypothesis(ctx.desk, ctx.actor, input)),
  amend: procedure
    .input(takes(amendHypothesisInput))
    .mutation(({ ctx, input }) => amendHypothesis(ctx.desk, ctx.actor, input)),
  retire: procedure
    .input(takes(retireHypothesisInput))
    .mutation(({ ctx, input }) => retireHypothesis(ctx.desk, ctx.actor, input)),
  retired: procedure
    .input(takes(readRetiredInput))
    .query(({ ctx, input }) => readRetired(ctx.desk, ctx.actor, input)),
});

import { addMember, addMemberInput } from "@weighhouse/desk/add-member";
import { addTeam, addTeamInput } from "@weighhouse/desk/add-team";
import { listMembers, listMembersInput } from "@weighhouse/desk/list-members";
import { procedure, router, takes } from "../trpc";

export const teamsRouter = router({
  add: procedure
    .input(takes(addTeamInput))
    .mutation(({ ctx, input }) => addTeam(ctx.desk, ctx.actor, input)),
});

export const membersRouter = router({
  list: procedure
    .input(takes(listMembersInput))
    .query(({ ctx, input }) => listMembers(ctx.desk, ctx.actor, input)),
  add: procedure
    .input(takes(addMemberInput))
    .mutation(({ ctx, input }) => addMember(ctx.desk, ctx.actor, input)),
});

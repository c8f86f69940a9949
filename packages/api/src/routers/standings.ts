import { citeStandings, citeStandingsInput } from "@weighhouse/desk/cite-standings";
import { readCitations, readCitationsInput } from "@weighhouse/desk/read-citations";
import { readCitation, readCitationInput } from "@weighhouse/desk/read-citation";
import { readStandings, readStandingsInput } from "@weighhouse/desk/read-standings";
import { readTimeline, readTimelineInput } from "@weighhouse/desk/read-timeline";
import { procedure, router, takes } from "../trpc";

export const standingsRouter = router({
  get: procedure
    .input(takes(readStandingsInput))
    .query(({ ctx, input }) => readStandings(ctx.desk, ctx.actor, input)),
  timeline: procedure
    .input(takes(readTimelineInput))
    .query(({ ctx, input }) => readTimeline(ctx.desk, ctx.actor, input)),
  cite: procedure
    .input(takes(citeStandingsInput))
    .mutation(({ ctx, input }) => citeStandings(ctx.desk, ctx.actor, input)),
  cited: procedure
    .input(takes(readCitationInput))
    .query(({ ctx, input }) => readCitation(ctx.desk, ctx.actor, input)),
  citations: procedure
    .input(takes(readCitationsInput))
    .query(({ ctx, input }) => readCitations(ctx.desk, ctx.actor, input)),
});

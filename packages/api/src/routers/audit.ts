import {
  summariseAuditTrail,
  summariseAuditTrailInput,
} from "@weighhouse/desk/summarise-audit-trail";
import { procedure, router, takes } from "../trpc";

export const auditRouter = router({
  summary: procedure
    .input(takes(summariseAuditTrailInput))
    .query(({ ctx, input }) => summariseAuditTrail(ctx.desk, ctx.actor, input)),
});

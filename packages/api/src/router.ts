import { apiKeysRouter } from "./routers/api-keys";
import { auditRouter } from "./routers/audit";
import { campaignsRouter } from "./routers/campaigns";
import { declareRouter } from "./routers/declare";
import { eventsRouter } from "./routers/events";
import { hypothesesRouter } from "./routers/hypotheses";
import { ledgerRouter } from "./routers/ledger";
import { measurementsRouter } from "./routers/measurements";
import { membersRouter, teamsRouter } from "./routers/people";
import { sealsRouter } from "./routers/seals";
import { standingsRouter } from "./routers/standings";
import { webhooksRouter } from "./routers/webhooks";

import { router } from "./trpc";

export const appRouter = router({
  campaigns: campaignsRouter,
  declare: declareRouter,
  teams: teamsRouter,
  members: membersRouter,
  standings: standingsRouter,
  hypotheses: hypothesesRouter,
  measurements: measurementsRouter,
  seals: sealsRouter,
  ledger: ledgerRouter,
  audit: auditRouter,
  apiKeys: apiKeysRouter,
  webhooks: webhooksRouter,
  events: eventsRouter,
});

export type AppRouter = typeof appRouter;

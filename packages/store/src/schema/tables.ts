// The one list of tables that drizzle and better-auth's adapter take.
export { account, rateLimit, session, user, verification } from "./accounts";
export { apiKeys } from "./api-keys";
export { campaigns } from "./campaigns";
export { entries, heads, nodes, signingKeys, tips } from "./ledger";
export { keptAnswers } from "./kept-answers";
export { memberships } from "./memberships";
export { measurements, parts } from "./projections";
export { rememberedMatches } from "./remembered-matches";
export { requestRates } from "./request-rates";
export { heldSeals } from "./seals";
export { scorerStates, standings, timelinePoints, timelineSteps } from "./standings";
export { timeStamps } from "./time-stamps";
export { stagedEntries, stagedFates, stagedMeasurements, stagedParts, uploads } from "./uploads";
export { webhookDeliveries, webhooks } from "./webhooks";

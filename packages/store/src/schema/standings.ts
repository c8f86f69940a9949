import { sql } from "drizzle-orm";
import {
  check,
  doublePrecision,
  foreignKey,
  integer,
  pgTable,
  primaryKey,
  text,
} from "drizzle-orm/pg-core";
import { instant } from "../instant";
import { campaigns } from "./campaigns";
import { campaignId, engineColumn, jsonText } from "./columns";

/** What an engine made of a size: the standings document, or why it can't be scored. */
export const standings = pgTable(
  "standings",
  {
    campaignId: campaignId().references(() => campaigns.id),
    size: integer("size").notNull(),
    engine: engineColumn(),
    scoredAt: instant("scored_at")
      .notNull()
      .default(sql`clock_timestamp()`),
    /** The document's bytes as the engine wrote them. */
    document: text("document"),
    problems: jsonText("problems"),
    /** Keys of rank 1 and 2, for the list of campaigns. */
    leader: text("leader"),
    runnerUp: text("runner_up"),
    leaderPosterior: doublePrecision("leader_posterior"),
    /** log10 Bayes factor of rank 1 against rank 2. */
    log10Lead: doublePrecision("log10_lead"),
  },
  (table) => [
    primaryKey({
      name: "standings_pkey",
      columns: [table.campaignId, table.size, table.engine],
    }),
    check(
      "standings_outcome_check",
      sql`(${table.document} is null) <> (${table.problems} is null)`,
    ),
  ],
);

/** A transaction that changed measurements or hypotheses, and what moved the standings in it. */
export const timelineSteps = pgTable(
  "timeline_steps",
  {
    campaignId: campaignId().references(() => campaigns.id),
    engine: engineColumn(),
    /** Size at the transaction's end. */
    size: integer("size").notNull(),
    at: instant("at").notNull(),
    seq: integer("seq").notNull(),
    kind: text("kind").notNull(),
    facilities: text("facilities").array().notNull(),
    measurements: integer("measurements").notNull(),
  },
  (table) => [
    primaryKey({
      name: "timeline_steps_pkey",
      columns: [table.campaignId, table.engine, table.size],
    }),
  ],
);

export const timelinePoints = pgTable(
  "timeline_points",
  {
    campaignId: campaignId(),
    engine: engineColumn(),
    size: integer("size").notNull(),
    hypothesis: text("hypothesis").notNull(),
    /** The engine's order: the document's hypotheses, then the two that stand beside them. */
    place: integer("place").notNull(),
    /** Natural log; null: the likelihood is zero. */
    lnEvidence: doublePrecision("ln_evidence"),
  },
  (table) => [
    primaryKey({
      name: "timeline_points_pkey",
      columns: [table.campaignId, table.engine, table.size, table.hypothesis],
    }),
    foreignKey({
      name: "timeline_points_step_fkey",
      columns: [table.campaignId, table.engine, table.size],
      foreignColumns: [timelineSteps.campaignId, timelineSteps.engine, timelineSteps.size],
    }).onDelete("cascade"),
  ],
);

/** The engine's state with the size it stands at: any scorer goes on from there. */
export const scorerStates = pgTable(
  "scorer_states",
  {
    campaignId: campaignId().references(() => campaigns.id),
    engine: engineColumn(),
    stateVersion: integer("state_version").notNull(),
    size: integer("size").notNull(),
    /** null: the document of that size can't be scored. */
    state: text("state"),
  },
  (table) => [
    primaryKey({
      name: "scorer_states_pkey",
      columns: [table.campaignId, table.engine, table.stateVersion],
    }),
  ],
);

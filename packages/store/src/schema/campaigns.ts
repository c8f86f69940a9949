import { sql } from "drizzle-orm";
import { check, integer, pgTable, text } from "drizzle-orm/pg-core";
import { instant } from "../instant";

/** What a campaign is outside its document; title and rules stand in its projection. */
export const campaigns = pgTable(
  "campaigns",
  {
    id: integer("id").primaryKey().generatedByDefaultAsIdentity(),
    key: text("key").notNull().unique("campaigns_key_unique"),
    /** The random ledger id of entry 0: the origin line of its tree heads. */
    ledger: text("ledger").notNull().unique("campaigns_ledger_unique"),
    clock: text("clock", { enum: ["real", "simulated"] }).notNull(),
    /** Who may read it: everyone, or its members. */
    visibility: text("visibility", { enum: ["public", "members"] }).notNull(),
    openedAt: instant("opened_at").notNull(),
  },
  (table) => [
    check("campaigns_clock_check", sql`${table.clock} in ('real', 'simulated')`),
    check("campaigns_visibility_check", sql`${table.visibility} in ('public', 'members')`),
  ],
);

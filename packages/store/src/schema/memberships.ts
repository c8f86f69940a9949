import { sql } from "drizzle-orm";
import { check, pgTable, primaryKey, text, uniqueIndex } from "drizzle-orm/pg-core";
import { instant } from "../instant";
import { user } from "./accounts";
import { campaigns } from "./campaigns";
import { campaignId } from "./columns";

/**
 * Who takes part in a campaign. Entries name the opaque member id alone, so that a person can be
 * forgotten (user_id null) without breaking the tree.
 */
export const memberships = pgTable(
  "memberships",
  {
    campaignId: campaignId().references(() => campaigns.id),
    member: text("member").notNull(),
    userId: text("user_id").references(() => user.id, { onDelete: "set null" }),
    role: text("role", { enum: ["coordinator", "member", "reader"] }).notNull(),
    team: text("team"),
    addedAt: instant("added_at")
      .notNull()
      .default(sql`now()`),
  },
  (table) => [
    primaryKey({ name: "memberships_pkey", columns: [table.campaignId, table.member] }),
    uniqueIndex("memberships_user_unique").on(table.campaignId, table.userId),
    check("memberships_role_check", sql`${table.role} in ('coordinator', 'member', 'reader')`),
  ],
);

import { sql } from "drizzle-orm";
import { pgTable, primaryKey, text } from "drizzle-orm/pg-core";
import { instant } from "../instant";
import { campaigns } from "./campaigns";
import { campaignId, jsonText } from "./columns";

/** How a facility's tables are read: what somebody chose when one with the same columns was posted. */
export const rememberedMatches = pgTable(
  "remembered_matches",
  {
    campaignId: campaignId().references(() => campaigns.id),
    facility: text("facility").notNull(),
    /** SHA-256 of the columns' names, lower-case hexadecimal. */
    columns: text("columns").notNull(),
    choices: jsonText("choices").notNull(),
    rememberedAt: instant("remembered_at")
      .notNull()
      .default(sql`now()`),
  },
  (table) => [
    primaryKey({
      name: "remembered_matches_pkey",
      columns: [table.campaignId, table.facility, table.columns],
    }),
  ],
);

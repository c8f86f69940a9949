import { sql } from "drizzle-orm";
import { foreignKey, integer, pgTable, primaryKey, text } from "drizzle-orm/pg-core";
import { instant } from "../instant";
import { bytea, campaignId } from "./columns";
import { heads } from "./ledger";

/** RFC 3161 time-stamps over signed tree heads, as the authority answered. Never changed. */
export const timeStamps = pgTable(
  "time_stamps",
  {
    campaignId: campaignId(),
    size: integer("size").notNull(),
    /** DER of the TimeStampResp over the SHA-256 of the head's note. */
    token: bytea("token").notNull(),
    /** The time that it says. */
    at: instant("at").notNull(),
    authority: text("authority").notNull(),
    storedAt: instant("stored_at")
      .notNull()
      .default(sql`clock_timestamp()`),
  },
  (table) => [
    primaryKey({ name: "time_stamps_pkey", columns: [table.campaignId, table.size] }),
    foreignKey({
      name: "time_stamps_head_fk",
      columns: [table.campaignId, table.size],
      foreignColumns: [heads.campaignId, heads.size],
    }),
  ],
);

import { sql } from "drizzle-orm";
import { check, foreignKey, index, pgTable, primaryKey, smallint, text } from "drizzle-orm/pg-core";
import { instant } from "../instant";
import { bytea, campaignId, jsonText } from "./columns";
import { memberships } from "./memberships";

/** What was answered to requests with an Idempotency-Key, to be answered again for a day. */
export const keptAnswers = pgTable(
  "kept_answers",
  {
    campaignId: campaignId(),
    member: text("member").notNull(),
    /** The Idempotency-Key. */
    key: text("key").notNull(),
    begunAt: instant("begun_at")
      .notNull()
      .default(sql`clock_timestamp()`),
    /** Whose it is while the request is worked on. */
    claim: text("claim").notNull(),
    /** Until then the claim holds, unless it is renewed; past that its process is taken for dead. */
    heldUntil: instant("held_until").notNull(),
    /** SHA-256 of address, content type and body; null, with the answer, while it is worked on. */
    digest: bytea("digest"),
    status: smallint("status"),
    /** Header fields by name. */
    headers: jsonText("headers"),
    body: bytea("body"),
  },
  (table) => [
    primaryKey({
      name: "kept_answers_pkey",
      columns: [table.campaignId, table.member, table.key],
    }),
    index("kept_answers_begun_index").on(table.campaignId, table.begunAt),
    foreignKey({
      name: "kept_answers_member_fkey",
      columns: [table.campaignId, table.member],
      foreignColumns: [memberships.campaignId, memberships.member],
    }).onDelete("cascade"),
    check(
      "kept_answers_answer_check",
      sql`num_nulls(${table.digest}, ${table.status}, ${table.headers}, ${table.body}) in (0, 4)`,
    ),
  ],
);

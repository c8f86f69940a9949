import { sql } from "drizzle-orm";
import { check, foreignKey, pgTable, primaryKey, text, uniqueIndex } from "drizzle-orm/pg-core";
import { instant } from "../instant";
import { bytea, campaignId } from "./columns";
import { memberships } from "./memberships";

/** Keys by which programs act for a member. What is stored lets nobody in: it is a digest. */
export const apiKeys = pgTable(
  "api_keys",
  {
    campaignId: campaignId(),
    id: text("id").notNull(),
    /** Who made it, and for whom it acts. */
    member: text("member").notNull(),
    title: text("title").notNull(),
    scopes: text("scopes").array().notNull(),
    /** SHA-256 of the key's text, which is random enough to need no salt. */
    hash: bytea("hash").notNull(),
    /** The first letters after the prefix, to tell keys apart on a page. */
    begins: text("begins").notNull(),
    madeAt: instant("made_at")
      .notNull()
      .default(sql`clock_timestamp()`),
    /** null: holds until it is revoked. */
    expiresAt: instant("expires_at"),
    /** To the hour: finer, it would be a write for each request. */
    lastUsedAt: instant("last_used_at"),
    revokedAt: instant("revoked_at"),
    /** The member who revoked it. */
    revokedBy: text("revoked_by"),
  },
  (table) => [
    primaryKey({ name: "api_keys_pkey", columns: [table.campaignId, table.id] }),
    uniqueIndex("api_keys_hash_unique").on(table.campaignId, table.hash),
    foreignKey({
      name: "api_keys_member_fkey",
      columns: [table.campaignId, table.member],
      foreignColumns: [memberships.campaignId, memberships.member],
    }).onDelete("cascade"),
    check("api_keys_hash_check", sql`octet_length(${table.hash}) = 32`),
    check("api_keys_scopes_check", sql`cardinality(${table.scopes}) > 0`),
    check(
      "api_keys_revoked_check",
      sql`(${table.revokedAt} is null) = (${table.revokedBy} is null)`,
    ),
  ],
);

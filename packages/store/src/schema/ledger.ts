import { sql } from "drizzle-orm";
import { check, integer, pgTable, primaryKey, smallint, text } from "drizzle-orm/pg-core";
import { instant } from "../instant";
import { campaigns } from "./campaigns";
import { bytea, campaignId } from "./columns";

/** The tree's right edge: the one row that an append locks and changes. */
export const tips = pgTable("tips", {
  campaignId: campaignId()
    .primaryKey()
    .references(() => campaigns.id),
  size: integer("size").notNull(),
  /** Roots of the perfect subtrees, largest first, 32 bytes each, one after another. */
  edge: bytea("edge").notNull(),
  lastAt: instant("last_at").notNull(),
});

/** The ledger. Rows are never changed or deleted: triggers and grants refuse it. */
export const entries = pgTable(
  "entries",
  {
    campaignId: campaignId().references(() => campaigns.id),
    seq: integer("seq").notNull(),
    version: smallint("version").notNull(),
    at: instant("at").notNull(),
    /** Opaque id of the member; null: the system. */
    member: text("member"),
    team: text("team"),
    kind: text("kind").notNull(),
    /** Canonical JSON, byte for byte as digested: never jsonb, which reorders. */
    payload: text("payload").notNull(),
    /** Lower-case hexadecimal. */
    payloadSha256: text("payload_sha256").notNull(),
  },
  (table) => [
    primaryKey({ name: "entries_pkey", columns: [table.campaignId, table.seq] }),
    check("entries_seq_check", sql`${table.seq} >= 0`),
    check("entries_team_check", sql`${table.member} is not null or ${table.team} is null`),
  ],
);

/** Roots of perfect subtrees; level 0 are the leaf hashes. Never changed. */
export const nodes = pgTable(
  "nodes",
  {
    campaignId: campaignId().references(() => campaigns.id),
    level: smallint("level").notNull(),
    index: integer("index").notNull(),
    hash: bytea("hash").notNull(),
  },
  (table) => [
    primaryKey({ name: "nodes_pkey", columns: [table.campaignId, table.level, table.index] }),
    check("nodes_hash_check", sql`octet_length(${table.hash}) = 32`),
  ],
);

/** Signed tree heads, one per transaction. Never changed. */
export const heads = pgTable(
  "heads",
  {
    campaignId: campaignId().references(() => campaigns.id),
    size: integer("size").notNull(),
    root: bytea("root").notNull(),
    /** C2SP signed note. */
    note: text("note").notNull(),
    at: instant("at").notNull(),
  },
  (table) => [primaryKey({ name: "heads_pkey", columns: [table.campaignId, table.size] })],
);

/** Public halves of the keys that have signed heads here; one key may have had several names. */
export const signingKeys = pgTable("signing_keys", {
  /** C2SP verifier key: name+hash+base64. */
  verifierKey: text("verifier_key").primaryKey(),
  /** SHA-256 of the public key, lower-case hexadecimal. */
  fingerprint: text("fingerprint").notNull(),
  addedAt: instant("added_at")
    .notNull()
    .default(sql`now()`),
});

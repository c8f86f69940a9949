import { sql } from "drizzle-orm";
import { pgTable, primaryKey, text } from "drizzle-orm/pg-core";
import { instant } from "../instant";
import { campaigns } from "./campaigns";
import { bytea, campaignId } from "./columns";

/**
 * Contents of seals that the server holds until their time, encrypted with a key that is nowhere in
 * the database. A row goes once its seal is open.
 */
export const heldSeals = pgTable(
  "held_seals",
  {
    campaignId: campaignId().references(() => campaigns.id),
    /** The digest on record, lower-case hexadecimal. */
    digest: text("digest").notNull(),
    /** AES-256-GCM: 12 bytes of initialisation vector, the ciphertext, 16 bytes of tag. */
    encrypted: bytea("encrypted").notNull(),
    /** First 16 hexadecimal digits of the SHA-256 of the key that it is encrypted with. */
    keyFingerprint: text("key_fingerprint").notNull(),
    heldAt: instant("held_at")
      .notNull()
      .default(sql`now()`),
  },
  (table) => [primaryKey({ name: "held_seals_pkey", columns: [table.campaignId, table.digest] })],
);

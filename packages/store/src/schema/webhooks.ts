import { sql } from "drizzle-orm";
import {
  boolean,
  check,
  doublePrecision,
  foreignKey,
  index,
  integer,
  pgTable,
  primaryKey,
  text,
} from "drizzle-orm/pg-core";
import { instant } from "../instant";
import { campaigns } from "./campaigns";
import { bytea, campaignId, jsonText } from "./columns";

/** Addresses that a campaign's coordinators have told when its standings move. */
export const webhooks = pgTable(
  "webhooks",
  {
    campaignId: campaignId().references(() => campaigns.id),
    id: text("id").notNull(),
    url: text("url").notNull(),
    /** Tells a hypothesis whose log10 Bayes factor against the leader moved by more; null: tells none. */
    movedBy: doublePrecision("moved_by"),
    /** Tells verdicts that turn. */
    turned: boolean("turned").notNull(),
    /** AES-256-GCM: 12 bytes of initialisation vector, the ciphertext, 16 bytes of tag. */
    secret: bytea("secret").notNull(),
    /** First 16 hexadecimal digits of the SHA-256 of the key that it is encrypted with. */
    keyFingerprint: text("key_fingerprint").notNull(),
    madeBy: text("made_by").notNull(),
    madeAt: instant("made_at")
      .notNull()
      .default(sql`clock_timestamp()`),
    /** What was last told: each hypothesis's log10 Bayes factor, each verdict; null: nothing yet. */
    told: jsonText("told"),
    /** Size of the standings that were last compared with it. */
    toldSize: integer("told_size").notNull(),
    lastDeliveredAt: instant("last_delivered_at"),
    switchedOffAt: instant("switched_off_at"),
    switchedOffWhy: text("switched_off_why"),
  },
  (table) => [
    primaryKey({ name: "webhooks_pkey", columns: [table.campaignId, table.id] }),
    check(
      "webhooks_tells_check",
      sql`coalesce(${table.movedBy}, 1) > 0 and (${table.movedBy} is not null or ${table.turned})`,
    ),
    check(
      "webhooks_off_check",
      sql`(${table.switchedOffAt} is null) = (${table.switchedOffWhy} is null)`,
    ),
  ],
);

/** What was to be sent to a webhook, and how that went. */
export const webhookDeliveries = pgTable(
  "webhook_deliveries",
  {
    campaignId: campaignId(),
    webhook: text("webhook").notNull(),
    id: text("id").notNull(),
    what: text("what", { enum: ["standings", "test"] }).notNull(),
    /** The bytes that are signed and sent. */
    body: text("body").notNull(),
    queuedAt: instant("queued_at")
      .notNull()
      .default(sql`clock_timestamp()`),
    tries: integer("tries").notNull().default(0),
    lastTryAt: instant("last_try_at"),
    /** HTTP status of the last try; null: there was no answer. */
    lastStatus: integer("last_status"),
    lastError: text("last_error"),
    deliveredAt: instant("delivered_at"),
    /** It is not tried again. */
    givenUpAt: instant("given_up_at"),
  },
  (table) => [
    primaryKey({ name: "webhook_deliveries_pkey", columns: [table.campaignId, table.id] }),
    foreignKey({
      name: "webhook_deliveries_webhook_fkey",
      columns: [table.campaignId, table.webhook],
      foreignColumns: [webhooks.campaignId, webhooks.id],
    }).onDelete("cascade"),
    index("webhook_deliveries_queued_index").on(table.campaignId, table.webhook, table.queuedAt),
    check("webhook_deliveries_what_check", sql`${table.what} in ('standings', 'test')`),
  ],
);

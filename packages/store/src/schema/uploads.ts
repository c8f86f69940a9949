import { sql } from "drizzle-orm";
import {
  bigint,
  boolean,
  doublePrecision,
  integer,
  pgTable,
  primaryKey,
  text,
  uuid,
} from "drizzle-orm/pg-core";
import { instant } from "../instant";
import { campaigns } from "./campaigns";
import { campaignId, jsonText } from "./columns";

/**
 * Measurements on their way in: read, judged and digested before any lock is held, and gone once they
 * are entered or a day has passed. The tables of rows are unlogged: a crash of the database loses
 * what was staged, never what was entered, and what is gone is no longer listed as there.
 */
export const uploads = pgTable(
  "uploads",
  {
    campaignId: campaignId().references(() => campaigns.id),
    upload: uuid("upload")
      .notNull()
      .default(sql`gen_random_uuid()`),
    /** Whose it is: nobody else adds to it or posts it. */
    member: text("member").notNull(),
    expiresAt: instant("expires_at")
      .notNull()
      .default(sql`clock_timestamp() + interval '1 day'`),
  },
  (table) => [primaryKey({ name: "uploads_pkey", columns: [table.campaignId, table.upload] })],
);

const place = () => ({
  campaignId: campaignId(),
  upload: uuid("upload").notNull(),
  part: integer("part").notNull(),
});

/** Parts that are there as a whole. */
export const stagedParts = pgTable(
  "staged_parts",
  {
    ...place(),
    /** Of the bytes that were sent, lower-case hexadecimal. */
    sha256: text("sha256").notNull(),
    rows: integer("rows").notNull(),
    bytes: bigint("bytes", { mode: "number" }).notNull(),
  },
  (table) => [
    primaryKey({
      name: "staged_parts_pkey",
      columns: [table.campaignId, table.upload, table.part],
    }),
  ],
);

export const stagedMeasurements = pgTable(
  "staged_measurements",
  {
    ...place(),
    /** In its part, from 1. */
    line: integer("line").notNull(),
    /** Which of the part's entries it will be in, and where; null: in none. */
    entry: integer("entry"),
    place: integer("place"),
    id: text("id"),
    measurand: text("measurand"),
    facility: text("facility"),
    team: text("team"),
    batch: text("batch"),
    observedAt: instant("observed_at"),
    value: doublePrecision("value"),
    sd: doublePrecision("sd"),
    unit: text("unit"),
    setAside: boolean("set_aside"),
    /** The canonical content in two, before and behind the place of `postedAt`; null: unreadable. */
    head: text("head"),
    tail: text("tail"),
    /** Why it is refused; null: it isn't, by itself. */
    problems: jsonText("problems"),
    notes: jsonText("notes"),
  },
  (table) => [
    primaryKey({
      name: "staged_measurements_pkey",
      columns: [table.campaignId, table.upload, table.part, table.line],
    }),
  ],
);

/** Payloads of entries to be, with their digests. */
export const stagedEntries = pgTable(
  "staged_entries",
  {
    ...place(),
    entry: integer("entry").notNull(),
    firstLine: integer("first_line").notNull(),
    lastLine: integer("last_line").notNull(),
    rows: integer("rows").notNull(),
    payload: text("payload").notNull(),
    sha256: text("sha256").notNull(),
    /** Those of its measurements that may be a measurand's first, or its earliest observed. */
    dated: jsonText("dated").notNull(),
  },
  (table) => [
    primaryKey({
      name: "staged_entries_pkey",
      columns: [table.campaignId, table.upload, table.part, table.entry],
    }),
  ],
);

/** What a comparison with the campaign and among the rows found; new rows have none. */
export const stagedFates = pgTable(
  "staged_fates",
  {
    ...place(),
    line: integer("line").notNull(),
    fate: text("fate", { enum: ["alreadyThere", "conflict", "repeated"] }).notNull(),
    /** The first field that differs; of a repeated row the part and line that have its id. */
    about: jsonText("about"),
  },
  (table) => [
    primaryKey({
      name: "staged_fates_pkey",
      columns: [table.campaignId, table.upload, table.part, table.line],
    }),
  ],
);

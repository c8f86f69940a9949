import { sql } from "drizzle-orm";
import {
  boolean,
  doublePrecision,
  index,
  pgTable,
  primaryKey,
  text,
  uniqueIndex,
} from "drizzle-orm/pg-core";
import { instant } from "../instant";
import { campaigns } from "./campaigns";
import { campaignId, jsonText, versionColumns } from "./columns";

/** Every part of a campaign document but its measurements, in each of its versions. */
export const parts = pgTable(
  "parts",
  {
    campaignId: campaignId().references(() => campaigns.id),
    part: text("part").notNull(),
    key: text("key").notNull(),
    ...versionColumns(),
    content: jsonText("content").notNull(),
  },
  (table) => [
    primaryKey({
      name: "parts_pkey",
      columns: [table.campaignId, table.part, table.key, table.fromSize],
    }),
    uniqueIndex("parts_current_unique")
      .on(table.campaignId, table.part, table.key)
      .where(sql`${table.toSize} is null`),
    // A citation's code names it among all campaigns.
    index("parts_citation_index")
      .on(table.key)
      .where(sql`${table.part} = 'citation'`),
  ],
);

/**
 * Measurements in each of their versions: `content` is the whole, the columns are for finding. No
 * foreign key: rows are written only under the lock of their campaign's tip, and a million checks of
 * the one campaign would keep others waiting.
 */
export const measurements = pgTable(
  "measurements",
  {
    campaignId: campaignId(),
    id: text("id").notNull(),
    ...versionColumns(),
    measurand: text("measurand").notNull(),
    facility: text("facility"),
    team: text("team"),
    batch: text("batch"),
    observedAt: instant("observed_at"),
    postedAt: instant("posted_at"),
    /** In the unit as posted, as are `sd` and the content. */
    value: doublePrecision("value"),
    sd: doublePrecision("sd"),
    unit: text("unit"),
    setAside: boolean("set_aside").notNull(),
    withdrawn: boolean("withdrawn").notNull().default(false),
    content: jsonText("content").notNull(),
  },
  (table) => [
    primaryKey({
      name: "measurements_pkey",
      columns: [table.campaignId, table.id, table.fromSize],
    }),
    uniqueIndex("measurements_current_unique")
      .on(table.campaignId, table.id)
      .where(sql`${table.toSize} is null`),
    index("measurements_from_size_index").on(table.campaignId, table.fromSize),
    index("measurements_order_index").on(table.campaignId, table.firstSeq, table.firstPlace),
    index("measurements_measurand_index").on(table.campaignId, table.measurand, table.observedAt),
    index("measurements_facility_index").on(table.campaignId, table.facility, table.observedAt),
  ],
);

import { customType, integer, text } from "drizzle-orm/pg-core";

export const bytea = customType<{ data: Uint8Array; driverData: Buffer }>({
  dataType: () => "bytea",
  fromDriver: (value) => new Uint8Array(value),
  toDriver: (value) => Buffer.from(value),
});

/** JSON kept as the text that was written: jsonb would reorder properties. */
export const jsonText = customType<{ data: string; driverData: string }>({
  dataType: () => "json",
  fromDriver: (value) => (typeof value === "string" ? value : JSON.stringify(value)),
  toDriver: (value) => value,
});

/** A projection's row holds for the sizes [from_size, to_size); to_size null: still. */
export const versionColumns = () => ({
  fromSize: integer("from_size").notNull(),
  toSize: integer("to_size"),
  /** Where its key was first put: entry, and place within the entry's changes. Parts keep that order. */
  firstSeq: integer("first_seq").notNull(),
  firstPlace: integer("first_place").notNull(),
});

export const campaignId = () => integer("campaign_id").notNull();
export const engineColumn = () => text("engine").notNull();

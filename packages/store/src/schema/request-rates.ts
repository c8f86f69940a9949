import { pgTable, text } from "drizzle-orm/pg-core";
import { instant } from "../instant";

/**
 * How fast somebody asks, counted for all web processes together. Unlogged (by its migration): what
 * a crash forgets here nobody misses.
 */
export const requestRates = pgTable("request_rates", {
  /** Whose requests of which class: `key:…`, `user:…` or `address:…`. */
  subject: text("subject").primaryKey(),
  /** When the requests until now would be over if they came evenly at the rate allowed. */
  evenAt: instant("even_at").notNull(),
});

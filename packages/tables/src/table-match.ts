import * as z from "zod";
import type { CampaignDocument } from "@weighhouse/campaign/document";

/** What a table is read against: the campaign's declarations, and what fills rows that lack it. */
export type TableContext = {
  document: Pick<CampaignDocument, "observables" | "measurands"> &
    Partial<Pick<CampaignDocument, "facilities">>;
  defaults?: {
    measurand?: string | null;
    facility?: string | null;
    team?: string | null;
    batch?: string | null;
  };
};

const timeFormats = ["iso", "jd", "mjd"] as const;
const timeScales = ["utc", "tt", "tai", "tdb"] as const;

/** How a column's times are read; `offset` days are added to them before. */
export const timeReadingSchema = z.strictObject({
  format: z.enum(timeFormats),
  scale: z.enum(timeScales),
  offset: z.number(),
});
export type TimeReading = z.output<typeof timeReadingSchema>;

/**
 * What was chosen for a table beyond what it says itself; remembered for each facility.
 * `columns` has by column name a field: a measurement's own, `conditions.depth`, `observable`,
 * `date` and `timeOfDay` (joined), `sd@flux-may` (the sd of one measurand's or observable's value
 * in a table with several), `extra` or `ignore`.
 */
export const tableChoicesSchema = z.strictObject({
  columns: z.record(z.string(), z.string().max(200)).default({}),
  units: z.record(z.string(), z.string().max(100)).default({}),
  times: z.record(z.string(), timeReadingSchema).default({}),
  decimal: z.enum(["point", "comma"]).nullable().default(null),
  /** What a limit is said at where the table doesn't say. */
  limits: z
    .union([
      z.strictObject({ confidence: z.number().gt(0.5).lt(1) }),
      z.strictObject({ sigmas: z.number().positive() }),
    ])
    .nullable()
    .default(null),
});
export type TableChoices = z.output<typeof tableChoicesSchema>;

/** How one column is read. */
export const columnMatchSchema = z.strictObject({
  column: z.string(),
  /** As in the choices. */
  field: z.string(),
  unit: z.string().nullable(),
  why: z.enum(["name", "synonym", "ucd", "unit", "remembered", "chosen", "none"]),
  /** What is done to its cells, in words; null: they are taken as they are. */
  conversion: z.string().nullable(),
  time: timeReadingSchema.nullable(),
  /** Why the column can't be read so. */
  problem: z.strictObject({ found: z.string(), allowed: z.string() }).nullable(),
});
export type ColumnMatch = z.output<typeof columnMatchSchema>;

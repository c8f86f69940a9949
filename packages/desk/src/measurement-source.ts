import * as z from "zod";
import { defaulted, key, optional } from "@weighhouse/campaign/fields";

const defaults = z.strictObject({ measurand: optional(key), facility: optional(key) });

/** Where measurements come from: the text of a CSV file, or drafts with a measurement's fields. */
export const measurementSource = z.discriminatedUnion("from", [
  z.strictObject({
    from: z.literal("csv"),
    text: z.string(),
    /** For rows whose column is absent or whose cell is empty. */
    defaults: defaulted(defaults, { measurand: null, facility: null }),
  }),
  z.strictObject({
    from: z.literal("drafts"),
    drafts: z.array(z.record(z.string(), z.unknown())),
  }),
]);
export type MeasurementSource = z.output<typeof measurementSource>;

import * as z from "zod";
import { defaulted, key, line, optional } from "@weighhouse/campaign/fields";
import { tableChoicesSchema } from "@weighhouse/tables/table-match";

/** For rows whose column is absent or whose cell is empty. */
const defaults = z.strictObject({
  measurand: optional(key),
  facility: optional(key),
  team: optional(key),
  batch: optional(line),
});
const none = { measurand: null, facility: null, team: null, batch: null };

/** Where measurements come from: a file's text or bytes, or drafts with a measurement's fields. */
export const measurementSource = z.discriminatedUnion("from", [
  z.strictObject({
    from: z.literal("csv"),
    text: z.string(),
    defaults: defaulted(defaults, none),
  }),
  z.strictObject({
    from: z.literal("table"),
    /** The file's, which is a hint at its format. */
    name: z.string(),
    content: z.union([z.string(), z.instanceof(Uint8Array)]),
    /** How its columns are read, where it isn't as they say themselves. */
    choices: optional(tableChoicesSchema),
    defaults: defaulted(defaults, none),
  }),
  z.strictObject({
    from: z.literal("drafts"),
    drafts: z.array(z.record(z.string(), z.unknown())),
  }),
]);
export type MeasurementSource = z.output<typeof measurementSource>;

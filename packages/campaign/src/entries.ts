import * as z from "zod";
import {
  campaignFields,
  closedSchema,
  derivedSchema,
  facilitySchema,
  measurandFields,
  observableSchema,
  sharedErrorSchema,
  teamSchema,
} from "./declarations";
import { key, line, list, measurementId, optional, prose, time, titled } from "./fields";
import { hypothesisFields, predictionFields } from "./hypothesis";
import { correlationSchema, measurementFields, withResultDefaults } from "./measurement";
import { measurementSealSchema, openingSchema, predictionSealSchema } from "./seals";

/**
 * The entries of a ledger and their payloads. `registeredAt` and `postedAt` are in none: the fold
 * sets them from the entry's own time. What an imported document said of its own dates is kept
 * under `claimed`, shown, and counts for nothing.
 */
export const entryKinds = [
  "campaign.opened",
  "campaign.amended",
  "observable.declared",
  "measurand.declared",
  "measurand.closed",
  "derived.declared",
  "shared-error.declared",
  "facility.declared",
  "team.joined",
  "measurand.proposed",
  "reference.objected",
  "hypothesis.registered",
  "hypothesis.amended",
  "hypothesis.retired",
  "prediction.sealed",
  "prediction.revealed",
  "registration.closed",
  "measurements.posted",
  "measurement.corrected",
  "measurements.withdrawn",
  "measurement.set-aside",
  "measurement.sealed",
  "measurement.revealed",
  "remark.made",
  "standings.cited",
  "ledger.restored",
] as const;
export type EntryKind = (typeof entryKinds)[number];

export const MEASUREMENTS_PER_ENTRY = 1000;

/** A random id, frozen in entry 0; the tree heads' origin line (C2SP: no space, no plus). */
const ledgerId = z
  .string()
  .regex(/^[A-Za-z0-9._:/-]{1,200}$/)
  .describe("a ledger id: 1 to 200 of A-Z, a-z, 0-9, . _ : / and -");

export const visibilities = ["public", "members"] as const;
export const clocks = ["real", "simulated"] as const;

export const measurandContentSchema = z
  .strictObject({
    ...measurandFields,
    claimed: optional(
      z.strictObject({ firstPostedAt: optional(time), firstObservedAt: optional(time) }),
    ),
  })
  .transform(titled);

export const predictionContentSchema = z.strictObject(predictionFields);

/** `claimed.predictions`: the dates an imported document gave single predictions, by measurand. */
export const hypothesisContentSchema = z.strictObject({
  ...hypothesisFields,
  predictions: z.array(predictionContentSchema),
  claimed: optional(
    z.strictObject({
      registeredAt: optional(time),
      predictions: z
        .record(key, time)
        .nullish()
        .transform((dates): Record<string, string> => dates ?? {}),
    }),
  ),
});

export const measurementContentSchema = z
  .strictObject({ ...measurementFields, claimed: optional(z.strictObject({ postedAt: time })) })
  .transform(withResultDefaults);

/** Which measurements: by their ids, or those of a facility observed within a range (ends included). */
export const selectionSchema = z.discriminatedUnion("by", [
  z.strictObject({
    by: z.literal("ids"),
    ids: z.array(measurementId).min(1).max(MEASUREMENTS_PER_ENTRY),
  }),
  z.strictObject({
    by: z.literal("facility"),
    facility: key,
    from: optional(time),
    to: optional(time),
  }),
]);
export type Selection = z.output<typeof selectionSchema>;

export const remarkKinds = ["question", "objection", "answer"] as const;
export const callers = ["clock", "coordinator"] as const;

/** Eight digits and small letters without i, l, o and u, which are misread. */
export const CODE_PATTERN = /^[0-9a-hjkmnp-tv-z]{8}$/;

/** A root of a tree, base64 as in the third line of a signed head. */
const root = z
  .string()
  .regex(/^[A-Za-z0-9+/]{43}=$/)
  .describe("32 bytes in base64");

const words = prose.min(1);
const entrySeq = z.int().nonnegative();

export const payloadSchemas = {
  "campaign.opened": z.strictObject({
    ledger: ledgerId,
    clock: z.enum(clocks),
    visibility: z.enum(visibilities),
    ...campaignFields,
  }),
  "campaign.amended": z.strictObject({ visibility: z.enum(visibilities), ...campaignFields }),
  "observable.declared": observableSchema,
  "measurand.declared": measurandContentSchema,
  "measurand.closed": z.strictObject({ key, ...closedSchema.shape }),
  "derived.declared": derivedSchema,
  "shared-error.declared": sharedErrorSchema,
  "facility.declared": facilitySchema,
  "team.joined": teamSchema,
  "measurand.proposed": z.strictObject({ measurand: measurandContentSchema, reason: words }),
  "reference.objected": z.strictObject({ measurand: key, reason: words }),
  "hypothesis.registered": hypothesisContentSchema,
  "hypothesis.amended": hypothesisContentSchema,
  "hypothesis.retired": z.strictObject({ key, reason: line }),
  "prediction.sealed": predictionSealSchema,
  "prediction.revealed": openingSchema,
  "registration.closed": z.strictObject({ by: z.enum(callers) }),
  "measurements.posted": z.strictObject({
    measurements: z.array(measurementContentSchema).min(1).max(MEASUREMENTS_PER_ENTRY),
    correlations: list(correlationSchema),
  }),
  /** `measurement` is the whole of it in its new version. */
  "measurement.corrected": z.strictObject({ measurement: measurementContentSchema, reason: line }),
  "measurements.withdrawn": z.strictObject({ selection: selectionSchema, reason: line }),
  "measurement.set-aside": z.strictObject({ id: measurementId, reason: line }),
  "measurement.sealed": measurementSealSchema,
  "measurement.revealed": openingSchema,
  /** `on` is the entry's seq that it is a remark on. */
  "remark.made": z.strictObject({ on: entrySeq, kind: z.enum(remarkKinds), text: words }),
  /** `standings` as of the size before this entry, word by word: `code` is made of its digest. */
  "standings.cited": z.strictObject({
    code: z.string().regex(CODE_PATTERN).describe("a citation's code: 8 of its letters and digits"),
    by: z.enum(["hand", "clock"]),
    note: optional(line),
    standings: z.record(z.string(), z.unknown()),
  }),
  /**
   * The database was put back to an earlier state: `before` and `root` are the last head known of
   * the ledger as it had been, `after` is the size that it came back with.
   */
  "ledger.restored": z.strictObject({
    before: z.int().positive(),
    root,
    after: z.int().positive(),
    reason: line,
  }),
} as const satisfies Record<EntryKind, z.ZodType>;

export type Payload<K extends EntryKind> = z.output<(typeof payloadSchemas)[K]>;
/** What may be given for a payload: defaults may be left out. */
export type PayloadInput<K extends EntryKind> = z.input<(typeof payloadSchemas)[K]>;

export type MeasurandContent = z.output<typeof measurandContentSchema>;
export type HypothesisContent = z.output<typeof hypothesisContentSchema>;
export type MeasurementContent = z.output<typeof measurementContentSchema>;
export type PredictionContent = z.output<typeof predictionContentSchema>;

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
import { key, line, list, measurementId, optional, time, titled } from "./fields";
import { hypothesisFields, predictionFields } from "./hypothesis";
import { correlationSchema, measurementFields, withResultDefaults } from "./measurement";

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
  "hypothesis.registered",
  "hypothesis.amended",
  "registration.closed",
  "measurements.posted",
  "measurement.set-aside",
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

const predictionContentSchema = z.strictObject(predictionFields);

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
  "hypothesis.registered": hypothesisContentSchema,
  "hypothesis.amended": hypothesisContentSchema,
  "registration.closed": z.strictObject({ by: z.enum(["clock", "coordinator"]) }),
  "measurements.posted": z.strictObject({
    measurements: z.array(measurementContentSchema).min(1).max(MEASUREMENTS_PER_ENTRY),
    correlations: list(correlationSchema),
  }),
  "measurement.set-aside": z.strictObject({ id: measurementId, reason: line }),
} as const satisfies Record<EntryKind, z.ZodType>;

export type Payload<K extends EntryKind> = z.output<(typeof payloadSchemas)[K]>;
/** What may be given for a payload: defaults may be left out. */
export type PayloadInput<K extends EntryKind> = z.input<(typeof payloadSchemas)[K]>;

export type MeasurandContent = z.output<typeof measurandContentSchema>;
export type HypothesisContent = z.output<typeof hypothesisContentSchema>;
export type MeasurementContent = z.output<typeof measurementContentSchema>;

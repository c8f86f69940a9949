import * as z from "zod";
import {
  defaulted,
  key,
  line,
  list,
  name,
  notNegative,
  number,
  optional,
  positive,
  prose,
  record,
  time,
  titled,
  unit,
} from "./fields";

/** What the coordinator declares: the campaign itself, observables, measurands and what they need. */
const probability = z.number().gt(0).lt(1);

export const ruleSchema = z.strictObject({
  coverage: defaulted(positive, 2),
  pass: defaulted(probability, 0.95),
  fail: defaulted(probability, 0.05),
});

export const campaignFields = {
  key,
  title: line,
  summary: optional(prose),
  registrationCloses: optional(time),
  dataCloses: optional(time),
  rule: ruleSchema.nullish().transform((rule) => rule ?? { coverage: 2, pass: 0.95, fail: 0.05 }),
  noneOfThese: z
    .strictObject({ weight: defaulted(notNegative, 0) })
    .nullish()
    .transform((none) => none ?? { weight: 0 }),
};
export const campaignSchema = z.strictObject(campaignFields);

export const conditionSchema = z
  .strictObject({
    key: name,
    title: optional(line),
    unit: optional(unit),
    time: optional(
      z.strictObject({
        epoch: optional(time),
        table: optional(z.array(z.tuple([time, number])).min(2)),
      }),
    ),
  })
  .transform(titled);

export const scales = ["linear", "log10", "cyclic", "magnitude", "event", "count"] as const;

export const observableSchema = z.strictObject({
  key,
  title: line,
  unit: optional(unit),
  scale: z.enum(scales),
  period: optional(positive),
  conditions: list(conditionSchema),
});

const referenceScatter = { scatter: defaulted(notNegative, 0) };
export const referenceSchema = z.discriminatedUnion("family", [
  z.strictObject({
    family: z.literal("uniform"),
    lower: number,
    upper: number,
    ...referenceScatter,
  }),
  z.strictObject({ family: z.literal("normal"), mean: number, sd: positive, ...referenceScatter }),
  z.strictObject({
    family: z.literal("polynomial"),
    in: name,
    degree: z.int().min(0).max(30),
    centre: number,
    sd: positive,
    ...referenceScatter,
  }),
  z.strictObject({ family: z.literal("gamma"), mean: positive, sd: positive, ...referenceScatter }),
]);

export const thresholdSchema = z
  .strictObject({ key, title: optional(line), value: number })
  .transform(titled);

/** A range of a condition; a null end is unbounded. */
const range = z.tuple([z.number().nullable(), z.number().nullable()]);

export const closedSchema = z.strictObject({ reason: line, replacedBy: optional(key) });

export const measurandFields = {
  key,
  observable: key,
  title: optional(line),
  window: z
    .strictObject({ from: optional(time), to: optional(time) })
    .nullish()
    .transform((window) => window ?? { from: null, to: null }),
  where: record(name, range),
  shape: defaulted(z.enum(["constant", "curve"]), "constant" as const),
  scatter: defaulted(notNegative, 0),
  reference: optional(referenceSchema),
  thresholds: list(thresholdSchema),
};
export const measurandSchema = z
  .strictObject({
    ...measurandFields,
    closed: optional(closedSchema),
    firstPostedAt: optional(time),
    firstObservedAt: optional(time),
  })
  .transform(titled);

/** `scored` null: decided from the hypotheses when the document is completed. */
export const derivedSchema = z
  .strictObject({
    key,
    observable: key,
    title: optional(line),
    expression: z.string().min(1),
    from: z.record(name, key),
    reference: optional(referenceSchema),
    scored: optional(z.boolean()),
  })
  .transform(titled);

export const sharedErrorSchema = z
  .strictObject({
    key,
    title: optional(line),
    sd: positive,
    relative: defaulted(z.boolean(), false),
    per: optional(z.literal("batch")),
  })
  .transform(titled);

export const facilitySchema = z.strictObject({ key, title: optional(line) }).transform(titled);
export const teamSchema = z.strictObject({ key, title: optional(line) }).transform(titled);

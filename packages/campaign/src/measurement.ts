import * as z from "zod";
import {
  coefficient,
  defaulted,
  key,
  line,
  list,
  measurementId,
  name,
  notNegative,
  number,
  optional,
  positive,
  record,
  time,
  unit,
} from "./fields";

/**
 * What an observer posts. One flat object: which fields go together is checked by rule, because a
 * union of result forms costs several times the time and words its errors worse.
 */
export const loadingSchema = z.strictObject({
  error: key,
  coefficient: defaulted(coefficient, 1),
});

export const limits = ["upper", "lower", "fainter", "brighter"] as const;

export const measurementFields = {
  id: measurementId,
  measurand: key,
  facility: optional(key),
  team: optional(key),
  batch: optional(line),
  observedAt: optional(time),
  knownSince: optional(time),
  conditions: record(name, number),
  value: optional(number),
  sd: optional(positive),
  sdDex: optional(positive),
  plus: optional(positive),
  minus: optional(positive),
  limit: optional(z.enum(limits)),
  confidence: optional(z.number().gt(0.5).lt(1)),
  sigmas: optional(positive),
  noise: optional(z.literal("linear")),
  occurred: optional(z.boolean()),
  efficiency: optional(z.number().min(0).max(1)),
  falseAlarm: optional(z.number().min(0).max(1)),
  count: optional(z.int().nonnegative()),
  exposure: optional(positive),
  background: optional(notNegative),
  unit: optional(unit),
  status: defaulted(z.enum(["final", "provisional"]), "final" as const),
  source: optional(z.string().min(1).max(2000)),
  extra: record(
    z.string().min(1).max(200),
    z.union([z.string().max(2000), z.number(), z.boolean(), z.null()]),
  ),
  shared: list(loadingSchema),
  sameData: optional(line),
  setAside: optional(z.strictObject({ reason: line })),
};

export const measurementSchema = z.strictObject({ ...measurementFields, postedAt: optional(time) });

export const correlationSchema = z.strictObject({
  a: measurementId,
  b: measurementId,
  coefficient: z.number().gt(-1).lt(1),
});

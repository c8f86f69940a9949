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

export const SOURCE_LENGTH = 2000;

export const limits = ["upper", "lower", "fainter", "brighter"] as const;

const identity = {
  id: measurementId,
  measurand: key,
  facility: optional(key),
  team: optional(key),
  batch: optional(line),
  observedAt: optional(time),
};
const report = {
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
  source: optional(z.string().min(1).max(SOURCE_LENGTH)),
  extra: record(
    z.string().min(1).max(200),
    z
      .union([z.string().max(2000), z.number(), z.boolean(), z.null()])
      .describe("a text of at most 2000 characters, a number, true, false or null"),
  ),
  shared: list(loadingSchema),
  sameData: optional(line),
  setAside: optional(z.strictObject({ reason: line })),
};

/** The fields that both a document and a ledger's payload have. */
export const measurementFields = { ...identity, ...report };

export const measurementSchema = z
  .strictObject({ ...identity, postedAt: optional(time), ...report })
  .transform(withResultDefaults);

type ResultFields = {
  occurred: boolean | null;
  efficiency: number | null;
  falseAlarm: number | null;
  count: number | null;
  exposure: number | null;
  background: number | null;
};

/** An event's report is taken as certain, and a count as of one exposure without background. */
export function withResultDefaults<M extends ResultFields>(measurement: M): M {
  if (measurement.occurred !== null) {
    measurement.efficiency ??= 1;
    measurement.falseAlarm ??= 0;
  }
  if (measurement.count !== null) {
    measurement.exposure ??= 1;
    measurement.background ??= 0;
  }
  return measurement;
}

export const correlationSchema = z.strictObject({
  a: measurementId,
  b: measurementId,
  coefficient: z.number().gt(-1).lt(1),
});

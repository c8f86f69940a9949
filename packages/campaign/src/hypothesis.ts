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
  time,
  titled,
  unit,
} from "./fields";

/** What a team registers: statement, parameters with priors, tables, predictions. */
export const priorSchema = z.discriminatedUnion("family", [
  z.strictObject({ family: z.literal("normal"), mean: number, sd: positive }),
  z.strictObject({ family: z.literal("lognormal"), median: positive, sdLog10: positive }),
  z.strictObject({ family: z.literal("uniform"), lower: number, upper: number }),
  z.strictObject({ family: z.literal("loguniform"), lower: positive, upper: positive }),
  z.strictObject({ family: z.literal("halfnormal"), sd: positive }),
  z.strictObject({ family: z.literal("fixed"), value: number }),
]);

export const parameterSchema = z
  .strictObject({ key: name, title: optional(line), unit: optional(unit), prior: priorSchema })
  .transform(titled);

/** Values at the crossings of one or two increasing axes; with two, a row for each of the first. */
export const tableSchema = z.strictObject({
  key: name,
  in: z.array(name).min(1).max(2),
  at: z.array(z.array(number).min(2)).min(1).max(2),
  values: z
    .union([z.array(number), z.array(z.array(number))])
    .describe("a list of numbers, or with two axes a list of such lists"),
});

/** One row is one joint draw of all columns; weights null: all rows alike. */
export const ensembleSchema = z.strictObject({
  columns: z.record(name, z.array(number).min(1)),
  weights: optional(z.array(notNegative).min(1)),
});

const commonOnly = defaulted(z.literal("common"), "common" as const);
const commonOrEach = defaulted(z.enum(["common", "each"]), "common" as const);

export const toleranceSchema = z.discriminatedUnion("family", [
  z.strictObject({
    family: z.literal("normal"),
    sd: positive,
    relative: defaulted(z.boolean(), false),
    sharing: defaulted(z.enum(["common", "each", "smooth"]), "common" as const),
    in: optional(name),
    length: optional(positive),
  }),
  z.strictObject({
    family: z.literal("interval"),
    lower: number,
    upper: number,
    sharing: commonOrEach,
  }),
  z.strictObject({ family: z.literal("atMost"), bound: number, sharing: commonOrEach }),
  z.strictObject({ family: z.literal("atLeast"), bound: number, sharing: commonOrEach }),
  z.strictObject({
    family: z.literal("splitNormal"),
    plus: positive,
    minus: positive,
    sharing: commonOnly,
  }),
  z.strictObject({
    family: z.literal("gamma"),
    mean: positive,
    sd: positive,
    sharing: commonOnly,
  }),
]);

/** `tolerance` null beside an `expected` is exact: zero tolerance. */
export const predictionFields = {
  measurand: key,
  expected: optional(z.union([number, z.string().min(1)]).describe("a number or an expression")),
  tolerance: optional(toleranceSchema),
  probability: optional(number),
  given: optional(z.strictObject({ measurand: key, occurred: z.boolean() })),
  decisive: defaulted(z.boolean(), false),
};
export const predictionSchema = z.strictObject({
  ...predictionFields,
  registeredAt: optional(time),
});

export const toleranceCorrelationSchema = z.strictObject({
  a: key,
  b: key,
  coefficient: z.number().gt(-1).lt(1),
});

const identity = {
  key,
  title: line,
  statement: optional(prose),
  team: optional(key),
  group: optional(line),
  weight: defaulted(positive, 1),
};
const model = {
  withheld: list(key),
  parameters: list(parameterSchema),
  tables: list(tableSchema),
  ensemble: optional(ensembleSchema),
};
const correlations = {
  toleranceCorrelations: list(toleranceCorrelationSchema),
};

/** The fields that both a document and a ledger's payload have, but for the predictions. */
export const hypothesisFields = { ...identity, ...model, ...correlations };

export const hypothesisSchema = z.strictObject({
  ...identity,
  registeredAt: optional(time),
  ...model,
  predictions: z.array(predictionSchema),
  ...correlations,
});

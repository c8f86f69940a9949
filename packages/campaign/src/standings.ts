import * as z from "zod";

/** The standings document. What doesn't exist is null, never 0 or NaN. */
export const STANDINGS_FORMAT = "weighhouse-standings/1";

export const verdictWords = [
  "pass",
  "fail",
  "undecided",
  "awaiting",
  "notMeasured",
  "withheld",
  "void",
] as const;
export const orders = ["before-observation", "before-posting", "after", "undated"] as const;
export const warningCodes = [
  "disagreeing-measurements",
  "same-data-twice",
  "vague-prediction",
  "outside-reference",
  "poor-reference",
  "every-hypothesis-fails",
  "more-fails-than-chance",
  "approximate-evidence",
  "common-ground-disagrees",
  "filed-after-excluded",
  "registered-after-observation",
  "unknown-unit",
] as const;

const size = z.int().nonnegative();
const maybe = z.number().nullable();
const verdictCounts = z.strictObject({
  pass: size,
  fail: size,
  undecided: size,
  awaiting: size,
  notMeasured: size,
  withheld: size,
  void: size,
});

const hypothesisStanding = z.strictObject({
  key: z.string(),
  rank: z.int().positive(),
  compared: size,
  silent: size,
  chiSquare: maybe,
  degreesOfFreedom: z.int(),
  pValue: maybe,
  lnEvidence: maybe,
  lnEvidenceError: z.number(),
  log10BayesFactor: maybe,
  posterior: z.number(),
  failedDecisive: z.array(z.string()),
  verdicts: verdictCounts,
  parameters: z.array(
    z.strictObject({
      key: z.string(),
      mean: z.number(),
      sd: z.number(),
      quantiles: z.tuple([z.number(), z.number(), z.number()]),
    }),
  ),
});

const pair = z.strictObject({
  a: z.string(),
  b: z.string(),
  log10BayesFactor: maybe,
  commonGround: z.strictObject({ measurements: size, log10BayesFactor: maybe }),
});

const verdictRow = z.strictObject({
  hypothesis: z.string(),
  measurand: z.string(),
  verdict: z.enum(verdictWords),
  conformance: maybe,
  tension: maybe,
  value: maybe,
  sd: maybe,
  lower: maybe,
  upper: maybe,
  inflated: z.boolean(),
  provisional: z.boolean(),
  order: z.enum(orders),
});

const measurandStanding = z.strictObject({
  key: z.string(),
  measurements: size,
  combined: z
    .strictObject({
      value: z.number(),
      sd: z.number(),
      chiSquare: maybe,
      degreesOfFreedom: z.int().nullable(),
      birgeRatio: maybe,
    })
    .nullable(),
  thresholds: z.array(z.strictObject({ key: z.string(), probabilityAbove: maybe })),
});

const warning = z.strictObject({ code: z.enum(warningCodes), at: z.string(), text: z.string() });

export const standingsSchema = z.strictObject({
  format: z.literal(STANDINGS_FORMAT),
  engine: z.string(),
  campaign: z.string(),
  asOf: z.strictObject({ size, treeHead: z.string() }).nullable(),
  measurements: z.strictObject({ counted: size, setAside: size }),
  noModel: z.strictObject({ lnEvidence: maybe }),
  hypotheses: z.array(hypothesisStanding),
  pairs: z.array(pair),
  verdicts: z.array(verdictRow),
  measurands: z.array(measurandStanding),
  warnings: z.array(warning),
});

export type VerdictWord = (typeof verdictWords)[number];
export type Order = (typeof orders)[number];
export type WarningCode = (typeof warningCodes)[number];
export type HypothesisStanding = z.output<typeof hypothesisStanding>;
export type Pair = z.output<typeof pair>;
export type VerdictRow = z.output<typeof verdictRow>;
export type MeasurandStanding = z.output<typeof measurandStanding>;
export type Warning = z.output<typeof warning>;
export type Standings = z.output<typeof standingsSchema>;

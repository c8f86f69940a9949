import * as z from "zod";

/** What each standing hangs on: the sensitivity document. */
export const SENSITIVITY_FORMAT = "weighhouse-sensitivity/1";

const maybe = z.number().nullable();

export const changeKinds = [
  "without-facility",
  "without-measurand",
  "without-team",
  "without-measurement",
  "without-provisional",
  "only-before-observation",
  "same-data-swapped",
  "shared-error-doubled",
  "shared-error-absent",
  "tolerances-halved",
  "tolerances-doubled",
  "prior-halved",
  "prior-doubled",
  "disagreeing-inflated",
  "references-doubled",
  "equal-weights",
] as const;

const standing = z.strictObject({
  key: z.string(),
  rank: z.int().positive(),
  log10BayesFactor: maybe,
  posterior: z.number(),
  chiSquare: maybe,
});

export const sensitivitySchema = z.strictObject({
  format: z.literal(SENSITIVITY_FORMAT),
  engine: z.string(),
  campaign: z.string(),
  /** In words: what would have to go for the leader to change. */
  finding: z.string(),
  leader: z.string().nullable(),
  hypotheses: z.array(standing),
  changes: z.array(
    z.strictObject({
      kind: z.enum(changeKinds),
      /** Of what was changed: a facility's, measurand's, team's, error's, hypothesis's/parameter's key or a measurement's id; null for all. */
      key: z.string().nullable(),
      leader: z.string().nullable(),
      leaderChanges: z.boolean(),
      hypotheses: z.array(standing),
    }),
  ),
  /** Counted measurements that were left out one by one; the most telling 50 are among the changes. */
  measurementsTried: z.int().nonnegative(),
  /** The factor on all references' widths nearest to 1 at which the leader changes; null: none from 1/1024 to 1024. */
  referenceWidthFactor: z.strictObject({ factor: z.number(), leader: z.string() }).nullable(),
  weightOfEvidence: z.array(
    z.strictObject({
      a: z.string(),
      b: z.string(),
      measurand: z.string(),
      /** log10 B of a against b, less the same without the measurand. */
      log10BayesFactor: maybe,
    }),
  ),
});

export type Sensitivity = z.output<typeof sensitivitySchema>;
export type ChangeKind = (typeof changeKinds)[number];

import * as z from "zod";

/** Candidates ranked by what they would tell: the plan document. */
export const PLAN_FORMAT = "weighhouse-plan/1";

const maybe = z.number().nullable();

export const planSchema = z.strictObject({
  format: z.literal(PLAN_FORMAT),
  candidates: z.array(
    z.strictObject({
      key: z.string(),
      informationGainBits: z.number(),
      gainPerCost: maybe,
      decisiveProbability: maybe,
      halfGainSd: maybe,
      predictive: z.array(z.strictObject({ hypothesis: z.string(), mean: maybe, sd: maybe })),
    }),
  ),
  sets: z.array(
    z.strictObject({
      candidates: z.array(z.string()),
      informationGainBits: z.number(),
      gainPerCost: maybe,
    }),
  ),
});

export type Plan = z.output<typeof planSchema>;

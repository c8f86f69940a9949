import * as z from "zod";

/** How often a campaign of some candidates would decide, were each hypothesis true in turn. */
export const SIMULATION_FORMAT = "weighhouse-simulation/1";

const fraction = z.number().min(0).max(1);
/** 2.5, 50 and 97.5 %; null: infinite, next to an impossible rival. */
const maybe = z.number().nullable();
const quantiles = z.tuple([maybe, maybe, maybe]);

export const simulationSchema = z.strictObject({
  format: z.literal(SIMULATION_FORMAT),
  engine: z.string(),
  campaign: z.string(),
  runs: z.int().positive(),
  candidates: z.array(z.string()),
  truths: z.array(
    z.strictObject({
      hypothesis: z.string(),
      /** Of the runs drawn from it: it leads; it leads by log10 B of 1 or more. */
      leads: fraction,
      leadsDecisively: fraction,
      /** Another has log10 B > 1 against it. */
      misleading: fraction,
      /** log10 B against the best of the others: 2.5, 50 and 97.5 % quantiles; null without another. */
      log10BayesFactor: quantiles.nullable(),
      posterior: quantiles,
    }),
  ),
});

export type Simulation = z.output<typeof simulationSchema>;

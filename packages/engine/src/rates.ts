import {
  gammaFromMoments,
  logGammaPdf,
  gammaQuantile,
} from "@weighhouse/numerics/gamma-distribution";
import { uniformUnknown } from "./block/outer-unknowns";
import type { BlockProblem, OuterUnknown } from "./block/problem";
import type { RateRole } from "./frame";

/** A block without rows: one rate under its prior, and the factor that the counts bring. */
export function rateProblem(
  role: RateRole,
  lnCounts: (rate: number) => number,
  seed: number,
): BlockProblem {
  const outer = role.family === "exact" ? [] : [rateUnknown(role)];
  const none = new Float64Array();
  return {
    rows: {
      count: 0,
      observed: none,
      kind: new Uint8Array(),
      variance: none,
      asymmetric: null,
      eachFlat: null,
      factors: null,
      period: null,
      groups: [],
      smooth: [],
    },
    linear: [],
    design: { start: new Int32Array(1), column: new Int32Array(), value: none },
    correlations: [],
    outer,
    scenarios: new Float64Array(1),
    varying: [],
    evaluate: () => true,
    outerFactor: (values) => lnCounts(role.family === "exact" ? role.rate : values[0]!),
    atFit: [],
    seed,
  };
}

/** A gamma's coordinate is ln rate, in which its density has one peak and no pole at 0. */
function rateUnknown(role: Exclude<RateRole, { family: "exact" }>): OuterUnknown {
  if (role.family === "uniform") return uniformUnknown(role, { counted: false });
  const gamma = gammaFromMoments(role.mean, role.sd);
  return {
    lower: -Infinity,
    upper: Infinity,
    lnPrior: (c) => {
      const rate = Math.exp(c);
      return rate > 0 && rate < Infinity ? logGammaPdf(rate, gamma) + c : -Infinity;
    },
    quantile: (u) => Math.log(gammaQuantile(u, gamma)),
    valueAt: (c) => Math.exp(c),
    penalised: false,
    breaks: [],
    counted: false,
  };
}

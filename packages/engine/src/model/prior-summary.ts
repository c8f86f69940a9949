import type { Prior } from "@weighhouse/campaign/document";
import { normalQuantile, normalUpperQuantile } from "@weighhouse/numerics/normal";

/** Mean, sd and the 2.5, 50 and 97.5 % quantiles of a parameter. */
export interface ParameterSummary {
  mean: number;
  sd: number;
  quantiles: [number, number, number];
}

const LOWER = 0.025;
const UPPER = 0.975;

/**
 * A prior's moments and quantiles: what is known of a parameter that no counted measurement touches.
 *
 * Source: closed forms; lognormal with mu = ln median, s = sdLog10 ln 10: mean exp(mu + s^2/2),
 * sd mean sqrt(exp(s^2) - 1).
 */
export function priorSummary(prior: Prior): ParameterSummary {
  switch (prior.family) {
    case "fixed": {
      const { value } = prior;
      return { mean: value, sd: 0, quantiles: [value, value, value] };
    }
    case "normal": {
      const { mean, sd } = prior;
      const reach = sd * normalQuantile(UPPER);
      return { mean, sd, quantiles: [mean - reach, mean, mean + reach] };
    }
    case "lognormal": {
      const { median } = prior;
      const s = prior.sdLog10 * Math.LN10;
      const mean = median * Math.exp((s * s) / 2);
      const reach = Math.exp(s * normalQuantile(UPPER));
      const sd = mean * Math.sqrt(Math.expm1(s * s));
      return { mean, sd, quantiles: [median / reach, median, median * reach] };
    }
    case "uniform": {
      const { lower, upper } = prior;
      const width = upper - lower;
      const at = (share: number) => lower + share * width;
      return {
        mean: at(0.5),
        sd: width / Math.sqrt(12),
        quantiles: [at(LOWER), at(0.5), at(UPPER)],
      };
    }
    case "loguniform": {
      const { lower, upper } = prior;
      const log = Math.log(upper / lower);
      const at = (share: number) => lower * Math.exp(share * log);
      const mean = (upper - lower) / log;
      // E x^2 = (upper^2 - lower^2) / (2 log), seen from the mean.
      const sd = Math.sqrt(Math.max(0, mean * ((upper + lower) / 2 - mean)));
      return { mean, sd, quantiles: [at(LOWER), at(0.5), at(UPPER)] };
    }
    case "halfnormal": {
      const { sd } = prior;
      // P(|x| <= q) = p where P(x > q) = (1 - p) / 2.
      const at = (p: number) => sd * normalUpperQuantile((1 - p) / 2);
      return {
        mean: sd * Math.sqrt(2 / Math.PI),
        sd: sd * Math.sqrt(1 - 2 / Math.PI),
        quantiles: [at(LOWER), at(0.5), at(UPPER)],
      };
    }
  }
}
